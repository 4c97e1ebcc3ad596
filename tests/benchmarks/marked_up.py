"""What reading JATS and HTML costs, as ratios to parsing them with lxml and joining their text."""

from __future__ import annotations

import random
from collections.abc import Callable, Iterable
from pathlib import Path

from lxml import etree

from recheck.documents import open_document
from tests.benchmarks.pages import WORDS, interleaved

_BOUND = "under 3"


def _sentences(chance: random.Random, sup: str) -> str:
    """A paragraph of about 150 words with results and citations as journals mark them up."""
    parts = []
    for at in range(10):
        parts.append(" ".join(chance.choices(WORDS, k=13)).capitalize())
        if at % 3 == 0:
            parts.append(
                f" (<i>t</i>(22) = {chance.uniform(0, 4):.2f}, <i>p</i> = .{chance.randint(10, 99)})"
                f" <{sup}><a>{chance.randint(1, 40)}</a></{sup}>"
            )
        parts.append(".\n" if at % 2 else ". ")
    return "".join(parts)


def _row(chance: random.Random, columns: int) -> str:
    cells = "".join(
        f'<td align="left" rowspan="1" colspan="1">{chance.uniform(20, 60):.1f} ({chance.uniform(2, 9):.1f})</td>'
        for _ in range(columns)
    )
    return f'<tr><td align="left" rowspan="1" colspan="1">{chance.choice(WORDS)}</td>{cells}</tr>'


def _table(chance: random.Random, rows: int = 12, columns: int = 4) -> str:
    heads = "".join(f"<th>Bench {number} (n = 30)</th>" for number in range(1, columns + 1))
    body = "\n".join(_row(chance, columns) for _ in range(rows))
    return f"<table><thead><tr><th>Loaf</th>{heads}</tr></thead><tbody>{body}</tbody></table>"


def sample_html(sections: int = 10) -> bytes:
    """An article page of about 30 pages in the bakery scenario: 10 sections with a table each, 60 references."""
    chance = random.Random(20260101)
    parts = [
        "<!DOCTYPE html><html><head><meta charset='utf-8'><title>Bench scoring</title></head><body><main><h1>Bench scoring</h1>"
    ]
    for number in range(1, sections + 1):
        parts.append(f"<section class='level2'><h2>Experiment {number}</h2>")
        parts += [f"<p>{_sentences(chance, 'sup')}</p>\n" for _ in range(7)]
        parts.append(
            f"<p>Table {number}. Heights of loaves, mean (SD)</p>{_table(chance)}<p>Note. Heights in mm.</p></section>"
        )
    parts.append("<h2>References</h2><ol>")
    parts += [
        f'<li id="r">Krume P, Laib Q. {" ".join(chance.choices(WORDS, k=18))}. <i>Annals of Crust</i> <b>12</b>:101-109 (2019). <a href="https://x.example">Link</a></li>'
        for _ in range(60)
    ]
    return "".join([*parts, "</ol></main></body></html>"]).encode()


def sample_jats(sections: int = 10) -> bytes:
    """The same article in JATS."""
    chance = random.Random(20260101)
    parts = [
        "<article><front><article-meta><title-group><article-title>Bench scoring</article-title></title-group></article-meta></front><body>"
    ]
    for number in range(1, sections + 1):
        parts.append(f"<sec><title>Experiment {number}</title>")
        for _ in range(7):
            text = _sentences(chance, "sup").replace("<i>", "<italic>").replace("</i>", "</italic>")
            text = text.replace("<a>", '<xref ref-type="bibr" rid="r1">').replace("</a>", "</xref>")
            parts.append(f"<p>{text}</p>\n")
        parts.append(
            f"<table-wrap><label>Table {number}</label><caption><title>Heights of loaves, mean (SD)</title></caption>{_table(chance)}"
            "<table-wrap-foot><fn><p>Heights in mm.</p></fn></table-wrap-foot></table-wrap></sec>"
        )
    parts.append("</body><back><ref-list>")
    parts += [_reference(chance, number) for number in range(1, 61)]
    return "".join([*parts, "</ref-list></back></article>"]).encode()


def _reference(chance: random.Random, number: int) -> str:
    authors = "".join(
        f"<name><surname>{chance.choice(WORDS).title()}</surname><given-names>P</given-names></name>, "
        for _ in range(4)
    )
    facts = "<volume>12</volume>:<fpage>101</fpage>-<lpage>109</lpage>"
    return (
        f'<ref id="r{number}"><label>{number}</label><mixed-citation publication-type="journal">{authors}(<year>2019</year>)'
        f" <article-title>{' '.join(chance.choices(WORDS, k=14))}</article-title> <source>Annals of Crust</source> {facts}."
        "</mixed-citation></ref>"
    )


def bare_xml(data: bytes) -> int:
    """Parse XML and join its text."""
    return len("".join(etree.fromstring(data).itertext()))


def bare_html(data: bytes) -> int:
    """Parse HTML and join its text."""
    return len("".join(etree.fromstring(data, etree.HTMLParser(encoding="utf-8")).itertext()))


def opening_ratio(data: bytes, bare: Callable[[bytes], int], *, rounds: int = 15) -> float:
    """Time of opening a document over that of parsing it and joining its text."""
    ours, theirs = interleaved((lambda: open_document(data), lambda: bare(data)), rounds)
    return ours / theirs


def measured(paths: Iterable[str] = ()) -> list[tuple[str, float, str]]:
    """All figures of this module: what, the figure, and the bound wanted."""
    rows = [
        (
            "open_document / lxml parse and text, JATS of 30 pages",
            opening_ratio(sample_jats(), bare_xml),
            _BOUND,
        ),
        (
            "open_document / lxml parse and text, HTML of 30 pages",
            opening_ratio(sample_html(), bare_html),
            _BOUND,
        ),
    ]
    for path in map(Path, paths):
        bare = {".xml": bare_xml, ".html": bare_html, ".htm": bare_html}.get(path.suffix)
        if bare is not None:
            rows.append(
                (
                    f"open_document / lxml parse and text, {path.name}",
                    opening_ratio(path.read_bytes(), bare),
                    _BOUND,
                )
            )
    return rows
