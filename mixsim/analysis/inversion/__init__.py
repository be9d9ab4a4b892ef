"""From what was read on a sample back to what went in.

`asked` gathers the readings, `model` gives the readings for some values, `decide` says what a rule
makes of them (`closed_form`, `scan`, `explain`), `doubt` how sure that is; `inverting` asks all of them and
puts the `answer` together.
"""
