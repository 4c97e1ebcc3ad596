"""The invented trials: simulated raw data, and every number that their articles print.

Each function draws its raw data from a generator with a fixed seed, rounds them as the instrument
would (0.1 mm, a tenth of a minute, whole scores) and returns the analyses by name.
"""

from __future__ import annotations

import numpy as np
from analyses import (
    Counts,
    Data,
    Numbers,
    collapsed,
    correlation,
    cronbach_alpha,
    n_of_t,
    odds_ratio,
    omnibus_contrast,
    one_way,
    paired,
    power_of_t,
    regression,
    repeated,
    risk_ratio,
    standard_error,
    summary,
    two_groups,
    two_way,
)
from numpy.random import Generator, default_rng

Results = dict[str, Numbers]
OVENS = ("steam", "stone", "convection")


def steam_oven(seed: int = 23) -> Results:
    """Loaf height by oven and flour (18 loaves a cell), collapses, and a panel that tasted all ovens."""
    draw, panel = default_rng(seed), default_rng(seed + 33)
    white = [_heights(draw, mean, 6.2, 18) for mean in (101.5, 98.6, 98.0)]
    rye = [_heights(draw, mean, 6.0, 18) for mean in (92.5, 86.5, 82.5)]
    sole = np.round(231 + 0.35 * (np.concatenate(rye[:2]) - 88) + panel.normal(0, 7, 36))
    loss = [_heights(panel, 12.1, 1.5, 18) for _ in range(2)]
    anova = two_way(np.array([[white[i], rye[i]] for i in range(3)]))
    return {
        "oven": anova["rows"], "flour": anova["columns"], "interaction": anova["interaction"],
        "rye_stone": two_groups(rye[0], rye[1]), "rye_convection": two_groups(rye[0], rye[2]),
        "stone_convection": two_groups(rye[1], rye[2]), "white": two_groups(white[0], white[2]),
        "white_stone": summary(white[1]),
        "collapse": collapsed(_collapses(draw, (36, 36, 36), (0.06, 0.17, 0.39))),
        "sole": correlation(sole, np.concatenate(rye[:2])), "loss": two_groups(*loss),
        "crust": repeated(_ratings(panel, (5.1, 4.6, 4.2), 24, loadings=(0.5, 1.0, 1.1))),
        "aroma": repeated(_ratings(panel, (4.5, 4.4, 4.5), 24, loadings=(0.7, 0.8, 0.7))),
        "power": {"d": 0.96, "power": power_of_t(0.96, 18), "n": 18},
        "panel": {"c1": 14, "percent1": 100 * 14 / 24, "c2": 9, "percent2": 100 * 9 / 24},
    }  # fmt: skip


def bench_coaching(seed: int = 29) -> Results:
    """Apprentices coached at the bench or taught as usual, scored before and after eight weeks."""
    draw = default_rng(seed)
    ability = {"coached": draw.normal(0, 6, 34), "usual": draw.normal(0, 6, 32)}
    before = {arm: np.round(58 + a + draw.normal(0, 5, len(a))) for arm, a in ability.items()}
    gain = {"coached": 11.0, "usual": 5.5}
    after = {arm: np.round(58 + gain[arm] + a + draw.normal(0, 5, len(a))) for arm, a in ability.items()}
    shaping = [_minutes(draw, 24.0, 4.4, 34), _minutes(draw, 26.2, 4.4, 32)]
    waste = [_heights(draw, 6.1, 2.0, 34), _heights(draw, 7.3, 2.0, 32)]
    age = [np.round(draw.normal(21.5, 2.4, n)) for n in (34, 32)]
    return {
        "baseline": two_groups(before["coached"], before["usual"]),
        "week8": two_groups(after["coached"], after["usual"]),
        "coached": paired(before["coached"], after["coached"]),
        "usual": paired(before["usual"], after["usual"]),
        "shaping": two_groups(*shaping), "waste": two_groups(*waste), "age": two_groups(*age),
        "passed": collapsed(_collapses(draw, (34, 32), (0.82, 0.56))),
        "women": collapsed(_collapses(draw, (34, 32), (0.45, 0.45))),
        "bakery": collapsed(_collapses(draw, (34, 32), (0.75, 0.75))),
        "power": {"d": 0.75, "percent": 100 * power_of_t(0.75, 32), "n": 32},
    }  # fmt: skip


def starter_hydration(seed: int = 6) -> Results:
    """Rise of starters at three hydrations, loaves of two mills, and proofing time against height."""
    draw = default_rng(seed)
    rise = [np.round(draw.normal(mean, 0.28, 14), 2) for mean in (2.05, 2.42, 2.30)]
    acidity = [np.round(draw.normal(mean, 1.3, 14), 1) for mean in (8.6, 8.9, 8.4)]
    mills = [_heights(draw, 88.0, 4.3, 20), _heights(draw, 84.4, 3.8, 20)]
    rooms = [_heights(draw, 90.5, 3.1, 16), _heights(draw, 86.5, 7.2, 24)]
    proofing = _minutes(draw, 210, 32, 40)
    height = np.round(88 + 0.11 * (proofing - 210) + draw.normal(0, 6.2, 40), 1)
    crumb = np.round(24 - 0.03 * (proofing - 210) + draw.normal(0, 3.2, 40), 1)
    salt = _minutes(draw, 2.0, 0.2, 40)
    return {
        "rise": one_way(rise), "acidity": one_way(acidity),
        "tukey_80_60": omnibus_contrast(rise, 1, 0), "tukey_100_60": omnibus_contrast(rise, 2, 0),
        "tukey_80_100": omnibus_contrast(rise, 1, 2),
        "mills": two_groups(*mills), "rooms": two_groups(*rooms, equal_variances=False),
        "height": correlation(proofing, height), "crumb": correlation(proofing, crumb),
        "salt": correlation(salt, height),
        "proofing": summary(proofing),
    }  # fmt: skip


def tasting_panel(seed: int = 19) -> Results:
    """Forty-eight tasters, half of them told the age of the starter, rate one loaf from 1 to 7."""
    draw = default_rng(seed)
    told, untold = 24, 24

    def scale(first: float, second: float) -> Numbers:
        return two_groups(_scale_means(draw, first, told), _scale_means(draw, second, untold))

    return {
        "liking": scale(5.3, 4.5), "sourness": scale(4.6, 4.2), "crust": scale(4.7, 4.75),
        "price": two_groups(_heights(draw, 6.3, 1.4, told), _heights(draw, 5.7, 1.4, untold)),
        "bread": one_way([_scale_means(draw, mean, 16) for mean in (5.0, 4.4, 4.1)]),
        "knowledge": correlation(*_related(draw, 48, 0.42)),
        "age": correlation(*_related(draw, 48, -0.08)),
        "again": collapsed(_collapses(draw, (24, 24), (0.7, 0.45))),
        "alpha": {"liking": cronbach_alpha(_items(draw, 48, 4, 1.1)),
                  "sourness": cronbach_alpha(_items(draw, 48, 3, 0.8))},
    }  # fmt: skip


def oven_gloves(seed: int = 41) -> Results:
    """Apprentices given long or short oven gloves for a season: burns, grip strength, minutes lost."""
    draw = default_rng(seed)
    long, short = 61, 59

    def arms(first: float, second: float, sd: float) -> Numbers:
        return two_groups(_heights(draw, first, sd, long), _heights(draw, second, sd, short))

    burns = _collapses(draw, (long, short), (0.26, 0.49))
    scars = _collapses(draw, (long, short), (0.12, 0.2))
    return {
        "age": arms(20.4, 20.6, 2.8), "bench": arms(14.9, 14.6, 6.1), "start": arms(38.1, 37.8, 7.4),
        "women": collapsed(_collapses(draw, (long, short), (0.44, 0.41))),
        "left": collapsed(_collapses(draw, (long, short), (0.11, 0.14))),
        "grip": arms(37.9, 34.2, 7.2), "minutes": arms(41.2, 52.6, 19.4), "comfort": arms(4.2, 5.1, 1.3),
        "burns": {**collapsed(burns), **risk_ratio(burns)}, "scars": {**collapsed(scars), **risk_ratio(scars)},
    }  # fmt: skip


def recipe_recall(seed: int = 52) -> Results:
    """Apprentices who copied recipes by hand or photographed them, and how their scores go together."""
    draw = default_rng(seed)
    n, each = 64, 32
    shared = draw.normal(0, 1, n)
    recall = np.round(21 + 3.2 * shared + draw.normal(0, 2.6, n) + np.repeat([2.2, 0.0], each))
    years = np.round(np.abs(2.6 + 0.7 * shared + draw.normal(0, 1.2, n)), 1)
    sleep = np.round(7.1 + 0.2 * shared + draw.normal(0, 0.8, n), 1)
    liking = _on_scale(4.6 - 0.5 * shared + draw.normal(0, 1.1, n))
    scores = {"recall": recall, "years": years, "sleep": sleep, "liking": liking}
    pairs = {f"{a}_{b}": correlation(scores[a], scores[b]) for a in scores for b in scores if a > b}
    later = [_heights(draw, mean, 4.1, each) for mean in (17.4, 14.2)]
    copying = [_heights(draw, mean, 2.2, each) for mean in (9.8, 3.1)]
    confidence = two_groups(_scale_means(draw, 4.9, each), _scale_means(draw, 4.7, each))
    errors = [np.abs(_heights(draw, mean, 2.4, each)) for mean in (5.2, 6.9)]
    return {
        **{name: summary(data) for name, data in scores.items()}, **pairs,
        "now": two_groups(recall[:each], recall[each:]), "later": two_groups(*later),
        "errors": two_groups(*errors), "copying": two_groups(*copying),
        "confidence": confidence, "confidence_told": confidence,
    }  # fmt: skip


def crumb_structure(seed: int = 63) -> Results:
    """Pore size by flour and hydration (12 loaves a cell), and a regression of softness after three days."""
    draw = default_rng(seed)
    cells = np.array(
        [
            [_heights(draw, 3.1 + 0.5 * wet + 0.5 * flour + 0.3 * wet * flour, 0.9, 12) for wet in range(3)]
            for flour in range(2)
        ]
    )
    anova = two_way(cells)
    water, salt, age = _heights(draw, 70, 5, 48), _heights(draw, 2.0, 0.3, 48), _heights(draw, 30, 9, 48)
    softness = np.round(14 + 0.21 * (water - 70) - 1.1 * (salt - 2) + draw.normal(0, 2.1, 48), 1)
    model = regression(softness, [water, salt, age])
    means = {f"cell{f}{w}": summary(cells[f, w]) for f in range(2) for w in range(3)}
    return {
        "flour": anova["rows"], "hydration": anova["columns"], "interaction": anova["interaction"], **means,
        "model": model[0], "water": model[1], "salt": model[2], "starter": model[3],
    }  # fmt: skip


def evening_class(seed: int = 74) -> Results:
    """Apprentices in an evening class or left to a book: ratings, a quiz, a certificate, and a regression."""
    draw = default_rng(seed)
    each = 34
    ratings = [_on_scale(draw.normal(mean, 1.1, each)) for mean in (5.3, 4.4)]
    trust = [_on_scale(draw.normal(mean, 1.2, each)) for mean in (4.9, 4.8)]
    points = [_points(draw, mean, each) for mean in (14.6, 11.9)]
    passed = _collapses(draw, (each, each), (0.76, 0.44))
    shared = draw.normal(0, 1, 2 * each)
    hours = np.round(5 + 1.4 * shared + draw.normal(0, 1.0, 2 * each), 1)
    loaves = np.round(31 + 7 * shared + draw.normal(0, 5, 2 * each))
    score = np.round(60 + 6 * shared + draw.normal(0, 5, 2 * each))
    age = np.round(23 - 1.2 * shared + draw.normal(0, 3.0, 2 * each), 1)
    measures = {"score": score, "hours": hours, "loaves": loaves, "age": age}
    pairs = {f"{a}_{b}": correlation(measures[a], measures[b]) for a in measures for b in measures if a > b}
    model = regression(score, [hours, loaves, age])
    return {
        "rating": two_groups(*ratings), "trust": two_groups(*trust), "quiz": two_groups(*points),
        "minutes": standard_error(_minutes(draw, 41.0, 9.0, 2 * each)),
        "passed": {**collapsed(passed), **odds_ratio(passed)}, **pairs, "model": model[0],
        "power": {"d": 0.7, "n": n_of_t(0.7, 0.8), "N": 2 * n_of_t(0.7, 0.8)},
        **{name: summary(data) for name, data in measures.items()},
    }  # fmt: skip


TRIALS = {
    "steam_oven.pdf": steam_oven,
    "bench_coaching.pdf": bench_coaching,
    "starter_hydration.md": starter_hydration,
    "tasting_panel.txt": tasting_panel,
    "oven_gloves.xml": oven_gloves,
    "recipe_recall.docx": recipe_recall,
    "crumb_structure.html": crumb_structure,
    "evening_class.html": evening_class,
}


def _heights(draw: Generator, mean: float, sd: float, n: int) -> Data:
    return np.round(draw.normal(mean, sd, n), 1)


_minutes = _heights


def _collapses(draw: Generator, totals: tuple[int, ...], chances: tuple[float, ...]) -> Counts:
    """A table with a row for each group: how many did, how many did not."""
    counts = draw.binomial(totals, chances)
    return np.column_stack([counts, np.array(totals) - counts])


def _ratings(draw: Generator, means: tuple[float, ...], people: int, loadings: tuple[float, ...]) -> Data:
    """Ratings, shape (people, conditions); unlike loadings and noise break sphericity."""
    taste = draw.normal(0, 1, (people, 1)) * np.array(loadings)
    noise = draw.normal(0, 1, (people, len(means))) * np.linspace(0.2, 1.6, len(means))
    return _on_scale(np.array(means) + taste + noise)


def _items(draw: Generator, people: int, items: int, shared: float) -> Data:
    person = shared * draw.normal(0, 1, (people, 1))
    return _on_scale(4.6 + person + draw.normal(0, 0.9, (people, items)))


def _scale_means(draw: Generator, mean: float, people: int) -> Data:
    """Means of four ratings from 1 to 7."""
    person = draw.normal(0, 0.9, (people, 1))
    return np.asarray(_on_scale(mean + person + draw.normal(0, 0.9, (people, 4))).mean(axis=1))


def _on_scale(scores: Data) -> Data:
    """Whole ratings from 1 to 7."""
    return np.asarray(np.clip(np.round(scores), 1, 7))


def _points(draw: Generator, mean: float, people: int) -> Data:
    """Points of a quiz of twenty questions."""
    return draw.binomial(20, np.clip(draw.normal(mean / 20, 0.1, people), 0, 1)).astype(float)


def _related(draw: Generator, n: int, rho: float) -> tuple[Data, Data]:
    first = draw.normal(0, 1, n)
    second = rho * first + np.sqrt(1 - rho**2) * draw.normal(0, 1, n)
    return np.round(50 + 10 * first), np.round(4.5 + second, 1)
