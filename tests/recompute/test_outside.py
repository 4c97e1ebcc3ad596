"""Every public function of recompute is held to something outside by a test that names it, and names its own source."""

from __future__ import annotations

import ast
import inspect
import sys
import warnings
from collections.abc import Callable, Iterator
from importlib import import_module
from pathlib import Path
from types import ModuleType

import numpy as np
import pytest
import regex
from numpy.typing import NDArray

from recheck import recompute
from tests.benchmarks.formulas import functions, table

ROWS = {name: row for name, row in table()[0].items() if name != "contingency.expected_counts"}
"""Functions on rows: all of the table of speeds but the one of whole tables."""
PREFIX = recompute.__name__ + "."
MACHINERY = ("arrays.", "granularity.", "power.search.")
"""Interval arithmetic, whole-number engines and root finding: their proofs stand in their docstrings, in place of a source."""
PLAIN = regex.compile(r"\b[Bb]y definition\b|\b(ibidem|as above|Cochrane\s+Handbook)\b|\b(1[89]|20)\d\d\b")
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


@pytest.mark.parametrize("name", sorted(ROWS))
def test_a_row_is_its_own(name: str):
    """Nothing that stands in one row changes another, and a row alone is what it is among others."""
    row = ROWS[name]
    arguments = [np.array(column) for column in row.arguments(12)]
    before = _parts(functions()[name](*arguments, **row.options))
    alone = _parts(functions()[name](*(column[1] for column in arguments), **row.options))
    for one, among in zip(alone, before, strict=True):
        assert np.allclose(one, among[1], rtol=1e-12, atol=1e-14, equal_nan=True)
    for column in arguments:
        for strange in (np.nan, 0.0, np.inf):
            kept, column[0] = np.array(column[0]), strange
            with np.errstate(all="ignore"), warnings.catch_warnings():
                warnings.simplefilter("ignore", RuntimeWarning)
                after = _parts(functions()[name](*arguments, **row.options))
            column[0] = kept
            assert all(
                np.allclose(a[1:], b[1:], rtol=1e-12, atol=1e-14, equal_nan=True)
                for a, b in zip(before, after, strict=True)
            )


@pytest.mark.parametrize("name", sorted(name for name in ROWS if name.endswith("_bounds")))
def test_an_unknown_end_of_a_box_leaves_no_two_ends(name: str):
    """Where an argument is nan, no two ends of a range are told as if it were not there."""
    row = ROWS[name]
    arguments = [np.array(column) for column in row.arguments(12)]
    for column in arguments:
        kept, column[0] = np.array(column[0]), np.nan
        with np.errstate(all="ignore"):
            parts = _parts(functions()[name](*arguments, **row.options))
        column[0] = kept
        assert any(np.isnan(part[0]) for part in parts)


def _parts(found: object) -> list[NDArray[np.float64]]:
    """The arrays of a result, of a pair of ends, or of two such pairs."""
    return (
        [part for inner in found for part in _parts(inner)]
        if isinstance(found, tuple)
        else [np.asarray(found)]
    )


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
    """A function's name as `functions` has it; one that keeps its results is no plain function."""
    if inspect.isclass(value) or not callable(value) or not hasattr(value, "__name__"):
        return set()
    return {f"{value.__module__.removeprefix(PREFIX)}.{value.__name__}"}


def _has_source(name: str, function: Callable[..., object], seen: tuple[str, ...]) -> bool:
    """A source in the docstring or its module's; else that of a function that it names in backquotes, as `*_bounds` do."""
    module = sys.modules[function.__module__]
    text = function.__doc__ or ""
    if name.startswith(MACHINERY) or PLAIN.search(text) or PLAIN.search(module.__doc__ or ""):
        return bool(text)
    others, home = functions(), name.rpartition(".")[0]
    referred = [*regex.findall(r"`([\w.]+)`", text), function.__name__.removesuffix("_bounds")]
    near = (
        o
        for word in referred
        for o in (word, f"{home}.{word}", *(full for full in others if full.endswith(f".{word}")))
    )
    return any(
        _has_source(other, others[other], (*seen, name))
        for other in near
        if other in others and other not in (*seen, name)
    )
