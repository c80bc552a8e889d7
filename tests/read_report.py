"""Writes the reports of the made reductions once and reads them back."""

import tempfile
from functools import cache
from io import BytesIO
from pathlib import Path

import pypdf
from made_reduction import bare_reduction, long_reduction, made_reduction
from made_trial import REPORT_DATE

from incline.report import write_pdf

KINDS = ("metric", "us", "bare", "long")


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


def texts(data):
    """Text of each page of any report."""
    return [" ".join(p.extract_text().split()) for p in pypdf.PdfReader(BytesIO(data)).pages]
