"""An audit as a table: HTML for a notebook, plain records for a data frame."""

from __future__ import annotations

from html import escape
from typing import Any

from recheck.model import Audit, Finding, shown
from recheck.model.figures import whereabouts
from recheck.reports.look import clean
from recheck.reports.words import CAUTION, counted, implied_range

MOST_IMPLIED = 2
COLUMNS = ("verdict", "place", "quote", "quantity", "printed", "implied", "what to ask", "check")


def records(audit: Audit) -> list[dict[str, Any]]:
    """Give one flat dict for each finding, in ranked order, as `pandas.DataFrame` takes them.

    `implied_low` and `implied_high` are those of the first reading.
    """
    return [
        {
            "document": audit.document.name,
            "rank": finding.rank,
            "verdict": finding.verdict,
            "reversal": finding.reversal,
            "check": finding.check,
            "page": finding.place.page,
            "line": finding.place.line,
            "section": finding.place.section,
            "quote": finding.place.quote,
            "quantity": finding.quantity,
            "printed": finding.printed,
            "implied_low": finding.implied[0].low if finding.implied else None,
            "implied_high": finding.implied[0].high if finding.implied else None,
            "gap": finding.gap,
            "confidence": finding.confidence,
            "assumptions": "; ".join(finding.assumptions),
            "mended_by": "; ".join(remedy.text for remedy in finding.reconciled_by),
            "message": finding.message,
            "question": finding.question,
            "id": finding.id,
        }
        for finding in audit.findings
    ]


def findings_table(audit: Audit) -> str:
    """Write the findings as an HTML table without scripts: discrepancies in full, the rest counted."""
    worst = [finding for finding in audit.findings if finding.verdict not in ("agrees", "unchecked")]
    summary = audit.summary()
    counts = ", ".join(f"{word} {number}" for word, number in summary.items())
    caption = f"<caption><b>{_html(audit.document.name)}</b>: {_html(counts)}</caption>"
    if not worst:
        outcome = "No discrepancy found." if audit.findings else "Nothing to check."
        return f"<table>{caption}<tr><td>{outcome}</td></tr></table>"
    head = "".join(f'<th scope="col">{column}</th>' for column in COLUMNS)
    rows = "".join(_row(finding) for finding in worst)
    return (
        f"<table>{caption}<thead><tr>{head}</tr></thead><tbody>{rows}</tbody></table>"
        f"<p><small>{_html(CAUTION)}</small></p>"
    )


def _row(finding: Finding) -> str:
    shown_first = finding.implied[:MOST_IMPLIED]
    rows = [
        implied_range(each) + (f", assuming {each.assuming}" if each.assuming else "") for each in shown_first
    ]
    more = len(finding.implied) - len(rows)
    rows += [f"and {counted(more, 'other reading', 'other readings')}"] if more > 0 else []
    implied = "<br>".join(map(_html, rows))
    verdict = f"{finding.verdict} (reversal)" if finding.reversal else finding.verdict
    cells = (
        f"<b>{_html(verdict)}</b>",
        _html(whereabouts(finding.place)),
        _html(finding.place.quote),
        _html(shown(finding.quantity)),
        _html(finding.printed),
        implied,
        _html(finding.question),
        _html(finding.check),
    )
    return "<tr>" + "".join(f'<td style="text-align:left">{cell}</td>' for cell in cells) + "</tr>"


def _html(text: str) -> str:
    return escape(clean(text))
