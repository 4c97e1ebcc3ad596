"""Honest passages in which a hasty reader takes one number for another."""

from __future__ import annotations

import numpy as np
from scipy import optimize, stats

from tests.soundness import computing, raw
from tests.soundness.computing import sd
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.linking_traps import LINKING_TRAPS
from tests.soundness.retold import RETOLD
from tests.soundness.samples import Generator, Piece, Sample


def figure(hand: Hand, value: float, decimals: int = 2, bounded: bool = False) -> str:
    """A number to so many decimals."""
    return hand.number(hand.rounded(value, decimals), bounded)


def a_t(rng: np.random.Generator, hand: Hand) -> tuple[float, int, Piece]:
    """Some t with its df, and the result with p as printed."""
    df = int(rng.integers(8, 120))
    t = float(stats.t.rvs(df, random_state=rng)) * 1.5
    return t, df, hand.join(hand.statistic("t", t, (float(df),)), hand.p(float(2 * stats.t.sf(abs(t), df))))


def critical_value(rng: np.random.Generator) -> Sample:
    """The critical value of a test beside the test."""
    hand = draw_hand(rng)
    _, df, result = a_t(rng, hand)
    critical = figure(hand, float(stats.t.isf(0.025, df)))
    said = one(rng, [
        f"The critical value of t({df}) is {critical} at p < {figure(hand, 0.05, 2, True)}.",
        f"With t({df}) crit = {critical}, we tested the starters.", f"The critical t({df}) = {critical} was not always passed.",
        f"The 97.5% quantile of t({df}) is {critical}." if not hand.comma else "We tested both starters.",
    ])  # fmt: skip
    return Sample(f"{said} The starters were compared{hand.bracket(result)}.", (dict(result.values),))


def several_bounds(rng: np.random.Generator) -> Sample:
    """Several results told together by their bounds."""
    hand = draw_hand(rng)
    df = int(rng.integers(10, 90))
    ts = np.abs(rng.normal(size=4)) * 0.8
    ps = 2 * stats.t.sf(ts, df)
    top, least = np.ceil(ts.max() * 100) / 100, np.floor(ps.min() * 100) / 100
    texts = [
        f"no other difference was found, ts({df}) < {figure(hand, top)}, ps > {figure(hand, least, 2, True)}",
        f"all ts({df}) ≤ {figure(hand, top)}, all ps ≥ {figure(hand, least, 2, True)}",
        f"the rest was small, |t|s < {figure(hand, top)}, ps > {figure(hand, least, 2, True)}",
        "the main effects were small (Fs < 1)",
        f"t values with {df} df ranged from {figure(hand, ts.min())} to {figure(hand, ts.max())} "
        f"and p values from {figure(hand, ps.min(), 2, True)} to {figure(hand, ps.max(), 2, True)}",
    ]  # fmt: skip
    text = one(rng, texts)
    return Sample(f"{text[0].upper()}{text[1:]}.")


def respectively(rng: np.random.Generator) -> Sample:
    """Two statistics and then two p, respectively."""
    hand = draw_hand(rng)
    df = int(rng.integers(10, 90))
    t = np.sort(rng.normal(size=2) * 2)
    p = 2 * stats.t.sf(np.abs(t), df)
    shown_t = f"{figure(hand, t[0])} and {figure(hand, t[1])}"
    shown_p = f"{figure(hand, p[0], 3, True)} and {figure(hand, p[1], 3, True)}"
    text = one(rng, [
        f"Rye and spelt differed from wheat or not, t({df}) = {shown_t}, p = {shown_p}, respectively.",
        f"Height and crumb gave t({df}) = {shown_t}; ps = {shown_p}, respectively.",
        f"For height and crumb, t = {shown_t} with {df} degrees of freedom (p = {shown_p}).",
    ])  # fmt: skip
    return Sample(text)


def bayesian(rng: np.random.Generator) -> Sample:
    """A Bayes factor and a credible interval beside t and p."""
    hand = draw_hand(rng)
    t, df, result = a_t(rng, hand)
    d = 2 * t / np.sqrt(df + 2)
    low, high = 0.85 * d - 0.5, 0.85 * d + 0.4
    interval = one(rng, ["CrI", "credible interval", "HDI"])
    text = (
        f"The starters were compared{hand.bracket(result)}; BF10 = {figure(hand, float(np.exp(abs(t) - 1)))}, "
        f"95% {interval} [{figure(hand, low)}; {figure(hand, high)}]."
    )
    return Sample(text, (dict(result.values),))


def two_p(rng: np.random.Generator) -> Sample:
    """The plain and the adjusted p of one test, or a one-tailed beside a two-tailed p."""
    hand = draw_hand(rng)
    t, df, _ = a_t(rng, hand)
    p = float(2 * stats.t.sf(abs(t), df))
    shown = hand.statistic("t", t, (float(df),)).text
    other = one(rng, [
        f"adjusted p = {figure(hand, min(1, 3 * p), 3, True)}", f"p_adj = {figure(hand, min(1, 3 * p), 3, True)}",
        f"p_Bonferroni = {figure(hand, min(1, 3 * p), 3, True)}", f"one-tailed p = {figure(hand, p / 2, 3, True)}",
        f"p corrected for three tests = {figure(hand, min(1, 3 * p), 3, True)}",
    ])  # fmt: skip
    plain = f", p = {figure(hand, p, 3, True)}" if rng.random() < 0.6 else ""
    return Sample(f"The starters were compared ({shown}{plain}, {other}).")


def equivalence(rng: np.random.Generator) -> Sample:
    """Two one-sided tests beside the usual one."""
    hand = draw_hand(rng)
    t, df, result = a_t(rng, hand)
    low, high = t + 2.5, t - 2.5
    weaker = low if abs(low) < abs(high) else high
    p = float(stats.t.sf(low, df) if weaker is low else stats.t.cdf(high, df))
    shown = f"t({df}) = {figure(hand, weaker)}, p = {figure(hand, p, 3, True)}"
    said = one(rng, ["The equivalence test (TOST) gave", "Two one-sided tests gave"])
    return Sample(
        f"The starters were compared{hand.bracket(result)}. {said} {shown}.", (dict(result.values),)
    )


def reliability(rng: np.random.Generator) -> Sample:
    """Cronbach's α, medians with quartiles, counts with percent beside M and SD."""
    hand = draw_hand(rng)
    x = raw.plain_groups(rng, 1)[0]
    quartiles = [figure(hand, float(q), 1) for q in np.quantile(x, [0.5, 0.25, 0.75])]
    group = hand.group(float(x.mean()), sd(x), len(x))
    half = len(x) // 2
    text = one(rng, [
        f"The four items went together (Cronbach's α = {figure(hand, 0.87, 2, True)}; {group.text}).",
        f"The median was {quartiles[0]} [{quartiles[1]}; {quartiles[2]}] in {half} ({figure(hand, 100 * half / len(x), 1)}%) loaves.",
        f"Of {len(x)} loaves {half} ({figure(hand, 100 * half / len(x), 1)}) were round; the rest, {len(x) - half} "
        f"({figure(hand, 100 * (len(x) - half) / len(x), 1)}), were long.",
        f"Heights were {figure(hand, float(x.mean()), 1)} ({figure(hand, float(x.min()), 1)}-{figure(hand, float(x.max()), 1)}) cm.",
    ])  # fmt: skip
    return Sample(text)


def rmsea(chi2: float, df: int, n: int) -> tuple[float, float, float]:
    """RMSEA with its 90% interval from the noncentral χ² (Browne & Cudeck 1992)."""

    def limit(share: float) -> float:
        if stats.chi2.cdf(chi2, df) < share:
            return 0.0
        return float(optimize.brentq(lambda nc: stats.ncx2.cdf(chi2, df, nc) - share, 1e-9, 10 * chi2 + 50))

    points = (max(0.0, chi2 - df), limit(0.95), limit(0.05))
    first, low, high = (float(np.sqrt(nc / (df * (n - 1)))) for nc in points)
    return first, low, high


def model_fit(rng: np.random.Generator) -> Sample:
    """RMSEA with its interval beside χ², a difference of two fits, R² with F."""
    hand = draw_hand(rng)
    df = int(rng.integers(5, 60))
    value = float(stats.chi2.rvs(df, random_state=rng))
    p = float(stats.chi2.sf(value, df))
    n, k = int(rng.integers(60, 300)), int(rng.integers(1, 5))
    first, low, high = rmsea(value, df, n)
    r2 = float(rng.uniform(0.02, 0.4))
    df2 = n - k - 1
    f = r2 / k / ((1 - r2) / df2)
    joint = "; " if hand.comma else ", "
    ends = f"90% CI [{figure(hand, low, 2, True)}; {figure(hand, high, 2, True)}]"
    parts = one(rng, [
        f"The model fitted|χ²({df}) = {figure(hand, value)}|p = {figure(hand, p, 3, True)}|RMSEA = {figure(hand, first, 2, True)}|{ends}",
        f"The step added little|Δχ²({df}) = {figure(hand, value)}|p = {figure(hand, p, 3, True)}",
        f"The predictors explained height|R² = {figure(hand, r2, 2, True)}|"
        f"adjusted R² = {figure(hand, 1 - (1 - r2) * (n - 1) / df2, 2, True)}|F({k}{joint}{df2}) = {figure(hand, f)}|"
        f"p = {figure(hand, float(stats.f.sf(f, k, df2)), 3, True)}",
    ])  # fmt: skip
    return Sample(parts.replace("|", joint) + ".")


def planning(rng: np.random.Generator) -> Sample:
    """A power analysis with d, α, N and power before the result."""
    hand = draw_hand(rng)
    _, _, result = a_t(rng, hand)
    n = int(rng.integers(30, 300))
    said = one(rng, [
        f"For d = {figure(hand, 0.5, 1)}, α = {figure(hand, 0.05, 2, True)} and a power of {figure(hand, 0.8, 2, True)} we planned N = {n} loaves.",
        f"A sample of {n} has a power of 80% for d = {figure(hand, 0.4, 1)} at p < {figure(hand, 0.05, 2, True)}.",
        f"An earlier bakery had found t({n}) = {figure(hand, 2.31)}.",
    ])  # fmt: skip
    return Sample(f"{said} The starters were compared{hand.bracket(result)}.", (dict(result.values),))


def many_groups(rng: np.random.Generator) -> Sample:
    """Groups and tests of two outcomes in one paragraph, each t right after its own groups or at the end."""
    hand = draw_hand(rng)
    tests, told = [], []
    for outcome in ("height", "crumb"):
        a, b = raw.plain_groups(rng)
        test = computing.t_test(a, b, pooled=True)
        tests.append((outcome, hand.join(hand.statistic("t", test.value, test.df), hand.p(test.p))))
        pieces = [hand.group(float(g.mean()), sd(g), len(g)) for g in (a, b)]
        told.append(f"{outcome} was noted for rye ({pieces[0].text}) and wheat ({pieces[1].text})")
    if rng.random() < 0.5:
        parts = [f"{g}{hand.bracket(r)}" for g, (_, r) in zip(told, tests, strict=True)]
        text = f"Loaf {parts[0]}; {parts[1]}."
    else:
        late = " and ".join(f"{name}{hand.bracket(r)}" for name, r in tests)
        text = f"Loaf {told[0]}; {told[1]}. Tests followed for {late}."
    return Sample(text, tuple(dict(r.values) for _, r in tests))


TRAPS: dict[str, Generator] = {
    "critical values": critical_value, "bounds of several": several_bounds, "respectively": respectively,
    "Bayes beside t": bayesian, "two p of one test": two_p, "equivalence tests": equivalence,
    "reliability, medians, counts": reliability, "fit and R squared": model_fit, "planning": planning,
    "groups of two outcomes": many_groups, **LINKING_TRAPS, **RETOLD,
}  # fmt: skip
