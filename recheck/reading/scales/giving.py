"""A summary with its scale, and with all that the document says of how its scores come about."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from recheck.model import AVERAGED_BY, SCALE_ENDS_INFERRED, SCALE_INFERRED, SCORES_ASKED, Claim
from recheck.reading.scales.by_name import Attached
from recheck.reading.scales.described import Scale, joined, said_in, stems_of
from recheck.reading.scales.hints import several_told
from recheck.reading.scales.whose import measure_told, named_before
from recheck.reading.tokens import Spans
from recheck.reading.views import View


@dataclass(frozen=True, slots=True)
class Hinted:
    """What sentences anywhere say of scores: of those of some outcomes, by their stems, and of all.

    `moved` tells that scores of no outcome in particular were standardised or put on another scale; `several` are words
    that tell of several things or occasions for one rater, each with the stems of its sentence where that names an outcome.
    """

    named: Sequence[tuple[frozenset[str], View, str, int]]
    general: Sequence[tuple[View, str, int]]
    moved: bool = False
    several: Sequence[tuple[frozenset[str], str]] = ()


_OF_SCORES = (
    "rating",
    "rated",
    "score",
    "judg",
    "tast",
    "answer",
    "respons",
    "item",
    "scale",
    "evaluat",
    "assess",
)
_OF_SEVERAL = ("averag", "mean ", "means ", "collaps", "aggregat", "composite", "combined", "prorat", "pro-rat", "missing", "repeat", "pooled", "retest", "re-test", "days", "week", "evenings", "mornings", "shifts", "sessions", "occasions", "loaves", "breads", "slices", "samples", "wines", "products", "portions", "stimul", "served", "replicat", "duplicat", "triplicat", "twice", "standardi", "z-", "cent", "rescal", "re-scal", "convert", "transform", "normali", "each", "every", "half", "halves", "decimal", " times", "judges", "raters", "assessors", "panel", "summ", "sum ", "total", "rated", "tasted", "scored")  # fmt: skip


def general_hints(views: Sequence[View], spans: Sequence[Spans], scales: Sequence[Scale]) -> Hinted:
    """Sentences of the document that say how scores come about."""
    keys = [frozenset(key) for scale in scales for key in scale.names]
    told = {(scale.passage, scale.sentence) for scale in scales}
    named: list[tuple[frozenset[str], View, str, int]] = []
    general: list[tuple[View, str, int]] = []
    several: list[tuple[frozenset[str], str]] = []
    moved = False
    for number, view in enumerate(views):
        low = view.text.lower()
        if not any(sign in low for sign in _OF_SEVERAL):
            continue
        for order, (start, end) in enumerate(spans[number]):
            text = view.text[start:end]
            lowered = text.lower()
            if (number, order) in told or not any(sign in lowered for sign in _OF_SEVERAL):
                continue
            if words := several_told(text):
                stems = stems_of(text)
                other = measure_told(text) or any(key <= stems for key in keys)
                several.append((stems if other else frozenset(), words))
            if not any(word in lowered for word in _OF_SCORES) and not lowered.startswith(_OF_ALL):
                continue
            hints = said_in(text)
            if not (
                hints.averaged
                or hints.prorated
                or hints.uneven
                or hints.summed
                or hints.of_items
                or hints.moved
            ):
                continue
            stems = stems_of(text)
            if any(key <= stems for key in keys):
                named.append((stems, view, text, start))
                continue
            moved = moved or (hints.moved and not any(word in lowered for word in _OF_MODELS))
            if (hints.averaged or hints.prorated or hints.uneven) and not (
                named_before(text) or measure_told(text)
            ):
                general.append((view, text, start))
    return Hinted(named, general, moved, several)


_OF_ALL = (
    "data ",
    "values ",
    "all data",
    "all values",
    "the data",
    "the values",
    "results ",
    "means ",
    "for each ",
    "means are",
)
"""Beginnings of sentences that tell how all numbers of a document came about."""


_OF_MODELS = (
    "predictor",
    "regression",
    "moderat",
    "covariate",
    "interaction",
    "model",
    "coefficient",
    "factor ",
)
"""Words of sentences in which what is standardised goes into a model, not into means."""


def asked_note(text: str) -> str:
    """The note of a summary whose scores were told with the request."""
    return f"scores, as told: “{text}”"


def _as_asked(claim: Claim, attached: Attached) -> Claim:
    """A summary with what was said of its scores."""
    scale, hints = attached.scale, attached.scale.hints
    told = {"scale_min": scale.low, "scale_max": scale.high, "items_per_score": scale.items}
    values = {**claim.values, **{name: value for name, value in told.items() if value is not None}}
    words = (
        ("whole-scores", scale.stepped),
        ("averaged-scores", hints.averaged),
        ("single-item", hints.single),
    )
    notes = (
        *claim.notes,
        asked_note(scale.quote),
        SCORES_ASKED,
        *(() if attached.sure else (SCALE_INFERRED,)),
    )
    stated = dict.fromkeys((*claim.stated, *(word for word, true in words if true)))
    return replace(claim, values=values, stated=tuple(stated), notes=notes)


def given(claim: Claim, attached: Attached, said: Hinted) -> Claim:
    """A summary with its scale."""
    if attached.scale.asked:
        return _as_asked(claim, attached)
    scale = _with_all(attached.scale, said)
    if scale.hints.moved:
        return claim
    hints, n = scale.hints, claim.values.get("n")
    # As many judges as there are values: each value is the score of one of them.
    judged = any(n is None or count != n.value for count in scale.counts)
    averaged = hints.averaged or hints.near or judged
    several = scale.of_items or (hints.multiple and not hints.single)
    # Several items, and not a word on whether they are averaged or summed.
    open_ = several and scale.stepped and not (averaged or hints.summed)
    items = scale.items if hints.of_items and averaged and not hints.summed else None
    ends = {} if off_items(scale) else {"scale_min": scale.low, "scale_max": scale.high}
    words = (
        ("whole-scores", scale.stepped), ("averaged-scores", averaged or open_),
        ("summed-scores", hints.summed and items is None), ("single-item", hints.single), ("prorated", hints.prorated),
    )  # fmt: skip
    values = {
        **claim.values,
        **{name: v for name, v in (*ends.items(), ("items_per_score", items)) if v is not None},
    }
    notes = [*claim.notes, f"scale: “{scale.quote}”"]
    sure = attached.sure and not said.moved and not (open_ and scale.of_items)
    notes += [] if sure else [SCALE_INFERRED]
    notes += [SCALE_ENDS_INFERRED] if scale.ends_inferred and ends else []
    why = hints.why if averaged or open_ else _several_of(scale, said)
    notes += [f"{AVERAGED_BY}“{why}”"] if why else []
    stated = dict.fromkeys((*claim.stated, *(word for word, true in words if true)))
    return replace(claim, values=values, stated=tuple(stated), notes=tuple(notes))


def _several_of(scale: Scale, said: Hinted) -> str:
    """Words anywhere that tell of several things or occasions, perhaps for these scores."""
    mine = (
        words
        for stems, words in said.several
        if not stems or any(stems.issuperset(key) for key in scale.names)
    )
    return next(mine, "") if not scale.hints.summed else ""


def off_items(scale: Scale) -> bool:
    """Whether a scale is that of items which are summed: their sum lies on another one."""
    return scale.of_items and scale.hints.summed


def _with_all(scale: Scale, said: Hinted) -> Scale:
    """A scale with all that is said of its scores elsewhere."""
    for stems, view, text, start in said.named:
        if any(stems.issuperset(key) for key in scale.names):
            scale = joined(scale, view, text, start, beside=False)
    for view, text, start in said.general:
        scale = joined(scale, view, text, start, beside=False)
    return scale
