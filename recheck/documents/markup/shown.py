"""What a browser shows of a page, and what of it is the article."""

from __future__ import annotations

import re
from functools import lru_cache

from lxml import etree

from recheck.documents.markup.names import LOCAL
from recheck.documents.runs import LOWERED, RAISED

NEVER = frozenset((
    "", "script", "style", "template", "head", "noscript", "button", "input", "select", "textarea", "svg", "canvas", "iframe", "object",
    "embed", "audio", "video", "datalist", "dialog", "map", "progress", "meter", "rt", "rp", "param", "source", "track", "link", "meta",
    "title", "base", "colgroup", "col", "noframes", "nav", "menu", "del", "s", "strike",
))  # fmt: skip
"""Elements whose content is not shown, is no part of a text, or was struck out of it."""

BLOCK = frozenset((
    "address", "article", "aside", "blockquote", "body", "center", "dd", "details", "dir", "div", "dl", "dt", "fieldset", "figcaption",
    "figure", "footer", "form", "frameset", "header", "hgroup", "hr", "html", "legend", "li", "main", "ol", "p", "pre", "search",
    "section", "summary", "ul", "caption", "table", "tbody", "thead", "tfoot", "tr", "td", "th",
    "h1", "h2", "h3", "h4", "h5", "h6", "option", "optgroup",
))  # fmt: skip
"""Elements that begin on a new line."""

_HIDING = re.compile(r"display\s*:\s*none|visibility\s*:\s*(?:hidden|collapse)", re.IGNORECASE)
_ALIGNED = re.compile(r"vertical-align\s*:\s*(super|sub)\b", re.IGNORECASE)
_UNSEEN = frozenset((
    "sr-only", "visually-hidden", "visuallyhidden", "screen-reader-text", "screenreader-only", "d-none", "hidden", "hide", "is-hidden",
    "MathJax_Preview", "katex-html", "footnote-back", "footnote-backref", "anchorjs-link", "headerlink",
    "code-copy-button", "reversefootnote",
))  # fmt: skip
_FURNITURE = frozenset((
    "toc", "table-of-contents", "tocnav", "sidebar", "navbar", "nav", "navigation", "breadcrumb", "breadcrumbs", "menu", "cookie-banner",
    "cookies", "cookie-consent", "share", "social", "social-share", "related", "related-articles", "recommended", "recommendations",
    "advert", "advertisement", "ads", "comments", "pagination", "site-header", "site-footer", "page-footer", "footer", "skip-link",
    "skiplinks", "banner", "search-form", "newsletter", "metrics", "altmetric",
))  # fmt: skip
_SURROUNDING_ROLES = frozenset((
    "navigation", "banner", "contentinfo", "search", "complementary", "menu", "menubar", "toolbar", "dialog", "tooltip", "doc-toc",
))  # fmt: skip
_PARTS = {
    "notes": frozenset(("footnotes", "footnote-list", "endnotes", "fn-group")),
    "references": frozenset(("references", "ref-list", "reference-list", "csl-bib-body", "bibliography", "citation-list", "c-article-references")),
    "entry": frozenset(("csl-entry",)),
    "table note": frozenset((
        "table-notes", "table-note", "tablenotes", "table-foot", "table-footer", "table-footnotes", "table-footnote", "table-wrap-foot",
        "tblfn", "tw-foot", "tablefootnote", "table__footnotes", "c-article-table-footer",
    )),
}  # fmt: skip
_PART_ROLES = {
    "doc-endnotes": "notes",
    "doc-footnote": "notes",
    "doc-bibliography": "references",
    "doc-biblioentry": "entry",
}
MARGINS = frozenset(("aside", "footer"))
"""Elements that stand beside the article unless they hold much of it."""

_SMALL = 0.3
"""Share of a page's text above which a part is never taken for furniture, whatever it is called."""


def is_hidden(element: etree._Element) -> bool:
    """Tell whether a browser leaves out an element, or shows it to a screen reader alone."""
    names = element.get("class")
    if names is not None and _unseen(names) and not _alone(element):
        return True
    style = element.get("style")
    return (style is not None and _hides(style)) or element.get("hidden") is not None


def mark_of(style: str | None) -> str:
    """The mark of a style that raises or lowers text, "" for any other."""
    return "" if style is None else _mark_of(style)


@lru_cache(maxsize=1024)
def _mark_of(style: str) -> str:
    match = _ALIGNED.search(style)
    return "" if match is None else RAISED if match[1].lower() == "super" else LOWERED


@lru_cache(maxsize=1024)
def _unseen(names: str) -> bool:
    return not _UNSEEN.isdisjoint(names.split())


@lru_cache(maxsize=1024)
def _hides(style: str) -> bool:
    return _HIDING.search(style) is not None


def _alone(element: etree._Element) -> bool:
    """Whether the drawn form of a formula is the only one that the page holds."""
    parent = element.getparent()
    return "katex-html" in (element.get("class") or "") and (parent is None or len(parent) == 1)


def is_furniture(element: etree._Element, whole: int) -> bool:
    """Tell whether a block surrounds the article: menus, lists of contents, side bars, foot lines.

    `whole` is the number of characters of the page; a large part is always text.
    """
    tag = element.tag
    names, own, role = element.get("class"), element.get("id"), element.get("role")
    likely = (
        tag in MARGINS
        or (names is not None and _surrounds(names))
        or (own is not None and own.lower() in _FURNITURE)
        or (role is not None and role in _SURROUNDING_ROLES)
    )
    return likely and _length(element) < _SMALL * whole


@lru_cache(maxsize=1024)
def _surrounds(names: str) -> bool:
    return not _FURNITURE.isdisjoint(names.lower().split())


def part_of(element: etree._Element) -> str:
    """What part of an article a block is by its class, its role or its id.

    `notes`, `references`, `entry` (one reference), `table note`; "" for ordinary text.
    """
    return _part(element.get("class") or "", element.get("role") or "", element.get("id") or "")


@lru_cache(maxsize=1024)
def _part(names: str, role: str, own: str) -> str:
    if role in _PART_ROLES:
        return _PART_ROLES[role]
    split = frozenset(names.lower().split())
    return next(
        (part for part, found in _PARTS.items() if found & split), "references" if own == "refs" else ""
    )


def _length(element: etree._Element) -> int:
    return len(etree.tostring(element, method="text", encoding="unicode", with_tail=False))


def article_of(page: etree._Element) -> tuple[etree._Element, int]:
    """The element that holds the article, and the number of characters in it: `main` or the only `article`, where it holds most text, else the body."""
    body = next((child for child in page if LOCAL[child.tag] == "body"), page)
    whole = _shown_length(body)
    for found in (_named(body, "main"), _named(body, "article")):
        if len(found) == 1:
            length = _shown_length(found[0])
            if length >= 0.5 * whole:
                return found[0], length
    return body, whole


def _named(body: etree._Element, tag: str) -> list[etree._Element]:
    found = [element for element in body.iter(tag) if not is_hidden(element)]
    if tag == "main" and not found:
        found = [element for element in body.iter("div", "section") if element.get("role") == tag]
    return found


def _shown_length(element: etree._Element) -> int:
    unseen = sum(len(e.text or "") for e in element.iter("script", "style", "template", "noscript"))
    return _length(element) - unseen
