"""JATS (NISO Z39.96) and its forerunner, the NLM DTD: an article in XML becomes a document."""

from __future__ import annotations

import hashlib
from collections.abc import Callable

from lxml import etree

from recheck.documents.markup.assembly import Assembly
from recheck.documents.markup.jats_tables import add_table, captioned_text
from recheck.documents.markup.jats_text import BLOCKS, DEEPEST, DROPPED, FLOATS, Inline
from recheck.documents.markup.names import LOCAL, pieces, whole_text
from recheck.documents.runs import Runs
from recheck.errors import UnreadableDocument
from recheck.model import Document

_ARTICLES = ("article", "sub-article", "response")
_PARTS = frozenset(("front", "front-stub", "body", "back"))
_READER = "lxml"


def jats_document(root: etree._Element, *, name: str, data: bytes, notes: tuple[str, ...] = ()) -> Document:
    """Read an article from its parsed XML.

    `data` are the bytes that the digest is taken of. Raises `UnreadableDocument` where the XML holds no article.
    """
    articles = _articles(root)
    if not articles:
        raise UnreadableDocument(
            name,
            f"it is XML with the root element {LOCAL[root.tag]}, not an article in JATS",
            "give it as JATS XML, HTML, PDF or UTF-8 text",
        )
    if len(articles) > 1:
        notes = (*notes, f"The file holds {len(articles)} articles; the first one was read.")
    article = articles[0]
    title = _title(article)
    writer = _Writer()
    writer.article(article, title)
    assembly = writer.assembly
    return Document(
        name=name, format="jats", sha256=hashlib.sha256(data).hexdigest(), passages=tuple(assembly.passages),
        words=assembly.words(), title=title.finished()[0] or None, reader=_READER, notes=(*notes, *assembly.notes()),
        tables=tuple(assembly.tables),
    )  # fmt: skip


def _articles(root: etree._Element) -> list[etree._Element]:
    """The articles of a file that are not parts of another article."""
    if LOCAL[root.tag] in _ARTICLES:
        return [root] if _is_article(root) else []
    found: list[etree._Element] = []
    for element in root.iter("{*}article"):
        if _is_article(element) and not (found and found[-1] in element.iterancestors()):
            found.append(element)
    return found


def _is_article(element: etree._Element) -> bool:
    return any(LOCAL[child.tag] in _PARTS for child in element)


def _child(element: etree._Element, *names: str) -> etree._Element | None:
    """The first descendant that one leads to by the names of elements, each a child of the one before."""
    found: etree._Element | None = element
    for name in names:
        if found is None:
            return None
        found = next((child for child in found if LOCAL[child.tag] == name), None)
    return found


def _title(article: etree._Element) -> Runs:
    runs = Runs()
    for names in (("front", "article-meta"), ("front-stub",)):
        title = _child(article, *names, "title-group", "article-title")
        if title is not None:
            Inline(Assembly()).fill(title, runs)
            break
    return runs


class _Writer:
    """Walks through the blocks of an article and puts them down in order."""

    def __init__(self) -> None:
        self.assembly = Assembly()

    def article(self, article: etree._Element, title: Runs) -> None:
        """Put down a whole article: title, abstracts, body, back matter, floats; then what is no part of it."""
        text, marks = title.finished()
        if text:
            self.assembly.add_text(text, marks, "heading")
        for names in (("front", "article-meta"), ("front-stub",)):
            meta = _child(article, *names)
            for part in meta if meta is not None else ():
                if LOCAL[part.tag] in ("abstract", "trans-abstract"):
                    self._abstract(part)
        for wanted in ("body", "back", "floats-group", "floats-wrap"):
            for part in article:
                if LOCAL[part.tag] == wanted:
                    self.assembly.section = None
                    self.blocks(part, 0)
        for part in article:
            if LOCAL[part.tag] in ("sub-article", "response"):
                outer, self.assembly.aside = self.assembly.aside, True
                self.article(part, _title(part))
                self.assembly.aside = outer

    def _abstract(self, part: etree._Element) -> None:
        aside = self.assembly.aside
        self.assembly.aside = aside or LOCAL[part.tag] == "trans-abstract"
        if _child(part, "title") is None:
            self.assembly.head_text("Abstract", "")
        self._section(part, 0)
        self.assembly.section = None
        self.assembly.aside = aside

    def blocks(self, element: etree._Element, depth: int) -> None:
        """Put down the children of an element, each in its own way, and what stands loose between them."""
        self._loose(element.text)
        for child in element:
            self.block(child, depth)
            self._loose(child.tail)

    def _loose(self, text: str | None) -> None:
        if text and not text.isspace():
            self.assembly.add_text(" ".join(text.split()))

    def block(self, child: etree._Element, depth: int) -> None:
        """Put down one element."""
        name = LOCAL[child.tag]
        if depth > DEEPEST:
            self._deep(child)
        elif name in _WAYS:
            _WAYS[name](self, child, depth + 1)
        elif name in DROPPED or name in _APART:
            return
        elif any(
            LOCAL[part.tag] in BLOCKS or LOCAL[part.tag] in FLOATS or LOCAL[part.tag] in _WAYS
            for part in child
        ):
            self._section(child, depth + 1)
        else:
            self._paragraph(child, depth + 1)

    def _deep(self, child: etree._Element) -> None:
        runs = Runs()
        runs.add(whole_text(child))
        self.assembly.add(runs)

    def _section(self, element: etree._Element, depth: int) -> None:
        outer = self.assembly.section
        label = _child(element, "label")
        title = _child(element, "title")
        if title is None and LOCAL[element.tag] == "ack":
            self.assembly.section = "Acknowledgments"
        if title is not None or label is not None:
            runs, inline = Runs(), Inline(self.assembly)
            for part in (label, title):
                if part is not None:
                    inline.fill(part, runs)
                    runs.add(" ")
            self.assembly.head(runs)
        self.blocks(element, depth)
        self.assembly.section = outer

    def _paragraph(self, element: etree._Element, depth: int) -> None:
        """Put down running text; lists and quotations within it stand for themselves, floats come after it."""
        runs, inline = Runs(), Inline(self.assembly)
        runs.add(element.text or "")
        for child in element:
            if LOCAL[child.tag] in BLOCKS:
                self.assembly.add(runs)
                self.block(child, depth)
                runs = Runs()
                runs.add(child.tail or "")
            else:
                inline.add(child, runs)
        self.assembly.add(runs)
        for float_ in inline.floats:
            self.block(float_, depth)

    def _item(self, element: etree._Element, depth: int) -> None:
        """Put down an item of a list, its label before its first paragraph."""
        runs, inline = Runs(), Inline(self.assembly)
        for child in element:
            name = LOCAL[child.tag]
            if name in ("label", "term", "title"):
                inline.fill(child, runs)
                runs.add(": " if name == "term" else " ")
            elif name in ("p", "def"):
                inline.fill(child, runs)
                self.assembly.add(runs)
                runs = Runs()
            else:
                self.assembly.add(runs)
                runs = Runs()
                self.block(child, depth)
        self.assembly.add(runs)
        for float_ in inline.floats:
            self.block(float_, depth)

    def _table(self, element: etree._Element, depth: int) -> None:
        add_table(element, self.assembly)

    def _figure(self, element: etree._Element, depth: int) -> None:
        """Put down label and caption of a figure or a supplementary file as one passage."""
        label, caption, inline = Runs(), Runs(), Inline(self.assembly)
        for part in element:
            name = LOCAL[part.tag]
            if name == "label":
                inline.fill(part, label)
            elif name in ("caption", "title", "p"):
                inline.fill(part, caption)
                caption.add(" ")
        whole = captioned_text(label, caption)[1]
        if whole is not None:
            self.assembly.add(whole, "caption")
        for part in element:
            if LOCAL[part.tag] in ("table-wrap", "table", "fig", "fn", "fn-group"):
                self.block(part, depth)

    def _note(self, element: etree._Element, depth: int) -> None:
        self.assembly.add(Inline(self.assembly).note(element), "note")

    def _table_group(self, element: etree._Element, depth: int) -> None:
        """Put down tables that have their label and caption in common."""
        for part in element:
            if LOCAL[part.tag] == "table-wrap":
                add_table(part, self.assembly, element)

    def _references(self, element: etree._Element, depth: int) -> None:
        outer = self.assembly.section
        title = _child(element, "title")
        runs = Runs()
        runs.add(whole_text(title) if title is not None else "References")
        self.assembly.head(runs)
        for child in element:
            name = LOCAL[child.tag]
            if name == "ref":
                text = " ".join(" ".join(pieces(child)).split())
                if text:
                    self.assembly.add_text(text, kind="references")
            elif name not in ("title", "label"):
                self.block(child, depth)
        self.assembly.section = outer

    def _code(self, element: etree._Element, depth: int) -> None:
        runs = Runs()
        runs.add(whole_text(element))
        self.assembly.add(runs, "aside")

    def _formula(self, element: etree._Element, depth: int) -> None:
        runs = Runs()
        Inline(self.assembly).add(element, runs)
        self.assembly.add(runs)

    def _nothing(self, element: etree._Element, depth: int) -> None:
        """Leave out what was put down with its parent."""


_APART = frozenset(
    ("contrib-group", "aff", "author-notes", "history", "funding-group", "bio", "sig-block", "title", "label")
)
_Way = Callable[[_Writer, etree._Element, int], None]
_WAYS: dict[str, _Way] = {
    "sec": _Writer._section, "app": _Writer._section, "ack": _Writer._section, "notes": _Writer._section,
    "boxed-text": _Writer._section, "app-group": _Writer._section, "glossary": _Writer._section, "list": _Writer._section,
    "def-list": _Writer._section, "disp-quote": _Writer._section, "fig-group": _Writer._figure, "fn-group": _Writer._section,
    "table-wrap-group": _Writer._table_group,
    "p": _Writer._paragraph, "list-item": _Writer._item, "def-item": _Writer._item, "table-wrap": _Writer._table,
    "table": _Writer._table, "array": _Writer._table, "fig": _Writer._figure, "supplementary-material": _Writer._figure,
    "chem-struct-wrap": _Writer._figure, "fn": _Writer._note, "ref-list": _Writer._references, "code": _Writer._code,
    "disp-formula": _Writer._formula, "caption": _Writer._figure,
}  # fmt: skip
