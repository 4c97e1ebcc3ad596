"""The whole way for one document: open, read, check, confirm, rank."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path
from typing import BinaryIO, Literal, get_args

from recheck.checks.registry import all_checks
from recheck.checks.running import run_checks
from recheck.confirming import confirm
from recheck.documents import open_document, text_document
from recheck.model import Audit, Context, Document, DocumentFacts, Reading, ScoreRule, Settings
from recheck.ranking import rank
from recheck.reading import read
from recheck.reports.table import findings_table

ReaderChoice = Literal["auto", "pdfium", "pdfminer"]
Source = str | Path | bytes | BinaryIO

Audit.notebook_view = findings_table


def audit(
    source: Source,
    *,
    name: str | None = None,
    alpha: float | None = None,
    reader: ReaderChoice = "auto",
    scores: Sequence[str] = (),
) -> Audit:
    """Audit one manuscript: a path, its bytes, or an open binary file.

    `alpha` overrides the significance level that the text states; `scores` says what the scores of
    outcomes are, as in `"crumb score: 1..7"`. Raises `UnreadableDocument`, and `ValueError` for an
    alpha outside 0 to 1, an unknown reader or scores that cannot be understood.
    """
    if reader not in get_args(ReaderChoice):
        raise ValueError(f"reader must be one of {', '.join(get_args(ReaderChoice))} (got {reader!r})")
    _check_alpha(alpha)
    rules = score_rules(scores)
    if hasattr(source, "read"):
        name, source = name or str(getattr(source, "name", "")) or None, source.read()
    document = open_document(source, name=name, reader=reader)
    return _audit(document, source, alpha, reader, rules)


def audit_text(
    text: str, *, name: str = "text", alpha: float | None = None, scores: Sequence[str] = ()
) -> Audit:
    """Audit a text that is at hand as a string. Raises `TypeError` for anything else."""
    if not isinstance(text, str):
        raise TypeError(
            f"text must be a string (got {type(text).__name__}); recheck.audit takes bytes and paths"
        )
    _check_alpha(alpha)
    rules = score_rules(scores)
    return _audit(text_document(text, name=name), None, alpha, "auto", rules)


def score_rules(scores: Sequence[str]) -> tuple[ScoreRule, ...]:
    """Read what is said of scores. Raises `ValueError` with a sentence for what cannot be understood."""
    if not scores:
        return ()
    from recheck.reading.scales import score_rule

    return tuple(score_rule(text) for text in ([scores] if isinstance(scores, str) else scores))


def _check_alpha(alpha: float | None) -> None:
    if alpha is not None and not (isinstance(alpha, (int, float)) and 0 < alpha < 1):
        raise ValueError(f"alpha must be a number between 0 and 1 (got {alpha!r})")


def _audit(
    document: Document,
    source: str | Path | bytes | None,
    alpha: float | None,
    reader: ReaderChoice,
    scores: tuple[ScoreRule, ...],
) -> Audit:
    all_checks()
    reading = read(document, scores)
    settings = replace(_settings(reading.context, alpha, reader), scores=scores)
    findings = run_checks(reading.claims, settings, same=reading.same)
    if document.format == "pdf" and reader == "auto" and document.reader == "pdfium" and source is not None:
        findings = confirm(findings, reading.claims, lambda pages: _second(source, document, pages, scores))
    facts = DocumentFacts(
        name=document.name, format=document.format, sha256=document.sha256, pages=document.pages,
        words=document.words, title=document.title,
    )  # fmt: skip
    notes = (*document.notes, *reading.context.notes, *reading.notes)
    return Audit(facts, settings, reading.claims, rank(findings), notes)


def _second(
    source: str | Path | bytes, document: Document, pages: Sequence[int] | None, scores: Sequence[ScoreRule]
) -> Reading:
    """Read some pages (or all) again with the other engine."""
    wanted = None if pages is None else frozenset(pages)
    return read(open_document(source, name=document.name, reader="pdfminer", pages=wanted), scores)


def _settings(context: Context, alpha: float | None, reader: ReaderChoice) -> Settings:
    if alpha is not None:
        return Settings(alpha=alpha, alpha_source="asked", reader=reader)
    if context.alpha is not None:
        level = context.alpha.number / 100 if context.alpha.percent else context.alpha.number
        if 0 < level < 1:
            return Settings(alpha=level, alpha_source="stated", reader=reader)
    return Settings(reader=reader)
