"""The file of the report: safe to open, complete in itself, the same every time."""

import os
import re
import subprocess
import sys
from datetime import date
from pathlib import Path

import made_reduction as made
import matplotlib as mpl
import pytest
from made_trial import NASTY_NAME, NASTY_NOTE, REPORT_DATE
from pypdf.generic import ContentStream
from read_report import KINDS, pages, printed, reader, report, texts

from incline.errors import InclineError
from incline.report import write_pdf
from incline.report.text import clean, markup


def test_hostile_text_prints_as_typed():
    text = " ".join(pages("metric"))
    assert NASTY_NAME in text
    assert NASTY_NOTE.replace("\x07", "") in text
    for said in ("P2 <mid>", "M. Reader <aft>", "Shore crane sling <left>", "P3 aft θ", "μ = 2σ"):
        assert said in text


def _dictionaries(kind):
    opened = reader(kind)
    for number in range(1, len(opened.xref[0]) + 1):
        found = opened.get_object(number)
        if isinstance(found, dict):
            yield found


@pytest.mark.parametrize("kind", KINDS)
def test_file_holds_no_image_outside_link_script_or_attachment(kind):
    for found in _dictionaries(kind):
        assert found.get("/Subtype") not in ("/Image", "/FileAttachment")
        assert found.get("/Subtype") != "/Link" or "/Dest" in found  # a place in the report itself
        assert not {"/URI", "/JS", "/Launch", "/EmbeddedFiles"} & found.keys()
    opened = reader(kind)
    for page in opened.pages:
        operators = {o for _, o in ContentStream(page.get_contents(), opened).operations}
        assert b"INLINE IMAGE" not in operators


def test_every_font_is_embedded_as_a_subset():
    names = set()
    for page in reader("metric").pages:
        for font in page["/Resources"]["/Font"].values():
            font = font.get_object()  # noqa: PLW2901
            assert "/FontFile2" in font["/FontDescriptor"]
            names.add(font["/BaseFont"])
    assert names
    assert all(re.fullmatch(r"/[A-Z]{6}\+DejaVuSans(-Bold)?", n) for n in names)


def test_metadata_names_the_test_and_dates_from_the_report():
    info = reader("metric").metadata
    assert info.title == f"Inclining test of {NASTY_NAME}"
    assert info.author == info.creator == "incline 0.1.0"
    assert info.subject == "Lightship from the test at Inner basin, Nowhere Haven, 2026-03-14"
    assert info.creation_date.date() == info.modification_date.date() == REPORT_DATE


@pytest.mark.parametrize(
    ("typed", "printed"),
    [
        ("A&B <i>", "A&amp;B &lt;i&gt;"),
        ("&alpha;", "&amp;alpha;"),
        ("two\r\nlines", "two<br/>lines"),
        ("bell\x07 null\x00 turn\u202e", "bell null turn"),
        ("e\u0301", "é"),
        ("\u6f22", "[U+6F22]"),  # a glyph that the typeface lacks
    ],
)
def test_text_for_paragraphs(typed, printed):
    assert markup(typed) == printed


def test_clean_is_stable():
    once = clean(NASTY_NOTE)
    assert clean(once) == once


def test_same_arguments_same_bytes(monkeypatch):
    monkeypatch.setenv("SOURCE_DATE_EPOCH", "1234567890")
    with mpl.rc_context({"lines.linewidth": 9.0, "text.parse_math": True, "axes.facecolor": "red"}):
        again = printed(made.made_reduction())
    assert again == report("metric")


def test_another_process_writes_the_same_bytes(tmp_path):
    code = (
        "import sys, pathlib; sys.path.insert(0, sys.argv[2]); import made_reduction as m;"
        "from incline.report import write_pdf;"
        "from made_trial import REPORT_DATE;"
        "write_pdf(m.made_reduction(), pathlib.Path(sys.argv[1]), REPORT_DATE, '0.1.0')"
    )
    path, here = tmp_path / "other.pdf", Path(__file__).parent
    environment = {
        **os.environ,
        "PYTHONHASHSEED": "77",
        "PYTHONPATH": str(here.parent),
        "TZ": "Asia/Tokyo",
    }
    subprocess.run([sys.executable, "-c", code, path, here], check=True, env=environment)
    assert path.read_bytes() == report("metric")


def test_another_date_changes_the_report(tmp_path):
    reduction = made.made_reduction()
    path = tmp_path / "later.pdf"
    write_pdf(reduction, path, date(2026, 4, 3), "0.1.0")
    assert "2026-04-03" in texts(path.read_bytes())[0]
    assert path.read_bytes() != report("metric")


def test_replaces_the_file_and_leaves_nothing_beside_it(tmp_path):
    path = tmp_path / "report.pdf"
    path.write_text("old")
    write_pdf(made.bare_reduction(), path, REPORT_DATE, "0.1.0")
    assert [p.name for p in tmp_path.iterdir()] == ["report.pdf"]
    assert path.read_bytes().startswith(b"%PDF-")


def test_unwritable_place_is_a_user_error(tmp_path):
    with pytest.raises(InclineError, match="cannot write"):
        write_pdf(made.bare_reduction(), tmp_path / "no" / "x.pdf", REPORT_DATE, "0.1.0")
