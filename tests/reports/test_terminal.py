from dataclasses import replace

import pytest

import recheck
from recheck.model import Place
from recheck.reports.look import Look
from recheck.reports.terminal import closing_line, terminal_report
from recheck.reports.words import CAUTION
from tests.reports.audits import AGREES, CONDITIONAL, EMPTY, FULL, IMPOSSIBLE, REVERSED, UNCHECKED, audit

WHOLE = """\
rise.pdf
════════
“Training apprentices in scoring loaves”
6 pages with 4,210 words. 2 results read: 1 t-test and 1 group summary; 1 of
them could be checked.
Alpha is 0.05 (the usual level; the manuscript states none).

Findings: 1 inconsistent (1 reversal), 1 unchecked.

────────────────────────────────────────────────────────────────────────────────
1. INCONSISTENT, REVERSAL: printed and implied p on opposite sides of alpha 0.05
   page 4, section “Results”
   “Trained apprentices baked taller loaves, t(28) = 2.20, p = .010”

   p = .010 is printed; t = 2.20, df = 28 imply 0.03584 to 0.03662.

   printed      p = .010            ·██·············│···························
   implied      0.03584 to 0.03662  ·············░··│···························
   implied      0.9817 to 0.9821    ················│························░░·
                assuming a one-tailed test
                                    ──┴─────────────┴─────────────────────────┴─
                log scale           0.01       alpha 0.05                     1
   gap          25.3 units of the last printed digit

   tolerance    t = 2.20 stands for 2.195 to 2.205; p = .010 stands for 0.0095
                to 0.0105; df taken as exact
   mended by    p would have to be another (p 0.03584 to 0.03662)
   ask          Could you check p = .010 on page 4, and say how it was computed?
   note         the sign = was read through a font table inferred from the whole
                document
   check        p-from-t; read with high confidence

────────────────────────────────────────────────────────────────────────────────
Not checked, and why
   1  these df belong to another model

1 result was read that stands alone: nothing else printed with it bears on it.

--all lists also what agrees and what was not checked, in reading order.

────────────────────────────────────────────────────────────────────────────────
A discrepancy is a question to the authors and no evidence of misconduct: a
misprint, rounding or an unstated choice of analysis may explain it. What
follows from it is for the journal's own integrity procedures and a qualified
statistician to decide.
"""


def test_a_whole_report_reads_as_intended():
    assert terminal_report(audit(REVERSED, UNCHECKED)) == WHOLE


@pytest.mark.parametrize("width", [40, 60, 80, 100])
@pytest.mark.parametrize("everything", [False, True])
def test_no_line_is_wider_than_the_terminal(width, everything):
    text = terminal_report(FULL, everything=everything, look=Look(width))
    assert max(map(len, text.splitlines())) <= width


def test_colour_adds_nothing_but_codes():
    import re

    plain, coloured = (
        terminal_report(FULL, everything=True, look=Look(80, colour)) for colour in (False, True)
    )
    assert coloured != plain
    assert re.sub(r"\x1b\[[0-9;]*m", "", coloured) == plain


def test_findings_come_in_ranked_order_with_their_words():
    text = terminal_report(FULL)
    order = [text.index(word) for word in ("1. INCONSISTENT, REVERSAL", "2. IMPOSSIBLE", "3. CONDITIONAL")]
    assert order == sorted(order)


def test_what_could_not_be_read_is_said():
    assert "Note: page 3 has no text layer" in terminal_report(FULL)


def test_all_lists_what_agrees_and_what_was_not_checked():
    brief, full = terminal_report(FULL), terminal_report(FULL, everything=True)
    assert AGREES.place.quote in full and AGREES.place.quote not in brief
    assert "M = 5.00 (SD = 1.65)" in full and "M = 5.00 (SD = 1.65)" not in brief
    assert UNCHECKED.check in full and UNCHECKED.check not in brief


def test_without_results_there_is_nothing_to_check():
    text = terminal_report(EMPTY)
    assert "No statistical result was read." in text and "Nothing to check." in text
    assert "alpha" not in text.lower() and CAUTION[:20] not in text


def test_agreement_alone_says_no_discrepancy():
    text = terminal_report(audit(AGREES))
    assert "No discrepancy: 1 agrees." in text
    assert CAUTION[:20] not in text


def test_reasons_alone_say_that_nothing_could_be_checked():
    assert "Nothing could be checked: 1 unchecked." in terminal_report(audit(UNCHECKED))


def test_every_report_with_a_question_ends_in_the_caution():
    for finding in (REVERSED, IMPOSSIBLE, CONDITIONAL):
        assert "no evidence of misconduct" in terminal_report(audit(finding))


def test_reasons_are_grouped_and_the_rest_counted():
    findings = [replace(UNCHECKED, id=str(k), message=f"reason {k}") for k in range(11)]
    text = terminal_report(audit(UNCHECKED, UNCHECKED, *findings))
    assert "   2  these df belong to another model" in text
    assert "   4  for 4 other reasons" in text


def test_a_manuscript_cannot_write_to_the_terminal():
    wicked = "t(28) = 2.20\x1b[2J\x07\u202e, p = .010\ud800"
    finding = replace(REVERSED, place=Place(wicked, section="\x1b]0;x\x07"), message=wicked, printed=wicked)
    text = terminal_report(audit(finding, replace(AGREES, place=Place(wicked))), everything=True)
    assert not set(text) & set("\x1b\x07\u202e\ud800")


def test_long_quotes_lose_their_middle():
    quote = f"At the start {'loaves ' * 200}at the end"
    text = terminal_report(audit(replace(IMPOSSIBLE, place=Place(quote))))
    assert "At the start" in text and "at the end" in text
    assert len(text) < 2000


def test_whole_numbers_are_listed():
    implied = replace(REVERSED.implied[0], low=12.0, high=16.0, integers=(12, 14, 16))
    assert "12, 14 or 16" in terminal_report(audit(replace(REVERSED, quantity="n", implied=(implied,))))


def test_many_readings_are_cut_and_counted():
    finding = replace(REVERSED, implied=REVERSED.implied * 4)
    assert "4 more are in the JSON" in terminal_report(audit(finding))


def test_the_closing_line_counts_documents():
    assert closing_line(1, 2, 1) == "4 documents: 1 with discrepancies, 2 without, 1 could not be read.\n"


def test_groups_of_a_finding_are_named_by_their_quotes_in_its_order():
    text = "Steamed loaves (M = 92.4, SD = 6.1, n = 18) rose higher than dry ones (M = 86.0, SD = 5.8, n = 18), t(34) = 2.23."
    lines = terminal_report(recheck.audit_text(text)).splitlines()
    first, second = (next(line for line in lines if f"group {n}: “" in line) for n in (1, 2))
    assert "92.4" in first and "86.0" in second
