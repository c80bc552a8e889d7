"""Tables, waterlines and free surfaces against closed forms and published exercises."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.integrate import simpson
from textbook import HERE, single_shift, trial

from incline import reduce
from incline.flotation import describe_waterline, plan_waterline
from incline.hydrostatics import Curves
from incline.record import DraftReading, HydrostaticTable, Tank

L, B = 60.0, 12.0


def box_table(drafts=(1.0, 2.0, 3.0, 4.0, 5.0), trims=(0.0,), length=L, beam=B, **leave_out):
    """Exact hydrostatics of a box (B at a trimmed waterline by the closed form of a wedge)."""

    def grid(f):
        return tuple(tuple(f(t, trim / length) for t in drafts) for trim in trims)

    columns = {
        "volume": grid(lambda t, _: length * beam * t),
        "lcb": grid(lambda t, tau: length / 2 - length**2 * tau / (12 * t)),
        "kb": grid(lambda t, tau: t / 2 + length**2 * tau**2 / (24 * t)),
        "bmt": grid(lambda t, _: beam**2 / (12 * t)),
        "lcf": grid(lambda *_: length / 2),
        "area": grid(lambda *_: length * beam),
        "bml": grid(lambda t, _: length**2 / (12 * t)),
    } | leave_out
    return HydrostaticTable(
        drafts=drafts, trims=trims, bml_basis="tabulated", where=HERE, **columns
    )


def at(curves, mean, tau=0.0, deflection=None):
    bend = None if deflection is None else np.asarray(deflection)
    return curves.buoyancy(np.asarray(mean), np.asarray(tau), bend)


def test_box_upright():
    # Closed form: volume 2160, KB 1.5, BM 4, KM 5.5; table rows are interpolated exactly because
    # volume and its moments are polynomials of the draft.
    b = at(Curves(box_table(), L, "cubic"), 3.0)
    assert (b.volume, b.z, b.bmt) == pytest.approx((2160.0, 1.5, 4.0), rel=1e-13)
    b = at(Curves(box_table(), L, "cubic"), 3.37)
    assert b.z + b.bmt == pytest.approx(3.37 / 2 + 144 / (12 * 3.37), rel=1e-13)


def test_b12_box_of_150_by_24():
    # Barrass & Derrett, Ship Stability for Masters and Mates, 5th ed., p. 111 and 206 (read).
    t = box_table(drafts=(4.0, 4.7, 5.2, 6.0), length=150.0, beam=24.0)
    b = at(Curves(t, 150.0, "cubic"), 5.0)
    assert (b.z, b.bmt, b.z + b.bmt) == pytest.approx((2.5, 9.6, 12.1), abs=0.05)
    ten = Curves(box_table(drafts=tuple(np.arange(2.0, 7.1, 0.5)), beam=10.0), L, "cubic")
    assert at(ten, 3.5).bmt == pytest.approx(2.38, abs=0.005)
    drafts = np.linspace(2.0, 7.0, 5001)
    b = ten.buoyancy(drafts, np.zeros_like(drafts), None)
    least = int(np.argmin(b.z + b.bmt))
    assert drafts[least] == pytest.approx(4.08, abs=0.005)
    assert (b.z + b.bmt)[least] == pytest.approx(4.08, abs=0.005)


def test_b13_waterplane_by_simpsons_rule_sets_the_entry_draft():
    # Barrass & Derrett, 5th ed., p. 262 (read): half-ordinates from forward at 3 m: area 51.6 m2,
    # centre of flotation 9.767 m from forward. Simpson's rule by scipy; the centre then decides at
    # which draft the table of a trimmed ship is entered.
    half = np.array([0.0, 1.2, 1.5, 1.8, 1.8, 1.5, 1.2])
    x = 18.0 - 3.0 * np.arange(7)  # forward of the after end
    area = -2.0 * simpson(half, x=x)
    lcf = -2.0 * simpson(half * x, x=x) / area
    assert area == pytest.approx(51.6, abs=0.05)
    assert 18.0 - lcf == pytest.approx(9.767, abs=0.0005)
    table = box_table(length=18.0, beam=area / 18.0, lcf=((lcf,) * 5,))
    found = at(Curves(table, 18.0, "cubic"), 2.5, 0.3 / 18.0)
    assert found.entry == pytest.approx(2.65 - 0.3 / 18.0 * (18.0 - 9.767), abs=1e-5)


def test_least_km_of_a_box():
    # KM = T/2 + B^2/(12 T) is least at T = B/sqrt(6): 4.898979 for B 12 (closed form).
    curves = Curves(box_table(drafts=(4.0, 4.4, 4.8, 5.2, 5.6)), L, "cubic")
    drafts = np.linspace(4.7, 5.1, 40001)
    b = curves.buoyancy(drafts, np.zeros_like(drafts), None)
    assert drafts[np.argmin(b.z + b.bmt)] == pytest.approx(B / 6**0.5, abs=1e-5)
    assert (b.z + b.bmt).min() == pytest.approx(4.898979, abs=5e-7)


@pytest.mark.parametrize("trims", [(0.0,), (0.5,), (-0.6, 0.0, 0.6, 1.2)])
@given(tau=st.floats(-0.009, 0.019), mean=st.floats(2.0, 4.0))
def test_box_with_trim(trims, tau, mean):
    # x_B = L/2 - L^2 tau / (12 T), z_B = T/2 + L^2 tau^2 / (24 T): closed form of a box, whether
    # the table is for one trim (with BM_L) or for several.
    b = at(Curves(box_table(trims=trims), L, "cubic"), mean, tau)
    assert b.volume == pytest.approx(L * B * mean, rel=1e-12)
    assert b.x == pytest.approx(L / 2 - L**2 * tau / (12 * mean), rel=1e-12)
    assert b.z == pytest.approx(mean / 2 + L**2 * tau**2 / (24 * mean), rel=1e-12)


def test_even_keel_table_without_bml_knows_b_only_on_its_own_trim():
    curves = Curves(box_table(bml=None), L, "cubic")
    assert at(curves, 3.0, 0.0).x == pytest.approx(L / 2)
    assert curves.tells_lcg(0.0)
    assert not curves.tells_lcg(0.01 * L)
    assert Curves(box_table(), L, "cubic").tells_lcg(0.01 * L)


@pytest.mark.parametrize(
    "power, factor",
    [(None, 2 / 3), (2, 4 / 5), (1, 5 / 6)],
    ids=["rectangle", "parabola", "diamond"],
)
def test_share_of_deflection_in_the_entry_draft(power, factor):
    # Closed forms for waterplanes of half-breadth 1 - |2x/L - 1|^power; None is a rectangle.
    s = np.polynomial.Polynomial([0.0, 1.0])
    half = np.polynomial.Polynomial([1.0]) if power is None else 1.0 - s**power
    area = 2 * B / 2 * L / 2 * 2 * half.integ()(1.0)
    inertia = 2 * B / 2 * 2 * (L / 2) ** 3 * (half * s**2).integ()(1.0)
    drafts = (2.0, 3.0, 4.0)
    t = box_table(
        drafts=drafts,
        volume=(tuple(area * d for d in drafts),),
        area=None,
        lcf=((L / 2,) * 3,),
        bml=(tuple(inertia / (area * d) for d in drafts),),
    )
    b = at(Curves(t, L, "cubic"), 3.0, 0.0, 0.12)
    assert b.deflection_factor == pytest.approx(factor, rel=1e-12)
    # The volume of a deflected vertical-sided hull is exact with that factor.
    assert b.volume == pytest.approx(area * (3.0 + factor * 0.12), rel=1e-12)


def test_three_quarters_without_bml():
    # Common practice, no source: 3/4 of the deflection where the waterplane is not known.
    b = at(Curves(box_table(bml=None), L, "cubic"), 3.0, 0.0, 0.12)
    assert b.entry == pytest.approx(3.09, abs=1e-12)


@given(st.floats(2.2, 3.8), st.sampled_from(["cubic", "linear"]))
def test_interpolation_returns_its_nodes_and_covers_its_range(draft, rule):
    t = box_table(drafts=(2.0, draft, 4.0))
    curves = Curves(t, L, rule)
    assert at(curves, draft).bmt == pytest.approx(B**2 / (12 * draft), rel=1e-12)
    assert curves.covers(2.0, 9.0)
    assert curves.covers(4.0, 0.0)
    assert not curves.covers(1.999, 0.0)
    assert not curves.covers(4.001, 0.0)
    several = Curves(box_table(trims=(-0.5, 0.5)), L, rule)
    assert several.covers(3.0, 0.5)
    assert not several.covers(3.0, 0.51)


def test_linear_rule_is_the_straight_line_between_rows():
    b = at(Curves(box_table(drafts=(3.0, 4.0)), L, "linear"), 3.25)
    assert b.bmt == pytest.approx(4.0 + 0.25 * (3.0 - 4.0), rel=1e-13)


# --- waterline through drafts -------------------------------------------------------------------


def marks(rows, lpp):
    return [
        DraftReading(x=x, side=side, y={"P": -10.0, "S": 10.0}[side], draft=d, freeboard=None, where=HERE)
        for x, p, s in rows
        for side, d in (("P", p), ("S", s))
        if 0.0 <= x <= lpp
    ]  # fmt: skip


def test_b14_marks_carried_to_the_perpendiculars():
    # Specimen draft survey of 2010 (read in part; perpendiculars recomputed): LBP 179.00, marks
    # 1.70 m abaft the forward perpendicular and 9.45 m forward of the after one.
    lpp = 179.0
    drafts = marks([(lpp - 1.70, 10.79, 10.81), (9.45, 11.16, 11.19)], lpp)
    water = describe_waterline(plan_waterline(drafts, lpp), drafts, lpp)
    assert water.draft_fp == pytest.approx(10.7962, abs=0.00005)
    assert water.draft_ap == pytest.approx(11.1961, abs=0.00005)
    assert water.deflection is None
    midship = marks([(lpp / 2, 10.90, 11.03)], lpp)
    three = [*drafts, *midship]
    water = describe_waterline(plan_waterline(three, lpp), three, lpp)
    # The parabola passes through the three mean drafts, so amidships is the mean of its two sides.
    assert water.draft_mid == pytest.approx(10.965, abs=1e-9)
    assert water.deflection is not None


@given(
    mean=st.floats(1, 9),
    trim=st.floats(-1, 1),
    bend=st.floats(-0.1, 0.1),
    lean=st.floats(-0.02, 0.02),
)
def test_waterline_is_recovered_from_its_own_drafts(mean, trim, bend, lean):
    drafts = [
        DraftReading(
            x=x, side=side, y=y, freeboard=None, where=HERE,
            draft=mean - trim / L * (x - L / 2) + bend * (1 - (2 * x / L - 1) ** 2) + lean * y,
        )
        for x in (2.0, 15.0, 30.0, 48.0, 59.0)
        for side, y in (("P", -6.0), ("S", 6.0))
    ]  # fmt: skip
    water = describe_waterline(plan_waterline(drafts, L), drafts, L)
    found = (water.draft_ap - water.draft_fp, water.deflection, water.list_tan, water.draft_mid)
    assert found == pytest.approx((trim, bend, lean, mean + bend), abs=1e-10)
    assert not any(r.flagged for r in water.residuals)


def test_a_misread_draft_is_flagged_and_only_that_one():
    rows = [
        (x, 3.0 + 0.001 * i, 3.001 - 0.001 * i) for i, x in enumerate((2.0, 15.0, 30.0, 48.0, 59.0))
    ]
    rows[3] = (48.0, 3.10, rows[3][2])
    drafts = marks(rows, L)
    water = describe_waterline(plan_waterline(drafts, L), drafts, L)
    assert [(r.x, r.side) for r in water.residuals if r.flagged] == [(48.0, "P")]


# --- free surface -------------------------------------------------------------------------------


@pytest.mark.parametrize(
    "displacement, inertia, density, correction, half",
    [
        # B11: Subramaniam, Ship Stability I (read).
        (6000, 1200.0, 1.0, 0.200, 0.0005),
        (8800, 1166.0, 0.95, 0.126, 0.0005),
        (16000, 20 * 8**3 / 12, 1.010, 0.054, 0.0005),
        # Closed form of a box tank 10 x 8 m in a box ship of 2214 t.
        (2214, 10 * 8**3 / 12, 0.85, 0.163806, 5e-7),
    ],
)
def test_b11_free_surface_correction(displacement, inertia, density, correction, half):
    base = single_shift(10.0, 5.0, 0.05, 4.0, displacement, 7.4)
    fsm = density * inertia
    slack = Tank(
        name="T", contents="oil", state="slack", density=density, level=None, volume=None, mass=0.0,
        centre=None, fsm=fsm, fsm_basis="", where=HERE,
    )  # fmt: skip
    still = reduce(base).outcome
    found = reduce(replace(base, tanks=(slack,))).outcome
    assert found.free_surface.correction == pytest.approx(correction, abs=half)
    # The measured GM is that of the ship with its liquids free: KG comes out lower by the correction.
    assert found.heel.gm_fluid == pytest.approx(still.heel.gm_fluid, rel=1e-13)
    assert still.as_inclined.vcg - found.as_inclined.vcg == pytest.approx(correction, abs=half)


@pytest.mark.parametrize(
    "tangent, moment, low_mm",
    [
        (0.017455065, 50.262717, 0.609),
        (0.034920769, 100.697523, 2.439),
        (0.052407779, 151.477445, 5.493),
        (0.069926812, 202.777395, 9.780),
    ],
)
def test_straight_line_puts_kg_low_on_a_box(tangent, moment, low_mm):
    # Box 60 x 12 x 3 m in salt water, KG 4.2: w d = D sin/cos (GM + BM t^2 / 2) at 1 to 4 degrees
    # (closed form). The straight line reads KG low by half a unit of the last digit given.
    t = trial(
        2214.0, 5.5, [0.0, moment, -moment], {"P": [0.0, tangent, -tangent]}, {"P": None}, "tangent"
    )
    low = 4.2 - reduce(t).outcome.as_inclined.vcg
    assert 1000.0 * low == pytest.approx(low_mm, abs=0.0005)
    # Half BM times sum(t^4)/sum(t^2) is the rule of thumb for it, in the limit of small heel.
    assert low == pytest.approx(0.5 * 4.0 * tangent**2, rel=0.002)
