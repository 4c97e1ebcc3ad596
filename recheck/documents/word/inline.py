"""What a paragraph of a Word document prints: runs, fields, symbols, equations; tracked deletions left out."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field

from recheck.documents.runs import Runs
from recheck.documents.word.numbering import Numbers
from recheck.documents.word.omml import add_math
from recheck.documents.word.package import MC, Element, M, W
from recheck.documents.word.styles import VAL, Style, Type, first_of, indent_of, is_on, outline_level, typed
from recheck.documents.word.symbol_font import printed, printed_code

_T, _R, _TAB, _RPR, _PPR = f"{W}t", f"{W}r", f"{W}tab", f"{W}rPr", f"{W}pPr"
_BREAKS = frozenset([f"{W}br", f"{W}cr"])
_HOLDERS = frozenset(
    W + name for name in ("hyperlink", "smartTag", "customXml", "ins", "moveTo", "fldSimple", "dir", "bdo", "sdtContent")
)  # fmt: skip
_PICTURES = frozenset([f"{W}drawing", f"{W}pict", f"{W}object"])
_MATH = frozenset([f"{M}oMath", f"{M}oMathPara"])
_OLE = "{urn:schemas-microsoft-com:office:office}OLEObject"
_SPACES_AS_INDENT = 60
_TAB_AS_INDENT = 720


@dataclass(slots=True, eq=False)
class Line:
    """A paragraph in the making: its runs, the words before its number, how it looks, and what hangs on it."""

    runs: Runs = field(default_factory=Runs)
    before: str = ""
    style: Style = field(default_factory=Style)
    indent: int = 0
    level: int = 0
    letters: int = 0
    bold: int = 0
    size: int = 0
    boxes: list[Element] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)


@dataclass(frozen=True, slots=True, eq=False)
class Paragraph:
    """A paragraph that prints something. `note` says that it stands in a footnote; `bold` that all of it is."""

    text: str
    marks: str
    style: Style
    level: int = 0
    indent: int = 0
    bold: bool = False
    size: int = 0
    note: bool = False


def chosen(alternate: Element) -> Element:
    """The one of several alternatives that is read: the first; the others say the same in older words."""
    first = alternate.find(f"{MC}Choice")
    return alternate.find(f"{MC}Fallback") if first is None else first


def is_prompt(control: Element) -> bool:
    """Tell whether a content control still shows its prompt, which is no text of the author."""
    return is_on(control.find(f"{W}sdtPr/{W}showingPlcHdr"))


class Inline:
    """Reads paragraphs one after another; a field may begin in one and end in another.

    `equations` counts equations that are kept as pictures and cannot be read.
    """

    def __init__(self, styles: Mapping[str, Style], numbers: Numbers) -> None:
        self.equations = 0
        self._numbers = numbers
        self._styles = styles
        self._fields: list[bool] = []

    def begin(self, paragraph: Element, line: Line | None = None) -> Line:
        """A line with the style of a paragraph, empty unless the one before runs on into it."""
        properties = paragraph.find(_PPR)
        named = None if properties is None else properties.find(f"{W}pStyle")
        line = line or Line()
        line.style = self._styles.get("" if named is None else named.get(VAL) or "") or self._styles[""]
        line.level = outline_level(properties) or line.style.level
        own = None if properties is None else properties.find(f"{W}numPr")
        line.before = self._numbers.before(first_of(own, line.style.numbered))
        placed = None if properties is None else properties.find(f"{W}jc")
        at_left = placed is None or placed.get(VAL) in ("left", "start", "both")
        line.indent = indent_of(properties, line.style.indent) if at_left else 0
        return line

    def read(self, paragraph: Element, line: Line) -> None:
        """Append what a paragraph prints."""
        self._holder(paragraph, line)
        # The code of a field ends with its paragraph: one that is never closed must not swallow the rest.
        self._fields = [False] * len(self._fields)

    def _holder(self, element: Element, line: Line) -> None:
        for child in element:
            tag = child.tag
            if tag == _R:
                self._run(child, line)
            elif tag in _HOLDERS:
                self._holder(child, line)
            elif tag == f"{W}sdt":
                self._control(child, line)
            elif tag in _MATH:
                self.equation(child, line)
            elif tag == f"{MC}AlternateContent":
                self._alternate(child, line)

    def _control(self, element: Element, line: Line) -> None:
        content = element.find(f"{W}sdtContent")
        if content is not None and not is_prompt(element):
            self._holder(content, line)

    def equation(self, element: Element, line: Line) -> None:
        """Append an equation."""
        if not any(self._fields):
            add_math(element, line.runs)

    def _alternate(self, element: Element, line: Line) -> None:
        inner = chosen(element)
        if inner is None:
            return
        self._holder(inner, line)
        line.boxes += _text_boxes(inner)

    def _run(self, run: Element, line: Line) -> None:
        base = line.style.type
        type_ = typed(run.find(_RPR), base, self._styles)
        for child in run:
            tag = child.tag
            if tag == _T:
                self._text(child.text or "", type_, line)
            elif tag == f"{W}fldChar":
                self._field(child.get(f"{W}fldCharType"))
            elif tag != _RPR and isinstance(tag, str) and not type_.hidden:
                self._other(child, tag, type_, line)

    def _text(self, text: str, type_: Type, line: Line) -> None:
        if type_.hidden or not text or any(self._fields):
            return
        if not line.letters:
            stripped = text.lstrip(" \u00a0\u2002\u2003\u2007\u2009\t")
            line.indent += _SPACES_AS_INDENT * (len(text) - len(stripped))
            line.size = line.size or (type_.size if stripped else 0)
        letters = len(text) - text.count(" ")
        line.letters += letters
        line.bold += letters * type_.bold
        line.runs.add(printed(text, type_.font), type_.mark)

    def _field(self, kind: str | None) -> None:
        """Keep count of fields: True while the code of one is told, False while its result is."""
        if kind == "begin":
            self._fields.append(True)
        elif kind == "separate" and self._fields:
            self._fields[-1] = False
        elif kind == "end" and self._fields:
            self._fields.pop()

    def _other(self, child: Element, tag: str, type_: Type, line: Line) -> None:
        if tag in _PICTURES:
            line.boxes += _text_boxes(child)
            ole = child.find(_OLE)
            if ole is not None and "equation" in (ole.get("ProgID") or "").lower():
                self.equations += 1
        elif tag == f"{MC}AlternateContent":
            self._in_run(child, type_, line)
        elif tag == f"{W}ruby":
            for base in child.findall(f"{W}rubyBase"):
                self._holder(base, line)
        elif tag in (f"{W}footnoteReference", f"{W}endnoteReference"):
            line.notes.append(f"{tag.removeprefix(W)[:-9]} {child.get(f'{W}id')}")
        elif not any(self._fields):
            self._sign(child, tag, type_, line)

    def _in_run(self, alternate: Element, type_: Type, line: Line) -> None:
        inner = chosen(alternate)
        for child in () if inner is None else inner:
            if child.tag == _T:
                self._text(child.text or "", type_, line)
            elif isinstance(child.tag, str):
                self._other(child, child.tag, type_, line)

    def _sign(self, child: Element, tag: str, type_: Type, line: Line) -> None:
        if tag == _TAB or tag == f"{W}ptab":
            line.indent += _TAB_AS_INDENT * (not line.letters)
            line.runs.add(" ", type_.mark)
        elif tag in _BREAKS:
            line.runs.line_break()
        elif tag == f"{W}noBreakHyphen":
            line.runs.add("-", type_.mark)
        elif tag == f"{W}sym":
            line.runs.add(printed_code(child.get(f"{W}char") or "", child.get(f"{W}font") or ""), type_.mark)


def _text_boxes(element: Element) -> Iterator[Element]:
    """Contents of text boxes in a drawing; those inside another are found with it."""
    for child in element:
        if child.tag == f"{W}txbxContent":
            yield child
        elif child.tag == f"{MC}AlternateContent":
            inner = chosen(child)
            if inner is not None:
                yield from _text_boxes(inner)
        elif isinstance(child.tag, str) and len(child):
            yield from _text_boxes(child)
