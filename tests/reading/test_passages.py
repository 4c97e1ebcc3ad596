"""Every passage gives just the claims that its file names; the shares per kind are printed."""

from __future__ import annotations

from collections import Counter

import pytest

from recheck.reading import read
from tests.reading.passages import Case, cases, document, fits

CASES = cases()


def matched(case: Case) -> tuple[list[str], list[str], list[str]]:
    """Kinds of claims that were read as expected, expected but missed, and read without being expected."""
    left = list(read(document(case.text)).claims)
    right, missed = [], []
    for expected in case.claims:
        claim = next((claim for claim in left if fits(expected, claim)), None)
        if claim is None:
            missed.append(expected.kind)
        else:
            right.append(expected.kind)
            left.remove(claim)
    return right, missed, [claim.kind for claim in left]


@pytest.mark.parametrize("case", CASES, ids=[case.name for case in CASES])
def test_passage_gives_its_claims_and_no_other(case: Case) -> None:
    _, missed, extra = matched(case)
    assert not missed and not extra, case.text


def test_shares_per_kind(capsys: pytest.CaptureFixture[str]) -> None:
    counts = {"right": Counter[str](), "missed": Counter[str](), "extra": Counter[str]()}
    for case in CASES:
        for name, kinds in zip(counts, matched(case), strict=True):
            counts[name].update(kinds)
    with capsys.disabled():
        print(f"\n{'kind':14} read of expected, expected of read")
        for kind in sorted(counts["right"]):
            right = counts["right"][kind]
            expected, found = right + counts["missed"][kind], right + counts["extra"][kind]
            print(f"{kind:14} {right}/{expected} {right / expected:.0%}, {right}/{found} {right / found:.0%}")
    assert sum(len(case.claims) for case in CASES) >= 200
    assert sum(not case.claims for case in CASES) >= 45
