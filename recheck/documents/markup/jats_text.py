"""Running text of JATS: inline elements, formulas, line breaks."""

from __future__ import annotations

import re
from collections.abc import Callable

from lxml import etree

from recheck.documents.markup.assembly import Assembly
from recheck.documents.markup.mathml import add_math
from recheck.documents.markup.names import LOCAL, pieces, whole_text
from recheck.documents.runs import BASE, LOWERED, RAISED, Runs

DEEPEST = 100
"""Elements within elements that are followed; what lies deeper is read as bare text."""

DROPPED = frozenset((
    "", "graphic", "inline-graphic", "media", "inline-media", "object-id", "alt-text", "long-desc", "permissions", "private-char",
    "glyph-data", "index-term", "rt", "rp", "processing-meta", "index-term-range-end", "milestone-start", "milestone-end",
    "strike", "copyright-statement", "copyright-year", "copyright-holder", "license", "sec-meta", "kwd-group", "textual-form", "x-ref",
))  # fmt: skip
"""Elements that hold no text of the article."""

BLOCKS = frozenset((
    "p", "list", "list-item", "def-list", "disp-quote", "boxed-text", "verse-group", "speech", "statement", "preformat", "code",
    "sec", "disp-formula-group", "question-wrap", "def-item", "def",
))  # fmt: skip
"""Elements that begin a paragraph of their own."""

FLOATS = frozenset((
    "table-wrap", "table-wrap-group", "fig", "fig-group", "supplementary-material", "fn", "fn-group", "chem-struct-wrap",
    "table", "array",
))  # fmt: skip
"""Elements that stand within a paragraph in the file but beside it on the page."""

_SET = ("{*}italic", "{*}bold", "{*}sub", "{*}sup", "{*}roman", "{*}styled-content", "{*}named-content")
"""Elements in which the words of a formula stand that is set as text."""
_ALTERNATIVES = (
    "math",
    "tex-math",
    "table",
    "array",
    "textual-form",
    "p",
    "named-content",
    "chem-struct",
    "preformat",
)
_TEX_BODY = re.compile(r"\\begin\s*\{document\}(.*?)(?:\\end\s*\{document\}|\Z)", re.DOTALL)
_NOTE_MARKS = frozenset(("bibr", "fn", "table-fn", "author-notes"))


class Inline:
    """Walks through inline elements; floats that it meets wait in `floats`."""

    def __init__(self, assembly: Assembly) -> None:
        self.floats: list[etree._Element] = []
        self.assembly = assembly

    def fill(self, element: etree._Element, runs: Runs, mark: str = BASE, depth: int = 0) -> None:
        """Append what an element holds."""
        text = element.text
        if text:
            runs.add(text, mark)
        for child in element:
            self.add(child, runs, mark, depth)

    def add(self, child: etree._Element, runs: Runs, mark: str = BASE, depth: int = 0) -> None:
        """Append an element and the text that follows it."""
        way = _WAY_OF[child.tag]
        if way is not None:
            way(self, child, runs, mark, depth + 1)
        elif len(child):
            self._within(child, runs, mark, depth + 1)
        else:
            text = child.text
            if text:
                runs.add(text, mark)
        text = child.tail
        if text:
            runs.add(text, mark)

    def note(self, element: etree._Element) -> Runs:
        """The text of a footnote; a letter or number before it is raised, as it is where it refers from."""
        runs = Runs()
        for part in element:
            if LOCAL[part.tag] == "label":
                text = whole_text(part).strip()
                runs.add(text, RAISED if text.isalnum() else BASE)
                runs.add(" ")
        labelled = bool(runs.parts)
        runs.add(element.text or "")
        for part in element:
            if not labelled or LOCAL[part.tag] != "label":
                self.add(part, runs)
            else:
                runs.add(part.tail or "")
        return runs

    def _within(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        if depth > DEEPEST:
            runs.add(whole_text(child), mark)
        else:
            self.fill(child, runs, mark, depth)

    def _nothing(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        """Leave out what is no text."""

    def _float(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        self.floats.append(child)

    def _block(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        runs.add(" ")
        self._within(child, runs, mark, depth)
        runs.add(" ")

    def _raised(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        self._within(child, runs, RAISED, depth)

    def _lowered(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        self._within(child, runs, LOWERED, depth)

    def _break(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        runs.line_break()

    def _reference(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        """A mark of a note or a source that touches what it stands at is raised on the page, whether the file says so or not."""
        if mark == BASE and runs.parts and child.get("ref-type") in _NOTE_MARKS:
            last = runs.parts[-1][-1]
            if last.isalnum() or last in ".,;)%*" or (last.isspace() and _is_number(child)):
                mark = RAISED
        self._within(child, runs, mark, depth)

    def _formula(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        """MathML before TeX before words; a formula that is only an image is counted."""
        block = LOCAL[child.tag] == "disp-formula"
        if block:
            runs.add(" ")
        math = next(child.iterdescendants("{*}math"), None)
        tex = next(child.iterdescendants("{*}tex-math"), None) if math is None else None
        if math is not None:
            self._math(math, runs, mark, depth)
        elif tex is not None:
            self._tex(tex, runs, mark, depth)
        elif "".join(pieces(child, *_SET, f"{{*}}{LOCAL[child.tag]}")).strip():
            self._worded(child, runs, mark, depth)
        elif next(child.iterdescendants("{*}graphic", "{*}inline-graphic"), None) is not None:
            self.assembly.pictures += 1
        if block:
            runs.add(" ")

    def _worded(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        """A formula that is set as text; its number is left out."""
        runs.add(child.text or "", mark)
        for part in child:
            if LOCAL[part.tag] not in ("label", "alternatives"):
                self.add(part, runs, mark, depth)
            else:
                runs.add(part.tail or "", mark)

    def _math(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        add_math(child, runs, mark)

    def _tex(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        runs.add(tex_of(whole_text(child)), mark)

    def _alternatives(self, child: etree._Element, runs: Runs, mark: str, depth: int) -> None:
        """One of several forms of the same thing."""
        forms = {LOCAL[form.tag]: form for form in reversed(child)}
        wanted = next((forms[name] for name in _ALTERNATIVES if name in forms), None)
        if wanted is None and len(child):
            wanted = child[0]
        if wanted is not None:
            way = _WAYS.get(LOCAL[wanted.tag], Inline._within)
            way(self, wanted, runs, mark, depth)


def _is_number(reference: etree._Element) -> bool:
    """Whether a reference to a source is a bare number, and no year."""
    text = (reference.text or "").strip()
    return reference.get("ref-type") == "bibr" and not len(reference) and text.isdecimal() and len(text) <= 3


def tex_of(source: str) -> str:
    """The formula alone of a TeX source that may be a whole document."""
    found = _TEX_BODY.search(source)
    text = " ".join((found[1] if found else source).split())
    return text if text.startswith(("$", "\\(", "\\[")) or not text else f"\\({text}\\)"


_Way = Callable[[Inline, etree._Element, Runs, str, int], None]
_WAYS: dict[str, _Way] = {
    **dict.fromkeys(DROPPED, Inline._nothing), **dict.fromkeys(FLOATS, Inline._float), **dict.fromkeys(BLOCKS, Inline._block),
    "sup": Inline._raised, "sub": Inline._lowered, "break": Inline._break, "xref": Inline._reference,
    "inline-formula": Inline._formula, "disp-formula": Inline._formula, "math": Inline._math, "tex-math": Inline._tex,
    "alternatives": Inline._alternatives,
}  # fmt: skip


class _WayOf(dict[object, _Way | None]):
    """Maps the tag of an element, with its namespace, to the way in which it is added; None for plain text."""

    def __missing__(self, tag: object) -> _Way | None:
        self[tag] = way = _WAYS.get(LOCAL[tag])
        return way


_WAY_OF = _WayOf()
