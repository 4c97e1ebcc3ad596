"""What the checks do, in words: the list of them, and one explained."""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterable, Sequence
from itertools import groupby
from typing import Any, Protocol

from recheck.model import STATED, VERDICTS, shown
from recheck.reports.look import Look
from recheck.reports.words import CAUTION, KINDS, MEANING, REVERSAL, ROUNDED, listed

TOPICS = {
    "words": "what verdicts, tolerances and other words of the reports mean",
    "ranking": "the order in which findings are listed",
}
"""What `recheck methods` explains beside the checks."""


class Described(Protocol):
    """The description of a check, as its registry keeps it."""

    @property
    def name(self) -> str:
        """Its permanent name."""

    @property
    def title(self) -> str:
        """What it compares, in one sentence."""

    @property
    def kinds(self) -> Sequence[Any]:
        """The kinds of claims that it looks at."""

    @property
    def quantity(self) -> str:
        """The quantity whose printed value it judges."""

    @property
    def needs(self) -> Sequence[str]:
        """Quantities without which it does not run."""

    @property
    def beside(self) -> str:
        """What else must be read with them, in words."""

    @property
    def formula(self) -> str:
        """The relation that must hold."""

    @property
    def source(self) -> str:
        """Where the relation is published."""

    @property
    def limits(self) -> str:
        """Where it does not hold."""

    @property
    def run(self) -> Callable[..., Any]:
        """The function; the first line of its module's docstring is the heading of its family."""


def methods_list(checks: Iterable[Described], look: Look) -> str:
    """List all checks by family, then the other topics."""
    checks = list(checks)
    column = max(len(name) for name in [*TOPICS, *(check.name for check in checks)]) + 2
    lines = []
    for module, family in groupby(checks, key=lambda check: check.run.__module__):
        lines += [look.paint(line, "heading") for line in look.paragraph(_heading(module))]
        lines += [line for check in family for line in _entry(check.name, check.title, column, look)]
        lines.append("")
    lines.append(look.paint("Other pages", "heading"))
    lines += [line for name, title in TOPICS.items() for line in _entry(name, title, column, look)]
    lines += [
        "",
        *look.paragraph("`recheck methods NAME` explains one: formula, needs, source, limits, examples."),
    ]
    return "\n".join(lines) + "\n"


def _heading(module: str) -> str:
    text = (sys.modules[module].__doc__ or module).strip().splitlines()[0]
    return text.rstrip(".")


def _entry(name: str, title: str, column: int, look: Look) -> list[str]:
    first, *more = look.paragraph(title, indent=column + 2)
    return [f"  {name:<{column}}{first[column + 2 :]}", *more]


def method_text(check: Described, look: Look) -> str:
    """Explain one check."""
    parts = [
        ("looks at", listed(KINDS[kind][1] for kind in check.kinds)),
        ("judges", shown(check.quantity)),
        (
            "needs",
            "; ".join(filter(None, (listed(shown(quantity) for quantity in check.needs), check.beside))),
        ),
        ("formula", check.formula),
        ("source", check.source),
        ("limits", check.limits),
    ]
    lines = [look.paint(check.name, "heading"), *look.paragraph(check.title), ""]
    for label, text in parts:
        lines += look.labelled(label, [text])
    lines += ["", look.paint("Examples, by the verdict that each gets", "heading")]
    for verdict in VERDICTS:
        examples: Sequence[str] = getattr(check, verdict, ())
        lines += look.labelled(verdict, [line for example in examples for line in _example(example)])
    return "\n".join(lines) + "\n"


def _example(example: str) -> list[str]:
    """A sentence in quotes; a table, or text of several paragraphs, line by line."""
    lines = [line for line in example.splitlines() if line.strip()]
    return lines if len(lines) > 1 else [f"“{example}”"]


def ranking_text(rule: str, look: Look) -> str:
    """The rule by which findings are ordered, its numbered lines each on its own."""
    items: list[str] = []
    for line in rule.splitlines():
        if items and not line[:1].isdigit() and (line.startswith(" ") or not items[-1][:1].isdigit()):
            items[-1] += f" {line.strip()}"
        else:
            items.append(line)
    lines = [look.paint("The order of findings", "heading"), ""]
    for item in items:
        lines += look.paragraph(item, hanging=3 if item[:1].isdigit() else 0)
    return "\n".join(lines) + "\n"


def words_text(roundings: Iterable[str], look: Look) -> str:
    """What the verdicts, the tolerance and the keys of `stated` mean.

    `roundings` are the readings of rounding that are tried, each in words.
    """
    lines = [look.paint("Verdicts, worst first", "heading")]
    for word, meaning in (*MEANING.items(), ("reversal", REVERSAL)):
        lines += look.labelled(word, [meaning])
    lines += ["", look.paint("What a printed number stands for", "heading")]
    lines += look.labelled("rounded", [ROUNDED])
    lines += look.labelled("else", [f"{words} (conditional)" for words in roundings])
    lines += ["", look.paint("What a manuscript can say of a result (`stated` in the JSON)", "heading")]
    column = max(map(len, STATED)) + 2
    lines += [line for word, meaning in STATED.items() for line in _entry(word, meaning, column, look)]
    return "\n".join([*lines, "", *look.paragraph(CAUTION)]) + "\n"
