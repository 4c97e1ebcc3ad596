"""Every public function of recompute is held to something outside by a test that names it, and names its own source."""

from __future__ import annotations

import ast
import inspect
import sys
from collections.abc import Callable, Iterator
from importlib import import_module
from pathlib import Path
from types import ModuleType

import regex

from recheck import recompute
from tests.benchmarks.formulas import functions

PREFIX = recompute.__name__ + "."
MACHINERY = ("arrays.", "granularity.", "power.search.")
"""Interval arithmetic, whole-number engines and root finding: their proofs stand in their docstrings, in place of a source."""
PLAIN = regex.compile(r"\b[Bb]y definition\b|\b(ibidem|as above|Cochrane Handbook)\b|\b(1[89]|20)\d\d\b")
"""A year, a work without one, a work named further up, or that there is nothing to cite."""


def test_every_function_is_named_in_a_test():
    tests = Path(__file__).parent.rglob("test_*.py")
    named = {name for path in tests if path != Path(__file__) for name in _named(path)}
    assert sorted(functions().keys() - named) == []


def test_every_function_names_its_source():
    assert [
        name for name, function in sorted(functions().items()) if not _has_source(name, function, ())
    ] == []


def test_the_names_are_found():
    """The first test cannot fail if its search finds what is not there."""
    here = _named(Path(__file__).parent / "test_two_groups.py")
    assert "two_groups.t_pooled" in here
    assert "risks.odds_ratio" not in here


def _named(path: Path) -> set[str]:
    """Functions of recompute that a test file imports, or reaches as attributes or by strings through their module."""
    tree = ast.parse(path.read_text())
    modules: dict[str, ModuleType] = {}
    found: set[str] = set()
    for alias, value in _imported(tree):
        if isinstance(value, ModuleType):
            modules[alias] = value
        else:
            found |= _full(value)
    for node in ast.walk(tree):
        if isinstance(node, ast.Attribute) and isinstance(node.value, ast.Name) and node.value.id in modules:
            found |= _full(getattr(modules[node.value.id], node.attr, None))
        elif isinstance(node, ast.Constant) and isinstance(node.value, str) and node.value.isidentifier():
            found |= {
                name for module in modules.values() for name in _full(getattr(module, node.value, None))
            }
    return found


def _imported(tree: ast.AST) -> Iterator[tuple[str, object]]:
    """What a file imports from recompute, modules and functions, by the name it has there."""
    for node in ast.walk(tree):
        if not isinstance(node, ast.ImportFrom) or not (node.module or "").startswith(
            recompute.__name__.split(".")[0]
        ):
            continue
        home = import_module(node.module or "")
        for alias in node.names:
            if not hasattr(home, alias.name):
                import_module(f"{node.module}.{alias.name}")
            yield alias.asname or alias.name, getattr(home, alias.name)


def _full(value: object) -> set[str]:
    module = getattr(value, "__module__", None) or ""
    return {f"{module.removeprefix(PREFIX)}.{value.__name__}"} if inspect.isfunction(value) else set()


def _has_source(name: str, function: Callable[..., object], seen: tuple[str, ...]) -> bool:
    """A source in the docstring or its module's; else that of a function that it names in backquotes, as `*_bounds` do."""
    module = sys.modules[function.__module__]
    text = function.__doc__ or ""
    if name.startswith(MACHINERY) or PLAIN.search(text) or PLAIN.search(module.__doc__ or ""):
        return bool(text)
    others = functions()
    referred = {word for word in regex.findall(r"`([\w.]+)`", text)} | {
        function.__name__.removesuffix("_bounds")
    }
    return any(
        _has_source(other, others[other], (*seen, name))
        for word in referred
        for other in (f"{name.rpartition('.')[0]}.{word}", *(o for o in others if o.endswith(f".{word}")))
        if other in others and other != name and other not in seen
    )
