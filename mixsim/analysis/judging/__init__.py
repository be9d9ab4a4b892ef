"""Whether a piece passes: what was read on it, set against limits in the light of its uncertainty.

`measurand` is what is judged, `budget` how sure it is and by what, `judging` the flow for single pieces,
`lot` that for a table of them, `label` what else a label may have meant; `answer` holds them all.
"""
