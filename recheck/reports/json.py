"""An audit as JSON, by the schema in `audit.schema.json`."""

from __future__ import annotations

import json
import math
from collections.abc import Sequence
from functools import cache
from importlib.resources import files
from typing import Any

from recheck.model import Audit, Claim, Finding, Place, Printed, Remedy
from recheck.version import __version__

SCHEMA = "recheck.audit/1"


def audit_record(audit: Audit) -> dict[str, Any]:
    """Give an audit as plain dicts, lists, numbers and strings; an infinite end becomes None."""
    document, settings = audit.document, audit.settings
    return {
        "schema": SCHEMA,
        "version": __version__,
        "document": {
            "name": document.name,
            "format": document.format,
            "sha256": document.sha256,
            "pages": document.pages,
            "words": document.words,
            "title": document.title,
        },
        "settings": {
            "alpha": settings.alpha,
            "alpha_source": settings.alpha_source,
            "reader": settings.reader,
            "rounding": settings.rounding,
            "scores": [rule.text for rule in settings.scores],
        },
        "notes": list(audit.notes),
        "claims": [_claim(claim) for claim in audit.claims],
        "findings": [_finding(finding) for finding in audit.findings],
        "summary": audit.summary(),
    }


def unread_record(name: str, error: str) -> dict[str, Any]:
    """Give the record that stands in the place of a document that could not be read."""
    return {"schema": SCHEMA, "document": {"name": name}, "error": error}


def written_json(records: Sequence[dict[str, Any]]) -> str:
    """Write one record as an object, several as a list."""
    content: Any = records[0] if len(records) == 1 else list(records)
    return json.dumps(content, indent=1, ensure_ascii=False, allow_nan=False) + "\n"


@cache
def audit_schema() -> dict[str, Any]:
    """Read the published JSON Schema (draft 2020-12) of these records."""
    text = files("recheck.reports").joinpath("audit.schema.json").read_text(encoding="utf-8")
    schema: dict[str, Any] = json.loads(text)
    return schema


def _finite(value: float | None) -> float | None:
    return value if value is not None and math.isfinite(value) else None


def _place(place: Place) -> dict[str, Any]:
    return {
        "page": place.page,
        "box": None if place.box is None else list(place.box),
        "section": place.section,
        "paragraph": place.paragraph,
        "line": place.line,
        "table": place.table,
        "row": place.row,
        "column": place.column,
        "quote": place.quote,
    }


def _printed(printed: Printed) -> dict[str, Any]:
    return {
        "text": printed.text,
        "relation": printed.relation,
        "value": _finite(printed.number),
        "decimals": printed.decimals,
        "percent": printed.percent,
        "page": printed.page,
        "box": None if printed.box is None else list(printed.box),
    }


def _claim(claim: Claim) -> dict[str, Any]:
    return {
        "id": claim.id,
        "kind": claim.kind,
        "place": _place(claim.place),
        "values": {quantity: _printed(printed) for quantity, printed in claim.values.items()},
        "stated": list(claim.stated),
        "background": list(claim.background),
        "interval_of": claim.interval_of,
        "confidence": claim.confidence,
        "groups": list(claim.groups),
        "outcome": claim.outcome,
        "group": claim.group,
        "variables": list(claim.variables),
        "link": claim.link,
        "link_confidence": claim.link_confidence,
        "notes": list(claim.notes),
    }


def _remedy(remedy: Remedy) -> dict[str, Any]:
    return {
        "kind": remedy.kind,
        "quantity": remedy.quantity,
        "low": _finite(remedy.low),
        "high": _finite(remedy.high),
        "change": remedy.change,
        "text": remedy.text,
    }


def _finding(finding: Finding) -> dict[str, Any]:
    return {
        "id": finding.id,
        "rank": finding.rank,
        "verdict": finding.verdict,
        "check": finding.check,
        "claims": list(finding.claims),
        "quantity": finding.quantity,
        "printed": finding.printed,
        "implied": [
            {
                "low": _finite(implied.low),
                "high": _finite(implied.high),
                "integers": list(implied.integers),
                "assuming": implied.assuming,
            }
            for implied in finding.implied
        ],
        "gap": _finite(finding.gap),
        "reversal": finding.reversal,
        "confidence": finding.confidence,
        "tolerance": finding.tolerance,
        "message": finding.message,
        "question": finding.question,
        "assumptions": list(finding.assumptions),
        "reconciled_by": [_remedy(remedy) for remedy in finding.reconciled_by],
        "place": _place(finding.place),
    }
