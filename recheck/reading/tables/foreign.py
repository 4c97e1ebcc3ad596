"""Tables of other people's studies: their numbers are no results of the manuscript."""

from __future__ import annotations

from functools import cache

import regex

from recheck.reading.tables.frame import Frame
from recheck.reading.views import TIMEOUT


def of_other_studies(frame: Frame) -> bool:
    """Whether the rows, or the columns, of a block are studies by other authors.

    Most of their names are citations, or some are and the caption speaks of earlier work.
    """
    sheet = frame.sheet
    rows = [sheet.row_header(row).text for row in sheet.rows if not sheet.is_subheading(row)]
    heads = [sheet.column_header(column).text for column in sheet.columns]
    earlier = bool(_earlier().search(frame.legend.text, timeout=TIMEOUT))
    return any(_cited(names, earlier) for names in (rows, heads))


def _cited(names: list[str], earlier: bool) -> bool:
    told = [name for name in names if name.strip()]
    cited = sum(bool(_citation().search(name, timeout=TIMEOUT)) for name in told)
    return cited >= 2 and (2 * cited > len(told) or earlier)


@cache
def _citation() -> regex.Pattern[str]:
    """`Miller (2011)`, `Ovens & Stone, 2015`, `Crumb et al. [12]`."""
    return regex.compile(
        r"\p{Lu}[\p{L}'’-]{1,24}(?:,? (?:and|&) \p{Lu}[\p{L}'’-]{1,24}| et al\.?| and colleagues)?,? ?[(\[]?(?:19|20)\d\d[a-z]?\b"
        r"|\p{Lu}[\p{L}'’-]{1,24} et al\.?,? ?\[?\d"
    )


@cache
def _earlier() -> regex.Pattern[str]:
    return regex.compile(
        r"\b(?:previous|earlier|prior|published|other|included|reviewed|existing) (?:\w+ ){0,2}(?:stud(?:y|ies)|reports?|trials?|work|literature|findings)"
        r"|meta-?analys|systematic review|in the literature|studies included"
    )
