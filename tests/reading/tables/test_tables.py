"""Every table gives just the claims that its file names, in every format; the shares are printed."""

from __future__ import annotations

from collections import Counter
from functools import cache

import pytest

from recheck.model import Claim
from recheck.reading import read
from tests.reading.tables.cases import TableCase, table_cases, wanted_fits
from tests.reading.tables.writers import document_of

CASES = {case.name: case for case in table_cases()}
RUNS = [(name, kind) for name, case in CASES.items() for kind in case.formats]


@cache
def claims_of(name: str, kind: str) -> tuple[Claim, ...]:
    return read(document_of(CASES[name], kind)).claims


def matched(case: TableCase, claims: tuple[Claim, ...]) -> tuple[list[str], list[str], list[str]]:
    """Kinds of claims that were read as expected, expected but missed, and read without being expected."""
    left = list(claims)
    right, missed = [], []
    for wanted in case.claims:
        claim = next((claim for claim in left if wanted_fits(wanted, claim, claims)), None)
        if claim is None:
            missed.append(wanted.expected.kind)
        else:
            right.append(wanted.expected.kind)
            left.remove(claim)
    return right, missed, [claim.kind for claim in left]


@pytest.mark.parametrize(("name", "kind"), RUNS, ids=[f"{name} [{kind}]" for name, kind in RUNS])
def test_table_gives_its_claims_and_no_other(name: str, kind: str) -> None:
    _, missed, extra = matched(CASES[name], claims_of(name, kind))
    assert not missed and not extra


def test_shares_per_kind_and_format(capsys: pytest.CaptureFixture[str]) -> None:
    tallies: dict[str, dict[str, Counter[str]]] = {
        by: {part: Counter() for part in ("right", "missed", "extra")} for by in ("kind", "format")
    }
    for name, kind in RUNS:
        for part, kinds in zip(
            ("right", "missed", "extra"), matched(CASES[name], claims_of(name, kind)), strict=True
        ):
            tallies["kind"][part].update(kinds)
            tallies["format"][part][kind] += len(kinds)
    with capsys.disabled():
        for by, counts in tallies.items():
            print(f"\n{by:14} read of expected, expected of read")
            for key in sorted(set(counts["right"]) | set(counts["missed"]) | set(counts["extra"])):
                right = counts["right"][key]
                expected, found = right + counts["missed"][key], right + counts["extra"][key]
                print(
                    f"{key:14} {right}/{expected} {right / max(expected, 1):.0%}, {right}/{found} {right / max(found, 1):.0%}"
                )
    assert len(CASES) >= 120
    assert sum(not case.claims for case in CASES.values()) >= 20
