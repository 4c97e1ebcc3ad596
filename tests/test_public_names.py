import subprocess
import sys
import tomllib
from pathlib import Path

import pytest

import recheck
import recheck.model

PUBLIC = ["Audit", "RecheckError", "__version__", "audit", "audit_text"]


def test_the_public_names_are_these():
    assert recheck.__all__ == PUBLIC
    assert len(PUBLIC) <= 10


@pytest.mark.parametrize("name", PUBLIC)
def test_every_public_name_can_be_imported_and_says_what_it_is(name):
    assert getattr(recheck, name).__doc__


def test_the_version_is_that_of_the_project_file():
    project = tomllib.loads((Path(__file__).parents[1] / "pyproject.toml").read_text(encoding="utf-8"))
    assert project["project"]["version"] == recheck.__version__


def test_other_names_are_refused():
    with pytest.raises(AttributeError, match="no attribute 'guess'"):
        _ = recheck.guess


def test_the_nouns_of_the_model_are_sorted_and_there():
    names = recheck.model.__all__
    constants = [name for name in names if name.isupper()]
    nouns = [name for name in names if name[:1].isupper() and not name.isupper()]
    assert names == sorted(constants) + sorted(nouns) + sorted(name for name in names if name.islower())
    assert all(hasattr(recheck.model, name) for name in names)


def test_importing_recheck_costs_next_to_nothing():
    script = (
        "import sys, recheck; print(sorted({'numpy', 'scipy', 'click', 'recheck.model'} & set(sys.modules)))"
    )
    done = subprocess.run(
        [sys.executable, "-c", script], capture_output=True, text=True, timeout=60, check=True
    )
    assert done.stdout == "[]\n"


def test_the_formulas_are_at_hand_by_name():
    from recheck import recompute

    assert recompute.__doc__
