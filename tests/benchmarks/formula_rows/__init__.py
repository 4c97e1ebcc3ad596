"""What each public array function is measured with and against: one module a subject, each with its `ROWS`.

`ROWS` maps the name of a function, as `module.function` under `recheck.recompute`, to a `Row`.
`EXEMPT` maps the name of a function that is no formula on arrays to the reason in words.
"""
