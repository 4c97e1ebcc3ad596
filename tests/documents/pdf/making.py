"""PDFs drawn for the tests, in the bakery scenario."""

from __future__ import annotations

import io
from collections.abc import Callable, Iterable

from reportlab.lib.pdfencrypt import StandardEncryption
from reportlab.pdfgen.canvas import Canvas

from recheck.documents import open_document
from recheck.model import Document, Passage

ROMAN, BOLD, ITALIC, SYMBOL = "Times-Roman", "Times-Bold", "Times-Italic", "Symbol"
Draw = Callable[[Canvas], None]

PROSE = (
    "The apprentices baked four loaves on each of the mornings and a panel of tasters scored them from one to"
    " seven without knowing which bench had shaped the dough. Loaves that were proofed overnight rose higher"
    " than those that were baked on the same day and their crumb was rated as more open by most of the panel."
    " Before the training nobody could tell the benches apart and afterwards the difference was plain to all of"
    " them even when the loaves had been left to cool in the cellar for a day and were cut by another baker."
)


def prose(start: int = 0) -> str:
    """Running text that differs from page to page: the words of `PROSE`, begun elsewhere."""
    words = PROSE.replace(".", "").split()
    turned = words[7 * start % len(words) :] + words[: 7 * start % len(words)]
    return "On day " + "abcdefghij"[start % 10] + " " + " ".join(turned) + "."


def pdf(*pages: Draw, size: tuple[float, float] = (595, 842), **options: object) -> bytes:
    """A PDF with one page for each drawing function."""
    stream = io.BytesIO()
    canvas = Canvas(stream, pagesize=size, invariant=True, **options)
    for draw in pages:
        draw(canvas)
        canvas.showPage()
    canvas.save()
    return stream.getvalue()


def locked(draw: Draw, password: str) -> bytes:
    """An encrypted PDF; an empty password opens without asking."""
    return pdf(draw, encrypt=StandardEncryption(password, ownerPassword="baker", strength=128))


def line(canvas: Canvas, x: float, y: float, text: str, font: str = ROMAN, size: float = 10) -> None:
    """One line of text, y counted from the top of the page."""
    canvas.setFont(font, size)
    canvas.drawString(x, canvas._pagesize[1] - y, text)


def rich(canvas: Canvas, x: float, y: float, *runs: tuple[str, str, float, float]) -> float:
    """Runs of (text, font, size, rise) one after another; gives the x at which they end."""
    for text, font, size, rise in runs:
        line(canvas, x, y - rise, text, font, size)
        x += canvas.stringWidth(text, font, size)
    return x


def wrapped(
    canvas: Canvas, x: float, y: float, width: float, text: str, *, size: float = 10, leading: float = 12,
    indent: float = 0,
) -> float:  # fmt: skip
    """A justified paragraph; gives the y of the line that would come next."""
    rows: list[list[str]] = [[]]
    room = width - indent
    for word in text.split():
        if canvas.stringWidth(" ".join([*rows[-1], word]), ROMAN, size) > room:
            rows.append([])
            room = width
        rows[-1].append(word)
    for at, row in enumerate(rows):
        start = x + (indent if at == 0 else 0)
        bare = sum(canvas.stringWidth(word, ROMAN, size) for word in row)
        space = canvas.stringWidth(" ", ROMAN, size)
        if at < len(rows) - 1 and len(row) > 1:
            space = (width - (start - x) - bare) / (len(row) - 1)
        for word in row:
            line(canvas, start, y, word, size=size)
            start += canvas.stringWidth(word, ROMAN, size) + space
        y += leading
    return y


def opened(data: bytes, *, reader: str = "pdfium", **options: object) -> Document:
    """The document that an engine and our assembly make of a PDF."""
    return open_document(data, name="bench.pdf", reader=reader, **options)  # type: ignore[arg-type]


def texts(document: Document, *kinds: str) -> list[str]:
    """The texts of the passages of some kinds, in order."""
    return [passage.text for passage in document.passages if passage.kind in (kinds or ("body",))]


def containing(document: Document, words: str) -> Passage:
    """The only passage that contains some words."""
    found = [passage for passage in document.passages if words in passage.text]
    assert len(found) == 1, [passage.text for passage in document.passages]
    return found[0]


def quoted(passages: Iterable[Passage]) -> str:
    """All text, for a look at the order."""
    return "\n".join(passage.text for passage in passages)
