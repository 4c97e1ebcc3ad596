"""Two numbers of a cell that only a comma divides: the `0.40,0.52` of `0.46 (0.40,0.52)`."""

from __future__ import annotations

from collections.abc import Sequence

from recheck.reading.tokens import Token


def divided(found: list[Token], comma: bool) -> list[Token]:
    """Take apart two numbers that only a comma divides: the `0.40,0.52` and the `12,25` of `0.46 (12,25)`."""
    parts: list[Token] = []
    for index, token in enumerate(found):
        if token.kind != "num" or "," not in token.text or not _two_numbers(found, index, comma):
            parts.append(token)
            continue
        head, tail = token.text.split(",")
        middle = token.start + len(head)
        parts.append(_part(token, head, token.start, middle))
        parts.append(Token("sign", ",", ",", middle, middle + 1, False))
        parts.append(_part(token, tail, middle + 1, token.end, spaced=False))
    return parts


def _part(token: Token, text: str, start: int, end: int, *, spaced: bool | None = None) -> Token:
    return token._replace(
        text=text, low=text, start=start, end=end, spaced=token.spaced if spaced is None else spaced
    )


def _two_numbers(found: Sequence[Token], index: int, comma: bool) -> bool:
    text = found[index].text
    if text.count(",") != 1:
        return False
    head, tail = text.split(",")
    if "." in text or "·" in text:
        if all(part.count(".") + part.count("·") == 1 for part in (head, tail)):
            return True
        return not comma and ("." in head or "·" in head)
    before = found[index - 1].text if index else ""
    after = found[index + 1].text if index + 1 < len(found) else ""
    opened = before in ("(", "[") or (before == "-" and index > 1 and found[index - 2].text in ("(", "["))
    return not comma and len(tail) != 3 and opened and after in (")", "]")
