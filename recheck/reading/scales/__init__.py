"""Scales: what a manuscript says of the scores that its means sum up."""

from recheck.reading.scales.asked import score_rule
from recheck.reading.scales.attaching import with_scales

__all__ = ["score_rule", "with_scales"]
