"""The formulas, on arrays: broadcastable arrays in, arrays out. Imports numpy and scipy.special alone."""

from recheck.recompute.bounds import p_from_F_bounds, p_from_t_bounds
from recheck.recompute.effect_sizes import cohens_d, hedges_g
from recheck.recompute.tails import chi2_tail, f_tail, t_tail, z_tail
from recheck.recompute.two_groups import t_pooled, t_welch

__all__ = [
    "chi2_tail", "cohens_d", "f_tail", "hedges_g", "p_from_F_bounds", "p_from_t_bounds",
    "t_pooled", "t_tail", "t_welch", "z_tail",
]  # fmt: skip
