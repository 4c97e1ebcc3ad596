"""Whether columns that are named like a test hold one: letters also name times, temperatures and assumptions."""

from __future__ import annotations

from dataclasses import replace
from functools import cache

import regex

from recheck.reading.tables.bundles import DEGREES, EFFECTS, STATISTICS, Bundle
from recheck.reading.tables.frame import Frame, star_of
from recheck.reading.views import TIMEOUT


def meant(frame: Frame, bundle: Bundle) -> Bundle | None:
    """The bundle with the names that its numbers bear out; None where it holds no test of the results."""
    told = _retold(frame, bundle)
    if told is None or _of_assumptions(frame, bundle) or not _supported(frame, told):
        return None
    return told


def _supported(frame: Frame, bundle: Bundle) -> bool:
    """Whether a statistic has a df, a p or a mark somewhere, or a heading of words: `t` may be a time, `H` humidity, `r` a radius."""
    if bundle.quantities & (DEGREES | {"p"}) or any(role.df for role in bundle.roles) or frame.legend.df:
        return True
    telling = [column for column, role in bundle.parts if set(role.quantities) & STATISTICS]
    if "r" in bundle.quantities and "correlat" in frame.legend.text:
        return True
    heads = " ".join(frame.sheet.column_header(column).text for column in telling)
    marked = any(
        star_of(piece, frame.legend)
        for row in frame.sheet.rows
        for c in telling
        for piece in frame.pieces(row, c)
    )
    means = any("mean" in role.quantities for role in frame.roles.values()) or any(
        "mean" in form for form in frame.legend.forms
    )
    if means and frame.legend.stars:
        return True
    return marked or bool(_spelled_out().search(heads, timeout=TIMEOUT)) or not telling


@cache
def _assumptions() -> regex.Pattern[str]:
    return regex.compile(
        r"levene|bartlett|shapiro|mauchly|kolmogorov|lilliefors|normality|homogeneity|sphericity|equal(?:ity of)? varianc|brown.?forsythe|box'?s m",
        regex.IGNORECASE,
    )


def _of_assumptions(frame: Frame, bundle: Bundle) -> bool:
    """Whether columns test an assumption: by their headings, or as the unnamed `F | Sig.` that programs print before t."""
    before = bundle.columns[0] - 1
    heads = [frame.sheet.column_header(column).text for column in bundle.columns]
    if not bundle.quantities & STATISTICS and before not in frame.roles:
        heads.append(frame.sheet.column_header(before).text)
    if any(_assumptions().search(head, timeout=TIMEOUT) for head in heads):
        return True
    following = frame.roles.get(bundle.columns[-1] + 1)
    bare = (
        bundle.quantities <= {"F", "p"}
        and "F" in bundle.quantities
        and not any(role.df for role in bundle.roles)
    )
    return (
        bare
        and following is not None
        and following.quantities[:1] == ("t",)
        and following.group == bundle.group
    )


@cache
def _spelled_out() -> regex.Pattern[str]:
    return regex.compile(
        r"value|statistic|ratio|score|\btest|χ|chi|wald|spearman|pearson|correlat|mann|kruskal",
        regex.IGNORECASE,
    )


_FEW = 2


def _retold(frame: Frame, bundle: Bundle) -> Bundle | None:
    """A bundle whose `χ² (Fisher's exact)` or `t-test` holds p values, named so; None where they may be either.

    A statistic alone whose numbers all lie from 0 to 1 is a p where one of them is a bound, or where the test has no statistic;
    a `p` that is above 1 in most rows is a pressure or a price.
    """
    if any(role.quantities == ("p",) and _mostly_above_1(frame, column) for column, role in bundle.parts):
        return None
    held = bundle.quantities & STATISTICS
    if (
        len(held) != 1
        or not held <= {"t", "F", "chi2"}
        or bundle.quantities & (DEGREES | {"p"})
        or frame.legend.df
    ):
        return bundle
    at = next(k for k, role in enumerate(bundle.roles) if set(role.quantities) & held)
    role = bundle.roles[at]
    found = [piece for row in frame.sheet.rows for piece in frame.pieces(row, bundle.columns[at])]
    numbers = [piece.numbers[0] for piece in found if piece.numbers]
    if (
        role.df
        or len(numbers) < _FEW
        or any(not 0 <= n.value <= 1 for n in numbers)
        or any(piece.stars for piece in found)
    ):
        return bundle
    if not any(piece.shape == "p" for piece in found) and "fisher-exact" not in role.stated:
        return bundle if bundle.quantities & EFFECTS else None
    roles = [*bundle.roles]
    roles[at] = replace(role, quantities=("p",))
    return replace(bundle, roles=tuple(roles))


def _mostly_above_1(frame: Frame, column: int) -> bool:
    numbers = [
        n for row in frame.sheet.rows for piece in frame.pieces(row, column) for n in piece.numbers[:1]
    ]
    return 2 * sum(number.value > 1 for number in numbers) > len(numbers)
