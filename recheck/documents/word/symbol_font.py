"""The Symbol font: which character each of its codes prints."""

from __future__ import annotations

_LETTERS = (
    ("ABGDEZHQIKLMNXOPRSTUFCYW", "ΑΒΓΔΕΖΗΘΙΚΛΜΝΞΟΠΡΣΤΥΦΧΨΩ"),
    ("abgdezhqiklmnxoprstufcyw", "αβγδεζηθικλμνξοπρστυφχψω"),
    ("VJvj", "ςϑϖϕ"),
    ("\"$'*-@\\^`~", "∀∃∋∗−≅∴⊥‾∼"),
)
_SIGNS = {
    0xA2: "′", 0xA3: "≤", 0xA4: "⁄", 0xA5: "∞", 0xA6: "ƒ", 0xAB: "↔", 0xAC: "←", 0xAD: "↑", 0xAE: "→", 0xAF: "↓",
    0xB0: "°", 0xB1: "±", 0xB2: "″", 0xB3: "≥", 0xB4: "×", 0xB5: "∝", 0xB6: "∂", 0xB7: "•", 0xB8: "÷", 0xB9: "≠",
    0xBA: "≡", 0xBB: "≈", 0xBC: "…", 0xC5: "⊕", 0xC6: "∅", 0xC7: "∩", 0xC8: "∪", 0xC9: "⊃", 0xCC: "⊂", 0xCE: "∈",
    0xCF: "∉", 0xD0: "∠", 0xD1: "∇", 0xD2: "®", 0xD3: "©", 0xD4: "™", 0xD5: "∏", 0xD6: "√", 0xD7: "⋅", 0xD8: "¬",
    0xD9: "∧", 0xDA: "∨", 0xE1: "〈", 0xE5: "∑", 0xF1: "〉", 0xF2: "∫", 0xE2: "®", 0xE3: "©", 0xE4: "™",
}  # fmt: skip
"""Adobe Symbol encoding (Unicode consortium, ADOBE/symbol.txt); codes below 0x7F not listed print themselves."""

_PRIVATE = 0xF000
_BELOW: dict[int, str] = {
    ord(code): char for codes, chars in _LETTERS for code, char in zip(codes, chars, strict=True)
}
_TABLE: dict[int, str] = _BELOW | {
    _PRIVATE + code: (_BELOW | _SIGNS).get(code, chr(code) if code < 0x7F else "\ufffd")
    for code in range(0x20, 0x100)
}
_PRIVATE_ALONE = {code: char for code, char in _TABLE.items() if code >= _PRIVATE}
_PICTURES = ("wingdings", "webdings", "zapf dingbats", "mt extra", "marlett")


def printed(text: str, font: str) -> str:
    """What a text prints in a font: letters in Symbol are Greek, and private codes mean Symbol unless the font is of pictures."""
    if font.lower().startswith("symbol"):
        return text.translate(_TABLE)
    if text.isascii():
        return text
    return text if font.lower().startswith(_PICTURES) else text.translate(_PRIVATE_ALONE)


def printed_code(code: str, font: str) -> str:
    """What the `w:char` of a `w:sym` prints; empty if it is no number, or a picture."""
    try:
        number = int(code, 16)
    except ValueError:
        return ""
    if font.lower().startswith(_PICTURES):
        return "□"
    if font.lower().startswith("symbol") and number < 0x100:
        number += _PRIVATE
    return printed(chr(number), font) if 0 < number < 0x110000 and not 0xD800 <= number < 0xE000 else ""
