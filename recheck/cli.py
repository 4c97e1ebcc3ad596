"""The commands of recheck; everything heavy is imported inside them."""

from __future__ import annotations

import io
import os
import sys
from collections.abc import Sequence
from contextlib import suppress
from typing import TYPE_CHECKING, Any

import click

from recheck.version import __version__

if TYPE_CHECKING:
    from recheck.auditing import ReaderChoice
    from recheck.model import Audit

DONE, DISCREPANT, WRONG_USE, UNREAD = 0, 1, 2, 3
INTERRUPTED, OUTPUT_LOST = 130, 141
STANDARD_INPUT = "standard input"


class OutputLostError(Exception):
    """The output could not be written; the message is empty where a reader closed the pipe."""


@click.group(
    epilog="""\b
Exit status:
  0    done; audit: no discrepancy, or nothing to check
  1    audit: something is impossible or inconsistent
  2    wrong use
  3    audit: a document could not be read; the others are still done
  130  interrupted
  141  the output could not be written, or nobody reads it any more

Nothing leaves this machine. A discrepancy is a question to the authors and
no evidence of misconduct."""
)
@click.version_option(__version__, message="recheck %(version)s")
def commands() -> None:
    """Tell whether the numbers printed in a manuscript can be true, without its raw data."""


def _a_level(_: click.Context, __: click.Parameter, value: float | None) -> float | None:
    if value is not None and not 0 < value < 1:
        raise click.BadParameter(f"must lie between 0 and 1 (got {value:g}).")
    return value


def _of_scores(_: click.Context, __: click.Parameter, values: tuple[str, ...]) -> tuple[str, ...]:
    if values:
        from recheck.auditing import score_rules

        try:
            score_rules(values)
        except ValueError as error:
            raise click.BadParameter(str(error)) from None
    return values


@commands.command(
    epilog="""\b
Examples:
  recheck audit manuscript.pdf
  recheck audit --all --alpha 0.01 manuscript.txt
  recheck audit --scores "crumb score: 1..7" manuscript.pdf
  recheck audit --json first.pdf second.pdf > audits.json
  recheck audit - < manuscript.txt

Exit status: 0 no discrepancy, 1 something is impossible or inconsistent,
2 wrong use, 3 a document could not be read (the others are still done)."""
)
@click.argument("files", nargs=-1, required=True, metavar="FILE...")
@click.option(
    "--json", "as_json", is_flag=True, help="Print JSON: an object for one file, a list for several."
)
@click.option("--all", "everything", is_flag=True, help="List also what agrees and what was not checked.")
@click.option(
    "--alpha",
    type=float,
    callback=_a_level,
    metavar="LEVEL",
    help="Level of significance.  [default: as the manuscript states it, else 0.05]",
)
@click.option(
    "--reader",
    type=click.Choice(["auto", "pdfium", "pdfminer"]),
    default="auto",
    show_default=True,
    help="Engine that reads a PDF; auto has both read what a finding hangs on.",
)
@click.option(
    "--scores",
    multiple=True,
    callback=_of_scores,
    metavar="NAME: SCORES",
    help="What the scores of an outcome are: 1..7 (whole numbers from 1 to 7), 0..20, 5 items (whole answers, five averaged), 0..100, not whole; the name * is all. May be repeated.",
)
@click.pass_context
def audit(
    ctx: click.Context,
    files: tuple[str, ...],
    as_json: bool,
    everything: bool,
    alpha: float | None,
    reader: ReaderChoice,
    scores: tuple[str, ...],
) -> None:
    """List the discrepancies in manuscripts, worst first.

    FILE is a PDF, a Word document (DOCX), JATS XML, HTML, Markdown or plain text, told apart by content;
    - is standard input.
    """
    if files.count("-") > 1:
        raise click.UsageError("- (standard input) can be read only once.")
    if as_json and everything:
        raise click.UsageError("--json holds everything already: leave out --all.")
    ctx.exit(_audit_files(files, as_json, everything, alpha, reader, scores))


@commands.command(
    epilog="""\b
Examples:
  recheck methods
  recheck methods ranking"""
)
@click.argument("name", required=False)
def methods(name: str | None) -> None:
    """List the checks, or explain one.

    NAME is a check from the list, or one of the other pages: words, ranking. What
    is told of a check: its formula, needs, source, limits and examples.
    """
    from recheck.checks.registry import all_checks, find_check
    from recheck.errors import UnknownCheck
    from recheck.reports import methods as pages
    from recheck.reports.look import look_of

    look = look_of(sys.stdout)
    if name is None:
        text = pages.methods_list(all_checks(), look)
    elif name == "words":
        from recheck.reconcile.rounding import ROUNDINGS

        text = pages.words_text([rounding.words for rounding in ROUNDINGS if rounding.words], look)
    elif name == "ranking":
        from recheck.ranking import RULE

        text = pages.ranking_text(RULE, look)
    else:
        try:
            text = pages.method_text(find_check(name), look)
        except UnknownCheck as error:
            raise click.UsageError(str(error)) from None
    _write(text)


def main(arguments: Sequence[str] | None = None) -> int:
    """Run a command line and return its exit status."""
    try:
        status = commands.main(arguments, prog_name="recheck", standalone_mode=False)
        _flush()
    except click.ClickException as error:
        error.show()
        return error.exit_code
    except (click.Abort, KeyboardInterrupt):
        return INTERRUPTED
    except OutputLostError as error:
        # What is left in the buffer has nowhere to go, and Python would complain of that at exit.
        with suppress(OSError):
            os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        if str(error):
            click.echo(str(error), err=True)
        return OUTPUT_LOST
    return status if isinstance(status, int) else DONE


def _audit_files(
    files: Sequence[str],
    as_json: bool,
    everything: bool,
    alpha: float | None,
    reader: ReaderChoice,
    scores: Sequence[str],
) -> int:
    """Audit each file and print what was found; return the exit status."""
    import logging

    from recheck.reports import json as json_report
    from recheck.reports.look import clean, look_of
    from recheck.reports.terminal import closing_line, terminal_report

    # The findings tell of faults; what libraries log of broken files would come between the lines.
    logging.getLogger().addHandler(logging.NullHandler())
    look = look_of(sys.stdout)
    records: list[dict[str, Any]] = []
    statuses: list[int] = []
    for number, name in enumerate(files, 1):
        title = STANDARD_INPUT if name == "-" else name
        _progress(f"reading {clean(title)} ({number} of {len(files)})")
        try:
            done = _audited(name, alpha, reader, scores)
            text = "" if as_json else terminal_report(done, everything=everything, look=look)
            records += [json_report.audit_record(done)] if as_json else []
            statuses.append(DISCREPANT if done.discrepant else DONE)
            _progress("")
        except Exception as error:  # one document must not end the others
            _progress("")
            text, sentence = "", clean(_sentence(title, error))
            records.append(json_report.unread_record(title, sentence))
            statuses.append(UNREAD)
            click.echo(sentence, err=True)
        _write(f"{text}\n\n" if text and len(files) > 1 else text)
    if as_json:
        _write_bytes(json_report.written_json(records))
    elif len(files) > 1:
        _write(closing_line(statuses.count(DISCREPANT), statuses.count(DONE), statuses.count(UNREAD)))
    return max(statuses)


def _audited(name: str, alpha: float | None, reader: ReaderChoice, scores: Sequence[str]) -> Audit:
    from recheck.auditing import audit as audit_document
    from recheck.errors import UnreadableDocument

    if name == "-":
        if sys.stdin is None:
            raise UnreadableDocument(STANDARD_INPUT, "it is closed", "send a manuscript into it")
        return audit_document(
            sys.stdin.buffer.read(), name=STANDARD_INPUT, alpha=alpha, reader=reader, scores=scores
        )
    return audit_document(name, alpha=alpha, reader=reader, scores=scores)


def _sentence(title: str, error: Exception) -> str:
    """Say in one sentence why a document was not audited."""
    from recheck.errors import RecheckError

    if isinstance(error, RecheckError):
        return str(error)
    if isinstance(error, MemoryError):
        return f"{title}: needs more memory than there is; audit it alone or in parts."
    fault = f"{type(error).__name__}: {error}".removesuffix(": ")
    return f"{title}: could not be audited because of a fault in recheck ({fault}): please report it."


def _progress(text: str) -> None:
    """Show what is being done on a terminal, in a line that the next one wipes out."""
    if sys.stderr.isatty():
        import shutil

        columns = shutil.get_terminal_size().columns - 1
        click.echo(f"\r{'':{columns}}\r{text[:columns]}", nl=False, err=True)


def _write(text: str) -> None:
    """Write to standard output, spelling out characters that its encoding lacks."""
    import recheck.reports.look  # noqa: F401  registers the error handler used here

    if isinstance(sys.stdout, io.TextIOWrapper):
        sys.stdout.reconfigure(errors="recheck-spelled")
    try:
        sys.stdout.write(text)
    except OSError as error:
        raise _lost(error) from None
    _flush()


def _write_bytes(text: str) -> None:
    """Write JSON as UTF-8, whatever the encoding of the terminal (RFC 8259, section 8.1)."""
    _flush()
    try:
        sys.stdout.buffer.write(text.encode("utf-8", "replace"))
        sys.stdout.buffer.flush()
    except OSError as error:
        raise _lost(error) from None


def _flush() -> None:
    try:
        sys.stdout.flush()
    except OSError as error:
        raise _lost(error) from None


def _lost(error: OSError) -> OutputLostError:
    if isinstance(error, BrokenPipeError):
        return OutputLostError()
    return OutputLostError(f"standard output: could not be written ({error.strerror}); send it elsewhere.")
