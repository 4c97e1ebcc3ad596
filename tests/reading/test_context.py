"""What a document says once: the level, the design, what `±` stands for, the decimal comma."""

from __future__ import annotations

import pytest

from recheck.model import Document, Passage, Reading
from recheck.reading import read
from recheck.reading.wording import stated


def reading(*texts: str, sections: tuple[str | None, ...] = ()) -> Reading:
    named = sections or (None,) * len(texts)
    passages = tuple(Passage(text=t, section=s) for t, s in zip(texts, named, strict=True))
    return read(Document(name="d", format="text", sha256="", passages=passages))


@pytest.mark.parametrize(
    ("text", "level"),
    [
        ("We used alpha = .01 for all tests.", ".01"),
        ("The significance level was set at 5%.", "5"),
        ("α was set at .01 throughout.", ".01"),
        ("Effects were considered significant at p < .05.", ".05"),
        ("P values less than 0.05 were considered statistically significant.", "0.05"),
        ("A significance level of 0.05 was adopted.", "0.05"),
        ("Statistical significance was defined as P < 0.01.", "0.01"),
    ],
)
def test_level_is_read(text: str, level: str) -> None:
    found = reading(text)
    assert found.context.alpha is not None and found.context.alpha.text == level
    assert not found.claims


@pytest.mark.parametrize(
    "text",
    [
        "The scale was reliable (Cronbach's α = .05).",
        "The difference was significant (p = .012).",
        "Loaves differed significantly, t(22) = 2.31, p < .05.",
    ],
)
def test_no_level_is_invented(text: str) -> None:
    assert reading(text).context.alpha is None


def test_levels_in_conflict_give_none_and_a_note() -> None:
    context = reading("The significance level was .05.", "The significance level was .01.").context
    assert context.alpha is None and context.notes


def test_corrected_level_gives_way_to_the_main_one() -> None:
    context = reading(
        "The significance level was .05.", "For post hoc tests a Bonferroni-corrected alpha of .017 was used."
    ).context
    assert context.alpha is not None and context.alpha.text == ".05"


def test_not_significant_takes_the_stated_level() -> None:
    found = reading("The significance level was .01.", "Loaves did not differ, t(22) = 0.31, ns.")
    p = found.claims[0].values["p"]
    assert (p.relation, float(p.value)) == (">", 0.01)


def test_announced_spread_labels_all_of_the_document() -> None:
    found = reading("Values are mean ± SEM.", "Height was 5.0 ± 0.4 cm.")
    assert "se" in found.claims[0].values


def test_two_announcements_label_nothing() -> None:
    found = reading("Ages are mean ± SD.", "Heights are mean ± SEM.", "Height was 5.0 ± 0.4 cm.")
    assert "spread-unlabelled" in found.claims[0].stated


def test_decimal_comma_is_found_for_the_document() -> None:
    found = reading("Hauteur: t(22) = 2,31, p = 0,030, puis t(22) = 1,250, p = 0,224.")
    assert float(found.claims[1].values["t"].value) == 1.25


def test_methods_speak_for_all_claims_but_discussions_do_not() -> None:
    found = reading(
        "Means were compared by Welch's test.", "Loaves differed, t(19.6) = 2.40, p = .026.",
        "Others used bootstrap intervals.", sections=("Methods", "Results", "Discussion"),
    )  # fmt: skip
    assert found.claims[0].suggests("welch") and not found.claims[0].suggests("bootstrap")


def test_credible_intervals_called_ci_are_no_claims() -> None:
    found = reading(
        "We give 95% credible intervals (CI).", "The slope was steep (b = 0.40, 95% CI [0.10, 0.70])."
    )
    assert not found.claims


@pytest.mark.parametrize(
    ("text", "word"),
    [
        ("A paired t-test was used", "paired"), ("an independent-samples t test", "independent"),
        ("p values were Bonferroni corrected", "adjusted-p"),
        ("pairwise comparisons with Tukey's HSD", "adjusted-p-post-hoc"),
        ("an ANCOVA controlling for oven", "covariate-adjusted"), ("a mixed-effects model", "mixed-model"),
        ("Greenhouse–Geisser corrected", "corrected-df"), ("one-sided tests", "one-tailed"),
        ("with Yates' correction", "yates"), ("without continuity correction", "uncorrected-chi2"), ("a permutation test", "permutation"),
        ("estimated marginal means", "marginal"), ("multiple imputation", "imputed"),
        ("a test of non-inferiority", "equivalence"), ("bootstrapped intervals", "bootstrap"),
        ("Mann–Whitney tests", "rank-test"), ("robust standard errors", "robust"),
    ],
)  # fmt: skip
def test_words_are_understood(text: str, word: str) -> None:
    assert word in stated(text)


@pytest.mark.parametrize(
    ("methods", "word", "spoken"),
    [
        ("A cluster-based permutation test found a cluster between 620 and 1480 ms.", "permutation", False),
        ("Permutation importance ranked the flours.", "permutation", False),
        ("All p values come from cluster-based permutation tests.", "permutation", True),
        ("Permutation tests were used.", "permutation", True),
        ("Indirect effects had bootstrapped intervals.", "bootstrap", False),
        ("Intervals were bootstrapped.", "bootstrap", True),
        ("The Bayesian information criterion chose the model.", "bayesian", False),
        ("A Bayesian analysis was made.", "bayesian", True),
        ("One-way ANOVA was followed by Tukey's HSD.", "adjusted-p", False),
        ("One-way ANOVA was followed by Tukey's HSD.", "adjusted-p-post-hoc", True),
    ],
)
def test_background_words_must_speak_of_the_tests(methods: str, word: str, spoken: bool) -> None:
    found = reading(methods, "Loaves rose, t(19) = 2.21, p = .040.")
    assert (word in found.claims[-1].background) == spoken


def test_comparisons_of_pairs_say_nothing_of_an_omnibus_test() -> None:
    found = reading("One-way ANOVA was followed by Tukey's HSD.", "Loaves rose (F(1, 34) = 4.83, P = 0.035).")
    assert "adjusted-p-post-hoc" not in found.claims[0].background


@pytest.mark.parametrize(
    ("text", "word"),
    [
        ("no Bonferroni correction was made", "adjusted-p"), ("p values are uncorrected", "adjusted-p"),
        ("Bonferroni correction was not applied", "adjusted-p"), ("adjusted for multiple comparisons", "covariate-adjusted"),
        ("in contrast to rye", "contrast"), ("loaves paired with butter", "paired"),
        ("wheat grown in a greenhouse", "corrected-df"), ("a robust effect", "robust"), ("without continuity correction", "yates"),
        ("a glass of water", "glass-delta"), ("the posterior edge", "bayesian"), ("T1-weighted images", "weighted"),
    ],
)  # fmt: skip
def test_other_meanings_and_negations_do_not_count(text: str, word: str) -> None:
    assert word not in stated(text)


HEIGHTS = "Height was 92.4 ± 6.1 mm with rye (n = 25) and 86.0 ± 5.8 mm with wheat (n = 25), t(48) = 3.80."


@pytest.mark.parametrize(
    "told",
    [
        "Values are mean ± 95% confidence limits.",
        "Means ± 95% CI are given.",
        "Numbers are means ± 2 SE.",
        "Heights are given ± half the 95% confidence interval.",
        "Uncertainties are 95% confidence intervals (± values).",
        "± denotes the 95% confidence limits.",
        "Plus-minus values are 95% CIs.",
    ],
)
def test_half_an_interval_is_no_spread(told: str) -> None:
    # What its own paragraph says of ± wins over what another one says.
    for texts in ((f"{told} {HEIGHTS}",), ("Data are mean ± s.e.m.", f"{told} {HEIGHTS}"), (told, HEIGHTS)):
        claims = reading(*texts).claims
        assert not any({"sd", "se"} & c.values.keys() for c in claims), texts
        assert "t-test" in [c.kind for c in claims]


@pytest.mark.parametrize(
    ("texts", "spread"),
    [
        (("Data are mean ± s.e.m.", f"Heights are mean ± SD. {HEIGHTS}"), "sd"),
        (("Data are mean ± SD.", f"{HEIGHTS} Here means ± SE are given."), "se"),
        (("Data are mean ± s.e.m.", HEIGHTS), "se"),
        (("Mean differences are given with 95% confidence intervals.", HEIGHTS), "sd"),
        (("Errors are rare. The 95% CI is given in brackets.", HEIGHTS), "sd"),
        (("Heights are mean ± SE. Figure 2 shows means ± 95% CI.", HEIGHTS), "se"),
        (("Limits of agreement were the mean ± 1.96 times the standard error.", HEIGHTS), "sd"),
    ],
)
def test_a_paragraph_says_what_stands_after_its_own_signs(texts: tuple[str, ...], spread: str) -> None:
    summaries = [c for c in reading(*texts).claims if c.kind == "group-summary"]
    assert len(summaries) == 2 and all(spread in c.values for c in summaries)


@pytest.mark.parametrize(("level", "least"), [(".10", "0.05"), (".01", "0.01")])
def test_p_that_is_not_significant_is_above_a_level_of_05_at_most(level: str, least: str) -> None:
    """A lax level may be that of some tests alone; a strict one lets more p be `ns`."""
    found = reading(
        f"We used alpha = {level} for all tests.", "The loaves did not differ, t(122) = 1.93, ns."
    )
    (test,) = (claim for claim in found.claims if claim.kind == "t-test")
    assert str(test.values["p"].value) == least
    assert test.values["p"].relation == ">"
