"""The record of an invented workboat's test, made by hand for tests of what is printed from it."""

import datetime

from incline.errors import Where
from incline.record import (
    Change,
    Device,
    DraftReading,
    HydrostaticTable,
    Item,
    Move,
    Occasion,
    Person,
    Point,
    Reading,
    Sample,
    Settings,
    Shift,
    Tank,
    Trial,
    Vessel,
    Weight,
)
from incline.result import (
    DraftResidual,
    Waterline,
)

NASTY_NAME = "Bracken A&B <i>Łódź</i>"
NASTY_NOTE = '<img src="file:///etc/hostname"/> gust & <b>swell</b> \x07μ = 2σ &alpha;'
REPORT_DATE = datetime.date(2026, 4, 2)
LPP, BEAM = 24.0, 7.2
KG_LIMIT = 2.75
AT = Where("made.csv", 2)


def _table() -> HydrostaticTable:
    drafts = tuple(1.6 + 0.2 * i for i in range(8))
    volume = tuple(73.0 * t**1.15 for t in drafts)
    return HydrostaticTable(
        drafts=drafts,
        trims=(0.0,),
        volume=(volume,),
        lcb=(tuple(11.9 - 0.12 * (t - 2.0) for t in drafts),),
        kb=(tuple(t * 1.15 / 2.15 for t in drafts),),
        bmt=(tuple(485.0 / v for v in volume),),
        lcf=(tuple(11.5 - 0.20 * (t - 2.0) for t in drafts),),
        area=None,
        bml=(tuple(5100.0 / v for v in volume),),
        bml_basis="as tabulated",
        where=AT,
    )


WEIGHTS = tuple(
    Weight(id=name, mass=mass, certificate=paper, x=12.0, z=3.85, where=AT)
    for name, mass, paper in (
        ("A", 1.0042, "WB-1107, 2026-01-20"),
        ("B", 1.0036, "WB-1108, 2026-01-20"),
        ("C", 0.9981, "WB-1109, 2026-01-20"),
        ("D", 1.0017, ""),
    )
)
START = {"A": -2.9, "B": -2.9, "C": 2.9, "D": 2.9}
_SEQUENCE = ("", "A", "B", "B", "A", "C", "D", "D", "C")


def _shifts() -> tuple[tuple[Shift, ...], tuple[float, ...]]:
    """Shifts in the usual order for four weights, and the moment after each [t m]."""
    place, mass = dict(START), {w.id: w.mass for w in WEIGHTS}
    shifts, moments = [], []
    for number, name in enumerate(_SEQUENCE):
        moves = [Move(weight=w, y=y, x=None, z=None, where=AT) for w, y in START.items()]
        if name:
            place[name] = -place[name]
            moves = [Move(weight=name, y=place[name], x=None, z=None, where=AT)]
        time = f"{9 + number // 4:02d}:{15 * (number % 4):02d}"
        shifts.append(Shift(number=number, time=time, moves=tuple(moves), moment=None, where=AT))
        moments.append(sum(mass[w] * (place[w] - START[w]) for w in place))
    return tuple(shifts), tuple(moments)


SHIFTS, MOMENTS = _shifts()
DEVICES = (
    Device(id="P1 fore", kind="pendulum", length=2.412, place="fore hold", where=AT),
    Device(id="P2 <mid>", kind="pendulum", length=2.855, place="engine room", where=AT),
    Device(id="P3 aft θ", kind="pendulum", length=2.203, calibration="tape T-44", where=AT),
)
_SLOPE = 1.0 / (195.4 * 1.05)
_OFFSETS = (0.0004, -0.0011, 0.0)
_NOISE = (
    3,
    -5,
    2,
    6,
    -4,
    -1,
    4,
    -3,
    1,
    -2,
    5,
    -6,
    2,
    0,
    3,
    -4,
    1,
    -1,
    2,
    4,
    -3,
    -2,
    5,
    -5,
    0,
    1,
    -1,
)


def _readings() -> tuple[Reading, ...]:
    made = []
    for n, shift in enumerate(SHIFTS):
        for j, device in enumerate(DEVICES):
            noise = _NOISE[(3 * n + j) % len(_NOISE)] * 2.5e-5
            tangent = _OFFSETS[j] + _SLOPE * MOMENTS[n] + noise
            spoiled = (n, j) == (6, 2)
            value = round((device.length or 1.0) * (tangent + 0.004 * spoiled), 4)
            swing = (0.006, -0.0055, 0.005, -0.0046, 0.0042) if j == 0 else (0.0005, -0.0005)
            made.append(
                Reading(
                    shift=shift.number,
                    device=device.id,
                    kind=("swings", "repeats", "single")[j],
                    values=(value,) if j == 2 else tuple(value + s for s in swing),
                    quantity="length",
                    note=NASTY_NOTE if (n, j) == (3, 1) else "",
                    excluded="bob touched the trough <edge>" if spoiled else "",
                    where=AT,
                )
            )
    return tuple(made)


def _waterline() -> tuple[tuple[DraftReading, ...], Waterline]:
    ap, fp, bend, lean = 2.52, 2.11, 0.008, 0.0031
    misses = (0.002, -0.003, 0.001, 0.004, -0.002, -0.019)
    drafts, rows = [], []
    for (x, side), miss in zip(
        ((2.0, "P"), (2.0, "S"), (12.0, "P"), (12.0, "S"), (22.5, "P"), (22.5, "S")),
        misses,
        strict=True,
    ):
        y = -3.4 if side == "P" else 3.4
        fitted = ap + (fp - ap) * x / LPP + bend * (1.0 - (2.0 * x / LPP - 1.0) ** 2) + lean * y
        draft = fitted + miss
        board = 3.4 - draft if x == 12.0 else None
        drafts.append(DraftReading(x=x, side=side, y=y, draft=draft, freeboard=board, where=AT))
        student = miss / 0.004
        rows.append(
            DraftResidual(
                x=x, side=side, draft=draft, fitted=fitted, residual=miss,
                studentised=student, flagged=abs(student) > 4.0,
            )
        )  # fmt: skip
    line = Waterline(
        draft_ap=ap, draft_fp=fp, draft_mid=(ap + fp) / 2.0 + bend, trim=ap - fp,
        tau=(ap - fp) / LPP, deflection=bend, list_tan=lean, residuals=tuple(rows), sd=0.0098, dof=2,
    )  # fmt: skip
    return tuple(drafts), line


DRAFTS, WATERLINE = _waterline()
TANKS = (
    Tank(name="Fuel, port", contents="gas oil", state="slack", density=0.845, level=0.6, volume=2.1,
         mass=1.7745, centre=Point(6.1, -1.8, 1.1), fsm=1.31, fsm_basis="density times breadth cubed times length / 12", where=AT),
    Tank(name="Fresh water", contents="water", state="pressed full", density=1.0, level=None, volume=1.5,
         mass=1.5, centre=Point(3.2, 0.0, 1.9), fsm=0.0, fsm_basis="", where=AT),
    Tank(name="Bilge holding", contents="", state="empty", density=None, level=None, volume=None,
         mass=0.0, centre=None, fsm=0.0, fsm_basis="", where=AT),
)  # fmt: skip
ITEMS = tuple(
    Item(action=action, name=name, mass=mass, centre=Point(*at), to=Point(*to) if to else None, basis=basis, where=AT)
    for action, name, mass, at, to, basis in (
        ("deduct", "Pendulum gear", 0.18, (12.0, 0.4, 2.2), None, "weighed"),
        ("deduct", "Shore crane sling <left>", 0.06, (10.0, -1.0, 3.9), None, ""),
        ("deduct", "Workshop stores", 0.75, (4.5, 1.1, 2.4), None, "estimated by the yard"),
        ("deduct", "Rain water in hold", 0.22, (15.0, 0.0, 0.6), None, "sounded"),
        ("add", "Life raft", 0.21, (9.0, 2.1, 5.3), None, "maker's data"),
        ("add", "Anchor & cable", 0.94, (22.8, 0.3, 3.1), None, "weighed"),
        ("add", "Mast top and radar", 0.12, (8.2, 0.0, 9.4), None, ""),
        ("relocate", "Towing hook", 0.41, (1.5, 0.0, 3.6), (4.0, 0.0, 3.9), ""),
        ("relocate", "Spare propeller", 0.63, (14.0, 1.5, 1.0), (2.5, 0.0, 1.2), ""),
        ("relocate", "Deck plates", 0.35, (18.0, -2.0, 3.4), (11.0, 0.0, 1.3), "counted"),
    )
)  # fmt: skip
PEOPLE = (
    Person(name="I. Test-Leader", role="conducts the test", mass=0.09, centre=Point(12.0, 0.0, 4.4), where=AT),
    Person(name="M. Reader <aft>", role="reads pendulums", mass=0.08, centre=Point(5.0, 0.5, 2.9), where=AT),
    Person(name="Q. Witness", role="witness for the administration", where=AT),
)  # fmt: skip


def made_trial(units: str) -> Trial:
    return Trial(
        folder="made",
        digest="5f" * 32,
        vessel=Vessel(name=NASTY_NAME, number="X-4471", lpp=LPP, beam=BEAM, depth=3.4, kind="workboat"),
        occasion=Occasion(
            date=datetime.date(2026, 3, 14), place="Inner basin, Nowhere Haven", berth="alongside, slack lines",
            weather="light airs", water_depth=5.5, notes=NASTY_NOTE,
        ),
        settings=Settings(
            x_origin="amidships", units=units, rule_set="IMO", method=None, allowance=0.006,
            keel_thickness=0.012, interpolation="cubic", kg_limit=KG_LIMIT,
        ),
        people=PEOPLE,
        devices=DEVICES,
        weights=WEIGHTS,
        shifts=SHIFTS,
        readings=_readings(),
        drafts=DRAFTS,
        samples=(
            Sample(place="starboard, amidships", depth=1.0, density=1.0215, temperature=11.5, share=1.0, where=AT),
            Sample(place="port, aft", depth=2.0, density=1.0222, temperature=None, share=1.0, where=AT),
        ),
        tanks=TANKS,
        items=ITEMS,
        changes=(Change(change="ashore", name="Draft party", mass=0.16, centre=Point(12.0, 1.0, 4.0), where=AT),),
        table=_table(),
        remarks=("The marks at x = 12 m are taken at half the beam.",),
    )  # fmt: skip
