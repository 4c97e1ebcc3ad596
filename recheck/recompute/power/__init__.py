"""Power, sample size and detectable effect of tests, by the exact and by the usual approximate methods.

Everywhere `tails` is 1 or 2; with `far_tail` a two-sided test may reject on either side, without it the far side is
dropped, as many programs do (the power at an effect of 0 is then alpha / 2). `n` may be any real number: the
functions that look for it give the root, and with `whole` the smallest whole number that has the power.
"""
