"""An interval against all methods that it may have been made by, where the text names none."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass

from recheck.checks.compare import Comparison, judge
from recheck.checks.registry import Case
from recheck.model import Claim, Finding, Interval
from recheck.reconcile.readings import Box, Numbers, Way, box_of

Ends = tuple[tuple[Interval, ...], tuple[Interval, ...]]
"""The lower and the upper end that one method gives, each as intervals over what the other numbers can stand for."""
_ENDS = ("ci_low", "ci_high")
USUAL = "the interval is that of a usual method for independent cases ({})"


@dataclass(frozen=True, slots=True)
class Method:
    """One way to make an interval: its name, and the ends that it gives from the box of printed numbers."""

    words: str
    ends: Callable[[Box], Ends]


def judge_interval(
    case: Case, check: str, numbers: Numbers, methods: Sequence[Method], *, claims: tuple[Claim, ...],
    bounds: Interval, kinds: str, doubts: tuple[str, ...] = (), excuses: tuple[str, ...] = (),
) -> Finding:  # fmt: skip
    """Agree where one method gives both ends; else judge the end that none of the fitting ones gives.

    Never more than `conditional`: `kinds` names the methods that were tried, and there are others.
    """
    box = box_of(numbers)
    tried: list[Method] = []
    others: list[Method] = []
    for method in methods:
        low, high = (_meets(box[end], told) for end, told in zip(_ENDS, method.ends(box), strict=True))
        if low and high:
            tried, others = [method], []
            break
        tried += [method] * low
        others += [method] * high
    name = "ci_high" if tried or not others else "ci_low"
    tried = tried or others or list(methods)
    return judge(
        case,
        Comparison(
            check, name, numbers, tuple(_ways(tried, name == "ci_high")), claims, bounds=bounds,
            doubts=(*doubts, USUAL.format(kinds)), excuses=excuses,
        ),
    )  # fmt: skip


def _meets(printed: Interval, implied: Sequence[Interval]) -> bool:
    return any(printed.meets(interval.guarded()) for interval in implied)


def _ways(methods: Sequence[Method], upper: bool) -> Iterator[Way]:
    for method in methods:

        def implied(box: Box, method: Method = method) -> tuple[Interval, ...]:
            return method.ends(box)[upper]

        yield Way(implied, (), (method.words,), costly=True)
