"""Which groups a test in a table compares: the summaries and counts of its own row or block of rows."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cache

import regex

from recheck.model import LEVELS, Claim, ClaimKind, Confidence, Printed
from recheck.reading.tables.bundles import Bundle
from recheck.reading.tables.frame import Found, Frame
from recheck.reading.tokens import words
from recheck.reading.views import TIMEOUT


@dataclass(frozen=True, slots=True)
class Link:
    """Ids of what a test compares, on what ground, or why there is no link."""

    groups: tuple[str, ...] = ()
    basis: str | None = None
    confidence: Confidence = "high"
    note: str | None = None
    of_counts: bool = False


SAME_ROW = "the same row of the table"
SAME_ROWS = "the rows of the table beside which the test stands"
SAME_COLUMN = "the same column of the table"
SAME_COLUMNS = "the columns of the table below which the test stands"
_OTHER_GROUPS = "the row has other groups than the test compares"
_OTHER_TEST = "the heading of the test names something else than the groups of the row"


def link_of(
    frame: Frame,
    members: Sequence[Found],
    bundle: Bundle,
    values: Mapping[str, Printed],
    kind: ClaimKind,
    basis: str,
) -> Link:
    """Choose those of the summaries beside a test that it compares; none where that is not sure."""
    beside = _of_one_kind(members, kind)
    chosen = [member for member in beside if not everyone(member.claim) or _smaller(member, beside)]
    if len(chosen) < 2:
        return Link()
    said = " ".join(dict.fromkeys(text for text in (bundle.group, bundle.name) if text))
    if said and not generic(said):
        inside = [m for m in chosen if _under(m.claim, said)]
        if not inside:
            pair = _named_pair(said, chosen)
            return _linked(pair, basis, frame) if pair else Link(note=_OTHER_TEST)
        chosen = inside
    without_change = [member for member in chosen if not _change(member.claim)]
    chosen = without_change if len(without_change) >= 2 else chosen
    if not _plain_design(chosen) or not _as_many(len(chosen), values, kind):
        return Link(note=_OTHER_GROUPS)
    # Without df nothing tells that a further column, such as a mean over all, is not among the groups.
    counted = (
        len(chosen) == 2
        or bool({"df", "df1"} & set(values))
        or all("n" in member.claim.values for member in chosen)
    )
    return _linked(chosen, basis, frame, sure=counted)


def _linked(chosen: Sequence[Found], basis: str, frame: Frame, *, sure: bool = True) -> Link:
    high = sure and frame.confidence == "high"
    return Link(tuple(member.claim.id for member in chosen), basis, "high" if high else "medium")


def _of_one_kind(members: Sequence[Found], kind: ClaimKind) -> list[Found]:
    """One summary for each group: of means for tests of means, of medians for tests of ranks."""
    first = ("median", "mean") if kind == "rank-test" else ("mean", "median")
    best: dict[tuple[int, int], Found] = {}
    for member in members:
        if member.claim.kind != "group-summary":
            continue
        place = (member.row, member.columns[0])
        held = best.get(place)
        if held is None or (first[0] in member.claim.values and first[0] not in held.claim.values):
            best[place] = member
    return list(best.values())


def _as_many(groups: int, values: Mapping[str, Printed], kind: ClaimKind) -> bool:
    """Whether a test of this kind, with these df, compares so many groups."""
    if kind in ("t-test", "comparison", "rank-test", "z-test"):
        return groups == 2
    df = values.get("df1") if kind == "F-test" else values.get("df") if kind == "chi2-test" else None
    if df is not None and df.decimals <= 0:
        return groups == df.value + 1
    return df is None and kind in ("F-test", "chi2-test", "estimate")


def _plain_design(chosen: Sequence[Found]) -> bool:
    """Whether the groups stand beside each other, not crossed: `Course | Before`, `Course | After`, `None | Before` …"""
    if len(chosen) == 2:
        return True
    return not any(LEVELS in (member.claim.group or "") for member in chosen) or len(
        {(member.claim.group or "").partition(LEVELS)[0] for member in chosen}
    ) == 1  # fmt: skip


# -- names ----------------------------------------------------------------------------------------------


@cache
def _whole_sample() -> regex.Pattern[str]:
    """`Total`, `Both mills`, `All three flours`, `Mean across flours`, `Rye and wheat combined`; not `whole wheat`, `all-purpose`."""
    return regex.compile(
        r"(?:the )?(?:total|all|overall|whole|entire|full|combined|pooled|both|complete|average|mean over|grand mean)\b(?: (?:the|sample|groups?|cohort|population"
        r"|patients|participants|subjects|samples|data|loaves|bakers|n))*[\s.:*]*$|(?:study )?(?:sample|population|cohort)$"
        r"|(?:mean |average |total )?(?:across|averaged? over|entire|(?:mean|average|total) of|grand (?:mean|average|total))\b"
        r"|(?:mean |average |total )?(?:in |of |for |over )?(?:both|all)(?: (?:of|the|two|three|four|five|six))* (?!others|controls)\p{L}+s$"
        r"|.*\b(?:across (?:all|both|the)\b|(?:combined|pooled|taken together|averaged|collapsed)$)",
        regex.IGNORECASE,
    )


def everyone(claim: Claim) -> bool:
    """Whether a summary is about all groups together."""
    levels = (claim.group or "").split(LEVELS)
    return any(_whole_sample().match(level.strip(), timeout=TIMEOUT) for level in levels)


def _smaller(member: Found, members: Sequence[Found]) -> bool:
    """Whether a column that is named like the whole has fewer cases than another: `Both loaves` beside `Rye`, `Wheat`."""
    size = member.claim.values.get("n")
    others = [other.claim.values["n"] for other in members if "n" in other.claim.values]
    return size is not None and any(size.value < other.value for other in others)


_CHANGES = words(
    "change changes difference differences diff gain gains improvement δ increase decrease reduction delta"
)


def _change(claim: Claim) -> bool:
    return not _CHANGES.isdisjoint((claim.group or "").lower().replace("δ", "δ ").replace("|", " ").split())


_GENERIC = words(
    "test tests statistic statistics comparison comparisons between group groups difference differences anova analysis of variance "
    "student student's independent dependent paired unpaired sample samples t f significance significant result results "
    "one way one-way univariate welch welch's the for two sided tailed two-sided two-tailed value values statistical p chi square chi-square "
    "chi-squared χ² χ kruskal wallis kruskal-wallis mann whitney mann-whitney wilcoxon fisher fisher's exact omnibus across among conditions "
    "condition effect size level outcome comparison's output summary related unrelated inferential t-test t-tests test's signed-rank rank in by to within repeated measures "
    "repeated-measures probability u z h d ttest both versus vs friedman main 95% ci confidence interval cohen's and"
)


def generic(text: str) -> bool:
    """Whether a heading says no more than that groups are compared."""
    return not [
        word for word in _plain(text).split() if word not in _GENERIC and not word.replace(".", "").isdigit()
    ]


def _plain(text: str) -> str:
    return " ".join(regex.sub(r"[|()\[\],;:/*†‡]", " ", text.lower(), timeout=TIMEOUT).split())


def _under(claim: Claim, said: str) -> bool:
    """Whether the heading over the test is also over the group: `Rye` over `Before`, `After`, `t` and `p`."""
    return (claim.group or "").lower().startswith(said.lower() + LEVELS)


@cache
def _between() -> regex.Pattern[str]:
    return regex.compile(
        r" ?(?:\bvs\b\.?|\bversus\b|\bv\b\.?|\bcompared (?:with|to)\b|[–—-]|\band\b|,|/) ?", regex.IGNORECASE
    )


def _named_pair(said: str, chosen: Sequence[Found]) -> list[Found]:
    """The two groups that a heading names, such as `Rye vs. wheat`; [] where it does not name just two."""
    text = regex.sub(r"^(?:p|P)(?:[ -]values?)?(?: for)? ", "", said, timeout=TIMEOUT).strip("() ")
    parts = [
        part.strip(" ()[]:")
        for part in _between().split(text, timeout=TIMEOUT)
        if part and part.strip(" ()[]:")
    ]
    if len(parts) != 2:
        return []
    found = [_called(part, chosen) for part in parts]
    one, two = found
    return [one, two] if one is not None and two is not None and one is not two else []


def _called(name: str, chosen: Sequence[Found]) -> Found | None:
    """The only group that goes by this name: the same words, or the one letter or number at its end."""
    key = _key(name)
    keys = [_key((member.claim.group or "").rpartition(LEVELS)[2]) for member in chosen]
    for same_name in (str.__eq__, _ends_alike, _begins_alike):
        same = [member for member, own in zip(chosen, keys, strict=True) if same_name(own, key)]
        if same:
            return same[0] if len(same) == 1 else None
    return None


def _ends_alike(own: str, key: str) -> bool:
    """`Group A` is called `A`."""
    return len(key) <= 2 and " " in own and own.split(" ")[-1] == key


def _begins_alike(own: str, key: str) -> bool:
    """`Rye flour` is called `rye`, and the other way round."""
    return len(key) >= 3 and (own.startswith(key) or (len(own) >= 3 and key.startswith(own + " ")))


def _key(text: str) -> str:
    return " ".join("".join(char if char.isalnum() else " " for char in text.lower()).split())
