"""SE beside SD and n of one group; what stands beside it tells which method made it."""

import pytest

import recheck
from recheck.checks.examples import table

ROWS = ("Rye | 18 | 92.4 | 6.12 | 1.44", "Wheat | 20 | 90.1 | 5.43 | 1.21", "Oat | 24 | 89.9 | 7.11 | 1.45")


def verdicts(text, *checks):
    return [(f.check, f.quantity, f.verdict) for f in recheck.audit_text(text).findings if f.check in checks]


def found(text, check):
    return [f for f in recheck.audit_text(text).findings if f.check == check]


def test_an_se_is_that_of_sd_and_n():
    # A closed form: 6.1 / √18 = 1.4378, over the box of the SD 1.426 to 1.450.
    (finding,) = found("Rye loaves rose to 92.4 mm (SD = 6.1, SE = 1.44, n = 18).", "se-from-sd")
    assert finding.verdict == "agrees"
    assert (finding.implied[0].low, finding.implied[0].high) == pytest.approx(
        (6.05 / 18**0.5, 6.15 / 18**0.5)
    )


@pytest.mark.parametrize(
    ("fourth", "verdict"),
    [
        ("Spelt | 25 | 88.7 | 7.05 | 4.11", "inconsistent"),
        (
            "Spelt | 25 | 88.7 | 7.05 | 1.44",
            "conditional",
        ),  # with 24 in the denominator: an SD with n in its own
        ("Spelt | 25 | 88.7 | 7.05 | 1.41", "agrees"),
    ],
)
def test_rows_beside_one_show_the_method(fourth, verdict):
    text = table("Table 1. Height of loaves in mm.", " | n | Mean | SD | SE", *ROWS, fourth)
    assert verdicts(text, "se-from-sd").count(("se-from-sd", "se", verdict)) >= 1
    alone = table("Table 1. Height of loaves in mm.", " | n | Mean | SD | SE", fourth)
    assert verdicts(alone, "se-from-sd") == [
        ("se-from-sd", "se", "conditional" if verdict == "inconsistent" else verdict)
    ]


def test_an_se_of_pooled_sds_is_honest():
    # SDs 2.0 and 6.0, 20 each: pooled √20 = 4.472, SE 1.0.
    rows = ("Rye | 20 | 92.4 | 2.0 | 1.00", "Wheat | 20 | 90.1 | 6.0 | 1.00")
    text = table("Table 1. Height of loaves in mm.", " | n | Mean | SD | SE", *rows)
    finding = found(text, "se-from-sd")[0]
    assert finding.verdict == "conditional"
    assert "pooled over the groups" in finding.message


def test_a_stated_model_is_not_rebuilt():
    text = table(
        "Table 1. Estimated marginal means of height in mm.",
        " | n | Mean | SD | SE",
        "Rye | 18 | 92.4 | 6.12 | 2.44",
    )
    assert verdicts(text, "se-from-sd") == [("se-from-sd", "se", "unchecked")]


@pytest.mark.parametrize(
    ("told", "verdict", "words"),
    [
        # An n of its own beside SD and SE: no fourfold n is behind it, as 4.2²/1.4² = 9 of 36 would be.
        ("(SD = 4.2, SE = 1.4, n = 36)", "conditional", "not from a model (marginal means, clusters, repeated measures); else n would be 9"),
        ("(SD = 4.23, SE = 0.82, n = 36)", "conditional", "some of the n cases have no value of this variable (n would be 27)"),
        ("(SD = 4.2, SE = 0.70, n = 36)", "agrees", ""),
    ],
)  # fmt: skip
def test_missing_cases_are_few_where_n_stands_beside_the_numbers(told, verdict, words):
    (finding,) = found(f"Rye loaves rose to 92.4 mm {told}.", "se-from-sd")
    assert (finding.verdict, words in finding.message) == (verdict, True)
