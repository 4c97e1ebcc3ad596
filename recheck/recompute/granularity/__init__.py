"""Means and spreads of whole scores, exactly: which of them any scores can have, shown by a sample or disproved."""

from recheck.recompute.granularity.answers import Answer, find_scores
from recheck.recompute.granularity.limits import (
    Limit,
    sd_most,
    sd_most_any_mean,
    sd_most_for_mean,
    spread_limits,
)
from recheck.recompute.granularity.rows import means_possible, share_of_means_detectable
from recheck.recompute.granularity.scores import Scores

__all__ = [
    "Answer", "Limit", "Scores", "find_scores", "means_possible", "sd_most", "sd_most_any_mean", "sd_most_for_mean",
    "share_of_means_detectable", "spread_limits",
]  # fmt: skip
