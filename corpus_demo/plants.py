"""The errors that are planted in the demo articles: one printed number changed in each."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal


@dataclass(frozen=True)
class Plant:
    """One number changed after printing.

    `result` and `slot` name it in the prose, `change` is what is printed in its place, `snippet`
    is the printed claim around it. `quantity`, `verdict` and `reversal` are those of the finding that
    an audit owes: an SD that is wrong shows in the t that does not follow from it.
    """

    file: str
    result: str
    slot: str
    change: str
    snippet: str
    quantity: str
    verdict: Literal["impossible", "inconsistent", "conditional"]
    reversal: bool
    what: str


STEAM, COACHING = "steam_oven.pdf", "bench_coaching.pdf"
STARTER, PANEL = "starter_hydration.md", "tasting_panel.txt"
GLOVES, RECALL, CRUMB = "oven_gloves.xml", "recipe_recall.docx", "crumb_structure.html"
CLASS = "evening_class.html"
PLANTS = (
    Plant(
        STEAM, "interaction", "p", "= .015",
        "*F*({interaction[df1]}, {interaction[df2]}) = {interaction[F]}, *p* {interaction[p]}",
        "p", "inconsistent", True, "p of an F test: a digit is lost, and the interaction becomes significant",
    ),
    Plant(
        STEAM, "rye_convection", "df", "43",
        "*t*({rye_convection[df]}) = {rye_convection[t]}",
        "df", "conditional", False, "df of a t test: digits swapped, more df than two groups of 18 can give",
    ),
    Plant(
        STEAM, "stone_convection", "d", "0.61",
        "*p* {stone_convection[p]}, *d* = {stone_convection[d]}",
        "d", "inconsistent", False, "d that follows neither from the groups nor from t",
    ),
    Plant(
        STEAM, "white", "p", "= .006",
        "*t*({white[df]}) = {white[t]}, *p* {white[p]}",
        "p", "inconsistent", True, "p of a t test: digits swapped, a difference becomes significant",
    ),
    Plant(
        COACHING, "shaping", "lo", "−0.7",
        "mean difference of {shaping[difference]} min (95% CI {shaping[lo]} to {shaping[hi]}; P{shaping[p]}",
        "mean_difference", "inconsistent", False, "CI that leaves out its own estimate: a digit is wrong",
    ),
    Plant(
        COACHING, "usual", "lo", "−3.3",
        "95% CI {usual[lo]} to {usual[hi]}; paired t test, t~{usual[df]}~={usual[t]}, P{usual[p]}",
        "p", "inconsistent", False, "CI of a mean change that holds 0 beside P<0.001: a sign is added",
    ),
    Plant(
        COACHING, "passed", "p", "=0.12",
        "χ^2^={passed[chi2]}, df={passed[df]}, P{passed[p]}",
        "p", "inconsistent", True, "P of a χ² test: that of another comparison (growing up in a bakery) is printed",
    ),
    Plant(
        STARTER, "mills", "sd2", "6.4",
        "s.d. = {mills[sd2]}, n = {mills[n2]}",
        "t", "inconsistent", False, "t that does not follow from its groups: the digits of an SD are swapped",
    ),
    Plant(
        STARTER, "height", "r", "1.43",
        "*r* = {height[r]}, n = {height[n]}",
        "r", "impossible", False, "r above 1: a digit is wrong",
    ),
    Plant(
        STARTER, "crumb", "p", "= 0.007",
        "*r* = {crumb[r]}, n = {crumb[n]}, *P* {crumb[p]}",
        "p", "inconsistent", False, "P of a correlation: a digit is lost",
    ),
    Plant(
        PANEL, "sourness", "sd2", "−1.24",
        "SD = {sourness[sd2]}, n = {sourness[n2]}",
        "sd", "impossible", False, "an SD below 0: a sign is added",
    ),
    Plant(
        PANEL, "price", "p", "= .029",
        "t({price[df]}) = {price[t]}, p {price[p]}",
        "p", "conditional", False, "p of a t test that is one-tailed and does not say so",
    ),
    Plant(
        GLOVES, "women", "percent1", "46",
        "Women, n (%)|{women[c1]} ({women[percent1]})",
        "percent", "conditional", False, "percentage of a count: a digit is wrong; another number of apprentices could give it",
    ),
    Plant(
        GLOVES, "minutes", "lo", "−9.6",
        "{minutes[difference]} ({minutes[lo]} to {minutes[hi]})",
        "mean_difference", "inconsistent", False, "CI in a table that leaves out its own estimate: a digit is lost",
    ),
    Plant(
        RECALL, "later", "t", "3.29",
        "{later[sd2]}|{later[t]}",
        "t", "inconsistent", False, "t in a table that does not follow from its groups: digits swapped",
    ),
    Plant(
        RECALL, "confidence_told", "m1", "5.50",
        "*M* = {confidence_told[m1]}, *SD* = {confidence_told[sd1]}",
        "mean", "conditional", False, "mean that the table gives otherwise: a digit is wrong",
    ),
    Plant(
        CRUMB, "flour", "ms", "6.42",
        "{flour[df1]}|{flour[ms]}",
        "ms", "inconsistent", False, "mean square that is not SS/df: digits swapped",
    ),
    Plant(
        CRUMB, "salt", "se", "1.40",
        "{salt[b]}|{salt[se]}",
        "t", "inconsistent", False, "t of a coefficient that is not b/SE: the digits of the SE are swapped",
    ),
    Plant(
        CLASS, "power", "n", "24",
        "power = .80) gave {power[n]} apprentices per group",
        "n", "inconsistent", False, "size of the groups that the planned power needs: a digit is wrong",
    ),
    Plant(
        CLASS, "trust", "m1", "4.86",
        "*M* = {trust[m1]}, *SD* = {trust[sd1]}",
        "mean", "impossible", False, "mean that no 34 answers to one question from 1 to 7 have: a digit is wrong",
    ),
    Plant(
        CLASS, "minutes", "se", "1.92",
        "*SE* = {minutes[se]}",
        "se", "conditional", False, "SE that is not SD/√n: digits swapped",
    ),
    Plant(
        CLASS, "passed", "or", "5.63",
        "odds ratio {passed[or]}, 95% CI",
        "or", "conditional", False, "odds ratio that the counts do not give: digits swapped",
    ),
    Plant(
        CLASS, "model", "r2", ".15",
        "*R*^2^ = {model[r2]}, *F*",
        "r2", "conditional", False, "R² that F and its df do not give: digits swapped",
    ),
    Plant(
        CLASS, "loaves_hours", "r", "−.75",
        "{score_loaves[r]}|{loaves_hours[r]}",
        "r(2,1)", "conditional", False, "correlation that cannot stand beside the others of its table: a sign is added",
    ),
)  # fmt: skip
