"""The report of an audit for a terminal: plain text, printable, worst first."""

from __future__ import annotations

from collections import Counter
from collections.abc import Mapping

from recheck.model import DISCREPANT, Audit, Claim, Finding, Place, Verdict
from recheck.model.figures import figure
from recheck.reports.finding_text import brief_lines, finding_lines, listed_lines
from recheck.reports.look import Look, clean, shortened
from recheck.reports.words import CAUTION, counted, kinds_read, listed

MOST_REASONS = 8
ALPHA_SOURCES = {
    "default": "the usual level; the manuscript states none",
    "stated": "stated in the manuscript",
    "asked": "as asked for",
}


def terminal_report(audit: Audit, *, everything: bool = False, look: Look | None = None) -> str:
    """Write an audit as text.

    `everything` lists also the results that agree and those that were not checked; otherwise they
    are counted, the latter by reason.
    """
    look = look or Look()
    lines = _head(audit, look)
    worst = [finding for finding in audit.findings if finding.verdict in (*DISCREPANT, "conditional")]
    for number, finding in enumerate(worst, 1):
        write = brief_lines if finding.verdict == "conditional" else finding_lines
        lines += ["", look.rule(), *write(audit, finding, number, look)]
    lines += _rest(audit, everything, look)
    if worst:
        lines += ["", look.rule(), *look.paragraph(CAUTION)]
    return "\n".join(line.rstrip() for line in lines) + "\n"


def _head(audit: Audit, look: Look) -> list[str]:
    document = audit.document
    name = shortened(document.name, look.width)
    lines = [look.paint(name, "heading"), "═" * len(name)]
    if document.title:
        lines += look.paragraph(f"“{document.title}”")
    size = [] if document.pages is None else [counted(document.pages, "page", "pages")]
    size.append(counted(document.words, "word", "words"))
    lines += look.paragraph(f"{listed(size, last='with')}. {_read(audit)}")
    if audit.claims:
        alpha = figure(audit.settings.alpha)
        lines += look.paragraph(f"Alpha is {alpha} ({ALPHA_SOURCES[audit.settings.alpha_source]}).")
    for rule in audit.settings.scores:
        lines += look.paragraph(f"Scores, as told with the request: {rule.text}.")
    for note in audit.notes:
        lines += look.paragraph(f"Note: {note}", hanging=3)
    return [*lines, "", *look.paragraph(_outcome(audit))]


def _read(audit: Audit) -> str:
    """What was read, and how much of it could be checked."""
    if not audit.claims:
        return "No statistical result was read."
    total, checked = len(audit.claims), audit.summary()["checked"]
    kinds = kinds_read(audit)
    several = len({claim.kind for claim in audit.claims}) > 1
    read = f"{counted(total, 'result', 'results')} read: {kinds}" if several else f"{kinds} read"
    if total == 1:
        return f"{read}; it could {'' if checked else 'not '}be checked."
    part = "none" if not checked else "all" if checked == total else f"{checked} of them"
    return f"{read}; {part} could be checked."


def _outcome(audit: Audit) -> str:
    """The counts by verdict in one sentence."""
    if not audit.findings:
        return "Nothing to check."
    summary = audit.summary()
    parts = [f"{summary[verdict]} {verdict}" for verdict in (*DISCREPANT, "conditional") if summary[verdict]]
    if summary["reversals"]:
        where = next(k for k, part in enumerate(parts) if part.endswith(" inconsistent"))
        parts[where] += f" ({counted(summary['reversals'], 'reversal', 'reversals')})"
    if summary["agrees"]:
        parts.append(f"{summary['agrees']} {'agrees' if summary['agrees'] == 1 else 'agree'}")
    start = "Findings" if audit.discrepant else "No discrepancy" if parts else "Nothing could be checked"
    if summary["unchecked"]:
        parts.append(f"{summary['unchecked']} unchecked")
    return f"{start}: {', '.join(parts)}."


def _rest(audit: Audit, everything: bool, look: Look) -> list[str]:
    agreed, unchecked = _of(audit, "agrees"), _of(audit, "unchecked")
    lines: list[str] = []
    if agreed and everything:
        lines += ["", look.rule(), look.paint("Agrees as printed", "agrees"), *_listed(audit, agreed, look)]
    if unchecked:
        lines += ["", look.rule(), look.paint("Not checked, and why", "heading")]
        lines += _listed(audit, unchecked, look) if everything else _counted(unchecked, look)
    alone = _alone(audit)
    if alone:
        lines += ["", *look.paragraph(_alone_sentence(len(alone)))]
    if alone and everything:
        lines += [line for claim in alone for line in listed_lines(claim.place, "", look)]
    if not everything and (agreed or alone):
        lines += [
            "",
            *look.paragraph("--all lists also what agrees and what was not checked, in reading order."),
        ]
    return lines


def _of(audit: Audit, verdict: Verdict) -> list[Finding]:
    return [finding for finding in audit.findings if finding.verdict == verdict]


def _listed(audit: Audit, findings: list[Finding], look: Look) -> list[str]:
    """Findings in the manuscript's order, those about the same words together."""
    order = {claim.id: number for number, claim in enumerate(audit.claims)}
    about: dict[tuple[Place, str], list[str]] = {}
    for finding in sorted(findings, key=lambda finding: _position(finding, order)):
        reason = f": {_reason(finding)}" if finding.verdict == "unchecked" else ""
        about.setdefault((finding.place, reason), []).append(finding.check)
    lines: list[str] = []
    for (place, reason), checks in about.items():
        lines += listed_lines(place, f"{', '.join(dict.fromkeys(checks))}{reason}", look)
    return lines


def _position(finding: Finding, order: Mapping[str, int]) -> tuple[int, int, int]:
    """Page and line, then the number of the claim in reading order."""
    first = min((order[name] for name in finding.claims if name in order), default=0)
    return finding.place.page or 0, finding.place.line or 0, first


def _counted(findings: list[Finding], look: Look) -> list[str]:
    """The reasons of unchecked findings with their counts, the most frequent first."""
    reasons = Counter(_reason(finding) for finding in findings).most_common()
    lines = [line for reason, number in reasons[:MOST_REASONS] for line in _numbered(number, reason, look)]
    left = reasons[MOST_REASONS:]
    if left:
        others = f"for {counted(len(left), 'other reason', 'other reasons')}"
        lines += _numbered(sum(number for _, number in left), others, look)
    return lines


def _reason(finding: Finding) -> str:
    return clean(finding.message).removeprefix("Not checked: ")


def _numbered(number: int, text: str, look: Look) -> list[str]:
    first, *more = look.paragraph(text, indent=6)
    return [f"{number:>4}  {first[6:]}", *more]


def _alone(audit: Audit) -> list[Claim]:
    """Claims that no finding speaks of."""
    met = {claim for finding in audit.findings for claim in finding.claims}
    return [claim for claim in audit.claims if claim.id not in met]


def _alone_sentence(number: int) -> str:
    if number == 1:
        return "1 result was read that stands alone: nothing else printed with it bears on it."
    return f"{number:,} results were read that stand alone: nothing else printed with them bears on them."


def closing_line(with_discrepancies: int, without: int, unread: int) -> str:
    """Sum up several documents."""
    parts = [
        (with_discrepancies, "with discrepancies"),
        (without, "without"),
        (unread, "could not be read"),
    ]
    counts = ", ".join(f"{number} {words}" for number, words in parts if number)
    return f"{sum(number for number, _ in parts)} documents: {counts}.\n"
