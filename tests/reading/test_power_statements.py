"""Power statements by themselves and among other results; the wordings are in `passages/power.txt`."""

from __future__ import annotations

import time

import numpy as np
import pytest

from recheck.model import Claim
from recheck.reading import read
from tests.reading.passages import document
from tests.soundness.honest_power import HONEST_POWER
from tests.soundness.samples import make

PLAN = "A power analysis (d = 0.5, α = .05, power = .80) indicated 64 apprentices per group."


def claims(text: str) -> list[Claim]:
    return list(read(document(text)).claims)


def printed(claim: Claim) -> dict[str, str]:
    return {name: number.text for name, number in claim.values.items()}


@pytest.mark.parametrize("name", sorted(HONEST_POWER))
def test_the_numbers_of_a_power_statement_give_no_other_claims(name: str):
    for seed in range(25):
        text = make(name, HONEST_POWER[name], seed).text
        assert [claim.kind for claim in claims(text)] == ["power"], text


@pytest.mark.parametrize(
    "result",
    [
        "Coached apprentices scored higher (M = 5.2, SD = 1.1, n = 30) than others (M = 4.6, SD = 1.2, n = 30), t(58) = 2.02, p = .048, d = 0.52.",
        "Height and crumb score went together, r(48) = .31, p = .028.",
        "The flours differed, F(2, 61) = 3.40, p = .040, partial η² = .10.",
        "Steamed loaves split less often (12/40, 30%) than dry ones (22/40, 55%), χ²(1) = 5.12, p = .024.",
    ],
)
def test_results_beside_a_plan_are_read_as_without_it(result: str):
    alone = [(c.kind, printed(c), c.stated) for c in claims(result)]
    for text in (f"{PLAN} {result}", f"{result} {PLAN}"):
        beside = [(c.kind, printed(c), c.stated) for c in claims(text)]
        assert [c for c in beside if c[0] != "power"] == alone
        assert sum(c[0] == "power" for c in beside) == 1


def test_claims_stand_in_reading_order():
    result = "Height and crumb score went together, r(48) = .31, p = .028."
    assert [c.kind for c in claims(f"{PLAN} {result}")] == ["power", "correlation"]
    assert [c.kind for c in claims(f"{result} {PLAN}")] == ["correlation", "power"]


@pytest.mark.parametrize(
    "text",
    [
        "Crumb and Crust (2012) reported that 64 bakers per group give 80% power to detect d = 0.5.",
        "The original study had 80% power to detect d = 0.5 with n = 64 per group.",
        "Previous trials were planned with 80% power and 64 loaves per group for d = 0.5.",
        "For example, a study with n = 64 per group has 80% power to detect d = 0.5.",
        "Suppose a bakery wants 80% power to detect d = 0.5 with 64 loaves per group.",
        "The kneader has a power of 200 W, and 64 loaves per group were made with it at d = 0.5.",
        "The power of the oven was 80% for 64 loaves per group (d = 0.5).",
        "The explanatory power was 80% with n = 64 per group and f = 0.25.",
        "Spectral power was 0.80 for 64 loaves per group (α = .05, d = 0.5).",
        "Observed power was .80 for the test of flour, t(126) = 2.83, p = .005, d = 0.50.",
    ],
)
def test_what_is_no_power_statement_of_this_study(text: str):
    assert not [claim for claim in claims(text) if claim.kind == "power"]


@pytest.mark.parametrize(
    ("text", "size"),
    [
        (f"{PLAN} Allowing for 15% dropout, 76 per group were enrolled.", "64"),
        (f"{PLAN} We recruited 70 apprentices per group.", "64"),
        (
            "We aimed for 80% power at α = .05 to detect d = 0.5, which requires 64 bakers per group; 50 per group took part.",
            "64",
        ),
        (
            "With 80% power, α = .05 and d = 0.5, 64 per group were needed, and 72 to allow for withdrawals.",
            "64",
        ),
        ("We recruited 50 bakers per group, which gives no 80% power (d = 0.5, α = .05).", None),
        (
            "To allow for 10% attrition, 72 bakers per group were planned for 80% power at d = 0.5 (α = .05).",
            None,
        ),
    ],
)
def test_the_size_that_was_had_or_inflated_is_not_the_one_that_is_needed(text: str, size: str | None):
    (claim,) = [c for c in claims(text) if c.kind == "power"]
    assert printed(claim).get("n") == size


def test_what_one_sentence_lacks_is_taken_from_the_next():
    text = (
        "The sample size was calculated beforehand. We assumed a difference of 5 mm with a standard deviation of 10 mm. "
        "With a two-sided significance level of 5% and a power of 80%, 64 loaves per group were needed. The dough rose for 40 minutes."
    )
    (claim,) = claims(text)
    assert printed(claim) == {
        "mean_difference": "5",
        "sd": "10",
        "alpha": "5%",
        "power": "80%",
        "n": "64",
    } or {k: v.rstrip("%") for k, v in printed(claim).items()} == {
        "mean_difference": "5",
        "sd": "10",
        "alpha": "5",
        "power": "80",
        "n": "64",
    }
    assert "two-tailed" in claim.stated
    assert claim.place.quote.startswith("difference of 5 mm") and claim.place.quote.endswith(
        "64 loaves per group"
    )


def test_several_powers_or_effects_are_not_put_together():
    assert not claims("For d = 0.5, 64 bakers per group give 80% power and 86 per group give 90% power.")
    assert not claims("With 80% power, 64 bakers per group detect d = 0.5 and 26 per group detect d = 0.8.")


def test_complements_are_turned():
    (claim,) = claims("With α = .05 and β = .20, 64 bakers per group are needed for d = 0.5.")
    assert claim.values["power"].number == pytest.approx(0.8) and claim.values["power"].text == "1 − .20"


def test_decimal_commas():
    (claim,) = claims("Bei d = 0,5, α = 0,05 und power = 0,80: 64 apprentices per group.")
    assert printed(claim) == {"d": "0,5", "alpha": "0,05", "power": "0,80", "n": "64"}


def test_two_statements_alike_have_ids_of_their_own():
    found = claims(f"{PLAN} It was repeated. {PLAN}")
    assert len({claim.id for claim in found}) == len(found) == 2


def test_long_and_hostile_texts_are_read_in_time():
    rng = np.random.default_rng(1)
    words = [
        "power",
        "of",
        "0.5",
        "80%",
        "n",
        "=",
        "per",
        "group",
        "α",
        "β",
        "(",
        ")",
        "difference",
        "1 -",
        "sample size",
        "total",
        "d",
        ",",
    ]
    texts = [
        " ".join(rng.choice(words, 2000)),
        "power of " * 1500 + "80%",
        "n = 1, " * 1500 + "power = .80",
        "sample size " * 900 + "power 0.8",
    ]
    start = time.perf_counter()
    for text in texts:
        claims(text)
    assert time.perf_counter() - start < 6
