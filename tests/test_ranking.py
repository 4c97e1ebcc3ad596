"""The order of findings, worst first."""

from recheck.model import Finding, Place
from recheck.ranking import RULE, rank


def finding(name: str, verdict: str, **more: object) -> Finding:
    return Finding(
        id=name, check="p-from-t", verdict=verdict, claims=(name,), quantity="p", printed="= .04",
        implied=(), message="", place=Place(""), **more,
    )  # fmt: skip


def test_worst_first():
    findings = [
        finding("unchecked", "unchecked"),
        finding("agrees", "agrees"),
        finding("conditional", "conditional", gap=9.0),
        finding("near", "inconsistent", gap=1.0),
        finding("far", "inconsistent", gap=5.0),
        finding("doubtful", "impossible", confidence="medium", gap=3.0),
        finding("impossible", "impossible"),
        finding("reversal", "inconsistent", reversal=True, gap=0.5),
    ]
    ranked = rank(findings)
    names = [f.id for f in ranked]
    assert names == [
        "reversal",
        "impossible",
        "doubtful",
        "far",
        "near",
        "conditional",
        "agrees",
        "unchecked",
    ]
    assert [f.rank for f in ranked] == list(range(1, 9))


def test_rule_names_every_tier():
    for word in (
        "reversals",
        "impossible",
        "inconsistent",
        "conditional",
        "agrees",
        "unchecked",
        "gap",
        "confidence",
    ):
        assert word in RULE
