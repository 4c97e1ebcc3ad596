"""Elements of XML and HTML: their names without namespaces, and all their text."""

from __future__ import annotations

from collections.abc import Iterator
from typing import cast

from lxml import etree


class _Local(dict[object, str]):
    """Maps the tag of an element to its name alone: `{…MathML}mi` and an undeclared `mml:mi` are both `mi`.

    Comments, processing instructions and entities that a parser left alone are "".
    """

    def __missing__(self, tag: object) -> str:
        name = tag.rpartition("}")[2].rpartition(":")[2].lower() if isinstance(tag, str) else ""
        self[tag] = name
        return name


LOCAL = _Local()


def pieces(element: etree._Element, *tags: str) -> Iterator[str]:
    """The texts within an element in order, those directly within some elements only where tags are given."""
    return cast("Iterator[str]", element.itertext(*tags))


def whole_text(element: etree._Element) -> str:
    """Everything that stands within an element."""
    return "".join(pieces(element))
