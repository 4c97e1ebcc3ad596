"""Headings that name a group and a quantity in one cell: `Rye M | Rye SD | Wheat M | Wheat SD`."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Mapping
from functools import cache

import regex

from recheck.reading.views import TIMEOUT

_CENTRES = r"M|Mean|mean|MEAN|Mdn|Median|median|MW|Mittelwert"
_SPREADS = r"SD|sd|S\.D\.|s\.d\.|SE|se|SEM|S\.E\.|Std\.? ?[Dd]ev(?:\.|iation)?|Std\.? ?[Ee]rr(?:\.|or)?|IQR"


@cache
def _heading() -> regex.Pattern[str]:
    """The quantity before or behind the name of the group, with a space, a low line or brackets between them."""
    quantity = rf"(?:(?P<centre>{_CENTRES})|(?P<spread>{_SPREADS})|(?P<size>[nN])|(?P<share>%))"
    mark = r"[*†‡§ ]*"
    return regex.compile(
        rf"(?P<name>[\p{{L}}\d][^|]{{0,60}}?)(?:[ _.,:-]{{1,3}}|(?P<open>[ _]?[(\[])){quantity}(?(open)[)\]]){mark}"
        rf"|{quantity}(?:[ _.,:-]{{1,3}}|(?P<open>[ _]?[(\[])|(?=\d{mark}$))(?:of )?(?P<name>[\p{{L}}\d][^|()]{{0,60}}?)(?(open)[)\]]){mark}"
    )


def parted(paths: Mapping[int, tuple[str, ...]]) -> dict[int, tuple[str, ...]]:
    """The headings with such levels divided into the group and the quantity.

    Only where a centre and a spread (or a number and its share) stand over different columns under the same
    name and the same outer levels: `Copying M` alone may be anything.
    """
    found: dict[int, tuple[tuple[str, ...], str, str]] = {}
    kinds: dict[tuple[tuple[str, ...], str], set[str]] = defaultdict(set)
    for column, path in paths.items():
        match = _heading().fullmatch(path[-1], timeout=TIMEOUT) if path else None
        if match is None:
            continue
        kind = next(kind for kind in ("centre", "spread", "size", "share") if match[kind])
        name = match["name"].strip(" _")
        found[column] = (path[:-1], name, match[kind])
        kinds[path[:-1], name].add(kind)
    whole = {key for key, told in kinds.items() if told >= {"centre", "spread"} or told >= {"size", "share"}}
    divided = {
        column: (*outer, name, quantity)
        for column, (outer, name, quantity) in found.items()
        if (outer, name) in whole
    }
    return {**paths, **divided}
