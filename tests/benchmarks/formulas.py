"""How long each public array function takes beside the bare calls that its formula cannot do without."""

from __future__ import annotations

import inspect
import time
from collections.abc import Callable, Iterator
from importlib import import_module
from pkgutil import iter_modules, walk_packages

from recheck import recompute
from tests.benchmarks import formula_rows
from tests.benchmarks.formula_rows.row import Row

ROUNDS = 3


def functions() -> dict[str, Callable[..., object]]:
    """Every public function of the package, as `module.function`, from the module that defines it."""
    found = {}
    prefix = recompute.__name__ + "."
    for info in walk_packages(recompute.__path__, prefix):
        module = import_module(info.name)
        for name, value in vars(module).items():
            if name.startswith("_") or not callable(value) or inspect.isclass(value):
                continue
            if getattr(value, "__module__", "") == info.name and value.__name__ == name:
                found[f"{info.name.removeprefix(prefix)}.{name}"] = value
    return found


def table() -> tuple[dict[str, Row], dict[str, str]]:
    """All rows and all exempt functions of the modules of `formula_rows`; raises ValueError for a name told twice."""
    rows: dict[str, Row] = {}
    exempt: dict[str, str] = {}
    for info in iter_modules(formula_rows.__path__):
        module = import_module(f"{formula_rows.__name__}.{info.name}")
        for name in (*getattr(module, "ROWS", {}), *getattr(module, "EXEMPT", {})):
            if name in rows or name in exempt:
                raise ValueError(f"{name} stands twice in the table of formulas")
        rows |= getattr(module, "ROWS", {})
        exempt |= getattr(module, "EXEMPT", {})
    return rows, exempt


def is_exempt(name: str, exempt: dict[str, str]) -> bool:
    """Tell whether a function, or with `module.*` its whole module or package, needs no row."""
    parts = name.split(".")
    wholes = (".".join(parts[:i]) + ".*" for i in range(1, len(parts)))
    return name in exempt or any(whole in exempt for whole in wholes)


def ratio(name: str, rounds: int = ROUNDS) -> float:
    """Fastest run of the function over the fastest of its bare calls, both taken in turn."""
    row, function = table()[0][name], functions()[name]
    arguments = row.arguments()
    ours, bare = [], []
    for _ in range(rounds):
        bare.append(_seconds(lambda: row.bare(*arguments)))
        ours.append(_seconds(lambda: function(*arguments, **row.options)))
    return min(ours) / min(bare)


def measured() -> Iterator[tuple[str, float, str]]:
    """Every function in the table with its ratio and the bound that is wanted."""
    for name, row in sorted(table()[0].items()):
        yield f"{name} / its bare calls, {row.size:.0e} rows", ratio(name), f"at most {row.at_most:g}"


def _seconds(run: Callable[[], object]) -> float:
    start = time.perf_counter()
    run()
    return time.perf_counter() - start


if __name__ == "__main__":
    import sys

    for name in sorted(table()[0]):
        if not sys.argv[1:] or any(part in name for part in sys.argv[1:]):
            print(f"{ratio(name, 3):8.2f}  {name}", flush=True)
