import io
import json
import os
import subprocess
import sys
from pathlib import Path

import click
import pytest
from jsonschema import validate

from recheck.cli import DISCREPANT, DONE, INTERRUPTED, OUTPUT_LOST, UNREAD, WRONG_USE, commands, main
from recheck.reports.json import audit_schema

# Two-tailed p of t = 2.20 on 28 df is .0362 (R 4.2.2: 2 * pt(-2.20, 28)).
CLEAN = "Trained apprentices baked taller loaves, t(28) = 2.20, p = .036."
WRONG = "Trained apprentices baked taller loaves, t(28) = 2.20, p = .010."
PLAIN = "The loaves rose overnight and were scored in the morning."


@pytest.fixture
def files(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    for name, text in (("clean.txt", CLEAN), ("wrong.txt", WRONG), ("plain.txt", PLAIN), ("empty.txt", "")):
        Path(name).write_text(text, encoding="utf-8")
    return tmp_path


@pytest.fixture
def run(files, capsysbinary):
    def run_command(*arguments):
        status = main(arguments)
        out, err = capsysbinary.readouterr()
        return status, out.decode("utf-8"), err.decode("utf-8")

    return run_command


def started(*arguments, **more):
    home = Path(__file__).parents[1]
    environment = {**os.environ, "PYTHONPATH": str(home), **more.pop("env", {})}
    return subprocess.run([sys.executable, "-m", "recheck", *arguments], env=environment, timeout=60, **more)


@pytest.mark.parametrize(
    ("names", "status"),
    [
        (["clean.txt"], DONE),
        (["plain.txt"], DONE),
        (["wrong.txt"], DISCREPANT),
        (["missing.txt"], UNREAD),
        (["wrong.txt", "clean.txt"], DISCREPANT),
        (["missing.txt", "wrong.txt", "clean.txt"], UNREAD),
        ([], WRONG_USE),
        (["clean.txt", "--alpha", "1.5"], WRONG_USE),
        (["clean.txt", "--alpha", "nan"], WRONG_USE),
        (["clean.txt", "--reader", "eyes"], WRONG_USE),
        (["clean.txt", "--scores", "crumb"], WRONG_USE),
        (["clean.txt", "--scores", "crumb: 7..1"], WRONG_USE),
        (["clean.txt", "--scores", "crumb: 1..7"], DONE),
        (["-", "-"], WRONG_USE),
        (["clean.txt", "--json", "--all"], WRONG_USE),
    ],
)
def test_exit_statuses(run, names, status):
    assert run("audit", *names)[0] == status


def test_a_discrepancy_is_printed_with_its_quote(run):
    _, out, err = run("audit", "wrong.txt")
    assert "t(28) = 2.20, p = .010" in out and "0.0358" in out
    assert err == ""


def test_scores_that_are_told_are_used_and_kept(run, tmp_path):
    Path("scores.txt").write_text("Crumb scores rose (M = 4.19, SD = 1.17, n = 28).", encoding="utf-8")
    assert run("audit", "scores.txt")[0] == DONE
    # No 28 whole numbers have a mean from 4.185 to 4.195: 117/28 is 4.179, 118/28 is 4.214.
    status, out, _ = run("audit", "--scores", "crumb score: 1..7", "scores.txt")
    assert status == DISCREPANT and "crumb score: 1..7" in out
    record = json.loads(run("audit", "--json", "--scores", "crumb score: 1..7", "scores.txt")[1])
    assert record["settings"]["scores"] == ["crumb score: 1..7"]
    validate(record, audit_schema())


def test_scores_that_cannot_be_understood_get_one_sentence(run):
    _, out, err = run("audit", "clean.txt", "--scores", "crumb: 7..1")
    assert out == "" and err.rstrip().splitlines()[-1].startswith(
        "Error: Invalid value for '--scores': The highest"
    )


def test_nothing_to_check_is_said(run):
    assert "Nothing to check." in run("audit", "plain.txt")[1]


@pytest.mark.parametrize("name", ["missing.txt", ".", "empty.txt"])
def test_an_unread_document_gets_one_sentence(run, name):
    status, out, err = run("audit", name)
    assert (status, out) == (UNREAD, "")
    assert err.count("\n") == 1 and err.rstrip().endswith(".") and "Traceback" not in err


def test_documents_after_an_unread_one_are_done(run):
    _, out, err = run("audit", "clean.txt", "missing.txt", "wrong.txt")
    assert out.index("clean.txt") < out.index("wrong.txt")
    assert out.endswith("3 documents: 1 with discrepancies, 1 without, 1 could not be read.\n")
    assert "missing.txt" in err


def test_json_of_one_file_is_an_object(run):
    record = json.loads(run("audit", "--json", "wrong.txt")[1])
    validate(record, audit_schema())
    assert record["summary"]["inconsistent"] == 1


def test_json_of_several_files_is_a_list_with_errors_in_place(run):
    records = json.loads(run("audit", "--json", "clean.txt", "missing.txt", "wrong.txt")[1])
    validate(records, audit_schema())
    assert [record["document"]["name"] for record in records] == ["clean.txt", "missing.txt", "wrong.txt"]
    assert records[1]["error"]


def test_json_of_an_unread_file_is_still_an_object(run):
    status, out, _ = run("audit", "--json", "missing.txt")
    validate(json.loads(out), audit_schema())
    assert status == UNREAD


def test_the_same_input_gives_the_same_bytes(run):
    assert run("audit", "--json", "wrong.txt") == run("audit", "--json", "wrong.txt")


def test_alpha_is_passed_on(run):
    record = json.loads(run("audit", "--json", "--alpha", "0.01", "clean.txt")[1])
    assert record["settings"]["alpha"] == 0.01 and record["settings"]["alpha_source"] == "asked"


def test_standard_input_is_read_as_bytes(run, monkeypatch):
    monkeypatch.setattr("sys.stdin", io.TextIOWrapper(io.BytesIO(WRONG.encode())))
    status, out, _ = run("audit", "-")
    assert status == DISCREPANT and out.startswith("standard input\n")


def test_a_closed_standard_input_is_said(run, monkeypatch):
    monkeypatch.setattr("sys.stdin", None)
    status, _, err = run("audit", "-")
    assert (status, err) == (UNREAD, "standard input: it is closed; send a manuscript into it.\n")


@pytest.mark.parametrize("fault", [ZeroDivisionError("division\nby zero"), RecursionError(), MemoryError()])
def test_a_fault_of_ours_costs_one_document_only(run, monkeypatch, fault):
    import recheck.auditing

    honest = recheck.auditing.audit

    def faulty(source, **more):
        if source == "wrong.txt":
            raise fault
        return honest(source, **more)

    monkeypatch.setattr("recheck.auditing.audit", faulty)
    status, out, err = run("audit", "wrong.txt", "clean.txt")
    assert status == UNREAD and "clean.txt" in out
    assert err.startswith("wrong.txt: ") and err.count("\n") == 1


def test_a_failing_check_leaves_no_traceback(run, monkeypatch):
    import logging

    import recheck.auditing

    honest = recheck.auditing.audit

    def logging_audit(source, **more):
        logging.getLogger("recheck").error("a check failed")
        return honest(source, **more)

    monkeypatch.setattr("recheck.auditing.audit", logging_audit)
    assert run("audit", "clean.txt")[2] == ""


def test_an_interrupt_has_its_own_status(run, monkeypatch):
    def interrupted(*_, **__):
        raise KeyboardInterrupt

    monkeypatch.setattr("recheck.auditing.audit", interrupted)
    assert run("audit", "clean.txt")[0] == INTERRUPTED


def test_nothing_is_shown_of_the_progress_when_nobody_watches(run):
    assert run("audit", "clean.txt", "plain.txt")[2] == ""


def test_the_progress_line_is_wiped_out(run, monkeypatch):
    class Watched(io.StringIO):
        def isatty(self):
            return True

    watched = Watched()
    monkeypatch.setattr("sys.stderr", watched)
    run("audit", "clean.txt", "plain.txt")
    shown = watched.getvalue().split("\r")
    assert "reading plain.txt (2 of 2)" in shown
    assert shown[-1] == "" and shown[-2].isspace()


@pytest.mark.parametrize("encoding", ["ascii", "latin-1", "utf-8"])
def test_any_encoding_of_the_output_will_do(files, encoding):
    done = started("audit", "wrong.txt", cwd=files, env={"PYTHONIOENCODING": encoding}, capture_output=True)
    assert done.returncode == DISCREPANT and done.stderr == b""
    assert b"p = .010" in done.stdout.replace(b"\n", b" ")


@pytest.mark.skipif("os.name == 'nt'", reason="pipes are closed in another way")
def test_a_reader_that_goes_away_is_no_fault(files):
    read, write = os.pipe()
    os.close(read)
    with os.fdopen(write, "wb") as pipe:
        done = started("audit", "wrong.txt", cwd=files, stdout=pipe, stderr=subprocess.PIPE)
    assert (done.returncode, done.stderr) == (OUTPUT_LOST, b"")


@pytest.mark.skipif(not Path("/dev/full").exists(), reason="needs a device that is full")
def test_a_full_disk_is_said_in_one_sentence(files):
    with Path("/dev/full").open("wb") as full:
        done = started("audit", "--json", "wrong.txt", cwd=files, stdout=full, stderr=subprocess.PIPE)
    assert done.returncode == OUTPUT_LOST
    assert done.stderr.startswith(b"standard output: could not be written") and done.stderr.count(b"\n") == 1


def test_methods_lists_and_explains(run):
    status, out, _ = run("methods")
    first = next(line.split()[0] for line in out.splitlines() if line.startswith("  "))
    assert status == DONE
    assert run("methods", first)[1].startswith(f"{first}\n")
    assert "Verdicts, worst first" in run("methods", "words")[1]
    assert "The order of findings" in run("methods", "ranking")[1]


def test_an_unknown_check_is_wrong_use(run):
    status, out, err = run("methods", "p-form-t")
    assert (status, out) == (WRONG_USE, "")
    assert "no check named 'p-form-t'" in err


def test_version_and_help_import_nothing_heavy():
    script = (
        "import sys, recheck.cli as c; c.main(['--version']); c.main(['--help']);"
        "print({'numpy', 'scipy', 'regex', 'recheck.model', 'recheck.reports'} & set(sys.modules))"
    )
    done = subprocess.run(
        [sys.executable, "-c", script], capture_output=True, text=True, timeout=60, check=True
    )
    assert done.stdout.startswith("recheck 0.") and done.stdout.endswith("set()\n")


def test_the_readme_mentions_every_command_and_option():
    readme = (Path(__file__).parents[1] / "README.md").read_text(encoding="utf-8")
    for name, command in commands.commands.items():
        assert f"recheck {name}" in readme
        options = [
            option for parameter in command.params for option in parameter.opts if option.startswith("--")
        ]
        assert all(option in readme for option in options), (name, options)
    for status in (DONE, DISCREPANT, WRONG_USE, UNREAD, INTERRUPTED, OUTPUT_LOST):
        assert f"| {status} |" in readme


def test_every_command_and_option_says_what_it_is_for():
    for command in commands.commands.values():
        assert command.help and command.get_short_help_str(80).endswith(".")
        assert all(parameter.help for parameter in command.params if isinstance(parameter, click.Option))
