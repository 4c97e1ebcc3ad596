"""Levels of significance, which look like a p and are none."""

from __future__ import annotations

from recheck.reading.claims import Draft
from recheck.reading.quoting import Sentence
from recheck.reading.tokens import words

_LEVEL_WORDS = (
    "considered", "deemed", "regarded", "significance level", "level of significance", "significance was", "threshold",
    "set at", "set to", "alpha", "α", "cut-off", "cutoff", "criterion", "taken as", "defined as", "was accepted",
    "were accepted", "taken to", "denote", "indicates signific", "indicate signific", "represent", "level for",
    "declared", "p-values below", "interpreted as", "treated as", "significance at", "statistical significance",
    "retained if", "entered if", "removed if", "inclusion", "less than 0.05 was", "was used as", "were used as",
    "significant level", "fixed at", "established at", "stars", "asterisk", "set a ", "when p", "if p", "where p",
)  # fmt: skip
_CHOOSING = ("applied a", "as a threshold", "only those", "only the", "were tested", "were selected", "were submitted", "was selected",
             "were included", "were entered", "were retained", "were chosen", "screening")  # fmt: skip
_LETTERS = ("same letter", "different letter", "no letter", "letters indicate", "letters denote", "letters show", "letters mark", "letters within",
            "letters above", "lowercase letter", "lower-case letter", "capital letter", "common letter", "unlike letter", "small letter", "superscript", "subscripts differ", "asterisk", "dagger", "stars ", "same row", "same column", "within a row",
            "within a column", "within rows", "within columns", "bars with", "error bars")  # fmt: skip
"""Words of a legend that tells which means of a table or a figure differ."""
_WITH = words("with at applied used using by had having of under below")
_SETTING = (
    "considered",
    "deemed",
    "regarded",
    "set at",
    "set to",
    "defined as",
    "taken as",
    "interpreted as",
    "treated as",
)
_LEVELS = {"0.05", "0.01", "0.001", "0.10", "0.1", "0.005", "0.0001", "0.050", "0.010", "0.100", "0.025", "0.017", "0.0125",
           "0.20", "0.2", "0.15", "0.25", "5", "1"}  # fmt: skip


def _chosen(draft: Draft, sentence: Sentence) -> bool:
    """A p by which something was chosen, `those with a p value of < .05`; or `p < .05 is significant`."""
    line = draft.line
    verdict = line.at(draft.after).low in ("is", "was", "were", "are") and line.at(
        draft.after + 1
    ).low.startswith("signif")
    article = line.at(draft.first - 1).low in ("a", "the") and line.at(draft.first - 2).low in _WITH
    return verdict or (article and sentence.says(_CHOOSING))


def level(draft: Draft, sentence: Sentence) -> bool:
    """`p < .05 was considered significant`: a level, not a p."""
    if draft.part("statistic", "estimate", "effect", "interval"):
        return False
    p = draft.get("p")
    if (
        p
        and draft.line.at(draft.first - 2).low in ("level", "threshold")
        and draft.line.at(draft.first - 1).low == "of"
    ):
        return True
    if p is None or not (
        str(abs(p.printed.value)) in _LEVELS or abs(p.printed.value).normalize().as_tuple().digits == (1,)
    ):
        return False
    if p.printed.relation != "=" and (_chosen(draft, sentence) or sentence.says(_LETTERS)):
        return True
    alone = draft.line.at(draft.first - 1).text == "(" and draft.line.at(draft.after).text == ")"
    if alone and p.printed.relation in (">", "≥") and not sentence.says(_SETTING):
        return False
    if draft.line.at(draft.first - 1).text == "(" and draft.line.at(draft.first - 2).low == "significance":
        return True
    if draft.line.at(draft.first - 1).low == "at" and draft.line.at(draft.first - 2).low in (
        "significant",
        "significance",
    ):
        return True
    foreign = draft.get("other")
    if foreign is not None and foreign.printed.relation not in ("=", "≈"):
        return True
    if draft.line.at(draft.after).low == "level":
        return True
    if (
        draft.line.at(draft.first - 1).low in ("if", "when", "at", "where")
        and p.printed.relation != "="
        and sentence.says(("signific", "reject"))
        and not sentence.says(
            ("differ", "higher", "lower", "increas", "decreas", "effect", "correlat", "associat")
        )
    ):
        return True
    return sentence.says(_LEVEL_WORDS) and sentence.says(
        ("signific", "alpha", "α", "p-value", "p value", "level")
    )
