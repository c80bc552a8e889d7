"""Field sheets: what is written by hand on the quay, filled in as far as the trial is known."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

from reportlab.lib.pagesizes import A4, LETTER

from incline.files import write_whole
from incline.report.show import Show
from incline.sheets.book import Book, blank_device, section
from incline.sheets.checklists import before_test, end_checks
from incline.sheets.cover import cover, people_aboard
from incline.sheets.floating import density, drafts, surroundings
from incline.sheets.lists import changes, items, relocations, tanks
from incline.sheets.paper import SheetOf, Spread, render
from incline.sheets.plots import running_plot
from incline.sheets.prediction import predict
from incline.sheets.readings import device_title, reading_sheet
from incline.sheets.sequence import STANDARD_SHIFTS, ShiftRow, rows_of, standard_rows
from incline.sheets.weights import test_weights
from incline.units import SYSTEMS

if TYPE_CHECKING:
    import datetime
    from pathlib import Path

    from incline.reading.partial import Partial
    from incline.record import Device

__all__ = ["Choices", "write_sheets"]

_PAPERS = {"a4": A4, "letter": LETTER}


@dataclass(frozen=True, slots=True, kw_only=True)
class Choices:
    """What a trial does not say, or not yet. ``paper`` None: as usual with the trial's units.

    ``devices`` and ``shifts`` count where the trial lists none. ``gm`` [m] and ``displacement`` [t]
    are what is expected of the ship, in place of the trial's own.
    """

    paper: Literal["a4", "letter"] | None = None
    units: Literal["metric", "us"] = "metric"
    devices: int = 3
    shifts: int = STANDARD_SHIFTS
    gm: float | None = None
    displacement: float | None = None


def write_sheets(
    partial: Partial, path: Path, printed: datetime.date, version: str, choices: Choices
) -> None:
    """Write the field sheets of a trial to ``path`` as a PDF, replacing what is there.

    The same arguments give the same bytes. The file appears whole or not at all; raises
    InclineError when the disk refuses it.
    """
    known = partial.knows(section("output"), "units")
    units = partial.trial.settings.units if known else choices.units
    system = SYSTEMS[units]
    wide, high = _PAPERS[choices.paper or ("a4" if system.page == "A4" else "letter")]
    book = Book(
        partial=partial,
        show=Show(system),
        page=(float(wide), float(high)),
        printed=printed,
        version=version,
        devices=_devices(partial, choices),
        rows=_shifts(partial, choices),
        prediction=predict(partial, choices.gm, choices.displacement),
    )
    write_whole(path, render(book, lambda spread: _sheets(book, spread)))


def _devices(partial: Partial, choices: Choices) -> tuple[Device, ...]:
    """The devices of which something is known, else as many blank ones as asked for."""
    known = tuple(d for d in partial.trial.devices if d.id or d.length is not None or d.place)
    return known or (blank_device(),) * choices.devices


def _shifts(partial: Partial, choices: Choices) -> tuple[ShiftRow, ...]:
    """The shifts recorded; the usual sequence, or bare numbers, where there are none."""
    trial = partial.trial
    if trial.shifts:
        return rows_of(partial)
    if choices.shifts == STANDARD_SHIFTS and not trial.weights:
        return standard_rows()
    return tuple(ShiftRow(number) for number in range(choices.shifts))


def _sheets(book: Book, spread: Spread) -> list[SheetOf]:
    """All sheets, in the order in which they are filled in."""
    named = [(device_title(d, n), d) for n, d in enumerate(book.devices, start=1)]
    return [
        SheetOf("Field sheets of an inclining test", cover(book, spread)),
        SheetOf("Before the test", before_test(book)),
        SheetOf("Surroundings", surroundings(book), broad=True),
        SheetOf("People aboard", people_aboard(book), broad=True),
        SheetOf("Density of the water", density(book)),
        SheetOf("Drafts and freeboards", drafts(book), broad=True),
        SheetOf("Tanks", tanks(book), broad=True),
        SheetOf("Test weights", test_weights(book), broad=True),
        *(SheetOf(f"Readings, {name}", reading_sheet(book, d), broad=True) for name, d in named),
        *(SheetOf(f"Running plot, {name}", running_plot(book, d)) for name, d in named),
        SheetOf("To deduct", items(book, "deduct"), broad=True),
        SheetOf("To add", items(book, "add"), broad=True),
        SheetOf("To relocate", relocations(book), broad=True),
        SheetOf("Changes between drafts and shifts", changes(book), broad=True),
        SheetOf("End checks", end_checks(book)),
    ]
