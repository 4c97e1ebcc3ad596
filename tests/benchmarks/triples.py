"""How long a million t, df, p triples take beside one bare call of the library's t distribution."""

from __future__ import annotations

import time
from collections.abc import Callable

import numpy as np
from scipy.special import stdtr

from recheck.recompute.triples import check_t_triples


def _seconds(run: Callable[[], object]) -> float:
    start = time.perf_counter()
    run()
    return time.perf_counter() - start


def triples_ratio(size: int = 10**6, rounds: int = 5) -> float:
    """Fastest check of all triples (both ends, codes) over the fastest bare `stdtr`, both taken in turn."""
    rng = np.random.default_rng(7)
    t, df = rng.uniform(0, 6, size), rng.integers(1, 300, size).astype(float)
    p = np.round(2 * stdtr(df, -t), 3)
    t = np.round(t, 2)
    ends = (t - 0.005, t + 0.005, df, p - 0.0005, p + 0.0005)
    ours, bare = [], []
    for _ in range(rounds):
        bare.append(_seconds(lambda: stdtr(df, -t)))
        ours.append(_seconds(lambda: check_t_triples(*ends)))
    return min(ours) / min(bare)
