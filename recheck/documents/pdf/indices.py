"""Indices: small words that hang raised or lowered on a larger one."""

from __future__ import annotations

from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from recheck.documents.pdf.words import Words

_SMALL = 0.88
"""A glyph below this share of its neighbour's size can be an index; TeX sets 0.7, Word 0.65."""


_TALLEST = 40.0
_MOST_PAIRS = 4_000_000


def hosts(words: Words, chosen: NDArray[np.intp], around: NDArray[np.bool_]) -> NDArray[np.intp]:
    """For each word the larger word that it is an index of, or itself."""
    host = np.arange(len(words))
    sizes = words.size[chosen]
    small = chosen[(sizes < _SMALL * sizes.max()) & ~around[chosen]]
    for _ in range(2):
        free = small[host[small] == small]
        if not len(free):
            break
        found = _neighbours(words, free, chosen[~around[chosen]], host)
        if not (found >= 0).any():
            break
        host[free[found >= 0]] = host[found[found >= 0]]
    # A host may itself hang on a larger word; sizes only grow along the way, so it ends.
    while (host[host] != host).any():
        host = host[host]
    _extend(words, small, host)
    return host


def _neighbours(
    words: Words, small: NDArray[np.intp], others: NDArray[np.intp], host: NDArray[np.intp]
) -> NDArray[np.intp]:
    """The nearest larger word at the side of each small one, -1 for none."""
    one, big = pairs(words, small, others[host[others] == others], 0.75)
    index = small[one]
    size = words.size[big]
    rise = (words.base[big] - words.base[index]) / size
    near = (words.size[index] < _SMALL * size) & (rise < 0.75) & (rise > -0.52) & (np.abs(rise) > 0.07)
    follows, leads = (words.x0[index] - words.x1[big]) / size, (words.x0[big] - words.x1[index]) / size
    distance = np.where((follows > -0.4) & (follows < 0.45), np.abs(follows), np.inf)
    distance = np.where((leads > -0.1) & (leads < 0.2), np.minimum(distance, np.abs(leads) + 0.3), distance)
    near &= np.isfinite(distance)
    one, big, index, distance = one[near], big[near], index[near], distance[near]
    # A larger symbol amid smaller text is the odd one in its line, and no host to it.
    fit = _weights(words, others, index, 0.12, 1.1) <= 2 * _weights(words, others, big, 0.35, 9.0)
    one, big, distance = one[fit], big[fit], distance[fit]
    found = np.full(len(small), -1, np.intp)
    order = np.argsort(-distance, kind="stable")
    # The nearest is written last and stays.
    found[one[order]] = big[order]
    return found


def _weights(
    words: Words, others: NDArray[np.intp], asked: NDArray[np.intp], reach: float, most: float
) -> NDArray[np.int64]:
    """For each word asked for: characters at its height (give or take `reach` em) of about its size.

    `most` bounds the size of what is counted, as a multiple of the word's own.
    """
    weights = np.zeros(len(asked), np.int64)
    for size in np.unique(words.size[asked]):
        alike = others[(words.size[others] > 0.9 * size) & (words.size[others] < most * size)]
        alike = alike[np.argsort(words.base[alike], kind="stable")]
        sums = np.concatenate(([0], np.cumsum(words.ends[alike] - words.starts[alike])))
        mine = words.size[asked] == size
        base = words.base[asked[mine]]
        high = np.searchsorted(words.base[alike], base + reach * size, side="right")
        low = np.searchsorted(words.base[alike], base - reach * size)
        weights[mine] = sums[high] - sums[low]
    return weights


def pairs(
    words: Words, ones: NDArray[np.intp], others: NDArray[np.intp], reach: float
) -> tuple[NDArray[np.intp], NDArray[np.intp]]:
    """Places in `ones` and members of `others` whose base lines are within `reach` em of one another."""
    others = others[np.argsort(words.base[others], kind="stable")]
    room = reach * min(float(words.size[others].max()), _TALLEST)
    while True:
        low = np.searchsorted(words.base[others], words.base[ones] - room)
        counts = np.searchsorted(words.base[others], words.base[ones] + room) - low
        if counts.sum() <= _MOST_PAIRS:
            break
        room /= 2  # a figure of many thousand labels must not cost gigabytes
    one = np.repeat(np.arange(len(ones)), counts)
    within = np.arange(len(one)) - np.repeat(np.cumsum(counts) - counts, counts)
    return one, others[np.repeat(low, counts) + within]


def _extend(words: Words, small: NDArray[np.intp], host: NDArray[np.intp]) -> None:
    """Let an index of several words ("1, 2") hang on the host of its neighbour on either side."""
    # A word on which others hang is a base itself, and moving it would leave them on nothing.
    bases = set(host[small[host[small] != small]].tolist())
    for order in (small, small[::-1]):
        for one, other in pairwise(order.tolist()):
            if (
                host[one] == one
                or host[other] != other
                or other in bases
                or words.rows[one] != words.rows[other]
                or not _alike(words, one, other)
            ):
                continue
            left, right = min(one, other), max(one, other)
            if words.x0[right] - words.x1[left] < 0.5 * words.size[one]:
                host[other] = host[one]


def _alike(words: Words, one: int, other: int) -> bool:
    """Whether two words have one size: on a page that is scanned askew an index shares the row of its text."""
    small, large = sorted((float(words.size[one]), float(words.size[other])))
    return small > _SMALL * large
