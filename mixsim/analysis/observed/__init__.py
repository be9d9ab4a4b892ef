"""What was read on samples, as real numbers with their doubt, and what the mixture gives in their place.

`observation` is one column of readings, `gather` finds them in recipe and files, `noise` weighs them,
`samples` asks the evaluator.
"""
