"""The README shows real output: every block that begins with a command, and every example of Python, is run again."""

import doctest
import re
import shlex
import subprocess
import sys
from pathlib import Path

import pytest

README = Path(__file__).resolve().parents[1] / "README.md"
BLOCKS = re.findall(r"```\n\$ (.+?)\n(.+?)\n```", README.read_text(encoding="utf-8"), re.DOTALL)


@pytest.mark.parametrize(("command", "shown"), BLOCKS, ids=[command for command, _ in BLOCKS])
def test_shown_output_is_what_the_command_prints(command, shown):
    told, _, command = command.rpartition(" | ")
    text = told.removeprefix("echo ").strip('"')
    words = [sys.executable, "-m", *shlex.split(command)]
    done = subprocess.run(
        words, input=text, capture_output=True, encoding="utf-8", cwd=README.parent, timeout=60,
        env={"COLUMNS": "92", "PYTHONIOENCODING": "utf-8", "NO_COLOR": "1", "PATH": ""},
    )  # fmt: skip
    assert shown in done.stdout


def test_there_is_output_to_hold_it_to():
    assert len(BLOCKS) >= 2


def test_shown_values_are_what_python_gives():
    failed, tried = doctest.testfile(str(README), module_relative=False, encoding="utf-8")
    assert tried >= 10
    assert not failed
