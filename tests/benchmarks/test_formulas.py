"""Every public array function stands in the table of speeds, and its row fits it."""

import numpy as np
import pytest

from tests.benchmarks.formulas import functions, is_exempt, table

ROWS, EXEMPT = table()


def test_every_function_is_measured_or_says_why_not():
    names = functions().keys()
    assert [name for name in sorted(names - ROWS.keys()) if not is_exempt(name, EXEMPT)] == []
    assert sorted(ROWS.keys() - names) == []
    assert [name for name in EXEMPT if not name.endswith(".*") and name not in names] == []
    assert all(reason for reason in EXEMPT.values())


@pytest.mark.parametrize("name", sorted(ROWS))
def test_the_row_of_a_function_fits_it(name: str):
    row = ROWS[name]
    arguments = row.arguments(24)
    found = functions()[name](*arguments, **row.options)
    parts = found if isinstance(found, tuple) else (found,)
    arrays = [np.asarray(part) for pair in parts for part in (pair if isinstance(pair, tuple) else (pair,))]
    assert all(array.shape[:1] == arguments[0].shape[:1] for array in arrays)
    assert any(np.isfinite(array).any() for array in arrays)
    row.bare(*arguments)
