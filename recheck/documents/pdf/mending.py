"""A PDF that was cut off has lost its trailer, the way to its pages; often they are still there."""

from __future__ import annotations

import regex

_CATALOG = regex.compile(rb"\b(\d{1,7})\s+(\d{1,5})\s+obj\b(?:(?!endobj)[\s\S]){0,3000}?/Type\s*/Catalog\b")
_PAGES = regex.compile(rb"\b(\d{1,7})\s+(\d{1,5})\s+obj\b(?:(?!endobj)[\s\S]){0,20000}?/Type\s*/Pages\b")
_PATIENCE = 5.0


def mended(data: bytes) -> bytes | None:
    """Add a trailer that names the catalogue, or the tree of pages; None if neither is found."""
    try:
        catalog = [match.groups() for match in _CATALOG.finditer(data, timeout=_PATIENCE)]
        if catalog:
            return data + _trailer(b"%s %s R" % catalog[-1])
        # The tree's root is written before its branches or after them: the one that lists most wins.
        pages = [(len(match[0]), match[1], match[2]) for match in _PAGES.finditer(data, timeout=_PATIENCE)]
    except TimeoutError:
        return None
    if not pages:
        return None
    _, number, generation = max(pages)
    made = b"\n9999990 0 obj\n<< /Type /Catalog /Pages %s %s R >>\nendobj\n" % (number, generation)
    return data + made + _trailer(b"9999990 0 R")


def _trailer(root: bytes) -> bytes:
    return b"\nendstream\nendobj\ntrailer\n<< /Root %s >>\nstartxref\n0\n%%%%EOF\n" % root
