from fractions import Fraction
from time import perf_counter

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from recheck.recompute.granularity import Scores, answers, find_scores
from recheck.recompute.granularity.problem import TooLarge
from tests.recompute.granularity.brute import ends, pairs, printed_pairs
from tests.reference import rows

HALF = Fraction(1, 2)


def around(units: int, decimals: int) -> tuple[Fraction, Fraction]:
    return (units - HALF) / 10**decimals, (units + HALF) / 10**decimals


def holds(answer, scores, mean, spread=None, denominator=1):
    """The sample of an answer, checked in fractions: so many scores, on the grid and the scale, with that mean and SD."""
    values = [value for value, times in answer.sample for _ in range(times)]
    middle = Fraction(sum(values), scores.n)
    square = sum((v - middle) ** 2 for v in values) / denominator
    on_scale = all((scores.low is None or v >= scores.low) and (scores.high is None or v <= scores.high) for v in values)  # fmt: skip
    on_grid = all((v * scores.items).denominator == 1 for v in values)
    inside = mean[0] <= middle <= mean[1]
    spread_holds = spread is None or max(spread[0], 0) ** 2 <= square <= spread[1] ** 2
    return len(values) == scores.n and on_scale and on_grid and inside and spread_holds


def without_search(*_):
    raise TooLarge


@pytest.mark.parametrize("engine", ["search first", "bit sets alone"])
def test_every_sum_with_every_sum_of_squares(engine, monkeypatch):
    """All (n, highest score, sum, sum of squares) up to 7 scores: samples where listing finds one, none elsewhere."""
    if engine == "bit sets alone":
        monkeypatch.setattr(answers, "search", without_search)
        monkeypatch.setattr(answers, "FEW_INSIDE", -1)
    for n, high in [(n, high) for n in range(1, 8) for high in (1, 2, 3, 4, 6) if n * high <= 30] + [(3, 10)]:
        scores = Scores(n, 0, high)
        for total in range(n * high + 1):
            for squares in range(total % 2, n * high * high + 2, 2):
                found, _ = answers._sample(scores, total, range(squares, squares + 1), answers.WORK)
                assert bool(found) == ((total, squares) in pairs(n, high)), (n, high, total, squares)
                if found:
                    assert sum(found.values()) == n and min(found) >= 0 and max(found) <= high
                    assert sum(v * t for v, t in found.items()) == total
                    assert sum(v * v * t for v, t in found.items()) == squares


@pytest.mark.parametrize("decimals", [0, 1, 2])
@pytest.mark.parametrize(("high", "items"), [(1, 1), (2, 1), (4, 1), (6, 1), (6, 2), (6, 3)])
def test_every_printed_mean_with_every_printed_sd(high, items, decimals):
    for n in range(2, 7 if high < 6 else 5):
        scores = Scores(n, 0, Fraction(high, items), items)
        possible = printed_pairs(n, high, decimals, n - 1, items)
        means = {mean for mean, _ in possible}
        most = max(sd for _, sd in possible)
        for units in range(-1, high * 10**decimals // items + 2):
            mean = around(units, decimals)
            alone = find_scores(scores, mean)
            assert alone.possible == (units in means), (n, units)
            for sd in range(most + 2) if units in means else ():
                spread = around(sd, decimals)
                answer = find_scores(scores, mean, spread)
                assert answer.possible == ((units, sd) in possible), (n, units, sd, answer)
                if answer.possible:
                    assert holds(answer, scores, mean, spread, n - 1)


def test_sd_of_all_and_standard_errors_by_listing():
    for n in (3, 5):
        for kind, denominator in (("sd of all", n), ("se", n * (n - 1)), ("se of all", n * n)):
            possible = printed_pairs(n, 4, 2, denominator)
            for mean, sd in {(m, s) for m, _ in possible for s in range(0, 230, 3)} | possible:
                answer = find_scores(Scores(n, 0, 4), around(mean, 2), around(sd, 2), kind)
                assert answer.possible == ((mean, sd) in possible)


def test_differences_of_scores_are_scores_on_a_scale_of_twice_the_width():
    scores = [(a, b) for a in range(1, 4) for b in range(1, 4)]
    seen = {(a1 - b1 + a2 - b2, (a1 - b1) ** 2 + (a2 - b2) ** 2) for a1, b1 in scores for a2, b2 in scores}
    for total in range(-4, 5):
        for squares in range(total % 2, 10, 2):
            found, _ = answers._sample(Scores(2, -2, 2), total, range(squares, squares + 1), answers.WORK)
            assert bool(found) == ((total, squares) in seen)


@pytest.mark.parametrize("row", rows("granularity"), ids=lambda row: row["case"])
def test_reference_cases(row):
    low, high = (Fraction(row[c]) if row[c] else None for c in ("low", "high"))
    scores = Scores(int(row["n"]), low, high, int(row["items"]))
    mean = ends(row["mean"], row["rounding"])
    spread = ends(row["sd"], row["rounding"]) if row["sd"] else None
    kind = "sd of all" if row["denominator"] == "n" else "sd"
    answer = find_scores(scores, mean, spread, kind)
    assert bool(answer.possible) == (row["possible"] == "yes")
    if answer.possible:
        denominator = scores.n - (row["denominator"] != "n")
        assert holds(answer, scores, mean, spread, denominator if row["sd"] else 1)


def test_unlimited_whole_numbers_by_listing():
    """Two to four whole numbers without limits: a sum of squares about the mean bounds each of them."""
    for n in (2, 3, 4):
        reachable = {(t - 8 * n, q - 16 * t + 64 * n) for t, q in pairs(n, 16)}
        for total in range(n):
            for squares in range(total, 40, 2):
                found, _ = answers._sample(Scores(n), total, range(squares, squares + 1), answers.WORK)
                assert bool(found) == ((total, squares) in reachable)


@settings(max_examples=150, deadline=None, derandomize=True)
@given(st.data())
def test_a_real_sample_is_never_denied(data):
    """Figures of a drawn sample, rounded either way, are possible, however many scores and however wide the scale."""
    width, items = (
        data.draw(st.sampled_from([1, 2, 4, 6, 10, 27, 100])),
        data.draw(st.sampled_from([1, 1, 2, 5])),
    )
    steps = data.draw(st.lists(st.integers(0, width * items), min_size=2, max_size=60)) * data.draw(
        st.integers(1, 5)
    )
    n, decimals = len(steps), data.draw(st.sampled_from([1, 2, 3]))
    mean = Fraction(sum(steps), n * items)
    square = (sum(v * v for v in steps) - Fraction(sum(steps) ** 2, n)) / ((n - 1) * items**2)
    printed_mean, printed_sd = f"{float(mean):.{decimals}f}", f"{float(square) ** 0.5:.{decimals}f}"
    scores = Scores(n, 0, width, items)
    ends_of = [ends(text, "half either way") for text in (printed_mean, printed_sd)]
    answer = find_scores(scores, *ends_of)
    assert answer.possible is not False
    assert answer.possible is None or holds(answer, scores, *ends_of, n - 1)


@pytest.mark.parametrize(
    ("mean", "sd", "possible"),
    [("4.13", "1.53", True), ("4.13", "2.99", True), ("1.03", "0.27", True), ("1.03", "0.12", False), ("4.13", "3.02", False)],
)  # fmt: skip
def test_two_hundred_scores_on_a_scale_of_seven_points_take_no_time(mean, sd, possible):
    start = perf_counter()
    answer = find_scores(Scores(200, 1, 7), *(ends(text, "half either way") for text in (mean, sd)))
    assert answer.possible is possible
    assert perf_counter() - start < 0.5


def test_grounds_say_why():
    def ground(scores, mean, spread=None):
        return find_scores(
            scores, ends(mean, "half either way"), spread and ends(spread, "half either way")
        ).ground

    assert ground(Scores(28), "5.19") == "no sum"
    assert ground(Scores(28, 1, 7), "7.40") == "off the scale"
    assert ground(Scores(20, 1, 7), "3.45", "3.20") == "too large"
    assert ground(Scores(8, 1, 5), "1.50", "0.00") == "too small"
    assert ground(Scores(5, 1, 5), "3.00", "0.87") == "no sum of squares"
    assert ground(Scores(1, 1, 5), "3.00", "0.00") == "undefined"
    assert ground(Scores(3, 0, 3), "1.00", "1.73") == "sample"
    assert ground(Scores(2), "1.00", "1.00") == "no sum of squares"


def test_what_the_table_cannot_hold_is_unknown():
    """One sum of squares near the greatest of a wide scale: neither engine may go on for ever, nor guess."""
    n, total, squares = 200, 10010, 1000072
    sd = ((squares - total**2 / n) / (n - 1)) ** 0.5
    start = perf_counter()
    answer = find_scores(Scores(n, 0, 100), (Fraction(total, n),) * 2, (sd - 1e-9, sd + 1e-9))
    assert answer.possible is None and answer.ground == "unknown"
    assert perf_counter() - start < 2


@pytest.mark.parametrize(
    ("n", "mean", "sd"), [(50_000, "4.1", "2.7"), (20_000, "4.13", "3.2"), (3000, "4", "0")]
)
def test_thousands_of_scores_take_no_time(n, mean, sd):
    start = perf_counter()
    answer = find_scores(Scores(n, 1, 7), *(ends(text, "half either way") for text in (mean, sd)))
    assert answer.possible is (sd != "3.2")
    assert perf_counter() - start < 0.5


def test_bad_scores_are_named():
    with pytest.raises(ValueError, match="n and items"):
        Scores(0, 1, 7)
    with pytest.raises(ValueError, match="holds no score"):
        Scores(5, 7, 1)
    with pytest.raises(ValueError, match="without upper end"):
        find_scores(Scores(5), (0, 1), (1, float("inf")))


def test_a_float_is_the_decimal_that_it_was_written_as():
    """2.675 as a double lies below the decimal: an end must not."""
    assert find_scores(Scores(200), (2.675, 2.675)).possible
