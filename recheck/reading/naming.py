"""From assignments that belong together to the kind, the values and the notes of a claim."""

from __future__ import annotations

from dataclasses import dataclass, field

from recheck.model import ClaimKind, Confidence, Printed
from recheck.reading.claims import Draft
from recheck.reading.items import Assignment
from recheck.reading.tokens import words
from recheck.reading.widths import MARGIN


@dataclass(frozen=True, slots=True)
class Named:
    """A claim without its place: what it is and what it holds."""

    kind: ClaimKind
    values: dict[str, Printed]
    stated: tuple[str, ...] = ()
    interval_of: str | None = None
    confidence: Confidence = "high"
    notes: tuple[str, ...] = field(default=())


_KINDS: tuple[tuple[str, ClaimKind], ...] = (
    ("t", "t-test"), ("F", "F-test"), ("chi2", "chi2-test"), ("u", "rank-test"), ("z", "z-test"), ("w", "rank-test"),
    ("r", "correlation"),
)  # fmt: skip


def named(draft: Draft, label: str, sentence_says: tuple[str, ...]) -> Named | None:
    """Name a draft; `label` is what an unlabelled spread is said to be, "" where nobody says it.

    None where the numbers say nothing that could be checked or looked up: a lone n, df or coefficient.
    """
    values: dict[str, Printed] = {}
    notes: list[str] = []
    stated = [word for item in draft.items for word in item.stated]
    for item in draft.items:
        if item.several or (item.quantity == "other" and ("other" in values or item.part == "size")):
            continue
        for name, value in _values(item, draft, label):
            values.setdefault(name, value)
        notes += [note for note in item.notes if note not in notes]
    if {"sd", "ci_low", "ci_high"} <= set(values) <= {"sd", "ci_low", "ci_high", "ci_level"}:
        values["estimate"] = values.pop("sd")
        notes.append("the estimate is a standard deviation")
    kind = _kind(draft, values, sentence_says)
    if kind is None:
        return None
    if draft.get("spread") and not label:
        stated.append("spread-unlabelled")
    if draft.get("spread") and label == MARGIN:
        notes.append("no spread, but the width of an interval is said to stand after ±")
    if kind != "correlation" and "r" in values:
        stated.append("effect-size-r")
    if kind == "group-summary" and "N" in values and "n" not in values and _in_own_brackets(draft):
        values["n"] = values.pop("N")
    foreign = values.pop("other", None)
    lone = not draft.part("estimate", "effect", "statistic", "centre")
    if foreign is not None and lone and {"ci_low", "p"} & set(values):
        values["estimate"] = foreign
    confidence: Confidence = "high"
    if draft.inferred:
        notes.append("words stand between the numbers that were put together here")
        stated.append("inferred")
        confidence = "medium"
    doubts = {item.doubt for item in draft.items} | ({"low"} if _roughly(values) else set())
    confidence = "low" if "low" in doubts else "medium" if "medium" in doubts else confidence
    return Named(kind, values, tuple(dict.fromkeys(stated)), _interval_of(draft), confidence, tuple(notes))


def _in_own_brackets(draft: Draft) -> bool:
    """Whether N stands in brackets that hold this summary alone: `(N = 39, M = 27.3, SD = 6.8)`."""
    tokens = [t.text for t in draft.line.tokens[draft.first - 1 : draft.after]]
    size = draft.get("N")
    if size is None or draft.first == 0 or draft.line.at(draft.after).text not in (")", "]"):
        return False
    opened = [at for at, text in enumerate(tokens, draft.first - 1) if text in ("(", "[")]
    closed = sum(text in (")", "]") for text in tokens)
    return bool(opened) and closed < len(opened) and opened[-1] < size.first


def _roughly(values: dict[str, Printed]) -> bool:
    return any(value.relation == "≈" for value in values.values())


_ENDS = {"ci": ("ci_low", "ci_high"), "range": ("min", "max"), "iqr": ("q1", "q3")}


def _values(item: Assignment, draft: Draft, label: str) -> list[tuple[str, Printed]]:
    """The quantities that one assignment gives to its claim."""
    if item.part == "interval":
        ends = _ENDS.get(item.quantity)
        if ends is None or (item.quantity != "ci" and not draft.part("centre")):
            return []
        if not item.extra:
            return [(item.quantity, item.printed)]
        given = dict(item.extra)
        level = [("ci_level", given["ci_level"])] if "ci_level" in given and item.quantity == "ci" else []
        return [(ends[0], given["ci_low"]), (ends[1], given["ci_high"]), *level]
    name = item.quantity
    if name == "spread" and label == MARGIN:
        return []
    if name == "spread":
        name = label or "sd"
    if item.part == "centre" and item.loose and draft.line.at(item.after).low in _COMPARING:
        name = "estimate"
    if name == "se" and draft.get("mean_difference") and not draft.get("b", "beta", "mean"):
        name = "se_difference"
    if name == "df12":
        return list(item.extra)
    if name in ("alpha", "power", "sizes"):
        return []
    return [(name, item.printed), *item.extra]


def _kind(draft: Draft, values: dict[str, Printed], says: tuple[str, ...]) -> ClaimKind | None:
    if "count" in values or {"percent", "total"} <= values.keys():
        return "count"
    for quantity, kind in _KINDS:
        if quantity in values:
            return _test_kind(quantity, kind, draft, values, says)
    if "mean" in values or "median" in values:
        if "p" in values and ("ci_low" not in values or not {"sd", "se"} & set(values)):
            return "estimate"
        single = draft.part("centre")
        alone = not set(values) & {"sd", "se", "n", "N", "ci_low", "min", "q1", "iqr"}
        vague = single is not None and (single.loose or single.printed.relation != "=")
        return None if alone and vague else "group-summary"
    if "mean_difference" in values:
        return "comparison"
    if {"sd", "se"} & set(values) and not draft.part("estimate", "effect", "p"):
        return "estimate" if "estimate" in values else None
    if draft.part("effect"):
        return "estimate"
    if draft.part("estimate"):
        lone_letter = set(values) - {"n", "N", "df"} <= {"b", "beta", "intercept"}
        return None if lone_letter else "estimate"
    if "p" in values or "ci_low" in values:
        return "estimate"
    return None


def _test_kind(
    quantity: str, kind: ClaimKind, draft: Draft, values: dict[str, Printed], says: tuple[str, ...]
) -> ClaimKind | None:
    if quantity in ("t", "F", "chi2") and not set(values) - {quantity}:
        return kind if values[quantity].relation == "<" else None
    if quantity == "w":
        return "rank-test" if "p" in values else None
    if quantity == "z":
        if "p" not in values and not set(values) & {"b", "beta", "se", "u", "w", "or", "ci_low", "n", "N"}:
            return None
        return "rank-test" if {"u", "w"} & set(values) or "rank-test" in says else "z-test"
    if quantity == "r" and {"u", "w"} & set(values):
        return "rank-test"
    if quantity == "r" and "rank-test" in says and not {"df", "n", "N"} & set(values):
        return "estimate"
    return kind


_COMPARING = words(
    "lower higher less more greater fewer smaller larger shorter longer reduction decrease reduced decreased decline faster "
    "slower worse better below above"
)


def _other_sign(value: Assignment, interval: Assignment, draft: Draft) -> bool:
    """`0.50 lower (95% CI −0.90 to −0.10)`: the words carry the sign that the interval prints."""
    between = draft.line.tokens[value.after : interval.first]
    if any(token.low in _COMPARING for token in between):
        return True
    ends = dict(interval.extra)
    low, high, number = ends["ci_low"].value, ends["ci_high"].value, value.printed.value
    return value.loose and not low <= number <= high and low <= -number <= high


def _before_effect(interval: Assignment, draft: Draft) -> bool:
    """Whether an interval beside a test stands before d, and so is that of a mean or difference told elsewhere."""
    at = draft.items.index(interval)
    before, behind = draft.items[:at], draft.items[at + 1 :]
    standardized = any(item.quantity in ("d", "g", "delta", "d_z", "d_av", "d_rm") for item in behind)
    return (
        standardized
        and bool(before)
        and all(item.part in ("statistic", "p", "df", "size") for item in before)
    )


def _interval_of(draft: Draft) -> str | None:
    """The quantity directly before the interval, or the one that the interval is said to belong to."""
    previous: Assignment | None = None
    for item in draft.items:
        if item.quantity == "ci":
            if item.label:
                return {"difference": "mean_difference", "other": None}.get(item.label, item.label)
            if previous is not None and _other_sign(previous, item, draft):
                return None
            if _before_effect(item, draft):
                return "mean"
            if previous is None or previous.part in ("p", "size", "df", "other", "spread"):
                spread_first = (
                    previous is not None and previous.part == "spread" and draft.part("estimate", "centre")
                )
                return spread_first.quantity if spread_first else None
            if previous.part == "statistic" and previous.quantity != "r":
                return None
            if previous.quantity == "sd" and not draft.part("centre", "estimate", "effect"):
                return "estimate"
            return "percent" if previous.part == "count" else previous.quantity
        previous = item
    return None
