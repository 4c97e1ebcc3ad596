"""Honest effect sizes of other names beside F, t and χ², from raw data, by the formulas that programs and hands use."""

from __future__ import annotations

import numpy as np
from scipy import stats

from tests.soundness import computing, raw, sentences
from tests.soundness.computing import Test, Values, finite, hedges_j, pooled_sd
from tests.soundness.hand import Hand, draw_hand, one
from tests.soundness.honest import descriptives_only, facts
from tests.soundness.honest_effects import chi2_told, contingency_table
from tests.soundness.other_effects import two, with_t
from tests.soundness.other_t import compared
from tests.soundness.samples import Generator, Piece, Sample


def _told(hand: Hand, test: Test, pieces: list[Piece], subject: str) -> Sample:
    result = hand.join(hand.statistic("F", test.value, test.df), hand.p(test.p), *pieces)
    return Sample(sentences.lone(hand, result, subject), facts(result))


def one_way_shares(rng: np.random.Generator) -> Sample:
    """ω², ε², f or f² of a one-way design, beside the classical or Welch's F, by sums of squares."""
    hand = draw_hand(rng)
    groups = raw.plain_groups(rng, int(rng.integers(2, 6)))
    test = computing.one_way(groups)
    if not finite(test.value, test.p):
        return descriptives_only(hand, groups)
    df1, df2 = test.df
    scores = np.concatenate(groups)
    total = float(((scores - scores.mean()) ** 2).sum())
    within = sum(float(((g - g.mean()) ** 2).sum()) for g in groups)
    between, ms = total - within, within / df2
    omega2 = (between - df1 * ms) / (total + ms)
    values = {
        "omega2": omega2, "epsilon2": (between - df1 * ms) / total, "f": np.sqrt(between / within), "f2": between / within,
    }  # fmt: skip
    name = one(rng, list(values))
    value = float(values[name])
    if name == "f" and rng.random() < 0.25:
        value = float(np.sqrt(max(omega2, 0.0) / (1 - omega2)))
    if name in ("omega2", "epsilon2") and value < 0 and rng.random() < 0.7:
        value = 0.0
    shown = test if rng.random() < 0.75 else welch(groups)
    pieces = [hand.effect(name, value)]
    if rng.random() < 0.3:
        pieces.append(hand.effect(one(rng, ["eta2", "partial_eta2"]), between / total))
    return _told(hand, shown, pieces, "the flours were compared")


def welch(groups: list[Values]) -> Test:
    """Welch's F (1951) of raw groups."""
    n, m, v = (np.array([f(g) for g in groups]) for f in (len, np.mean, lambda g: np.var(g, ddof=1)))
    if v.min() < 1e-9:
        return computing.one_way(groups)
    w, k = n / v, len(groups)
    centre = (w * m).sum() / w.sum()
    loss = ((1 - w / w.sum()) ** 2 / (n - 1)).sum()
    F = (w * (m - centre) ** 2).sum() / (k - 1) / (1 + 2 * (k - 2) * loss / (k**2 - 1))
    df2 = (k**2 - 1) / (3 * loss)
    return Test(float(F), (float(k - 1), float(df2)), float(stats.f.sf(F, k - 1, df2)))


def factorial_shares(rng: np.random.Generator) -> Sample:
    """ω² of the total or partial, f, or d of the F of one factor of a two-way design."""
    hand = draw_hand(rng)
    a, b = int(rng.integers(2, 4)), int(rng.integers(2, 4))
    n = int(rng.integers(5, 25))
    cells = [
        [raw.standard(rng, "normal", float(rng.normal(0, 0.6)), 1.0, n) for _ in range(b)] for _ in range(a)
    ]
    test = computing.two_way(cells)[0]
    if not finite(test.value, test.p):
        return descriptives_only(hand, [cells[0][0]])
    df1, df2 = test.df
    scores = np.concatenate([x for row in cells for x in row])
    total, N = float(((scores - scores.mean()) ** 2).sum()), len(scores)
    ms = sum(float(((x - x.mean()) ** 2).sum()) for row in cells for x in row) / df2
    between = test.value * df1 * ms
    values = {
        "partial": ("omega2", df1 * (test.value - 1) / (df1 * (test.value - 1) + N)),
        "whole": ("omega2", (between - df1 * ms) / (total + ms)), "f": ("f", np.sqrt(between / (ms * df2))),
        "f-whole": ("f", np.sqrt(between / max(total - between, 1e-9))), "f2": ("f2", between / (ms * df2)),
    }  # fmt: skip
    if a == 2:
        rows = [np.concatenate(row) for row in cells]
        gap = float(rows[0].mean() - rows[1].mean())
        values |= {
            "d": ("d", gap / pooled_sd(*rows)),
            "d-error": ("d", gap / np.sqrt(ms)),
            "g": ("g", gap / pooled_sd(*rows) * hedges_j(N - 2)),
        }
    name, value = values[one(rng, list(values))]
    return _told(
        hand,
        test,
        [hand.effect(name, max(float(value), 0.0) if name == "omega2" else float(value))],
        "the main effect of flour was tested",
    )


def repeated_shares(rng: np.random.Generator) -> Sample:
    """ω², generalized-like ω² or f of repeated measures."""
    hand = draw_hand(rng)
    n, k = int(rng.integers(8, 60)), int(rng.integers(2, 5))
    x = raw.repeated(rng, n, k)
    test, _ = computing.repeated_measures(x)
    if not finite(test.value, test.p) or test.value > 500:
        return descriptives_only(hand, [x[:, 0]])
    F, (df1, df2) = test.value, test.df
    grand = x.mean()
    error = float(((x - x.mean(0) - x.mean(1, keepdims=True) + grand) ** 2).sum()) / df2
    subjects = float(k * ((x.mean(1) - grand) ** 2).sum())
    total, between = float(((x - grand) ** 2).sum()), F * df1 * error
    values = {
        "kirk": ("omega2", df1 * (F - 1) / (df1 * (F - 1) + n * k)),
        "olejnik": ("omega2", df1 * error * (F - 1) / (total + subjects / max(n - 1, 1))),
        "from-F": ("omega2", df1 * (F - 1) / (df1 * F + df2 + 1)), "epsilon": ("epsilon2", df1 * (F - 1) / (df1 * F + df2)),
        "f": ("f", np.sqrt(F * df1 / df2)), "f-whole": ("f", np.sqrt(between / (total - between))),
    }  # fmt: skip
    name, value = values[one(rng, list(values))]
    value = max(float(value), 0.0) if name != "f" else float(value)
    return _told(
        hand,
        test,
        [hand.effect(name, value)],
        "the three weeks were compared in a repeated-measures analysis",
    )


def shares_of_t(rng: np.random.Generator) -> Sample:
    """η², partial η² or ω² beside a pooled, Welch or paired t."""
    hand, a, b, test = two(rng)
    N, t = len(a) + len(b), test.value
    eta2, omega2 = t**2 / (t**2 + N - 2), (t**2 - 1) / (t**2 + N - 1)
    kind = rng.random()
    if kind < 0.25:
        test = computing.t_test(a, b, pooled=False)
        eta2 = eta2 if rng.random() < 0.5 else test.value**2 / (test.value**2 + test.df[0])
    elif kind < 0.45:
        x = raw.repeated(rng, len(a), 2)
        test = computing.one_sample(x[:, 0] - x[:, 1])
        if not finite(test.value, test.p):
            return descriptives_only(hand, [a, b])
        eta2 = test.value**2 / (test.value**2 + test.df[0])
        result = with_t(hand, test, hand.effect("partial_eta2", eta2))
        return Sample(sentences.lone(hand, result, "the weeks were compared"), facts(result))
    name = one(rng, ["eta2", "partial_eta2", "omega2"])
    value = max(omega2, 0.0) if name == "omega2" else eta2
    return compared(hand, a, b, with_t(hand, test, hand.effect(name, float(value))))


def r_of_t(rng: np.random.Generator) -> Sample:
    """r as the effect size of t: the correlation of score and group, by N, by z, from d, or biserial."""
    hand, a, b, test = two(rng)
    N, t, share = len(a) + len(b), test.value, len(a) / (len(a) + len(b))
    r = t / np.sqrt(t**2 + N - 2)
    d = test.effect / pooled_sd(a, b)
    values = {
        "r": r, "r2": r, "N": t / np.sqrt(t**2 + N), "z": float(np.sign(t) * stats.norm.isf(test.p / 2)) / np.sqrt(N),
        "d4": d / np.sqrt(d * d + 4), "biserial": r * np.sqrt(share * (1 - share)) / stats.norm.pdf(stats.norm.ppf(share)),
    }  # fmt: skip
    value = float(values[one(rng, list(values))])
    if not finite(value) or abs(value) > 1:
        return descriptives_only(hand, [a, b])
    extra = [hand.effect("r_pb" if rng.random() < 0.6 else "r", value if rng.random() < 0.8 else abs(value))]
    if rng.random() < 0.3:
        extra.append(hand.effect("d", d))
    return compared(hand, a, b, with_t(hand, test, *extra))


def v_of_table(rng: np.random.Generator) -> Sample:
    """φ, V, bias-corrected V, the contingency coefficient, or φ of the uncorrected χ² beside Yates'."""
    hand = draw_hand(rng)
    cells = contingency_table(rng)
    if cells is None:
        return Sample("No loaf collapsed.")
    N, (rows, columns) = int(cells.sum()), cells.shape
    chi2, p, df, _ = stats.chi2_contingency(cells, correction=False)
    shown, shown_p = chi2, p
    if df == 1 and rng.random() < 0.3:
        shown, shown_p, _, _ = stats.chi2_contingency(cells, correction=True)
    phi2, side = chi2 / N, min(rows, columns) - 1
    fair = max(phi2 - df / (N - 1), 0.0)
    least = min(rows - (rows - 1) ** 2 / (N - 1), columns - (columns - 1) ** 2 / (N - 1)) - 1
    values = {
        "V": np.sqrt(phi2 / side), "V2": np.sqrt(phi2 / side), "fair": np.sqrt(fair / least), "w": np.sqrt(phi2),
        "C": np.sqrt(phi2 / (1 + phi2)), "shown": np.sqrt(shown / N / side),
    }  # fmt: skip
    value = float(values[one(rng, list(values))])
    if value > 1:
        return Sample("No loaf collapsed.")
    name = "phi" if df == 1 and rng.random() < 0.6 else "cramers_v"
    return chi2_told(
        hand,
        float(shown),
        float(shown_p),
        int(df),
        N,
        [hand.effect(name, value if rng.random() < 0.9 or name != "phi" else -value)],
    )


EFFECT_CONVERSIONS: dict[str, Generator] = {
    "shares of a one-way F": one_way_shares, "shares of a two-way F": factorial_shares, "shares of a repeated F": repeated_shares,
    "eta squared of t": shares_of_t, "r of t": r_of_t, "V of a table": v_of_table,
}  # fmt: skip
