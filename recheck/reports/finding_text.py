"""One finding in words, for a terminal."""

from __future__ import annotations

from recheck.model import Audit, Claim, Finding, Implied, Interval, Place, Remedy, shown
from recheck.model.figures import figure, span, whereabouts
from recheck.reports.look import INDENT, LABEL, Look, clean, shortened
from recheck.reports.number_line import Bar, Drawing, number_line
from recheck.reports.words import implied_range

LONGEST_QUOTE = 320
LONGEST_LISTED = 160
MOST_READINGS = 4
WHERE = 10


def finding_lines(audit: Audit, finding: Finding, number: int, look: Look) -> list[str]:
    """A discrepancy in full: quote, printed, implied, tolerance, assumptions, remedies, question."""
    lines = brief_lines(audit, finding, number, look)
    lines += ["", *_printed_and_implied(audit, finding, look), ""]
    lines += look.labelled("tolerance", [finding.tolerance])
    lines += look.labelled("assuming", finding.assumptions)
    lines += look.labelled("mended by", [_remedy(remedy) for remedy in finding.reconciled_by])
    lines += look.labelled("ask", [finding.question])
    lines += look.labelled("note", _notes(audit, finding))
    return lines + look.labelled("check", [f"{finding.check}; read with {finding.confidence} confidence"])


def brief_lines(audit: Audit, finding: Finding, number: int, look: Look) -> list[str]:
    """A finding in short: verdict, place, quote and message."""
    title = f"{number}. {finding.verdict.upper()}"
    if finding.reversal:
        alpha = figure(_alpha(audit, finding))
        title += f", REVERSAL: printed and implied p on opposite sides of alpha {alpha}"
    role = "reversal" if finding.reversal else finding.verdict
    quote = shortened(finding.place.quote, LONGEST_QUOTE)
    return [
        *(look.paint(line, role) for line in look.paragraph(title, hanging=INDENT)),
        *look.paragraph(whereabouts(finding.place), indent=INDENT),
        *look.paragraph(f"“{quote}”", indent=INDENT, hanging=INDENT + 1),
        *_groups(audit, finding, look),
        "",
        *look.paragraph(finding.message, indent=INDENT),
    ]


def listed_lines(place: Place, text: str, look: Look) -> list[str]:
    """One result in a list: where it stands, its quote, and a text about it."""
    where = _short_place(place)
    edge = INDENT + WHERE
    quote = shortened(place.quote, LONGEST_LISTED)
    first, *more = look.paragraph(f"“{quote}”: {text}" if text else f"“{quote}”", indent=edge)
    return [f"{'':{INDENT}}{where:<{WHERE}}{first[edge:]}", *more]


def _short_place(place: Place) -> str:
    """Where a result stands, in the few characters that a list has room for."""
    if place.page or place.line:
        return f"p. {place.page}" if place.page else f"line {place.line}"
    if place.table:
        return place.table if len(place.table) < WHERE else "table"
    return f"par. {place.paragraph}" if place.paragraph else ""


def _groups(audit: Audit, finding: Finding, look: Look) -> list[str]:
    """The other claims that a finding rests on, each with its own quote and place."""
    by_id = {claim.id: claim for claim in _claims(audit, finding)}
    groups = [by_id[name] for name in finding.claims[1:] if name in by_id]
    lines = []
    for number, claim in enumerate(groups, 1):
        name = _member(finding, claim, number)
        text = f"{name}: “{shortened(claim.place.quote, LONGEST_QUOTE)}”, {whereabouts(claim.place)}"
        lines += look.paragraph(text, indent=INDENT, hanging=INDENT + 3)
    return lines


def _member(finding: Finding, claim: Claim, number: int) -> str:
    """What a further claim of a finding is to it, in the words of its message."""
    if finding.check == "told-twice":
        return "elsewhere"
    return f"{'cell' if claim.kind == 'count' else 'group'} {number}"


def _printed_and_implied(audit: Audit, finding: Finding, look: Look) -> list[str]:
    """Rows of what is printed and what is implied, beside a number line where a gap can be seen on one."""
    listed = finding.implied[:MOST_READINGS]
    cells = [_printed_cell(finding), *(implied_range(implied) for implied in listed)]
    edge = INDENT + LABEL + max(map(len, cells)) + 2
    drawing = _drawing(audit, finding, look.width - edge)
    lines = []
    for k, cell in enumerate(cells):
        label = look.paint(("implied" if k else "printed").ljust(LABEL), "label")
        lines.append(
            f"{'':{INDENT}}{label}{cell:<{edge - INDENT - LABEL}}{drawing.tracks[k] if drawing else ''}"
        )
        assuming = listed[k - 1].assuming if k else ""
        lines += look.paragraph(f"assuming {assuming}", indent=INDENT + LABEL) if assuming else []
    if drawing:
        scale = " " * (INDENT + LABEL) + "log scale" if drawing.logarithmic else ""
        lines += [" " * edge + drawing.axis, scale.ljust(edge) + drawing.values]
    left_out = len(finding.implied) - MOST_READINGS
    lines += look.labelled("", [f"{left_out} more are in the JSON"] if left_out > 0 else [])
    gap = [f"{figure(finding.gap, 3)} units of the last printed digit"] if finding.gap else []
    return lines + look.labelled("gap", gap)


def _printed_cell(finding: Finding) -> str:
    """The printed number with its short symbol; the message holds the long names."""
    name = shown(finding.quantity)
    return clean(f"{name} {finding.printed}" if len(name) <= 6 else finding.printed.removeprefix("= "))


def _drawing(audit: Audit, finding: Finding, columns: int) -> Drawing | None:
    printed = _printed_interval(audit, finding)
    if printed is None:
        return None
    is_p = finding.quantity == "p"
    return number_line(
        (printed,),
        [_bar(implied) for implied in finding.implied[:MOST_READINGS]],
        columns=columns,
        alpha=_alpha(audit, finding) if is_p else None,
        decades=is_p,
    )


def _bar(implied: Implied) -> Bar:
    if implied.integers:
        return tuple(Interval(number, number) for number in implied.integers)
    return (Interval(implied.low, implied.high),)


def _printed_interval(audit: Audit, finding: Finding) -> Interval | None:
    """The values that the printed number can stand for, where it is a number of one of the claims."""
    for claim in _claims(audit, finding):
        printed = claim.values.get(finding.quantity)
        if printed is not None and printed.text in finding.printed:
            # Rounding carries a p of .000 or 1.00 beyond what p can be.
            return printed.interval().within(0.0, 1.0) if finding.quantity == "p" else printed.interval()
    return None


def _remedy(remedy: Remedy) -> str:
    """What would mend a discrepancy; the numbers are added where the words do not hold them."""
    if remedy.low is None or remedy.high is None or span(remedy.low, remedy.high) in remedy.text:
        return remedy.text
    return f"{remedy.text} ({shown(remedy.quantity)} {span(remedy.low, remedy.high)})"


def _claims(audit: Audit, finding: Finding) -> list[Claim]:
    return [claim for claim in audit.claims if claim.id in finding.claims]


def _notes(audit: Audit, finding: Finding) -> list[str]:
    """What the reading of the claims left in doubt, each once."""
    return list(dict.fromkeys(note for claim in _claims(audit, finding) for note in claim.notes))


def _alpha(audit: Audit, finding: Finding) -> float:
    stated = [claim.values["alpha"].number for claim in _claims(audit, finding) if "alpha" in claim.values]
    return stated[0] if stated else audit.settings.alpha
