"""The whole way from text or bytes to a ranked audit."""

import io

import pytest

import recheck
from recheck.errors import RecheckError, UnreadableDocument

TEXT = "All tests were two-tailed with alpha set at .01. The loaves differed, t(28) = 2.20, p = .003."


def test_text_with_a_stated_level():
    audit = recheck.audit_text(TEXT)
    assert (audit.settings.alpha, audit.settings.alpha_source) == (0.01, "stated")
    first = audit.findings[0]
    assert (first.verdict, first.reversal, first.rank) == ("inconsistent", True, 1)
    assert first.place.line == 1
    assert audit.summary()["reversals"] == 1


def test_asked_level_goes_before_the_stated_one():
    audit = recheck.audit_text(TEXT, alpha=0.05)
    assert (audit.settings.alpha_source, audit.findings[0].reversal) == ("asked", False)


def test_same_bytes_give_the_same_audit(tmp_path):
    path = tmp_path / "loaves.txt"
    path.write_text(TEXT, encoding="utf-8")
    by_path, by_bytes = recheck.audit(path), recheck.audit(TEXT.encode(), name="loaves.txt")
    by_file = recheck.audit(io.BytesIO(TEXT.encode()), name="loaves.txt")
    assert (
        [f.id for f in by_path.findings]
        == [f.id for f in by_bytes.findings]
        == [f.id for f in by_file.findings]
    )
    assert by_path.document.sha256 == by_bytes.document.sha256


def test_a_missing_file_is_one_clear_sentence(tmp_path):
    with pytest.raises(UnreadableDocument, match=r"there is no such file; check the path\.$") as caught:
        recheck.audit(tmp_path / "nothing.pdf")
    assert isinstance(caught.value, RecheckError)


def test_text_without_statistics_has_nothing_to_check():
    audit = recheck.audit_text("Bread is baked every morning.")
    assert (audit.claims, audit.findings) == ((), ())


@pytest.mark.parametrize(
    ("data", "format_"),
    [
        (b"<!DOCTYPE html><html><p>t(28) = 2.20, p = .010</p></html>", "html"),
        (
            b'<?xml version="1.0"?><article><body><p>t(28) = 2.20, p = .010</p></body></article>',
            "jats",
        ),
        (b"The loaves differed, t(28) = 2.20, p = .010.", "text"),
    ],
)
def test_every_format_is_told_by_its_content(data, format_):
    found = recheck.audit(data, name="loaves.pdf")
    assert found.document.format == format_
    assert [finding.check for finding in found.findings if finding.verdict == "inconsistent"] == ["p-from-t"]


def test_markup_of_another_kind_is_refused():
    with pytest.raises(UnreadableDocument, match="recipe"):
        recheck.audit(b'<?xml version="1.0"?><recipe>t(28) = 2.20, p = .010</recipe>', name="loaves")


@pytest.mark.parametrize("alpha", [0, 1, 2, -0.05, float("nan"), "x"])
def test_an_alpha_that_is_none_is_refused(alpha):
    with pytest.raises(ValueError, match="between 0 and 1"):
        recheck.audit_text(TEXT, alpha=alpha)


def test_what_is_no_text_is_refused():
    with pytest.raises(TypeError, match="must be a string"):
        recheck.audit_text(TEXT.encode())
    with pytest.raises(ValueError, match="reader must be one of"):
        recheck.audit(TEXT.encode(), reader="eyes")


def test_an_audit_shows_itself_in_one_line():
    assert repr(recheck.audit_text(TEXT)).startswith("<Audit of text; claims: 1,")
