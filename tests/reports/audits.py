"""Audits made by hand, for tests of what reports show."""

from __future__ import annotations

from decimal import Decimal

from recheck.model import (
    Audit,
    Claim,
    DocumentFacts,
    Finding,
    Implied,
    Place,
    Printed,
    Remedy,
    Settings,
)

FACTS = DocumentFacts("rise.pdf", "pdf", "0" * 64, 6, 4210, "Training apprentices in scoring loaves")


def printed(text: str, decimals: int, relation: str = "=") -> Printed:
    return Printed(text, Decimal(text), decimals, relation)  # type: ignore[arg-type]


def place(quote: str, page: int = 4, **more: object) -> Place:
    return Place(quote, page=page, section="Results", **more)  # type: ignore[arg-type]


QUOTE = "Trained apprentices baked taller loaves, t(28) = 2.20, p = .010"
T_TEST = Claim(
    "c1",
    "t-test",
    place(QUOTE, box=(72.0, 301.5, 288.25, 313.0)),
    {"t": printed("2.20", 2), "df": printed("28", 0), "p": printed(".010", 3)},
    notes=("the sign = was read through a font table inferred from the whole document",),
)
SUMMARY = Claim("c2", "group-summary", place("M = 5.00 (SD = 1.65)", 5), {"mean": printed("5.00", 2)})
REVERSED = Finding(
    "f1",
    "p-from-t",
    "inconsistent",
    ("c1",),
    "p",
    "= .010",
    (Implied(0.03583566, 0.03661912), Implied(0.98169044, 0.98208217, "a one-tailed test")),
    "p = .010 is printed; t = 2.20, df = 28 imply 0.03584 to 0.03662.",
    T_TEST.place,
    tolerance="t = 2.20 stands for 2.195 to 2.205; p = .010 stands for 0.0095 to 0.0105; df taken as exact",
    question="Could you check p = .010 on page 4, and say how it was computed?",
    gap=25.3,
    reversal=True,
    reconciled_by=(Remedy("number", "p", "p would have to be another", 0.03583566, 0.03661912),),
    rank=1,
)
IMPOSSIBLE = Finding(
    "f2",
    "r-in-range",
    "impossible",
    ("c3",),
    "r",
    "= 1.32",
    (Implied(-1.0, 1.0),),
    "r = 1.32 is printed; a correlation lies between −1 and 1.",
    place("r(40) = 1.32, p < .001", 5),
    question="Could you check r = 1.32 on page 5?",
    rank=2,
)
CONDITIONAL = Finding(
    "f3",
    "p-from-t",
    "conditional",
    ("c1",),
    "p",
    "= .018",
    (Implied(0.0179, 0.0183, "a one-tailed test"),),
    "p = .018 is printed; t = 2.20, df = 28 imply 0.03584 to 0.03662. They agree only under what the text "
    "does not state: a one-tailed test.",
    place("t(28) = 2.20, p = .018"),
    assumptions=("a one-tailed test",),
    rank=3,
)
AGREES = Finding(
    "f4",
    "p-from-F",
    "agrees",
    ("c4",),
    "p",
    "= .002",
    (),
    "agrees",
    place("F(1, 38) = 11.2, p = .002", 2),
    rank=4,
)
UNCHECKED = Finding(
    "f5",
    "t-from-groups",
    "unchecked",
    ("c1",),
    "t",
    "= 2.20",
    (Implied(float("-inf"), float("inf")),),
    "these df belong to another model",
    place("t(28) = 2.20"),
    rank=5,
)


def audit(
    *findings: Finding, claims: tuple[Claim, ...] = (T_TEST, SUMMARY), notes: tuple[str, ...] = ()
) -> Audit:
    return Audit(FACTS, Settings(), claims, findings, notes)


FULL = audit(
    REVERSED,
    IMPOSSIBLE,
    CONDITIONAL,
    AGREES,
    UNCHECKED,
    notes=("page 3 has no text layer: run OCR on it first",),
)
EMPTY = audit(claims=())
