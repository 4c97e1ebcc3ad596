"""Linking a test to the group summaries that it compares, where these stand in prose beside it."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import replace

from recheck.model import Claim
from recheck.reading.effect_links import with_pairs
from recheck.reading.other_links import (
    of_variances,
    with_differences,
    with_one_group,
    with_sizes,
    with_variances,
)
from recheck.reading.placed import Placed
from recheck.reading.tokens import words


def in_prose(placed: Sequence[Placed]) -> dict[str, Claim]:
    """Each test and effect whose group summaries stand in its sentence or a neighbouring one, by its id, with the ids of its summaries."""
    summaries = _by_sentence(item for item in placed if has_spread(item.claim))
    tests = _by_sentence(item for item in placed if groups_compared(item.claim) == 2)
    larger = _by_sentence(item for item in placed if groups_compared(item.claim) > 2)
    found = {**_counted(placed), **_ranked(placed), **_of_one_group(placed, summaries)}
    found |= with_differences(item for item in placed if item.claim.kind == "t-test")
    found |= with_pairs(placed, has_spread, _alike)
    found |= with_variances((item for item in placed if of_variances(item.claim)), summaries)
    for test in (test for group in (*tests.values(), *larger.values()) for test in group):
        place = (test.passage, test.sentence)
        if groups_compared(test.claim) > 2:
            alone = place not in tests and len(larger[place]) == 1
            pair, basis, near = _several(test, summaries.get(place, []) if alone else [])
        else:
            pair, basis, near = _pair(test, summaries, tests)
        if pair:
            found[test.claim.id] = replace(
                test.claim,
                groups=tuple(item.claim.id for item in pair),
                link=basis,
                link_confidence="high" if near else "medium",
            )
    return found


def _of_one_group(placed: Sequence[Placed], summaries: _Sentences) -> dict[str, Claim]:
    """Each t that is the only test of its sentence, with the one summary that stands there."""
    tests = _by_sentence(item for item in placed if item.claim.kind in ("t-test", "F-test", "z-test"))
    found = {}
    for place, own in tests.items():
        here = summaries.get(place, [])
        if len(own) == len(here) == 1 and own[0].claim.kind == "t-test" and _alike(here):
            claim = with_one_group(own[0], here)
            if claim is not None:
                found[claim.id] = claim
    return found


def _counted(placed: Sequence[Placed]) -> dict[str, Claim]:
    """Each χ² of two shares that is the only one of its sentence, with the two counts that stand there with their totals."""
    tests = _by_sentence(item for item in placed if of_two_shares(item.claim))
    counts = _by_sentence(item for item in placed if item.claim.kind == "count") if tests else {}
    found: dict[str, Claim] = {}
    for place, own in tests.items():
        pair = [item.claim for item in counts.get(place, [])]
        if (
            len(own) == 1
            and len(pair) == 2
            and all({"count", "total"} <= claim.values.keys() for claim in pair)
        ):
            found[own[0].claim.id] = replace(
                own[0].claim, groups=tuple(claim.id for claim in pair),
                link="the only two counts in the same sentence", link_confidence="medium",
            )  # fmt: skip
    return found


def _ranked(placed: Sequence[Placed]) -> dict[str, Claim]:
    """Each test of ranks that is the only one of its sentence, with the two groups whose sizes stand there."""
    tests = [
        item for item in placed if item.claim.kind == "rank-test" and {"u", "w"} & item.claim.values.keys()
    ]
    if not tests:
        return {}
    return with_sizes(tests, _by_sentence(item for item in placed if _has_size(item.claim)))


def _has_size(claim: Claim) -> bool:
    return (
        claim.kind == "group-summary" and "n" in claim.values and bool({"mean", "median"} & set(claim.values))
    )


def of_two_shares(claim: Claim, groups: int = 2) -> bool:
    """Whether a χ² may compare the shares of so many groups: its df are one less, or not printed for two groups."""
    df = claim.values.get("df")
    return claim.kind == "chi2-test" and (groups == 2 if df is None else df.value == groups - 1)


def has_spread(claim: Claim) -> bool:
    """Whether a claim sums up a group with its mean and spread."""
    return claim.kind == "group-summary" and "mean" in claim.values and bool({"sd", "se"} & set(claim.values))


def groups_compared(claim: Claim) -> int:
    """How many groups' means a test compares: two for t and for F with one numerator df, one more than that df for F; else 0."""
    if of_variances(claim):
        return 0
    if claim.kind == "t-test":
        return 0 if claim.says("one-sample") else 2
    df1 = claim.values.get("df1")
    plain = claim.kind == "F-test" and df1 is not None and df1.value == df1.value.to_integral_value()
    return int(df1.value) + 1 if plain and df1 is not None and 1 <= df1.value < _MOST_GROUPS else 0


_MOST_GROUPS = 12

_Sentences = Mapping[tuple[int, int], list[Placed]]


def _by_sentence(items: Iterable[Placed]) -> _Sentences:
    found: dict[tuple[int, int], list[Placed]] = {}
    for item in items:
        found.setdefault((item.passage, item.sentence), []).append(item)
    return found


def _pair(test: Placed, summaries: _Sentences, tests: _Sentences) -> tuple[tuple[Placed, ...], str, bool]:
    """The two summaries of a test, on what basis, and whether they stand in its own sentence."""
    place = (test.passage, test.sentence)
    here, rivals = summaries.get(place, []), tests[place]
    own = _own(test, here, rivals)
    if len(own) == 2 and _alike(own):
        return tuple(own), "the only two group summaries in the same sentence", True
    if len(here) == 1 and len(rivals) == 1:
        return _with_the_one_before(test, here[0], summaries, tests)
    if here or len(rivals) != 1:
        return (), "", True
    for step, where in ((-1, "the sentence before"), (1, "the sentence after")):
        near = summaries.get((test.passage, test.sentence + step), [])
        if near:
            others = [k for k in (step, 2 * step) if (test.passage, test.sentence + k) in tests]
            sure = len(near) == 2 and not others and _alike(near) and _same_outcome(test, near)
            return (
                (tuple(near), f"the only two group summaries in {where}", False) if sure else ((), "", True)
            )
    return (), "", True


def _several(test: Placed, here: Sequence[Placed]) -> tuple[tuple[Placed, ...], str, bool]:
    """The groups of an F with several numerator df: all summaries of its sentence, where it is the only test there."""
    count = groups_compared(test.claim)
    if len(here) != count or not _alike(here):
        return (), "", True
    return tuple(here), f"the only {count} group summaries in the same sentence", True


def _with_the_one_before(
    test: Placed, here: Placed, summaries: _Sentences, tests: _Sentences
) -> tuple[tuple[Placed, ...], str, bool]:
    """`Rye was lowest (M = 80, SD = 5). It fell short of wheat (M = 91, SD = 8), t(34) = …`."""
    before = (test.passage, test.sentence - 1)
    near = summaries.get(before, [])
    pair = [*near, here]
    if len(near) != 1 or before in tests or not _alike(pair) or not _same_outcome(test, pair):
        return (), "", True
    return tuple(pair), "the group summaries in the same sentence and in the one before", False


def _own(test: Placed, here: list[Placed], rivals: list[Placed]) -> list[Placed]:
    """The summaries between this test and its neighbours, where a sentence holds several tests."""
    if len(rivals) == 1:
        return here
    starts = sorted(t.start for t in rivals)
    before = [s for s in starts if s < test.start]
    left = before[-1] if before else -1
    if len(here) != 2 * len(rivals):
        return []
    following = here and rivals[0].start < here[0].start
    if following:
        later = [s for s in starts if s > test.start]
        right = later[0] if later else 1 << 60
        return [s for s in here if test.start < s.start < right]
    return [s for s in here if left < s.start < test.start]


def _alike(summaries: Sequence[Placed]) -> bool:
    """Summaries of one outcome have the same spread and unit, and none is about age."""
    return alike([item.claim for item in summaries]) and not any(_about_age(item) for item in summaries)


def alike(claims: Sequence[Claim]) -> bool:
    """Whether all claims print the same kind of spread and, or none of them, a percentage."""
    return len({("sd" in c.values, c.values["mean"].percent) for c in claims}) == 1


_AGES = frozenset(("age", "aged", "ages", "mage", "years", "year"))


def _about_age(item: Placed) -> bool:
    """Whether the numbers, or the words right before them, speak of age."""
    quote = item.claim.place.quote
    at = item.text.find(quote[:12])
    before = item.text[max(0, at - 20) : max(0, at)].lower().split()[-2:]
    own = quote.lower().replace("_", " ").split()
    told = [word.strip("(,;:=") for word in (*before, *own)]
    return bool(_AGES.intersection(told)) or any(
        word == "old" and told[at - 1] in ("years", "months", "weeks") for at, word in enumerate(told) if at
    )


def _same_outcome(test: Placed, near: Sequence[Placed]) -> bool:
    """Whether the sentences share a word that can name the outcome, or the test's names none of its own.

    A difference that is printed with the test must be that of the two means as printed.
    """
    if not same_difference(test.claim, [item.claim for item in near]):
        return False
    mine = {w for w in test.text.lower().split() if len(w) > 4 and w.isalpha()} - _COMMON
    other = {w for s in near for w in s.text.lower().split() if len(w) > 4 and w.isalpha()} - _COMMON
    return bool(mine & other) or len(mine) <= 4


def same_difference(test: Claim, pair: Sequence[Claim]) -> bool:
    """Whether a difference that is printed with a test is that of the two means as printed."""
    printed = test.values.get("mean_difference")
    if printed is None or len(pair) != 2:
        return True
    one, two = (claim.values["mean"] for claim in pair)
    slack = printed.unit + one.unit / 2 + two.unit / 2
    return abs(abs(printed.value) - abs(one.value - two.value)) <= slack


_COMMON = words(
    "significant significantly difference between there which their these those groups group conditions condition "
    "higher lower compared results revealed showed effect where other participants"
)
