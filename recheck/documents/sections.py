"""What the parts of an article are called, whatever the format."""

import regex

from recheck.model import PassageKind

_NUMBERING = r"(?:(?:\d{1,2}|[IVX]{1,4}|[A-H]|[ivx]{1,4}(?=[.)]))(?:\.\d{1,2}){0,3}[.):]?\s+)?"

_REFERENCES = regex.compile(
    _NUMBERING
    + r"(?:(?:cited\s+|list\s+of\s+)?references(?:\s+(?:cited|list|and\s+notes))?|reference\s+list|bibliography"
    r"|literature(?:\s+cited)?|works\s+cited|cited\s+literature|literaturverzeichnis|références|referencias)\s*[:.]?",
    regex.IGNORECASE,
)
_AFTER_REFERENCES = regex.compile(
    _NUMBERING
    + r"(?:appendi(?:x|ces)|supplement|supporting\s+information|online\s+(?:methods|supplement)|(?:star\s+)?methods?\b"
    r"|materials?\s+and\s+methods|results?\b|discussion\b|experiment\s+\d|study\s+\d|annex|additional\s+(?:file|analys)"
    r"|(?:list\s+of\s+)?(?:tables?|figures?)(?:\s+(?:and\s+\w+|legends|captions|titles))?$|(?:figure|table)\s+(?:legends|captions)"
    r"|footnotes?$|endnotes?$|author(?:s[’']?|['’]s)?\s+(?:note|contribution)|acknowledge?ments?|funding|data\s+availability"
    r"|declarations?|conflicts?\s+of\s+interest|competing\s+interests?|tables?$|figures?$)",
    regex.IGNORECASE,
)
_CAPTION = regex.compile(
    r"(?:(?:supplement(?:ary|al)|supporting|extended\s+data|appendix|online)\s+)?"
    r"(?P<what>fig(?:ure|\.)?|table|tab\.|tabelle|tabell|tableau|tabla|tabela|tabella|scheme|box|video|exhibit)\s*(?P<number>[A-Z]{0,2}[.-]?\d{1,3}(?:[.-]\d{1,2})?[a-z]?|[IVX]{1,5})"
    r"(?P<after>\s*[.:|–—]|\s+-\s|\s*$|\s*\n|\s+(?=[^\W\d_]|[(]))",
    regex.IGNORECASE,
)
_NAMED = regex.compile(
    _NUMBERING
    + r"(?:title\s+page|author\s+note|abstract|summary|keywords?|introduction|background|methods?|materials?\s+and\s+methods|participants|"
    r"procedure|design|materials|measures|statistical\s+analys[ie]s|data\s+analys[ie]s|results?(?:\s+and\s+discussion)?|"
    r"(?:general\s+)?discussion|conclusions?|limitations|acknowledge?ments?|funding|appendix(?:\s+\w)?)\s*[:.]?",
    regex.IGNORECASE,
)
_ENTRY = regex.compile(r"(?:\(|\b)(?:18|19|20)\d\d[a-z]?(?:\)|\b)")
_AUTHOR = regex.compile(
    r"^\W*(?:\d{1,3}[.)\]]?\s+)?[^\W\d_][\w'’ -]+,?\s+(?:[A-Z]\.?[ -]?){1,4}(?:,|;|\.|&|and\b|\()"
)
_EDITOR_TITLE = regex.compile(
    r"(?i)^(?:microsoft\s+word|untitled|title|paper|manuscript|document\d*)\b|\.(?:docx?|tex|pdf|indd)$"
)
_STATEMENT = regex.compile(r"[=<>≤≥±]|\d\.\d|\d%|[.?!;:,]$")
_LEADING = regex.compile(_NUMBERING)
_PATIENCE = 1.0


def unlabelled(number: int) -> str:
    """The name under which places give a table without a label, numbered through the document."""
    return f"unlabelled table {number}"


def opens_references(heading: str) -> bool:
    """Tell whether a line is the heading of a list of references."""
    return not _ends_a_sentence(heading) and bool(_REFERENCES.fullmatch(heading.strip(), timeout=_PATIENCE))


def closes_references(heading: str) -> bool:
    """Tell whether a heading surely begins another part than the list of references."""
    return _AFTER_REFERENCES.match(heading.strip(), timeout=_PATIENCE) is not None


def is_named_section(line: str) -> bool:
    """Tell whether a line is nothing but the usual name of a section."""
    return not _ends_a_sentence(line) and bool(_NAMED.fullmatch(line.strip(), timeout=_PATIENCE))


def _ends_a_sentence(line: str) -> bool:
    """Whether a line is the last word of a paragraph: "… were not filled in by any / method."."""
    return line.rstrip()[-1:] == "." and unnumbered(line)[:1].islower()


def unnumbered(heading: str) -> str:
    """A heading without the number before it: "2.1 Methods" becomes "Methods"."""
    match = _LEADING.match(heading.strip(), timeout=_PATIENCE)
    return heading.strip()[match.end() :] if match else heading.strip()


def is_statement(line: str) -> bool:
    """Tell whether a line gives a number as a result does, or ends as a sentence or a label: no heading then."""
    return _STATEMENT.search(line, timeout=_PATIENCE) is not None


def captioned(text: str, *, sure: bool = False) -> PassageKind | None:
    """Say `table` or `figure` if a text begins as the caption of one, else None.

    "Figure 2 shows ..." is a sentence: without a full stop or colon after the number the next
    word must have a capital, and `sure` says that the type (smaller, bold) already tells a caption.
    """
    match = _CAPTION.match(text.lstrip(), timeout=_PATIENCE)
    if match is None or not match["what"][0].isupper():
        return None
    rest = text.lstrip()[match.end() :]
    marked = match["after"].strip() or not rest or "\n" in match["after"]
    if not marked and not (rest[:1].isupper() and (sure or match["what"].isupper())):
        return None
    return "table" if match["what"].lower().startswith("tab") else "figure"


def caption_label(text: str) -> str:
    """The name by which a caption is referred to: "Table 2", "Figure S1"; empty if there is none."""
    match = _CAPTION.match(text.lstrip(), timeout=_PATIENCE)
    if match is None or not match["what"][0].isupper():
        return ""
    what = match["what"].lower()
    name = (
        "Table" if what.startswith("tab") else "Figure" if what.startswith("fig") else match["what"].title()
    )
    return f"{name} {match['number']}"


def states_title(metadata: str) -> bool:
    """Tell whether the title in a file's metadata reads like one, and not like the name of a file."""
    stated = " ".join(metadata.split())
    return len(stated.split()) >= 3 and not _EDITOR_TITLE.search(stated, timeout=_PATIENCE)


def looks_like_reference(text: str) -> bool:
    """Tell whether a paragraph reads like one entry of a list of references."""
    start = text[:400]
    return (
        _AUTHOR.match(start, timeout=_PATIENCE) is not None
        and _ENTRY.search(start, timeout=_PATIENCE) is not None
    )
