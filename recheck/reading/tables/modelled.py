"""Means that are no plain means of their rows: what caption, notes and heads of a table say of them."""

from __future__ import annotations

from functools import cache

import regex

from recheck.reading.views import TIMEOUT


@cache
def _words() -> regex.Pattern[str]:
    """What tells of weights, adjustment, a model or imputation, wherever in a table's words it stands."""
    return regex.compile(
        r"""(?P<weighted>
            (?<![\w-](?:t[12]|diffusion)-)\bweighted\b(?!\s+(?:kappa|κ))      # population-weighted, weighted mean
            | \bunweighted\b(?!\s+(?:means?|average|data|values|scores?))     # what n is unweighted for, as the means are not
            | \bweightings?\b | \bweights?\s+(?:applied|used|were|are|was|from|to)\b
            | \b(?:survey|sampling|sample|design|population|calibration|frequency|propensity|raking|post-?stratification)[\s-]weights?\b
            | \bpost-?stratif\w+ | \bcomplex\s+(?:survey|sampl\w+)\b | \bnationally\s+representative\s+estimates?\b
            | \b(?:pooled|combined|summary|overall)\s+(?:effects?|estimates?)\b | \bmeta-?analy\w+
        )
        | (?P<adjusted>
            (?<!un)\badjusted\s+(?:group\s+|marginal\s+)?(?:means?|averages?|scores?|values?|estimates?|totals?)\b
            | \b(?:age|sex|gender|case-?mix|risk|season(?:ally)?|baseline|covariate|energy|population)[\s-]adjusted\b
            | \badjusted\s+for\b(?!\s+(?:the\s+)?(?:multipl\w+|number|several|family\w*|unequal|ties))
            | \badjust(?:ment|ing)\s+for\b(?!\s+(?:the\s+)?(?:multipl\w+|number|several|family\w*|unequal|ties))
            | \b(?:age|sex|gender|case-?mix|risk|directly|indirectly)[\s-](?:and[\s-](?:age|sex|gender)[\s-])?standardi[sz]ed\b
            | \bstandardi[sz](?:ed|ation)\s+(?:to|by|on)\b | \b(?:direct|indirect|age|sex)[\s-]standardi[sz]ation\b
        )
        | (?P<marginal>
            \bmarginal\b | \b(?:model|regression)-?\s?(?:based|predicted|estimated|derived|adjusted)\b
            | \b(?:model+ed|predicted|estimated|fitted|expected|extrapolated|projected|smoothed|shrunken)\s+(?:mean|means|value|values|scores?|marginal)\b
            | \bemms?\b | \bls-?means?\b | \bleast[\s-]squares?\s+means?\b | \bblu[pe]s?\b
        )
        | (?P<imputed>\bimput(?:ed|ation|ations)\b)""",
        regex.VERBOSE | regex.IGNORECASE,
    )


_KEYS = {
    "weighted": "weighted",
    "adjusted": "covariate-adjusted",
    "marginal": "marginal",
    "imputed": "imputed",
}


@cache
def _bare() -> regex.Pattern[str]:
    """`Adjusted` over a column of means; in a caption or note it may speak of p, of differences, of anything."""
    return regex.compile(r"(?<!un)\b(?:adjusted|adj\.|predicted|estimated|fitted)(?!\w)", regex.IGNORECASE)


def modelled(text: str, heads: str) -> tuple[str, ...]:
    """Keys of `STATED` for all that a table's words say of means that come from weights, a model or imputation.

    `text` is its caption and notes, `heads` what stands over the columns and before the row of the means.
    """
    found = {match.lastgroup for match in _words().finditer(f"{text} ; {heads}", timeout=TIMEOUT)}
    if _bare().search(heads, timeout=TIMEOUT):
        found.add("adjusted")
    return tuple(key for name, key in _KEYS.items() if name in found)
