"""The one scale of each outcome that a document names, and a scale that a summary was given."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

from recheck.model import LEVELS
from recheck.reading.matching import Key, terms
from recheck.reading.scales.described import Scale
from recheck.reading.scales.whose import canonical


@dataclass(frozen=True, slots=True)
class Attached:
    """A scale for a summary, whether it surely is that of its outcome, stands beside it, or is said of all numbers of its table."""

    scale: Scale
    sure: bool
    beside: bool = False
    of_all: bool = False


def by_name(scales: Iterable[Scale]) -> dict[Key, Scale | None]:
    """The one scale of each outcome; None where several are told that differ."""
    found: dict[Key, list[Scale]] = defaultdict(list)
    for scale in scales:
        for key in scale.names:
            found[key].append(scale)
    return {key: one_of(told) for key, told in found.items()}


def one_of(told: Sequence[Scale]) -> Scale | None:
    """Scales that are told of one outcome, put together where they are one."""
    # The scale of a sum is another one than that of its items.
    told = [scale for scale in told if not scale.of_items] or told
    best = next((s for s in told if s.low and s.high and not s.ends_inferred), told[0])
    for other in told:
        if other is best:
            continue
        alike = best.ends == other.ends or may_be(best, other)
        if not alike:
            return None
        best = merged(best, other)
    return best


def may_be(best: Scale, other: Scale) -> bool:
    """Whether a scale that is told less fully may be the same: by its number of points, or by its highest value alone."""
    low, high = best.ends
    if other.ends_inferred and low is not None and high is not None:
        return high - low + 1 == other.ends[1]
    return other.low is None and (other.high is None or other.ends[1] == high)


def merged(best: Scale, other: Scale) -> Scale:
    """One scale with what is said of it in two places."""
    one, two = best.hints, other.hints
    hints = replace(
        one, averaged=one.averaged or two.averaged, summed=one.summed or two.summed, multiple=one.multiple or two.multiple, single=one.single or two.single,
        prorated=one.prorated or two.prorated, uneven=one.uneven or two.uneven, of_items=one.of_items or two.of_items, near=one.near or two.near, moved=one.moved or two.moved, why=one.why or two.why,
    )  # fmt: skip
    items = best.items or other.items
    if best.items and other.items and best.items.value != other.items.value:
        items = None
    return replace(
        best,
        hints=hints,
        items=items,
        stepped=(best.stepped or other.stepped) and not hints.uneven,
        of_items=best.of_items or other.of_items,
        counts=(*best.counts, *other.counts),
    )


def name_of(label: str | None) -> Key:
    """The key of a name of a table, by its innermost level."""
    parts = (label or "").split(LEVELS)
    return canonical(terms(parts[-1]))
