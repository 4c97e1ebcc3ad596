"""From a document to everything that was read from it."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import replace
from functools import partial

from recheck.model import Claim, Confidence, Document, Passage, Printed, Reading, ScoreRule
from recheck.reading.assignments import assignments, ns_at
from recheck.reading.claims import Draft, drafts
from recheck.reading.context import Setting, decimal_comma, in_paragraph, setting_of
from recheck.reading.counted_groups import with_counted_groups
from recheck.reading.glyphs import Repairs, doubted, repaired
from recheck.reading.group_sizes import Told, with_group_sizes
from recheck.reading.groups import announced_spread, size_of_each, with_means
from recheck.reading.items import Assignment
from recheck.reading.listed import corrected
from recheck.reading.medians import announced_ends, with_medians
from recheck.reading.naming import Named, named
from recheck.reading.notes import TOO_LONG, notes_of
from recheck.reading.numerals import Line
from recheck.reading.parallel import in_parallel
from recheck.reading.placed import Placed, claim_id
from recheck.reading.power_statements import (
    in_reading_order,
    numbered,
    power_statements,
    without_their_numbers,
)
from recheck.reading.quoting import Sentence, beside_earlier_work, of_earlier_work
from recheck.reading.rank_sizes import with_rank_sizes
from recheck.reading.relating import related
from recheck.reading.significance import told_in_words
from recheck.reading.tokens import DIGITS, Spans, sentences, tokens
from recheck.reading.told_spreads import with_told_spreads
from recheck.reading.traps import trapped
from recheck.reading.variance_tests import of_variances
from recheck.reading.views import View, view_of
from recheck.reading.widths import MARGIN, tells_margins
from recheck.reading.wording import stated

READ = ("body", "heading", "caption", "note")


def read(document: Document, scores: Sequence[ScoreRule] = ()) -> Reading:
    """Read the claims of a document, its context, and what was left unread.

    `scores` is what is known of scores beside what the document says. A passage that takes longer than its patterns may is left out with a note.
    """
    passages, repairs = repaired([passage for passage in document.passages if passage.kind in READ])
    views = [view_of(passage) for passage in passages]
    spans = [tuple(sentences(view)) for view in views]
    setting = setting_of(views, spans)
    left: Counter[str] = Counter()
    placed: list[Placed] = []
    for number, view in enumerate(views):
        try:
            found = list(_passage(view, spans[number], number, setting, left))
        except TimeoutError:
            left[TOO_LONG] += 1
            continue
        placed += [_doubted(item, passages[number], repairs) for item in found]
    unnamed: tuple[str, ...] = ()
    if document.tables:
        # Importing the layouts takes a twentieth of a second, and a text alone has no use for them.
        from recheck.reading.tables import with_tables

        told = partial(_told_in, setting=setting, left=left)
        placed, unnamed = with_tables(placed, document, READ, setting, repairs, left, told)
    powers = numbered(
        list(_powers(views, spans, setting, passages, repairs, left)), [item.claim for item in placed]
    )
    placed = without_their_numbers(placed, powers)
    claims, same = related(_unique(placed), document, passages, [view.text for view in views])
    claims, unmet = _scaled(placed, claims, document, views, spans, scores)
    claims = in_reading_order(claims, placed, powers)
    return Reading(claims, setting.context, (*_notes(document, left), *unnamed, *unmet), same)


def _scaled(
    placed: Sequence[Placed], claims: tuple[Claim, ...], document: Document, views: Sequence[View], spans: Sequence[Spans],
    scores: Sequence[ScoreRule],
) -> tuple[tuple[Claim, ...], tuple[str, ...]]:  # fmt: skip
    """The claims, means with the scale of their scores where it is told, and a note on what was said of scores that are not there."""
    if not scores and not any(claim.kind == "group-summary" for claim in claims):
        return claims, ()
    from recheck.reading.scales import with_scales

    try:
        return with_scales(placed, claims, document, views, spans, scores)
    except TimeoutError:
        return claims, ("What is said of scores took too long to read.",)


def _powers(
    views: Sequence[View], spans: Sequence[Spans], setting: Setting, passages: Sequence[Passage],
    repairs: Repairs, left: Counter[str],
) -> Iterator[Placed]:  # fmt: skip
    """The power statements of all paragraphs, notes and captions."""
    for number, view in enumerate(views):
        if view.passage.kind == "heading":
            continue
        try:
            found = list(power_statements(view, spans[number], number, setting))
        except TimeoutError:
            left[TOO_LONG] += 1
            continue
        yield from (_doubted(item, passages[number], repairs) for item in found)


def _told_in(view: View, *, setting: Setting, left: Counter[str]) -> list[Claim]:
    """The claims of a text by itself: a cell with a whole result."""
    return [item.claim for item in _passage(view, tuple(sentences(view)), 0, setting, left)]


def _doubted(item: Placed, passage: Passage, repairs: Repairs) -> Placed:
    claim = doubted(item.claim, item.span, passage, item.passage, repairs)
    return item if claim is item.claim else replace(item, claim=claim)


def _notes(document: Document, left: Counter[str]) -> tuple[str, ...]:
    kinds = (p.kind for p in document.passages if p.kind not in READ and not DIGITS.isdisjoint(p.text))
    return notes_of(kinds, left)


def _passage(view: View, spans: Spans, number: int, setting: Setting, left: Counter[str]) -> Iterator[Placed]:
    own = in_paragraph(view, spans)
    setting = setting if own is None else replace(setting, plus_minus=own)
    for order, (start, end) in enumerate(spans):
        text = view.text[start:end]
        if DIGITS.isdisjoint(text) or not (any(sign in text for sign in _SIGNS) or _words_of_results(text)):
            continue
        comma = setting.decimal_comma or ("," in text and decimal_comma((text,)))
        line = Line(view, tokens(view, start, end), comma, "%" in text)
        sentence = Sentence(
            text, text.lower(), line, start, view.text[slice(*spans[order - 1])] if order else ""
        )
        for draft, name in _sentence(sentence, setting, left):
            first, last = _extent(draft, name)
            claim = _claim(view, first, last, name, setting)
            yield Placed(claim, number, order, first, last, text, view.span(first, last), start)


_SIGNS = "=<>≤≥≈±"
_SHARES = ("%)", "%]", "%;", "% (", "% [", "%, ", "% of")
_WORDS = ("mean", "average", "deviation", "interval", "ratio", "value", "correlation", "statistic", "difference", "test", "degrees",
          "range", "risk", "estimate", "median", "p .", "p 0", "p.0", "p:", "ci ", "ci,", "sd ", "se ", "sem ", "s.d", "sd", "se:", "cohen", "hedges", "kappa", "coefficient",
          "under the", "bayes", "auc", "icc")  # fmt: skip


def _words_of_results(text: str) -> bool:
    """Whether a sentence without a relation sign may hold a result in words: `a mean of 3.9`, `OR 1.5`."""
    if any(word in text for word in ("OR ", "HR ", "RR ", "CI", "OR, ", "HR, ", "RR, ")):
        return True
    if "%" in text and any(sign in text for sign in _SHARES):
        return True
    low = text.lower()
    if "%" in text and low.startswith(("of ", "among ")):
        return True
    return any(word in low for word in _WORDS)


def _sentence(sentence: Sentence, setting: Setting, left: Counter[str]) -> Iterator[tuple[Draft, Named]]:
    """The claims of one sentence; what was left out is counted by its reason."""
    line = sentence.line
    sign, brackets = announced_spread(sentence.low)
    items = with_means(_with_ns(assignments(line), line), line, brackets, setting.in_brackets)
    items = with_medians(items, line, announced_ends(sentence.low), setting.behind_medians)
    if not items:
        return
    says = stated(sentence.text)
    earlier = of_earlier_work(sentence)
    each, items = size_of_each(items, line)
    parts = [item.part for item in items]
    worded = "p" not in parts and parts.count("statistic") == 1
    items, together = in_parallel(items, line)
    told: list[Told] = []
    for draft in sorted((*drafts(items, line), *together), key=lambda draft: draft.first):
        label = (
            (_own_sign(sentence, sign) or setting.plus_minus)
            if _after_sign(draft)
            else (brackets or setting.in_brackets)
        )
        name = named(draft, label, says)
        reason = name and (trapped(draft, sentence) or _credible(draft, setting))
        if reason:
            left[reason] += 1
        else:
            told.append((draft, name and _sized(name, each)))
    found: list[Told] = []
    for draft, name in with_rank_sizes(
        with_counted_groups(with_group_sizes(told)), sentence.text, sentence.start
    ):
        if name is None:
            continue
        if worded:
            name = told_in_words(draft, name, sentence)
        if earlier or beside_earlier_work(draft, sentence):
            name = _of_earlier_work(name)
        found.append((draft, replace(name, stated=_said(draft, name, says))))
    for draft, name in with_told_spreads(found, sentence.text, sentence.start, sentence.before):
        if name is not None:
            yield draft, name


def _own_sign(sentence: Sentence, told: str) -> str:
    """What the sentence itself says stands after `±`, "" where it does not."""
    return MARGIN if not told and tells_margins(sentence.low) else told


def _of_earlier_work(name: Named) -> Named:
    """Doubt a result that may be that of an earlier study."""
    note = "the sentence speaks of earlier work"
    confidence: Confidence = "low" if name.confidence == "low" else "medium"
    return replace(name, confidence=confidence, notes=(*name.notes, note))


def _after_sign(draft: Draft) -> bool:
    """Whether an unlabelled spread stands after `±`, not in brackets alone."""
    spread = draft.get("spread")
    return spread is not None and any(
        token.text in ("±", "+") for token in draft.line.tokens[spread.first : spread.first + 2]
    )


def _credible(draft: Draft, setting: Setting) -> str | None:
    """In a Bayesian manuscript CI means credible interval."""
    if setting.credible and draft.get("ci") and not draft.part("statistic", "p"):
        return "credible"
    return None


def _sized(name: Named, each: Printed | None) -> Named:
    """Give a group summary the n that its sentence prints once for all groups."""
    if each is None or name.kind != "group-summary" or {"n", "N"} & set(name.values):
        return name
    note = "the size of each group is printed once for all groups"
    return replace(name, values={**name.values, "n": each}, notes=(*name.notes, note))


def _extent(draft: Draft, name: Named) -> tuple[int, int]:
    """First and last character of the numbers that the claim holds."""
    held = [i for i in draft.items if i.quantity != "other" or "estimate" in name.values] or list(draft.items)
    line = draft.line
    return line.at(held[0].first).start, line.at(max(i.after for i in held) - 1).end


def _said(draft: Draft, name: Named, says: tuple[str, ...]) -> tuple[str, ...]:
    """What the claim and its sentence say.

    Adjusted post hoc comparisons are not said of an omnibus test; where a sentence speaks of one-
    and of two-tailed tests, only the words beside the numbers count.
    """
    said = dict.fromkeys((*name.stated, *says, *of_variances(draft)))
    if name.kind in ("t-test", "F-test") and any(
        t.low in ("t", "anova") for t in draft.line.tokens[: draft.first]
    ):
        said.pop("rank-test", None)
    df1 = name.values.get("df1")
    if name.kind == "F-test" and df1 is not None and df1.value != 1:
        said.pop("adjusted-p-post-hoc", None)
    p = draft.get("p")
    if p is not None and draft.line.at(p.first - 1).low in ("uncorrected", "unadjusted", "raw", "nominal"):
        said = dict.fromkeys(word for word in said if not word.startswith("adjusted-p"))
    if p is not None and corrected(draft.line, p):
        said["adjusted-p"] = None
    if "one-tailed" in said and "two-tailed" in said:
        tokens_ = draft.line.tokens[draft.first : draft.after + 5]
        beside = stated(" ".join(token.text for token in tokens_).replace(" - ", "-"))
        for word in ("one-tailed", "two-tailed"):
            if word not in beside or ("one-tailed" in beside and "two-tailed" in beside):
                said.pop(word)
    return tuple(said)


def _with_ns(items: list[Assignment], line: Line) -> list[Assignment]:
    """Put in `ns` where it stands in the place of p: `F(1, 38) = 0.4, ns`."""
    found: list[Assignment] = []
    for index, item in enumerate(items):
        found.append(item)
        following = items[index + 1] if index + 1 < len(items) else None
        if item.part in ("statistic", "df") and line.at(item.after).text in (",", "(", ";"):
            ns = ns_at(line, item.after + 1, item.after + 1)
            if ns and not (following and following.part == "p" and following.first <= ns.after + 2):
                found.append(ns)
    return found


def _claim(view: View, start: int, end: int, name: Named, setting: Setting) -> Claim:
    first, last = view.span(start, end)
    text = view.passage.text
    if text[last : last + 1] in (")", "]") and text.count("(", first, last) + text.count(
        "[", first, last
    ) > text.count(")", first, last) + text.count("]", first, last):
        last += 1
    raw = text[first:last]
    marked_up = any(sign in raw for sign in ("\\", "$", "</", "_{", "^{")) or ("&" in raw and ";" in raw)
    quote = " ".join(view.text[start:end].split()) if marked_up else None
    place = view.passage.place(first, last, quote)
    values = {quantity: setting.at_own_level(value) for quantity, value in name.values.items()}
    confidence, notes = name.confidence, name.notes
    if any(_maybe_decimal(quantity, value) for quantity, value in values.items()):
        confidence, notes = "low", (*notes, "a comma may be a decimal sign or group thousands")
    # Tukey's and Dunnett's tests compare pairs: their p are not printed with an F.
    but = ("adjusted-p-post-hoc",) if setting.pairs_alone and name.kind == "F-test" else ()
    also = ("permutation",) if setting.by_permutation and name.kind == "F-test" else ()
    spoken = dict.fromkeys((*setting.context.background, *also))
    return Claim(
        claim_id(name.kind, place, values), name.kind, place, values, name.stated,
        tuple(word for word in spoken if word not in name.stated and word not in but),
        name.interval_of, confidence, notes=notes,
    )  # fmt: skip


_SELDOM_LARGE = frozenset(("t", "z", "r", "d", "g", "p"))


def _maybe_decimal(quantity: str, value: Printed) -> bool:
    """Tell whether a number taken for thousands (`1,663`) is more likely one with a decimal comma."""
    return quantity in _SELDOM_LARGE and abs(value.value) >= 1000 and value.text.count(",") == 1


def _unique(placed: Sequence[Placed]) -> list[Placed]:
    """Number the ids of claims that are printed alike in one section."""
    seen: Counter[str] = Counter()
    found = []
    for item in placed:
        seen[item.claim.id] += 1
        times = seen[item.claim.id]
        claim = item.claim if times == 1 else replace(item.claim, id=f"{item.claim.id}-{times}")
        found.append(replace(item, claim=claim))
    return found
