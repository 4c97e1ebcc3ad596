"""Characters that stand for one another in manuscripts, always one for one."""

from __future__ import annotations

import unicodedata

RAISED = dict(zip("0123456789-+", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺", strict=True))
LOWERED = dict(zip("0123456789", "₀₁₂₃₄₅₆₇₈₉", strict=True))
FLAT = {ord(mark): plain for table in (RAISED, LOWERED) for plain, mark in table.items()}
"""From raised and lowered digits to those on the base line."""

_KEPT = frozenset("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺₀₁₂₃₄₅₆₇₈₉")
_ALIKE = {
    **dict.fromkeys("−–—‐‑‒―﹣－", "-"),
    **dict.fromkeys("≦⩽⪯≲", "≤"),
    **dict.fromkeys("≧⩾⪰≳", "≥"),
    **dict.fromkeys("∼~≅≃≐", "≈"),
    **dict.fromkeys("≺‹〈", "<"),
    **dict.fromkeys("≻›〉", ">"),
    **dict.fromkeys("∙⋅•・", "·"),
    **dict.fromkeys("’‘ʼ`´′", "'"),
    **dict.fromkeys("Χꭓᵪ", "χ"),
    **dict.fromkeys("ϕΦ", "φ"),
    **dict.fromkeys("∆", "Δ"),
    **dict.fromkeys("ß", "β"),
    **dict.fromkeys("ϱ", "ρ"),
    "∗": "*", "，": ",", "；": ";", "：": ":", "％": "%", "⁄": "/", "∕": "/", "⁎": "*",
    **dict.fromkeys("⫽ϭ", "="), **dict.fromkeys("⬍Ͻ", "<"), **dict.fromkeys("⬎Ͼ", ">"), **dict.fromkeys("⫺Ϫ", "-"),
    **dict.fromkeys("⫾Ϯ", "±"), **dict.fromkeys("⫻ϫ", "×"), **dict.fromkeys("⫹ϩ", "+"), "ⱕ": "≤", "ⱖ": "≥",
    "р": "p", "Р": "P", "М": "M", "Ｍ": "M", "х": "x", "Н": "H", "\t": " ", "\n": " ", "\r": " ",
}  # fmt: skip


# Two code tables of typesetting fonts: Greek as control pictures (alpha at U+2423), and the
# private copy of the symbol font (U+F000 + its own code).
_ALIKE |= {chr(0x2423 + k): greek for k, greek in enumerate("αβγδεζηθικλμνξοπρσςτυφχψω")}
_ALIKE |= {
    chr(0xF000 + code): char
    for code, char in zip(
        (
            0x3D,
            0x3C,
            0x3E,
            0xB1,
            0xB4,
            0xA3,
            0xB3,
            0x2D,
            0x63,
            0x68,
            0x61,
            0x62,
            0x6D,
            0x72,
            0x77,
            0x66,
            0xBB,
            0x44,
            0x2B,
        ),
        "=<>±×≤≥-χηαβμρωφ≈Δ+",
        strict=True,
    )
}
MISCODED = (
    frozenset("⫽ϭ⬍Ͻ⬎Ͼ⫺Ϫ⫾Ϯ⫻ϫ⫹ϩⱕⱖ")
    | {chr(0x2423 + k) for k in range(25)}
    | {chr(0xF000 + k) for k in range(256)}
)
"""Characters that only a wrong code table puts into a manuscript."""


class _Alike(dict[int, str]):
    """Maps a character to the one that the grammar knows it by, always one for one."""

    def __missing__(self, code: int) -> str:
        char = chr(code)
        plain = char
        if char in _ALIKE:
            plain = _ALIKE[char]
        elif char.isspace():
            plain = " "
        elif code > 127 and char not in _KEPT:
            folded = unicodedata.normalize("NFKC", char)
            plain = _ALIKE.get(folded, folded) if len(folded) == 1 else char
        self[code] = plain
        return plain


TABLE = _Alike()
