"""Group summaries with the scale of their outcome, where the manuscript tells it."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import replace

from recheck.model import SCORES_ASKED, Claim, Document, ScoreRule
from recheck.reading.matching import Key
from recheck.reading.placed import Placed
from recheck.reading.scales.asked import asked_scales
from recheck.reading.scales.by_name import Attached, by_name
from recheck.reading.scales.counted import as_count, count_said, counted_rounds
from recheck.reading.scales.described import Scale, scales_of
from recheck.reading.scales.giving import Hinted, asked_note, general_hints, given, off_items
from recheck.reading.scales.of_cells import (
    captions_of,
    of_cell,
    of_everything,
    speaks_of_ratings,
    tells_scores_of,
    title_of,
)
from recheck.reading.scales.of_prose import of_prose
from recheck.reading.tokens import Spans
from recheck.reading.views import View


def with_scales(
    placed: Sequence[Placed], claims: Sequence[Claim], document: Document, views: Sequence[View], spans: Sequence[Spans],
    scores: Sequence[ScoreRule] = (),
) -> tuple[tuple[Claim, ...], tuple[str, ...]]:  # fmt: skip
    """All claims, means of groups with the scale of their outcome where it is told, and a note on outcomes of `scores` that are not there.

    `placed` and `claims` are the same claims in the same order; `views` and `spans` the passages that were read.
    What `scores` says of an outcome replaces what is read of it.
    """
    wanted = [at for at, claim in enumerate(claims) if _may_have(claim)]
    done = list(claims)
    asked = asked_scales(scores) if scores else {}
    if wanted:
        _scale(done, wanted, placed, document, views, spans, asked)
    _count(done, wanted, placed, views)
    return tuple(done), tuple(_unmet(done, scores))


def _unmet(claims: Sequence[Claim], scores: Sequence[ScoreRule]) -> Iterator[str]:
    """What was said of outcomes of which no mean was read."""
    met = {note for claim in claims if SCORES_ASKED in claim.notes for note in claim.notes}
    for rule in scores:
        if asked_note(rule.text) not in met:
            yield f"No mean was read of the outcome in “{rule.text}”; the name has to be the manuscript's own."


def _count(done: list[Claim], wanted: Iterable[int], placed: Sequence[Placed], views: Sequence[View]) -> None:
    """Say of summaries of counts that these are whole."""
    told = {
        at: said
        for at in wanted
        if "whole-scores" not in done[at].stated and (said := count_said(done[at], placed[at]))
    }
    if told:
        rounds = any(counted_rounds(view.text) for view in views if view.passage.kind == "body")
        for at, said in told.items():
            done[at] = as_count(done[at], said, rounds)


def _scale(
    done: list[Claim], wanted: Sequence[int], placed: Sequence[Placed], document: Document, views: Sequence[View], spans: Sequence[Spans],
    asked: Mapping[Key, Scale],
) -> None:  # fmt: skip
    """Give the summaries among the claims the scale of their outcome."""
    claims = tuple(done)
    scales = scales_of(views, spans, {placed[at].passage for at in wanted})
    found: dict[int, Attached] = {}
    of_tables = captions_of(document) if any(placed[at].passage < 0 for at in wanted) else {}
    index = by_name([*scales, *(scale for told in of_tables.values() for scale in told)])
    index |= {key: scale for key, scale in asked.items() if key}
    everything = of_everything(scales)
    for at in wanted:
        number = -1 - placed[at].passage
        if number < 0:
            continue
        table = document.tables[number]
        general = everything if everything and speaks_of_ratings(table) else None
        title = title_of(table) if not claims[at].outcome else ()
        if attached := of_cell(
            claims[at], index, of_tables.get(number, ()), general, title, scored=tells_scores_of(table)
        ):
            found[at] = attached
    found |= of_prose(placed, claims, [at for at in wanted if placed[at].passage >= 0], scales, index, views)
    told = _fitting(found, claims)
    if () in asked:
        told |= {
            at: Attached(asked[()], sure=True) for at in wanted if at not in told or not told[at].scale.asked
        }
    said = general_hints(views, spans, scales) if told else Hinted((), ())
    for at, attached in told.items():
        done[at] = given(claims[at], attached, said)


def _may_have(claim: Claim) -> bool:
    mean = claim.values.get("mean")
    return claim.kind == "group-summary" and mean is not None and not mean.percent and mean.relation == "="


def _fitting(found: Mapping[int, Attached], claims: Sequence[Claim]) -> dict[int, Attached]:
    """Scales that the means bear out: where none of an outcome's means lies on its scale, it is not surely theirs."""
    groups: dict[object, list[int]] = defaultdict(list)
    for at, attached in found.items():
        scale = attached.scale
        # A heading tells of its own outcome; a note without a name of all outcomes of its table.
        whom = scale.names or (claims[at].outcome if scale.passage == -1 else None)
        groups[whom, scale.passage, scale.sentence, scale.ends].append(at)
    kept: dict[int, Attached] = {}
    for members in groups.values():
        beyond = {at: _distance(claims[at], found[at].scale) for at in members}
        kept |= {
            at: fitted for at in members if (fitted := _fitted(found[at], beyond[at], list(beyond.values())))
        }
    return {at: kept[at] for at in sorted(kept)}


def _fitted(attached: Attached, own: float, beyond: Sequence[float]) -> Attached | None:
    """A scale in the light of the means that have it: of this one, and of all."""
    on = beyond.count(0)
    if attached.beside or attached.scale.asked or (attached.sure and on):
        return attached
    if attached.of_all and on == len(beyond):
        return replace(attached, sure=True)
    if own == 0 or (own <= 1 and (attached.sure or (attached.of_all and 2 * on > len(beyond)))):
        return replace(attached, sure=False)
    return None


def _distance(claim: Claim, scale: Scale) -> float:
    """How far a mean lies outside its scale, in widths of the scale."""
    if off_items(scale):
        return 0.0
    low, high = scale.ends
    mean = claim.values["mean"].interval()
    beyond = max(
        0.0, (low - mean.high) if low is not None else 0.0, (mean.low - high) if high is not None else 0.0
    )
    width = (high - low) if low is not None and high is not None else max(abs(high or 1.0), 1.0)
    return beyond / width if width else 0.0
