"""Many means at once, and how much their decimals can tell at all."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from recheck.recompute.arrays import Floats, floats

SLACK = 1e-9
"""Relative: ends of printed decimals that fall on a reachable mean must not miss it by a rounding error."""


def means_possible(
    mean_low: ArrayLike, mean_high: ArrayLike, n: ArrayLike, items: ArrayLike = 1
) -> NDArray[np.bool_]:
    """Tell for each row whether n whole scores, of `items` answers each, can have a mean in the interval.

    Arguments broadcast; ends are included. The GRIM test: Brown & Heathers (2017) Soc. Psychol.
    Personal. Sci. 8:363-369. A mean lies off a reachable one by half a unit of a decimal over n at
    least, or not at all: the slack of 1e-9 decides nothing for means of up to six digits.
    """
    low, high, n, items = floats(mean_low, mean_high, n, items)
    answers = n * items
    first, last = low * answers, high * answers
    return np.asarray(
        np.floor(last + SLACK * (1 + np.abs(last))) >= np.ceil(first - SLACK * (1 + np.abs(first)))
    )


def share_of_means_detectable(n: ArrayLike, decimals: ArrayLike, items: ArrayLike = 1) -> Floats:
    """Share of all means of so many decimals that n whole scores of `items` answers cannot have.

    Arguments broadcast. Of the 10^decimals printed means from one whole number to the next, the n × items
    reachable ones fill one each, those halfway between two of them both; none is left where there
    are at least as many. 0 says that a test of the mean alone can find nothing.
    """
    answers = np.asarray(n, dtype=np.int64) * np.asarray(items, dtype=np.int64)
    printed = 10 ** np.asarray(decimals, dtype=np.int64)
    common = np.gcd(answers, printed)
    # j printed / answers is halfway between whole numbers for one j in each run of answers / common, if that is even.
    halfway = np.where(answers // common % 2 == 0, common, 0)
    return np.asarray(np.maximum(0.0, 1.0 - (answers + halfway) / printed))
