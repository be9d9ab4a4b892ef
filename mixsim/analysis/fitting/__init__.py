"""Numbers of a recipe from any readings on one or several samples.

`model` gives weighted residuals for some values, `solve` finds the best ones, `doubt` says how sure they are
and which combinations the data fix; `fitting` asks all of them and puts the `answer` together.
"""
