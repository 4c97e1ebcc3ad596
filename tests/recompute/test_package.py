"""What the room shows outside, and what it may not import."""

import subprocess
import sys

from recheck import recompute

NAMES = [
    "chi2_tail",
    "cohens_d",
    "f_tail",
    "hedges_g",
    "p_from_F_bounds",
    "p_from_t_bounds",
    "t_pooled",
    "t_tail",
    "t_welch",
    "z_tail",
]
MODULES = (
    "anova", "bounds", "ci_and_p", "combining", "contingency", "conversions", "correlations", "matrices", "regressions", "effect_bounds", "effect_intervals", "effect_sizes", "effect_variances", "exact_tests", "granularity", "paired_counts", "proportions", "risk_intervals", "risks", "score_intervals", "shares", "intervals", "noncentral", "noncentral_f", "quantile_estimates", "ranks", "spread_limits", "tails", "triples", "two_groups", "variance_explained",
)  # fmt: skip


def test_the_names_at_hand_are_these():
    assert recompute.__all__ == NAMES
    assert all(getattr(recompute, name).__doc__ for name in NAMES)


def test_no_module_needs_more_than_numpy_and_scipy_special():
    imports = "; ".join(f"import recheck.recompute.{module}" for module in MODULES)
    heavy = "'scipy.stats', 'scipy.optimize', 'scipy.integrate', 'recheck.model', 'recheck.checks'"
    script = f"import sys; {imports}; print(sorted({{{heavy}}} & set(sys.modules)))"
    done = subprocess.run(
        [sys.executable, "-c", script], capture_output=True, text=True, timeout=60, check=True
    )
    assert done.stdout == "[]\n"
