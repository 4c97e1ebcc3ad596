"""Honest intervals of effect sizes by many methods, from raw data, printed in many hands."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from scipy import optimize, stats

from tests.soundness import computing, raw, sentences
from tests.soundness.computing import Values, finite, hedges_j, pooled_sd, sd
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.honest import descriptives_only, facts
from tests.soundness.other_effects import two, with_t
from tests.soundness.other_t import compared
from tests.soundness.samples import Generator, Piece, Sample

Ends = tuple[float, float]
LEVELS = (0.95, 0.95, 0.95, 0.95, 0.90, 0.99)


def about(hand: Hand, name: str, value: float, low: float, high: float, level: float) -> list[Piece]:
    """An effect with its interval, in one of the orders in which they are printed."""
    return [hand.effect(name, value), hand.interval(low, high, level)]


def noncentral(t: float, df: float, level: float) -> Ends:
    """Limits of the noncentrality by scipy's noncentral t."""
    tail, far = (1 - level) / 2, 6 + abs(t) * 6 / np.sqrt(df)

    def limit(share: float) -> float:
        return float(optimize.brentq(lambda nc: stats.nct.cdf(t, df, nc) - share, t - far, t + far))

    try:
        return limit(1 - tail), limit(tail)
    except ValueError:  # the noncentral t of scipy gives out far from zero
        return float("nan"), float("nan")


def d_methods(d: float, n1: int, n2: int, level: float) -> dict[str, tuple[str, float, float, float]]:
    """Published intervals of d and g: name, value and ends."""
    N, df = n1 + n2, n1 + n2 - 2
    J, k = hedges_j(df), np.sqrt(1 / n1 + 1 / n2)
    z, t = stats.norm.ppf((1 + level) / 2), stats.t.ppf((1 + level) / 2, df)
    low, high = (x * k for x in noncentral(d / k, df, level))
    g = J * d
    found = {
        "exact": ("d", d, low, high), "exact-g": ("g", g, J * low, J * high),
        "exact-d-by-g": ("g", g, low, high), "exact-g-by-d": ("d", d, J * low, J * high),
    }  # fmt: skip
    unbiased = k**2 + (1 - (df - 2) / (df * J * J)) * g * g
    for name, value, variance in (
        ("large", d, k**2 + d * d / (2 * N)), ("df", d, k**2 + d * d / (2 * df)), ("large-g", g, k**2 + g * g / (2 * N)),
        ("J2-g", g, J * J * (k**2 + d * d / (2 * N))), ("revised-g", g, k**2 + g * g / (2 * (N - 3.94))),
        ("unbiased-g", g, unbiased), ("by-hand", d, k**2),
    ):  # fmt: skip
        for c, quantile in (("z", z), ("t", t)):
            half = quantile * np.sqrt(variance)
            found[f"{name}-{c}"] = ("g" if name.endswith("g") else "d", value, value - half, value + half)
    return found


def d_interval(rng: np.random.Generator) -> Sample:
    """d or g with one of its published intervals, beside the groups or beside t alone."""
    hand, a, b, test = two(rng)
    level = float(rng.choice(LEVELS))
    choices = d_methods(test.effect / pooled_sd(a, b), len(a), len(b), level)
    name, value, low, high = choices[one(rng, list(choices))]
    if not finite(value, low, high):
        return descriptives_only(hand, [a, b])
    result = with_t(hand, test, *about(hand, name, value, low, high, level))
    if rng.random() < 0.4:
        return Sample(sentences.lone(hand, result, "the starters were compared"), facts(result))
    return compared(hand, a, b, result)


def resampled(
    rng: np.random.Generator,
    samples: list[Values],
    of: Callable[[list[Values]], float],
    *,
    paired: bool = False,
) -> Values:
    """A bootstrap distribution of a statistic of some samples, cases drawn together where they are paired."""
    found = []
    for _ in range(400):
        if paired:
            at = rng.integers(0, len(samples[0]), len(samples[0]))
            drawn = [s[at] for s in samples]
        else:
            drawn = [rng.choice(s, len(s)) for s in samples]
        with np.errstate(all="ignore"):
            found.append(of(drawn))
    return np.array([x for x in found if np.isfinite(x)])


def corrected_ends(draws: Values, estimate: float, level: float, how: str) -> Ends:
    """Percentile, bias-corrected or basic bootstrap ends."""
    tails = np.array([(1 - level) / 2, (1 + level) / 2])
    if how == "corrected":
        shift = stats.norm.ppf(np.clip(np.mean(draws < estimate), 0.01, 0.99))
        tails = stats.norm.cdf(2 * shift + stats.norm.ppf(tails))
    low, high = np.quantile(draws, tails)
    return (
        (2 * estimate - float(high), 2 * estimate - float(low))
        if how == "basic"
        else (float(low), float(high))
    )


def d_bootstrap(rng: np.random.Generator) -> Sample:
    """d with a bootstrap interval that the text is silent about half of the time."""
    hand, a, b, test = two(rng)
    d = test.effect / pooled_sd(a, b)
    draws = resampled(rng, [a, b], lambda s: float(s[0].mean() - s[1].mean()) / pooled_sd(s[0], s[1]))
    low, high = corrected_ends(draws, d, 0.95, one(rng, ["percentile", "percentile", "corrected"]))
    method = "Intervals of effect sizes are bootstrap intervals." if rng.random() < 0.5 else ""
    return compared(hand, a, b, with_t(hand, test, *about(hand, "d", d, low, high, 0.95)), method=method)


def difference_interval_after_d(rng: np.random.Generator) -> Sample:
    """The interval of the raw difference printed after d, pooled or Welch, of scores with an SD of about one."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    scale = 1.0 if rng.random() < 0.4 else float(rng.uniform(0.6, 1.6)) / pooled_sd(a, b)
    a, b = a * scale, b * scale
    test = computing.t_test(a, b, pooled=bool(rng.random() < 0.6))
    c = stats.t.ppf(0.975, test.df[0]) if rng.random() < 0.7 else 1.96
    d = hand.effect("d", test.effect / pooled_sd(a, b))
    interval = hand.interval(test.effect - c * test.error, test.effect + c * test.error)
    return compared(hand, a, b, with_t(hand, test, d, interval))


def other_d_interval(rng: np.random.Generator) -> Sample:
    """Glass's Δ, d by the root mean square SD and Welch's t, each with an interval made for it."""
    hand = draw_hand(rng)
    a, b = raw.plain_groups(rng)
    n1, n2, gap = len(a), len(b), float(a.mean() - b.mean())
    kind = one(rng, ["delta-normal", "delta-exact", "delta-unequal", "rms", "welch-exact"])
    test = computing.t_test(a, b, pooled=kind.startswith("delta"))
    k, name, value = np.sqrt(1 / n1 + 1 / n2), "delta" if kind.startswith("delta") else "d", gap / sd(b)
    if kind == "delta-exact":
        low, high = (x * k for x in noncentral(value / k, n2 - 1, 0.95))
    elif kind in ("delta-normal", "delta-unequal"):
        first = (sd(a) / sd(b)) ** 2 / (n1 - 1) + 1 / (n2 - 1) if kind == "delta-unequal" else k**2
        half = 1.96 * np.sqrt(first + value**2 / (2 * (n2 - 1)))
        low, high = value - half, value + half
    elif kind == "rms":
        v1, v2 = sd(a) ** 2, sd(b) ** 2
        mean = (v1 + v2) / 2
        value = gap / np.sqrt(mean)
        variance = (
            value**2 * (v1**2 / (n1 - 1) + v2**2 / (n2 - 1)) / (8 * mean**2)
            + (v1 / (n1 - 1) + v2 / (n2 - 1)) / mean
        )
        low, high = value - 1.96 * np.sqrt(variance), value + 1.96 * np.sqrt(variance)
    else:
        value = gap / pooled_sd(a, b)
        low, high = (x * k for x in noncentral(test.value, test.df[0], 0.95))
    if not finite(value, low, high):
        return descriptives_only(hand, [a, b])
    return compared(
        hand, a, b, with_t(hand, test, *about(hand, name, float(value), float(low), float(high), 0.95))
    )


def paired_d_interval(rng: np.random.Generator) -> Sample:
    """d_z, d_av or d_rm of pairs, each called by its name or d, with exact, normal or bootstrap ends."""
    hand = draw_hand(rng)
    n = int(rng.integers(8, 80))
    x = raw.repeated(rng, n, 2)
    a, b = x[:, 0], x[:, 1]
    test = computing.one_sample(a - b)
    if not finite(test.value, test.p) or min(sd(a), sd(b)) < 1e-9 or abs(test.value) > 30:
        return descriptives_only(hand, [a, b])
    r, gap = float(np.corrcoef(a, b)[0, 1]), test.effect
    spreads = {"d_z": sd(a - b), "d_av": float(np.sqrt((np.var(a, ddof=1) + np.var(b, ddof=1)) / 2))}
    kind = one(rng, ["d_z", "d_z", "d_av", "d_rm"])
    spread = spreads.get(kind, sd(a - b) / np.sqrt(2 * (1 - r)) if r < 1 else 1.0)
    value, k = gap / spread, sd(a - b) / spread / np.sqrt(n)
    how = one(rng, ["exact", "exact", "normal", "df", "within", "bootstrap"])
    if how == "exact":
        low, high = (e * k for e in noncentral(test.value, n - 1, 0.95))
    elif how == "bootstrap":
        draws = resampled(
            rng,
            [a, b],
            lambda s: float((s[0] - s[1]).mean()) / sd(s[0] - s[1]) if sd(s[0] - s[1]) > 1e-6 else np.nan,
            paired=True,
        )
        low, high = (
            e * value / (gap / sd(a - b)) for e in corrected_ends(draws, gap / sd(a - b), 0.95, "percentile")
        )
    else:
        second = {
            "normal": value**2 / (2 * n),
            "df": value**2 / (2 * (n - 1)),
            "within": value**2 * k**2 / 2,
        }[how]
        half = 1.96 * np.sqrt(k**2 + second)
        low, high = value - half, value + half
    if not finite(value, low, high):
        return descriptives_only(hand, [a, b])
    name = kind if rng.random() < 0.5 else "d"
    result = with_t(hand, test, *about(hand, name, value, float(low), float(high), 0.95))
    said = one(rng, ["", "", "in a paired t test"])
    return Sample(
        sentences.lone(hand, result, f"bench scores before and after training were compared {said}".strip()),
        facts(result),
    )


def share_interval(rng: np.random.Generator) -> Sample:
    """η², ω², ε² or f of a one-way or a repeated design, its interval by one of the ways programs have."""
    hand = draw_hand(rng)
    level = float(rng.choice([0.90, 0.90, 0.95]))
    if rng.random() < 0.6:
        groups = raw.plain_groups(rng, int(rng.integers(2, 5)))
        test = computing.one_way(groups)
        subjects = sum(len(g) for g in groups)
    else:
        x = raw.repeated(rng, int(rng.integers(10, 60)), int(rng.integers(3, 5)))
        groups, (test, _), subjects = [x[:, 0]], computing.repeated_measures(x), len(x)
    if not finite(test.value, test.p) or test.value > 60 or test.value <= 0:
        return descriptives_only(hand, groups)
    F, (df1, df2) = test.value, test.df
    one_sided = rng.random() < 0.2
    tail = (1 - level) if one_sided else (1 - level) / 2
    ends = [lambda_F(F, df1, df2, share) for share in (1 - tail, tail)]
    total = float(rng.choice([df1 + df2 + 1, df1 + df2 + 1, df2, subjects]))
    eta2 = df1 * F / (df1 * F + df2)
    name, value = "partial_eta2", eta2
    low, high = (e / (e + total) for e in ends)
    if (kind := rng.random()) < 0.15:
        name, value, low, high = (
            "f",
            float(np.sqrt(eta2 / (1 - eta2))),
            *(float(np.sqrt(e / total)) for e in ends),
        )
    elif kind < 0.35:
        name, value = "omega2", max(df1 * (F - 1) / (df1 * (F - 1) + df1 + df2 + 1), 0.0)
        if rng.random() < 0.5:
            low, high = (max(e - df1, 0.0) / (max(e - df1, 0.0) + df1 + df2 + 1) for e in ends)
    if one_sided and name != "f":
        high = 1.0
    if not finite(value, low, high) or (one_sided and name == "f"):
        return descriptives_only(hand, groups)
    result = hand.join(
        hand.statistic("F", F, test.df), hand.p(test.p), *about(hand, name, value, low, high, level)
    )
    return Sample(sentences.lone(hand, result, "the flours were compared"), facts(result))


def lambda_F(F: float, df1: float, df2: float, share: float) -> float:
    if stats.f.cdf(F, df1, df2) < share:
        return 0.0
    try:
        return float(
            optimize.brentq(lambda v: stats.ncf.cdf(F, df1, df2, v) - share, 1e-9, 20 * df1 * F + 100)
        )
    except ValueError:  # the noncentral F of scipy gives out far from zero
        return float("nan")


def share_bootstrap(rng: np.random.Generator) -> Sample:
    """η² of a one-way design with a percentile bootstrap interval, named in the method or not."""
    hand = draw_hand(rng)
    groups = raw.plain_groups(rng, int(rng.integers(2, 5)), 12, 60)
    test = computing.one_way(groups)
    if not finite(test.value, test.p):
        return descriptives_only(hand, groups)
    draws = resampled(rng, groups, lambda s: computing.one_way(s).effect)
    low, high = corrected_ends(draws, test.effect, 0.95, "percentile")
    result = hand.join(
        hand.statistic("F", test.value, test.df),
        hand.p(test.p),
        *about(hand, "partial_eta2", test.effect, low, high, 0.95),
    )
    note = "Intervals of effect sizes were bootstrapped.\n\n" if rng.random() < 0.5 else ""
    return Sample(
        note + sentences.lone(hand, result, "the flours were compared"), facts(result), alone=bool(note)
    )


def correlation_interval(rng: np.random.Generator) -> Sample:
    """A correlation with an interval by Fisher's z, for ranks, by t, or a bootstrap."""
    hand = draw_hand(rng)
    n = int(rng.integers(10, 150))
    x = raw.repeated(rng, n, 2)
    a, b = x[:, 0], x[:, 1]
    if np.ptp(a) == 0 or np.ptp(b) == 0:
        return descriptives_only(hand, [a])
    how = one(rng, ["fisher", "fisher", "spearman", "bonett", "t", "linear", "bootstrap"])
    ranks = how in ("spearman", "bonett")
    found = stats.spearmanr(a, b) if ranks else stats.pearsonr(a, b)
    r, p, level = float(found.statistic), float(found.pvalue), float(rng.choice(LEVELS))
    if not finite(r, p) or abs(r) > 0.98:
        return descriptives_only(hand, [a])
    z = stats.norm.ppf((1 + level) / 2)
    if how == "linear":
        half = stats.t.ppf((1 + level) / 2, n - 2) * np.sqrt((1 - r * r) / (n - 2))
        low, high = r - half, r + half
    elif how == "bootstrap":
        draws = resampled(rng, [a, b], lambda s: float(np.corrcoef(s[0], s[1])[0, 1]), paired=True)
        low, high = corrected_ends(draws, r, level, one(rng, ["percentile", "corrected"]))
    else:
        c = stats.t.ppf((1 + level) / 2, n - 2) if how == "t" else z
        half = c * np.sqrt((1 + r * r / 2 if how == "bonett" else 1) / (n - 3))
        low, high = np.tanh(np.arctanh(r) - half), np.tanh(np.arctanh(r) + half)
    df = (float(n - 2),) if rng.random() < 0.8 else (float(n),)
    result = hand.join(hand.statistic("r", r, df), hand.p(p), hand.interval(float(low), float(high), level))
    return Sample(f"Loaf height and crumb score went together or not{hand.bracket(result)}.", facts(result))


def contingency_table(rng: np.random.Generator) -> Values | None:
    """Counts of 2 or 3 rows and 2 to 4 columns; None where a row or a column is empty."""
    rows, columns, N = int(rng.integers(2, 4)), int(rng.integers(2, 5)), int(rng.integers(60, 400))
    shares = rng.dirichlet(np.ones(rows * columns) * 4)
    cells = rng.multinomial(N, shares).reshape(rows, columns)
    return cells if min(cells.sum(0).min(), cells.sum(1).min()) > 0 else None


def chi2_told(hand: Hand, chi2: float, p: float, df: int, N: int, extras: list[Piece]) -> Sample:
    """A χ² with its N and what stands beside it."""
    result = hand.join(hand.statistic("chi2", chi2, (float(df),), f"N = {N}"), hand.p(p), *extras)
    return Sample(sentences.lone(hand, result, "collapse was compared between ovens"), facts(result))


def v_interval(rng: np.random.Generator) -> Sample:
    """φ or V of a table with its interval by the noncentral chi-square, Fisher's z, a bootstrap, or one-sided."""
    hand = draw_hand(rng)
    cells = contingency_table(rng)
    if cells is None:
        return Sample("No loaf collapsed.")
    N, shape = int(cells.sum()), cells.shape
    chi2, p, df, _ = stats.chi2_contingency(cells, correction=False)
    side = min(shape) - 1
    V = float(np.sqrt(chi2 / (N * side)))
    how = one(rng, ["exact", "exact", "shifted", "one-sided", "bootstrap", "fisher"])
    tail = 0.05 if how == "one-sided" else 0.025
    ends = [lambda_chi2(chi2, df, share) for share in (1 - tail, tail)]
    low, high = (float(np.sqrt((e + (df if how == "shifted" else 0)) / (N * side))) for e in ends)
    if how == "one-sided":
        high = 1.0
    elif how == "bootstrap":
        draws = [_v_of(rng.multinomial(N, (cells / N).ravel()).reshape(shape)) for _ in range(300)]
        low, high = corrected_ends(np.array([v for v in draws if np.isfinite(v)]), V, 0.95, "percentile")
    elif how == "fisher" and df == 1:
        low, high = (float(np.tanh(np.arctanh(V) + s * 1.96 / np.sqrt(N - 3))) for s in (-1, 1))
    name = "phi" if df == 1 and rng.random() < 0.5 else "cramers_v"
    return chi2_told(hand, float(chi2), float(p), int(df), N, about(hand, name, V, low, high, 0.95))


def _v_of(cells: Values) -> float:
    if min(cells.sum(0).min(), cells.sum(1).min()) == 0:
        return float("nan")
    chi2 = float(stats.chi2_contingency(cells, correction=False).statistic)
    return float(np.sqrt(chi2 / (cells.sum() * (min(cells.shape) - 1))))


def lambda_chi2(chi2: float, df: float, share: float) -> float:
    if stats.chi2.cdf(chi2, df) < share:
        return 0.0
    return float(optimize.brentq(lambda v: stats.ncx2.cdf(chi2, df, v) - share, 1e-9, 10 * chi2 + 60))


EFFECT_INTERVALS: dict[str, Generator] = {
    "CI of d or g": d_interval, "CI of d by bootstrap": d_bootstrap, "CI of the difference after d": difference_interval_after_d,
    "CI of another d": other_d_interval, "CI of a paired d": paired_d_interval, "CI of a share": share_interval,
    "CI of a share by bootstrap": share_bootstrap, "CI of r": correlation_interval, "CI of V": v_interval,
}  # fmt: skip
