"""Heel against moment: the common line, GM, each device by itself, residuals."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from incline.report.canvas_backend import FigureFlowable
from incline.report.document import Sheet, note, part
from incline.report.figure_points import named_by
from incline.report.figures import common_plot, device_plots
from incline.report.figures_residuals import residual_plot
from incline.report.hull import methods
from incline.report.rolling import rolling_period
from incline.report.show import MISSING, signed
from incline.report.tables import Column, facts, grid

if TYPE_CHECKING:
    from incline.result import DeviceFit, HeelFit, HeelPoint

__all__ = ["heel_fit"]


def heel_fit(sheet: Sheet) -> list[Any]:
    """The fit in numbers, then in plots, then point by point."""
    heel, show, width = sheet.reduction.outcome.heel, sheet.show, sheet.width
    named = named_by(heel, sheet.reduction.diagnosis)
    common = FigureFlowable(common_plot(heel, show, width, named))
    rows = [FigureFlowable(f) for f in device_plots(heel, show, width, named)]
    residuals = FigureFlowable(residual_plot(heel, show, width, named))
    return [
        *part(_title(heel)),
        _common(sheet),
        note(
            "Regression alone: the plain formula of least squares, which takes the readings as "
            "independent and Δ as exact. The uncertainty of GM on the first page counts every "
            "source."
        ),
        *part("Each device by itself", 80.0),
        *_devices(sheet),
        *methods(sheet),
        *rolling_period(sheet),
        *part("Tangent against moment", common.height + 24.0),
        common,
        *part("Tangent against moment, device by device", rows[0].height + 40 if rows else 0.0),
        note("Solid: a line through the device alone. Dashed grey: the common slope."),
        *rows,
        *part("Residuals", residuals.height + 24.0),
        residuals,
        *part("Points of the fit"),
        _points(sheet),
    ]


def _title(heel: HeelFit) -> str:
    if heel.method == "straight-line":
        return "Common line through all devices"
    return "Common curve through all devices"


def _per_moment(sheet: Sheet, slope: float | None) -> str:
    """A slope in reciprocal moment units."""
    if slope is None:
        return MISSING
    return signed(f"{slope * sheet.show.scale('moment'):.5e}")


def _common(sheet: Sheet) -> Any:  # noqa: ANN401 - untyped library
    heel, show = sheet.reduction.outcome.heel, sheet.show
    slope, unit = _per_moment(sheet, heel.slope), show.unit("moment")
    counted = sum(1 for p in heel.points if not p.excluded)
    error = show.full(heel.u_gm_fluid, "length", 4) if heel.u_gm_fluid is not None else MISSING
    spread = MISSING if heel.residual_sd is None else show.plain(heel.residual_sd, 6)
    sides = ((heel.max_heel_port, "port"), (heel.max_heel_starboard, "starboard"))
    line = heel.method == "straight-line"
    name = "b, common slope of tangent on moment" if line else "b, slope of the curve upright"
    pairs = (
        (name, f"{slope} per {unit}"),
        ("standard error of b, regression alone", f"{_per_moment(sheet, heel.u_slope)} per {unit}"),
        ("1 / b, moment for unit tangent", show.full(1.0 / heel.slope, "moment")),
        ("GM fluid = 1 / (b Δ)", show.full(heel.gm_fluid, "length")),
        ("standard error of GM fluid, regression alone", error),
        ("readings; devices", f"{counted}; {len(heel.devices)}"),
        ("degrees of freedom", str(heel.dof)),
        ("standard deviation of residuals", f"{spread}, as tangents"),
        ("greatest heel", ", ".join(f"{show.degrees(h)}° to {side}" for h, side in sides)),
    )
    return facts(pairs, sheet.width)


def _devices(sheet: Sheet) -> list[Any]:
    show, heel = sheet.show, sheet.reduction.outcome.heel
    length, moment = show.unit("length"), show.unit("moment")
    columns = (
        Column("device", 0.23, "left"),
        Column("readings", 0.09),
        Column("zero offset", 0.11),
        Column(f"moment for unit tangent [{moment}]", 0.17),
        Column(f"GM alone [{length}]", 0.11),
        Column("standard error", 0.10),
        Column("less common", 0.10),
        Column("R²", 0.09),
    )
    rows = [_device(sheet, d) for d in heel.devices]
    text = (
        "Zero offset: what the device shows at zero moment in the common fit. R² is near 1 for any "
        "proper test; the residuals tell more."
    )
    return [grid(columns, rows, sheet.width), note(text)]


def _device(sheet: Sheet, device: DeviceFit) -> list[str]:
    show = sheet.show
    return [
        device.id,
        str(device.readings),
        show.tangent(device.intercept),
        show.number(1.0 / device.slope, "moment"),
        show.number(device.gm, "length"),
        show.number(device.u_gm, "length", 4),
        show.number(device.gm - sheet.reduction.outcome.heel.gm_fluid, "length", 4),
        show.plain(device.r_squared, 6),
    ]


def _points(sheet: Sheet) -> Any:  # noqa: ANN401
    columns = (
        Column("shift", 0.08, "left"),
        Column("device", 0.24, "left"),
        Column(f"moment in the fit [{sheet.show.unit('moment')}]", 0.17),
        Column("tangent", 0.11),
        Column("angle [deg]", 0.11),
        Column("fitted", 0.11),
        Column("residual", 0.11),
        Column("", 0.10, "left"),
    )
    points = sheet.reduction.outcome.heel.points
    return grid(columns, [_point(sheet, p) for p in points], sheet.width)


def _point(sheet: Sheet, point: HeelPoint) -> list[str]:
    show = sheet.show
    return [
        str(point.shift),
        point.device,
        show.number(point.moment, "moment"),
        show.tangent(point.tangent),
        show.degrees(math.atan(point.tangent)),
        show.tangent(point.fitted),
        show.tangent(point.residual),
        "excluded" if point.excluded else "",
    ]
