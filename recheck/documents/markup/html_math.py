"""Formulas of pages: TeX that a script sets, what such a script has drawn, images."""

from __future__ import annotations

from lxml import etree

from recheck.documents.markup.mathml import add_math
from recheck.documents.markup.names import LOCAL
from recheck.documents.runs import Runs

_DRAWN = frozenset(
    ("MathJax", "MathJax_Display", "MathJax_SVG", "MathJax_SVG_Display", "MathJax_CHTML", "mjx-chtml")
)
_PICTURES = frozenset(
    ("math", "tex", "latex", "equation", "formula", "mwe-math-fallback-image-inline", "inline-formula")
)


def add_tex(source: str, runs: Runs, mark: str) -> None:
    """Append TeX; a page that has it set by a script may leave out its brackets."""
    text = source.strip()
    bare = "\\" in text or "^" in text or "_" in text
    runs.add(f"\\({text}\\)" if bare and not text.startswith(("\\(", "\\[", "$")) else text, mark)


def is_drawn(names: list[str]) -> bool:
    """Tell by the classes of an element whether a script has drawn a formula in it."""
    return not _DRAWN.isdisjoint(names)


def add_drawn(element: etree._Element, runs: Runs, mark: str) -> bool:
    """Append a formula that a script has drawn from its MathML, if its TeX does not follow as a script.

    False where the page holds neither.
    """
    after = element.getnext()
    if after is not None and LOCAL[after.tag] == "script" and is_tex(after):
        return True
    math = next(element.iter("math"), None)
    if math is not None:
        add_math(math, runs, mark)
    return math is not None


def is_tex(script: etree._Element) -> bool:
    """Tell whether a script holds a formula."""
    return (script.get("type") or "").startswith("math/tex")


def is_picture(image: etree._Element) -> bool:
    """Tell whether an image stands for a formula."""
    return not _PICTURES.isdisjoint((image.get("class") or "").lower().split())
