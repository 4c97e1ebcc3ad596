"""Slips are named only where they lead back to agreement."""

from decimal import Decimal

from recheck.model import Printed
from recheck.reconcile.slips import candidates, slip_remedies


def number(text: str, relation: str = "=") -> Printed:
    plain = text.replace("−", "-")
    return Printed(text, Decimal(plain), len(plain.partition(".")[2]), relation)


def names(text: str, relation: str = "=") -> dict[str, str]:
    return {
        n.text if n.relation == "=" else f"{n.relation} {n.text}": words
        for n, words in candidates(number(text, relation))
    }


def test_swapped_digits():
    assert names("1.2")["2.1"] == "digits swapped"
    assert names("−1.2")["−2.1"] == "digits swapped"


def test_moved_point_keeps_the_digits():
    found = names(".30")
    assert found[".03"] == "digits swapped"
    assert found["3.0"] == "decimal point moved"


def test_relation_turned():
    assert names(".05", "<")["> .05"] == "< for >"
    assert names(".001")["< .001"] == "= for <"


def test_the_number_itself_is_never_a_candidate():
    assert "1.1" not in names("1.1")


def test_remedy_names_the_one_slip_that_mends():
    numbers = {"sd1": number("1.2"), "t": number("3.4")}
    remedies = slip_remedies(numbers, lambda name, n: name == "sd1" and n.value == Decimal("2.1"))
    assert [(r.kind, r.quantity, r.change) for r in remedies] == [("slip", "sd1", "1.2 → 2.1")]


def test_a_digit_that_could_be_many_is_not_named():
    numbers = {"t": number("3.4")}
    assert slip_remedies(numbers, lambda name, n: Decimal("5") < n.value < Decimal("5.0001")) == ()
    assert not slip_remedies(
        numbers, lambda name, n: n.value in (Decimal("3.6"), Decimal("3.7"), Decimal("3.8"))
    )
