"""The tables of a report as CSV, and the options of ``incline report``."""

import csv
import io
import json
import re

import made_reduction as made
import pypdf
import pytest
from conftest import DEMO_TRIALS
from hypothesis import given
from hypothesis import strategies as st
from made_trial import REPORT_DATE
from test_cli import incline

from incline.report import write_pdf
from incline.report.export import cell_of

WORKBOAT = DEMO_TRIALS / "workboat-metric"
RISKY = ("=", "+", "-", "@", "\t", "\r")  # what spreadsheets take for the start of a formula


@pytest.fixture(scope="module")
def tables(tmp_path_factory):
    folder = tmp_path_factory.mktemp("tables")
    files = write_pdf(made.made_reduction(), folder / "r.pdf", REPORT_DATE, "0.1.0", None, folder)
    return {
        p.name: list(csv.reader(io.StringIO(p.read_text("utf-8-sig"))))
        for p in files
        if p.suffix == ".csv"
    }


def column(rows, heading):
    return [row[rows[0].index(heading)] for row in rows[1:]]


def test_every_table_is_there_under_its_number_and_title(tables):
    assert {
        "01-result.csv", "09-density-of-the-water.csv", "10-test-weights.csv", "15-liquids-aboard-and-their-free-surfaces.csv",
        "16-from-as-inclined-to-lightship.csv", "a-budget-of-kg.csv", "b-monte-carlo-run.csv",
    } <= tables.keys()  # fmt: skip
    assert all(len({len(row) for row in rows}) == 1 for rows in tables.values())


def test_numbers_stay_numbers(tables):
    weights = tables["10-test-weights.csv"]
    assert [float(m) for m in column(weights, "mass [t]")] == [1.0042, 1.0036, 0.9981, 1.0017]
    ledger = tables["16-from-as-inclined-to-lightship.csv"]
    stores = next(r for r in ledger if r[0] == "Workshop stores")
    assert [float(c) for c in stores[1:]] == [-0.75, 4.5, 1.1, 2.4, -3.375, -0.825, -1.8]
    light = made.made_reduction().outcome.lightship
    assert float(ledger[-1][1]) == pytest.approx(
        light.displacement.value, abs=5e-4
    )  # printed to 1 kg


def test_what_is_not_known_is_an_empty_cell(tables):
    holding = next(
        r
        for r in tables["15-liquids-aboard-and-their-free-surfaces.csv"]
        if r[0] == "Bilge holding"
    )
    assert holding[3:5] == ["", ""]


def test_a_relocated_mass_is_not_taken_for_a_negative_one(tables):
    hook = next(r for r in tables["16-from-as-inclined-to-lightship.csv"] if r[0] == "Towing hook")
    assert re.fullmatch(r"'\(0\.410*\)", hook[1])


@pytest.mark.parametrize(
    ("text", "cell"),
    [
        ("−0.640", "-0.640"), ("1.5e−06", "1.5e-06"), ("+2", "2"), ("–", ""), ("12", "12"),
        ('=HYPERLINK("http://a.example")', '\'=HYPERLINK("http://a.example")'),
        ("+1 deg, heeled", "'+1 deg, heeled"), ("-3 and so on", "'-3 and so on"), ("@SUM(A1)", "'@SUM(A1)"),
        ("\t=1", "'=1"), ("\r=1", "'=1"), ("(0.870)", "'(0.870)"), ("0.870 t", "0.870 t"),
        ("−0.870 t", "-0.870 t"), ("−3.1\N{NO-BREAK SPACE}LT\N{NO-BREAK SPACE}ft", "-3.1 LT ft"), ("-1 A1", "'-1 A1"), ("a=b", "a=b"),
    ],
)  # fmt: skip
def test_cells(text, cell):
    assert cell_of(text) == cell


@given(
    st.text(max_size=12)
    | st.builds("".join, st.tuples(st.sampled_from(RISKY), st.text(max_size=8)))
)
def test_no_cell_is_a_formula(text):
    """A cell is a plain number, perhaps with a unit, or does not begin as a formula does."""
    cell = cell_of(text)
    number = r"-[0-9.]+(e-?[0-9]+)?( (m|t|mm|in|ft|LT|%|deg))?"
    assert not cell.startswith(RISKY) or re.fullmatch(number, cell)


# --- the command --------------------------------------------------------------------------------


def test_report_in_other_units_on_other_paper_with_tables(tmp_path):
    folder = tmp_path / "tables"
    run = incline(
        "report", WORKBOAT, "-o", tmp_path / "r.pdf", "--units", "us", "--paper", "a4",
        "--tables", folder, "--draws", "10000",
    )  # fmt: skip
    assert run.returncode == 0, run.stderr
    opened = pypdf.PdfReader(tmp_path / "r.pdf")
    assert float(opened.pages[0].mediabox.height) == pytest.approx(841.89, abs=0.01)  # A4
    text = " ".join(" ".join(p.extract_text().split()) for p in opened.pages)
    # Displacement is put in as 291.4 t; long tons of 2240 lb of 0.45359237 kg.
    result = json.loads((folder / "result.json").read_text(encoding="utf-8"))
    weight = result["lightship"]["displacement_t"]["value"]
    assert f"{weight / 1.0160469088:.2f} LT" in text
    assert not re.search(r"\d mm\b", text)  # remarks too are in the units asked for
    assert (folder / "01-result.csv").read_bytes().startswith(b"\xef\xbb\xbf,value")


def test_a_folder_with_something_in_it_is_refused_before_anything_is_written(tmp_path):
    folder = tmp_path / "tables"
    folder.mkdir()
    (folder / "mine.txt").write_text("mine")
    run = incline("report", WORKBOAT, "-o", tmp_path / "r.pdf", "--tables", folder)
    assert run.returncode == 1
    assert "--force" in run.stderr
    assert [p.name for p in folder.iterdir()] == ["mine.txt"]
    assert not (tmp_path / "r.pdf").exists()
