"""Field sheets read back: what stands on them, for a whole trial, a planned one, and none."""

import math
import re
from io import BytesIO
from itertools import pairwise

import pypdf
import pytest
from conftest import DEMO_TRIALS
from made_trial import REPORT_DATE

from incline.errors import Where
from incline.files import templates_folder
from incline.reading.partial import read_partial
from incline.record import Device
from incline.report.closing import STOP
from incline.sheets import Choices, write_sheets
from incline.sheets.graph import scale_of
from incline.sheets.prediction import Prediction, predict
from incline.sheets.sequence import rows_of, standard_rows

WORKBOAT = DEMO_TRIALS / "workboat-metric"
GM, DISPLACEMENT = 1.05, 310.0
TITLES = (
    "Before the test", "Surroundings", "People aboard", "Density of the water",
    "Drafts and freeboards", "Tanks", "Test weights", "To deduct", "To add", "To relocate",
    "Changes between drafts and shifts", "End checks",
)  # fmt: skip


def printed(tmp_path, partial, **choices):
    path = tmp_path / "sheets.pdf"
    write_sheets(partial, path, REPORT_DATE, "0.1.0", Choices(**choices))
    return path.read_bytes()


def texts(data):
    return [
        " ".join((page.extract_text() or "").split())
        for page in pypdf.PdfReader(BytesIO(data)).pages
    ]


def sheet(pages, title):
    """The text of the pages of one sheet: its title follows the date in the heading."""
    return " ".join(p for p in pages if re.search(rf"date of test \S+ {re.escape(title)}", p))


def planned(write_folder, without=("readings.csv", "drafts.csv", "density.csv")):
    """The demo before the day: no readings, drafts or samples yet."""
    return write_folder({
        f.name: f.read_text(encoding="utf-8")
        for f in WORKBOAT.iterdir() if f.name not in without
    })  # fmt: skip


@pytest.fixture(scope="module")
def workboat(tmp_path_factory):
    partial = read_partial(WORKBOAT)
    folder = tmp_path_factory.mktemp("workboat")
    data = printed(folder, partial, gm=GM, displacement=DISPLACEMENT)
    return partial, data, texts(data)


def test_every_page_names_vessel_date_sheet_page_and_has_boxes_for_initials(workboat):
    pages = workboat[2]
    total = {re.search(r"Sheet \d+ of (\d+)", p)[1] for p in pages}
    assert len(total) == 1
    last = int(total.pop())
    numbers = []
    for n, page in enumerate(pages, start=1):
        assert "Vessel: Kestrel Sound" in page
        assert "date of test 2026-03-14" in page
        assert f"page {n} of {len(pages)}" in page
        assert "Read by (initials)" in page
        assert "Recorded by (initials)" in page
        numbers.append(int(re.search(r"Sheet (\d+) of", page)[1]))
    assert sorted(set(numbers)) == list(range(1, last + 1))
    assert numbers == sorted(numbers)


def test_the_cover_lists_every_sheet_with_its_pages(workboat):
    pages = workboat[2]
    cover = " ".join(p for p in pages if "Sheet 1 of" in p)
    of_sheet = [int(re.search(r"Sheet (\d+) of", p)[1]) for p in pages]
    outline = [entry.title for entry in pypdf.PdfReader(BytesIO(workboat[1])).outline]
    assert len(outline) == max(of_sheet)
    for n, title in enumerate(outline, start=1):
        assert f"{n} {title} {of_sheet.count(n)}" in cover


def test_all_sheets_are_there_and_carry_what_the_trial_knows(workboat):
    trial, pages = workboat[0].trial, workboat[2]
    for title in TITLES:
        assert sheet(pages, title), title
    people = sheet(pages, "People aboard")
    assert all(p.name in people and p.role in people for p in trial.people)
    assert all(t.name in sheet(pages, "Tanks") for t in trial.tanks)
    assert all(w.certificate in sheet(pages, "Test weights") for w in trial.weights)
    drafts = sheet(pages, "Drafts and freeboards")
    assert all(f"{d.draft:.3f}" in drafts for d in trial.drafts)
    lists = {"deduct": "To deduct", "add": "To add", "relocate": "To relocate"}
    assert all(i.name in sheet(pages, lists[i.action]) for i in trial.items)
    assert all(f"{s.density:.4f}" in sheet(pages, "Density of the water") for s in trial.samples)


def test_stop_rules_are_there_and_are_called_common_practice(workboat):
    before = sheet(workboat[2], "Before the test")
    for reason in STOP:
        assert reason[1:].rstrip(";.") in before
    assert "common practice, with this program's figures" in before
    assert "Safety (common practice, not quoted from a standard)" in before


def weights_and_lengths():
    """Masses, places by shift and lengths as they stand in the demo's own files."""
    mass, y, shifts, lengths = {}, {}, {}, {}
    rows = [r.split(",") for r in (WORKBOAT / "weights.csv").read_text().splitlines()]
    head = next(r for r in rows if r[0] == "id")
    for row in rows[rows.index(head) + 1 :]:
        mass[row[0]] = float(row[head.index("mass [t]")])
    rows = [r.split(",") for r in (WORKBOAT / "shifts.csv").read_text().splitlines()]
    head = next(r for r in rows if r[0] == "shift")
    for row in rows[rows.index(head) + 1 :]:
        y[row[head.index("weight")]] = float(row[head.index("y [m]")])
        shifts[int(row[0])] = dict(y)
    text = (WORKBOAT / "trial.toml").read_text()
    for block in text.split("[[devices]]")[1:]:
        found = re.search(r'id = "(.*?)".*?length = "([\d.]+) m"', block, re.DOTALL)
        lengths[found[1]] = float(found[2])
    return mass, shifts, lengths


def test_predicted_deflections_are_sum_w_d_over_displacement_gm_times_length(workboat):
    # tan(heel) = w d / (displacement x GM), deflection = length x tan(heel): Barrass & Derrett,
    # Ship Stability for Masters and Mates, chapter on the inclining test, recalled from memory.
    mass, shifts, lengths = weights_and_lengths()
    pages = workboat[2]
    assert len(shifts) == 9
    assert len(lengths) == 3
    for device, length in lengths.items():
        readings, plot = (
            sheet(pages, f"Readings, {device}"),
            sheet(pages, f"Running plot, {device}"),
        )
        for n, places in shifts.items():
            moment = sum(mass[w] * (at - shifts[0][w]) for w, at in places.items())
            expected = 1000.0 * length * moment / (DISPLACEMENT * GM)
            moment_text, text = (
                f"{v:.{d}f}".replace("-", "−") for v, d in ((moment, 3), (expected, 1))
            )
            assert re.search(rf" {n} \d\d:\d\d {moment_text} {text} ", readings), (device, n)
            assert f" {n} {moment_text} {text} " in plot, (device, n)
        assert "GM 1.050 m (given)" in plot


def test_an_inclinometer_shows_the_angle_itself():
    known = Prediction(gm=1.0, displacement=100.0, gm_from="", displacement_from="")
    device = Device(id="I", kind="inclinometer", length=None, where=Where("trial.toml"))
    assert known.deflection(device, 100.0) == pytest.approx(math.pi / 4.0)


def test_a_whole_trial_predicts_with_its_own_gm_and_displacement():
    found = predict(read_partial(WORKBOAT), None, None)
    assert found is not None
    readings = [r for r in read_partial(WORKBOAT).trial.readings if r.device == "P1"]
    rows = rows_of(read_partial(WORKBOAT))
    device = read_partial(WORKBOAT).trial.devices[0]
    # The readings themselves lie within 3 mm of the line fitted to them: the demo's noise is 1 mm
    # for each reading and for its zero.
    for row, reading in zip(rows, readings, strict=True):
        seen = reading.values[0] - readings[0].values[0]
        assert seen == pytest.approx(found.deflection(device, row.moment), abs=3e-3)


def test_the_standard_sequence_is_the_published_one():
    # Positions and moments by shift: the usual sequence of the IS Code's figure, as the trade
    # uses it; common practice, no source for the order.
    assert [r.steps for r in standard_rows()] == [0, 1, 2, 1, 0, -1, -2, -1, 0]
    port = ["".join(w for w, p in r.places.items() if p.side == "port") for r in standard_rows()]
    assert port == ["AB", "B", "", "B", "AB", "ABC", "ABCD", "ABC", "AB"]


@pytest.mark.parametrize("units", ["metric", "us"])
def test_blank_sheets_have_a_row_for_each_shift_of_each_device(tmp_path, units):
    partial = read_partial(templates_folder() / units)
    pages = texts(printed(tmp_path, partial, units=units))
    for title in TITLES:
        assert sheet(pages, title), title
    for n in (1, 2, 3):
        found = sheet(pages, f"Readings, device {n}")
        assert found.endswith(" remarks 0 0 1 +1 2 +2 3 +1 4 0 5 −1 6 −2 7 −1 8 0")
        assert sheet(pages, f"Running plot, device {n}")
    assert not sheet(pages, "Readings, device 4")
    weights = sheet(pages, "Test weights")
    assert "1 → starboard port starboard starboard +1" in weights
    assert ("[LT]" in weights) == (units == "us")
    assert "date of test ____" in pages[0]


def test_blank_sheets_take_a_number_of_devices_and_shifts(tmp_path):
    partial = read_partial(templates_folder() / "metric")
    pages = texts(printed(tmp_path, partial, devices=5, shifts=7))
    assert sheet(pages, "Readings, device 5")
    assert not sheet(pages, "Readings, device 6")
    assert sheet(pages, "Readings, device 1").endswith(" remarks 0 1 2 3 4 5 6")
    assert sheet(pages, "Running plot, device 1").endswith(" plotted 0 1 2 3 4 5 6")


def test_a_planned_trial_gets_its_sheets_with_blanks_for_what_is_to_come(write_folder, tmp_path):
    partial = read_partial(planned(write_folder))
    assert partial.wrong == ()
    pages = texts(printed(tmp_path, partial, gm=GM, displacement=DISPLACEMENT))
    assert " 2 09:24 14.950 147.7 " in sheet(pages, "Readings, P1")  # 3.215 x 14.950 / (310 x 1.05)
    assert "forward P" in sheet(pages, "Drafts and freeboards")
    blind = texts(printed(tmp_path, partial))
    assert " 2 09:24 14.950 3 09:36 " in sheet(blind, "Readings, P1")
    assert "Dashed" not in sheet(blind, "Running plot, P1")


@pytest.mark.parametrize("paper", ["a4", "letter"])
def test_the_paper_is_the_one_asked_for(tmp_path, paper):
    partial = read_partial(templates_folder() / "metric")
    found = pypdf.PdfReader(BytesIO(printed(tmp_path, partial, paper=paper)))
    # ISO 216: A4 is 210 mm x 297 mm; ANSI Y14.1: letter is 8.5 in x 11 in.
    upright = {"a4": (210.0 / 25.4, 297.0 / 25.4), "letter": (8.5, 11.0)}[paper]
    for page in found.pages:
        size = sorted(float(side) / 72.0 for side in page.mediabox[2:])
        assert size == pytest.approx(list(upright), abs=0.001)


def test_fonts_are_embedded_and_nothing_is_an_image(workboat):
    for page in pypdf.PdfReader(BytesIO(workboat[1])).pages:
        resources = page["/Resources"]
        assert "/XObject" not in resources
        assert not page.images
        assert resources["/Font"]
        for font in resources["/Font"].values():
            assert "/FontFile2" in font.get_object()["/FontDescriptor"]


def test_the_same_trial_gives_the_same_bytes_and_few_of_them(workboat, tmp_path):
    again = printed(tmp_path, read_partial(WORKBOAT), gm=GM, displacement=DISPLACEMENT)
    assert again == workboat[1]
    assert len(again) < 1_000_000


def test_rows_to_write_in_are_eight_millimetres_high_at_least(workboat):
    """Heights between the horizontal rules of the reading sheet, from its drawing operators."""
    reader = pypdf.PdfReader(BytesIO(workboat[1]))
    page = next(
        p for p in reader.pages if "Readings, P1" in p.extract_text() and p.mediabox[2] > 800
    )
    lines = re.findall(
        r"([\d.]+) ([\d.]+) m ([\d.]+) ([\d.]+) l", page.get_contents().get_data().decode("latin-1")
    )
    heights = sorted({float(y) for _, y, _, y2 in lines if y == y2})
    gaps = [b - a for a, b in pairwise(heights)]
    assert sum(gap >= 8.0 * 72.0 / 25.4 for gap in gaps) >= 10


@pytest.mark.parametrize(
    "values", [[0.0, 14.95, -14.96], [3.0], [-0.002, 0.0], [1e-6, -1.0], [970.0, -20.0]]
)
def test_a_scale_holds_every_value_in_round_steps(values):
    scale = scale_of(values, 10, 1.15)
    assert scale.divisions <= 10
    assert all(0.0 <= scale.share(v) <= 1.0 for v in values)
    assert float(f"{scale.step:.0e}".split("e")[0]) in (1.0, 2.0, 5.0)
    assert scale.share(0.0) == pytest.approx(scale.below / scale.divisions)


def test_a_scale_without_values_has_no_figures():
    assert scale_of([], 10, 1.15).step is None
    assert scale_of([0.0], 10, 1.15).label(3) == ""
