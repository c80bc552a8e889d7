"""Writes the reports of the made reductions once and reads them back."""

import re
import tempfile
from functools import cache
from io import BytesIO
from pathlib import Path

import pypdf
from made_reduction import bare_reduction, long_reduction, made_reduction
from made_trial import REPORT_DATE

from incline.report import write_pdf

KINDS = ("metric", "us", "bare", "long")
SECTIONS = (
    "Result",
    "What was assumed",
    "Not recorded by the trial",
    "Vessel and drawings",
    "The test",
    "Rules and criteria",
    "Comparison with predicted and other values",
    "Axes, signs, units and method",
    "Condition as inclined",
    "Test weights and moments",
    "Devices and readings",
    "Heel against moment",
    "What the residuals say",
    "Anomalies and explanations",
    "From GM to the centre of gravity",
    "From as inclined to lightship",
    "With the excluded readings counted",
    "Uncertainty",
    "Cautions, and who decides",
    "Signatures and acceptance",
)
APPENDICES = ("Uncertainty budgets", "Monte Carlo run")


def printed(reduction):
    """The bytes of a reduction's report."""
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "report.pdf"
        write_pdf(reduction, path, REPORT_DATE, "0.1.0")
        return path.read_bytes()


@cache
def report(kind):
    """The bytes of one of the four reports."""
    reductions = {
        "metric": made_reduction,
        "us": lambda: made_reduction("us"),
        "bare": bare_reduction,
        "long": long_reduction,
    }
    return printed(reductions[kind]())


def reader(kind):
    """One of the four reports opened."""
    return pypdf.PdfReader(BytesIO(report(kind)))


@cache
def pages(kind):
    """Text of each page, every run of white space made one blank."""
    return texts(report(kind))


def body(kind):
    """Text of one of the four reports without the page of contents."""
    return without_contents(" ".join(pages(kind)))


def without_contents(text):
    return re.sub(r" Contents .*? Appendix B Monte Carlo run \d+ ", " ", text, count=1)


def section(text, title):
    """Text of one section of a body, from its heading to the next one's."""
    headings = [
        found
        for t in (*SECTIONS, *APPENDICES)
        if (found := re.search(rf"(?:\b\d+|Appendix [A-Z]) {re.escape(t)} ", text))
    ]
    starts = sorted(h.start() for h in headings)
    mine = next(h for h in headings if h.group().endswith(f" {title} "))
    after = [s for s in starts if s > mine.start()]
    return text[mine.end() : after[0] if after else len(text)]


def texts(data):
    """Text of each page of any report."""
    return [" ".join(p.extract_text().split()) for p in pypdf.PdfReader(BytesIO(data)).pages]
