"""Honest tests on imputed, weighted, trimmed or clustered data beside plain means and SDs."""

from __future__ import annotations

import numpy as np
from scipy import stats

from tests.soundness import computing, raw
from tests.soundness.computing import finite, sd
from tests.soundness.hand import draw_hand, one
from tests.soundness.honest import descriptives_only
from tests.soundness.other_t import coincide, compared
from tests.soundness.samples import Generator, Sample


def imputed(rng: np.random.Generator) -> Sample:
    """Estimates pooled over imputed data (Rubin 1987; df of Barnard & Rubin 1999), M and SD of those seen."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng, 2, 15, 80)
    m, df_complete = 5, len(a) + len(b) - 2
    gaps, errors = [], []
    for _ in range(m):
        full = [np.where(rng.random(len(g)) < 0.15, rng.choice(g, len(g)), g) for g in (a, b)]
        test = computing.t_test(full[0], full[1], pooled=True)
        gaps.append(test.effect)
        errors.append(test.error**2)
    within, between = float(np.mean(errors)), float(np.var(gaps, ddof=1))
    total = within + (1 + 1 / m) * between
    share = (1 + 1 / m) * between / total
    if not finite(total, share) or not share:
        return descriptives_only(hand, [a, b])
    old, seen = (m - 1) / share**2, (df_complete + 1) / (df_complete + 3) * df_complete * (1 - share)
    df = old * seen / (old + seen)
    if coincide(df, a, b):
        return imputed(rng)
    t = float(np.mean(gaps)) / np.sqrt(total)
    result = hand.join(hand.statistic("t", float(t), (df,)), hand.p(float(2 * stats.t.sf(abs(t), df))))
    method = one(rng, ["", "Missing scores were imputed (5 data sets) and results pooled by Rubin's rules."])
    return compared(hand, a, b, result, method=method)


def weighted(rng: np.random.Generator) -> Sample:
    """A weighted comparison, as the method paragraph says."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    w = [rng.uniform(0.3, 3, len(g)) for g in (a, b)]
    means = [float(np.average(g, weights=v)) for g, v in zip((a, b), w, strict=True)]
    error = np.sqrt(
        sum(
            float(np.sum((v * (g - mean)) ** 2)) / float(v.sum()) ** 2
            for g, v, mean in zip((a, b), w, means, strict=True)
        )
    )
    df = len(a) + len(b) - 2
    t = (means[0] - means[1]) / error
    result = hand.join(hand.statistic("t", float(t), (float(df),)), hand.p(float(2 * stats.t.sf(abs(t), df))))
    method = one(rng, ["All analyses used sampling weights.", "Survey weights were applied in all tests."])
    return compared(hand, a, b, result, method=method)


def trimmed(rng: np.random.Generator) -> Sample:
    """Yuen's t of trimmed means (1974) beside plain M and SD, as the method paragraph says."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    with np.errstate(all="ignore"):
        found = stats.ttest_ind(a, b, equal_var=False, trim=0.2)
    if not finite(float(found.statistic), float(found.pvalue), float(found.df)):
        return descriptives_only(hand, [a, b])
    result = hand.join(
        hand.statistic("t", float(found.statistic), (float(found.df),)), hand.p(float(found.pvalue))
    )
    method = one(
        rng,
        [
            "Groups were compared by Yuen's robust t test with 20% trimming.",
            "Trimmed means were compared (Yuen).",
        ],
    )
    return compared(hand, a, b, result, method=method)


def clustered(rng: np.random.Generator) -> Sample:
    """A mixed model of loaves within bakers: t on the bakers' means, M, SD and n of the loaves."""
    hand = draw_hand(rng)
    bakers, each = int(rng.integers(4, 16)), int(rng.integers(3, 10))
    groups = []
    for shift in (0.0, float(rng.normal())):
        baker = rng.standard_normal((bakers, 1)) * float(rng.uniform(0.2, 1.5)) + shift
        groups.append(10 + 2.5 * (baker + rng.standard_normal((bakers, each))))
    test = computing.t_test(groups[0].mean(axis=1), groups[1].mean(axis=1), pooled=True)
    p = test.p if rng.random() < 0.6 else float(2 * stats.norm.sf(abs(test.value)))
    df = test.df if rng.random() < 0.5 else (test.df[0] * float(rng.uniform(0.9, 1)),)
    p = float(2 * stats.t.sf(abs(test.value), df[0])) if p == test.p else p
    if coincide(df[0], groups[0].ravel(), groups[1].ravel()):
        return clustered(rng)
    result = hand.join(hand.statistic("t", test.value, df), hand.p(p))
    method = one(
        rng, ["", "Loaves were nested in bakers, so we fitted mixed models with a random intercept."]
    )
    return compared(hand, groups[0].ravel(), groups[1].ravel(), result, method=method)


def games_howell(rng: np.random.Generator) -> Sample:
    """Welch's t of a pair with the p of Games and Howell (1976), stated in the sentence before."""
    hand = draw_hand(rng)
    groups = raw.plain_groups(rng, 3)
    a, b = groups[:2]
    test = computing.t_test(a, b, pooled=False)
    p = float(stats.studentized_range.sf(abs(test.value) * np.sqrt(2), 3, test.df[0]))
    result = hand.join(hand.statistic("t", test.value, test.df), hand.p(p))
    sample = compared(hand, a, b, result)
    return Sample(f"Pairs were compared by the Games-Howell procedure. {sample.text}", sample.facts)


def strata(rng: np.random.Generator) -> Sample:
    """M and SD of scores z-standardised within batches, t with batches held constant (df N − 2 − batches + 1)."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng, 2, 16, 60)
    batches = int(rng.integers(2, 5))
    y = np.concatenate([a, b])
    member = np.r_[np.zeros(len(a)), np.ones(len(b))]
    batch = rng.integers(0, batches, len(y))
    y = y + batch * sd(y) * 0.8
    design = np.column_stack([member, np.eye(batches)[batch]])
    if np.linalg.matrix_rank(design) < batches + 1:
        return descriptives_only(hand, [a, b])
    test = computing.f_by_dropping(design, y, [0])
    sign = np.sign(y[member == 0].mean() - y[member == 1].mean()) or 1.0
    result = hand.join(
        hand.statistic("t", float(sign * np.sqrt(test.value)), (float(test.df[1]),)), hand.p(test.p)
    )
    return compared(hand, y[member == 0], y[member == 1], result, show=one(rng, ["each", "none"]))


OTHER_ADJUSTED: dict[str, Generator] = {
    "multiple imputation": imputed, "weights": weighted, "trimmed means": trimmed, "clustered loaves": clustered,
    "Games-Howell": games_howell, "batches held constant": strata,
}  # fmt: skip
