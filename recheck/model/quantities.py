"""The names of quantities, and how reports write them."""

QUANTITIES: dict[str, str] = {
    "t": "t", "z": "z", "F": "F", "chi2": "χ²", "r": "r", "u": "U", "w": "W",
    "df": "df", "df1": "df1", "df2": "df2", "p": "p", "alpha": "α",
    "mean": "mean", "sd": "SD", "se": "SE", "n": "n", "N": "N", "n1": "n1", "n2": "n2",
    "median": "median", "iqr": "IQR", "q1": "first quartile", "q3": "third quartile", "min": "minimum", "max": "maximum",
    "mean_difference": "mean difference", "se_difference": "SE of the difference",
    "ci_low": "lower end of the CI", "ci_high": "upper end of the CI", "ci_level": "level of the CI",
    "d": "d", "g": "g", "delta": "Δ", "d_z": "d_z", "d_av": "d_av", "d_rm": "d_rm", "r_pb": "r_pb",
    "eta2": "η²", "partial_eta2": "partial η²", "generalized_eta2": "generalized η²", "omega2": "ω²",
    "epsilon2": "ε²", "f": "f", "f2": "f²", "phi": "φ", "cramers_v": "V",
    "b": "b", "beta": "β", "intercept": "intercept", "r2": "R²", "adjusted_r2": "adjusted R²", "delta_r2": "ΔR²",
    "or": "OR", "rr": "RR", "rd": "RD", "hr": "HR",
    "auc": "AUC", "icc": "ICC", "kappa": "κ", "tau": "τ", "bf10": "BF₁₀", "bf01": "BF₀₁",
    "count": "count", "total": "total", "percent": "percent", "power": "power", "stars": "stars",
    "scale_min": "lowest score", "scale_max": "highest score", "items_per_score": "items per score",
    "effect_size": "effect size", "h": "h", "cohens_w": "w", "proportion1": "first proportion", "proportion2": "second proportion",
    "ratio": "allocation ratio", "k": "number of groups", "predictors": "number of predictors",
    "ss": "SS", "ms": "MS", "ss_error": "SS of the error", "ms_error": "MS of the error", "ss_total": "total SS", "mse": "MSE", "estimate": "estimate",
    "comparison_value": "comparison value",
}  # fmt: skip

RATIOS = ("or", "rr", "hr")
"""What compares two risks, odds or hazards by division: computed with, and symmetric, on the log scale."""
EFFECTS_OF_COUNTS = frozenset(("or", "rr", "rd"))
"""What the counts of two groups give; a hazard ratio needs times."""
STANDARDIZED = ("d", "g", "delta", "d_z", "d_av", "d_rm")
"""Standardized mean differences."""
EFFECTS_ON_RISK = frozenset((*RATIOS, "rd"))


def shown(quantity: str) -> str:
    """Write the name of a quantity as reports do."""
    return QUANTITIES.get(quantity, quantity)
