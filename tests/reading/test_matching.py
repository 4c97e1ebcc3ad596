"""Names of tables in a text: what is the same name, what only holds it."""

from __future__ import annotations

import pytest

from recheck.reading.matching import Vocabulary, abbreviations, stem, terms, words_of

HEIGHT, SOFTNESS = ("loaf", "height"), ("crumb", "softness")


@pytest.mark.parametrize(
    ("word", "found"),
    [("Loaves", "loave"), ("heights", "height"), ("baker's", "baker"), ("crosses", "cross"), ("batches", "batch"),
     ("recoveries", "recovery"), ("mass", "mass"), ("status", "status"), ("analysis", "analysis"), ("A", "A")],
)  # fmt: skip
def test_stems(word: str, found: str) -> None:
    assert stem(word) == found


@pytest.mark.parametrize(
    ("label", "key"),
    [
        ("Loaf height (mm), mean ± SD", HEIGHT), ("Loaf height, mm", HEIGHT), ("Loaf height (LH)", HEIGHT), ("Mean loaf height", HEIGHT),
        ("Height (week 2)", ("height", "week", "2")), ("Control (n = 34)", ("control",)), ("Men, n (%)", ("men",)),
        ("Tasting score", ("tasting", "score")), ("Second rise", ("second", "rise")), ("No training", ("no", "training")),
        ("Oven A", ("oven", "A")), ("Women, rye", ("women", "rye")), ("t", ("t",)), ("", ()),
    ],
)  # fmt: skip
def test_terms_of_a_label(label: str, key: tuple[str, ...]) -> None:
    assert terms(label) == key


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("Loaf height was greater.", [(HEIGHT, True)]),
        ("The height of the loaf differed.", [(HEIGHT, True)]),
        ("Loaf-heights differed.", [(HEIGHT, True)]),
        ("LH differed, as did crumb softness.", [(HEIGHT, True), (SOFTNESS, True)]),
        ("Final loaf height differed.", [(HEIGHT, False)]),
        ("Loaf height gain differed.", [(HEIGHT, False)]),
        ("Loaf height/width differed.", [(HEIGHT, False)]),
        ("Loaf height + mass differed.", [(HEIGHT, False)]),
        ("Non-trained bakers baked.", [(("trained",), False)]),
        ("Loaf mass and crumb height differed.", []),
        ("Height was greater.", []),
    ],
)
def test_mentions(text: str, found: list[tuple[tuple[str, ...], bool]]) -> None:
    vocabulary = Vocabulary([HEIGHT, SOFTNESS, ("trained",)], {"LH": HEIGHT})
    assert [(m.key, m.exact) for m in vocabulary.mentions(text, words_of(text))] == found


def test_the_longest_name_counts() -> None:
    vocabulary = Vocabulary([("height",), HEIGHT, ("loaf", "height", "gain")], {})
    text = "The loaf height gain differed, the loaf height did not, nor the height."
    assert [m.key for m in vocabulary.mentions(text, words_of(text))] == [
        ("loaf", "height", "gain"),
        HEIGHT,
        ("height",),
    ]


def test_abbreviations() -> None:
    texts = ["Bakers measured loaf height (LH) and the oven spring of rye (OSR). They came from Rye (UK)."]
    legends = ["CS, crumb softness; TP = tasting panel. LH: long hours"]
    assert abbreviations(texts, legends) == {"CS": SOFTNESS, "TP": ("tasting", "panel")}
    assert abbreviations(texts, []) == {"LH": HEIGHT}


def test_no_text_makes_a_pattern_backtrack() -> None:
    terms("(" * 2000 + "a, b " * 2000)
    abbreviations(["word (" * 4000], ["AB = word word " * 2000])
