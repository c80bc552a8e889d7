"""The whole reduction: what it refuses, what leaves it unchanged, and hard cases solved by hand."""

import dataclasses
import math
import re
from itertools import pairwise

import numpy as np
import pytest
from demos import demo_files
from hypothesis import given
from hypothesis import strategies as st
from scipy.optimize import brentq
from test_exact_hulls import B, L, box_table
from textbook import HERE, item, single_shift, trial, with_weight

from incline import FieldDataError, read_trial, reduce
from incline.hydrostatics import Curves
from incline.record import Change, DraftReading, Move, Point, Sample, Shift, Weight


@pytest.fixture(scope="module")
def workboat(tmp_path_factory):
    folder = tmp_path_factory.mktemp("workboat")
    for file, text in demo_files("workboat-metric").items():
        (folder / file).write_text(text, encoding="utf-8")
    return read_trial(folder)


def codes(t):
    with pytest.raises(FieldDataError, match=r"found .*; expected ") as caught:
        reduce(t)
    return [d.code for d in caught.value.defects]


def turned(t, devices):
    """Readings of some devices with their sign changed."""
    return dataclasses.replace(
        t,
        readings=tuple(
            dataclasses.replace(r, values=tuple(-v for v in r.values)) if r.device in devices else r
            for r in t.readings
        ),
    )


def test_one_device_read_with_the_wrong_sign(workboat):
    with pytest.raises(FieldDataError, match="device P2 heels against the others") as caught:
        reduce(turned(workboat, {"P2"}))
    assert [d.code for d in caught.value.defects] == ["sign-device"]


def test_all_devices_read_with_the_wrong_sign(workboat):
    assert codes(turned(workboat, {"P1", "P2", "P3"})) == ["sign-all"]


def test_a_device_that_does_not_move(workboat):
    still = tuple(
        dataclasses.replace(r, values=(0.4,) * len(r.values)) if r.device == "P1" else r
        for r in workboat.readings
    )
    assert codes(dataclasses.replace(workboat, readings=still)) == ["slope-zero"]


def test_exclusions_that_leave_too_little(workboat):
    left = tuple(
        dataclasses.replace(r, excluded="gust" if r.shift in (1, 2, 3, 5, 6, 7) else "")
        for r in workboat.readings
    )
    assert "moments-too-few" in codes(dataclasses.replace(workboat, readings=left))


@pytest.mark.parametrize("rise", [-1.0, 1.0])
def test_waterline_outside_the_table(workboat, rise):
    drafts = tuple(dataclasses.replace(d, draft=d.draft + rise) for d in workboat.drafts)
    t = dataclasses.replace(workboat, drafts=drafts)
    assert codes(t) == ["waterline-outside-table"]
    with pytest.raises(
        FieldDataError, match=r"drafts 1\.650 to 2\.300 m and trims -0\.400 to 0\.800"
    ):
        reduce(t)


def test_trim_outside_the_table(workboat):
    drafts = tuple(
        dataclasses.replace(d, draft=d.draft - 0.05 * (d.x - 14)) for d in workboat.drafts
    )
    assert codes(dataclasses.replace(workboat, drafts=drafts)) == ["waterline-outside-table"]


def test_a_ledger_that_leaves_no_ship(workboat):
    t = dataclasses.replace(workboat, items=(*workboat.items, item("deduct", 400.0, 3.0)))
    assert codes(t) == ["lightship-none"]


def test_the_largest_deduction_is_named_when_no_ship_is_left(workboat):
    """A mass in kg under [t] is a thousand times too large, and no item of the ledger."""
    first, *others = workboat.weights
    heavy = dataclasses.replace(first, mass=1000.0 * first.mass)
    for t, named in (
        (
            dataclasses.replace(workboat, weights=(heavy, *others)),
            f'"{heavy.id}" of {heavy.mass:.3f} t in weights.csv',
        ),
        (
            dataclasses.replace(workboat, items=(item("deduct", 4000.0, 3.0),)),
            "of 4000.000 t in ledger.csv",
        ),
    ):
        with pytest.raises(FieldDataError, match="left of") as caught:
            reduce(t)
        (defect,) = [d for d in caught.value.defects if d.code == "lightship-none"]
        assert named in defect.hint
        assert "check the unit of its mass" in defect.hint


def test_all_that_is_wrong_comes_at_once(workboat):
    t = turned(workboat, {"P2"})
    t = dataclasses.replace(
        t,
        items=(*t.items, item("deduct", 400.0, 3.0)),
        drafts=tuple(dataclasses.replace(d, draft=d.draft + 1.0) for d in t.drafts),
    )
    assert set(codes(t)) == {"sign-device", "waterline-outside-table", "lightship-none"} or set(
        codes(t)
    ) == {"sign-device", "waterline-outside-table"}


def test_drafts_at_one_place_are_too_few(workboat):
    same = tuple(dataclasses.replace(d, x=10.0) for d in workboat.drafts)
    assert codes(dataclasses.replace(workboat, drafts=same)) == ["drafts-too-few"]


# --- exclusions ---------------------------------------------------------------------------------


def test_an_excluded_reading_gives_both_results(workboat):
    bad = tuple(
        dataclasses.replace(r, values=(r.values[0] + 0.040,), excluded="misread batten")
        if (r.shift, r.device) == (2, "P1")
        else r
        for r in workboat.readings
    )
    result = reduce(dataclasses.replace(workboat, readings=bad))
    clean = tuple(r for r in bad if not r.excluded)
    without = reduce(dataclasses.replace(workboat, readings=clean))
    assert result.outcome.lightship == without.outcome.lightship
    assert result.with_excluded is not None
    counted = tuple(dataclasses.replace(r, excluded="") for r in bad)
    everything = reduce(dataclasses.replace(workboat, readings=counted))
    assert result.with_excluded.lightship == everything.outcome.lightship
    shown = [p for p in result.outcome.heel.points if p.excluded]
    assert [(p.shift, p.device, p.excluded) for p in shown] == [(2, "P1", "misread batten")]
    assert shown[0].residual == pytest.approx(0.040 / 3.215, rel=0.1)


def test_a_device_excluded_altogether_is_said(workboat):
    gone = tuple(
        dataclasses.replace(r, excluded="trough dry" if r.device == "P3" else "")
        for r in workboat.readings
    )
    result = reduce(dataclasses.replace(workboat, readings=gone))
    assert [d.id for d in result.outcome.heel.devices] == ["P1", "P2"]
    assert any("P3" in r for r in result.remarks)


# --- what leaves the result unchanged -----------------------------------------------------------


def light_of(t):
    light = reduce(t).outcome.lightship
    return [e.value for e in (light.displacement, light.vcg, light.lcg, light.tcg)]


@given(seed=st.integers(0, 1000))
def test_order_of_rows_does_not_matter(workboat, seed):
    rng = np.random.default_rng(seed)

    def shuffled(rows):
        return tuple(rows[i] for i in rng.permutation(len(rows)))

    t = dataclasses.replace(
        workboat,
        readings=shuffled(workboat.readings),
        drafts=shuffled(workboat.drafts),
        items=shuffled(workboat.items),
        tanks=shuffled(workboat.tanks),
    )
    assert light_of(t) == pytest.approx(light_of(workboat), abs=1e-10)


def test_the_mirrored_test_gives_the_mirrored_ship(workboat):
    def flip(p):
        return Point(p.x, -p.y, p.z)

    other = {"P": "S", "S": "P", "C": "C"}
    t = dataclasses.replace(
        turned(workboat, {"P1", "P2", "P3"}),
        shifts=tuple(
            dataclasses.replace(s, moves=tuple(dataclasses.replace(m, y=-m.y) for m in s.moves))
            for s in workboat.shifts
        ),
        drafts=tuple(dataclasses.replace(d, y=-d.y, side=other[d.side]) for d in workboat.drafts),
        tanks=tuple(
            dataclasses.replace(k, centre=flip(k.centre) if k.centre else None)
            for k in workboat.tanks
        ),
        people=tuple(dataclasses.replace(p, centre=flip(p.centre)) for p in workboat.people),
        items=tuple(
            dataclasses.replace(i, centre=flip(i.centre), to=flip(i.to) if i.to else None)
            for i in workboat.items
        ),
    )
    d, vcg, lcg, tcg = light_of(workboat)
    assert light_of(t) == pytest.approx([d, vcg, lcg, -tcg], abs=1e-10)


def test_every_zero_is_arbitrary(workboat):
    moved = tuple(
        dataclasses.replace(
            r, values=tuple(v + {"P1": 0.3, "P2": -0.1, "P3": 0.05}[r.device] for v in r.values)
        )
        for r in workboat.readings
    )
    assert light_of(dataclasses.replace(workboat, readings=moved)) == pytest.approx(
        light_of(workboat), abs=1e-9
    )


def test_relocating_there_and_back_is_nothing(workboat):
    a, b = Point(5.0, 1.0, 2.0), Point(20.0, -2.0, 6.0)
    both = (
        dataclasses.replace(item("relocate", 3.0, 2.0), name="there", centre=a, to=b),
        dataclasses.replace(item("relocate", 3.0, 2.0), name="back", centre=b, to=a),
    )
    t = dataclasses.replace(workboat, items=(*workboat.items, *both))
    assert light_of(t) == pytest.approx(light_of(workboat), abs=1e-10)


# --- hard cases by hand -------------------------------------------------------------------------

RHO = 1.025


def box_equilibrium(mass, x, y, z):
    """Mean draft, tau and tangent of list of a floating box with G at (x, y, z): closed form of
    its buoyancy, root found here."""
    mean = mass / RHO / (L * B)

    def along(tau):
        x_b = L / 2 - L**2 * tau / (12 * mean)
        z_b = mean / 2 + L**2 * tau**2 / (24 * mean)
        return x_b + tau * (z - z_b) - x

    tau = brentq(along, -0.05, 0.05, xtol=1e-15)
    z_b = mean / 2 + L**2 * tau**2 / (24 * mean)
    # y_B + z_B t = y_G + z_G t with y_B = BM t, leaving out t^3 terms (t is below 0.005 here).
    return mean, tau, y / (z_b + B**2 / (12 * mean) - z)


def box_drafts(mean, tau, tangent):
    return tuple(
        DraftReading(
            x=px, side=side, y=py, freeboard=None, where=HERE,
            draft=mean - tau * (px - L / 2) + tangent * py,
        )
        for px in (1.0, 20.0, 40.0, 59.0)
        for side, py in (("P", -B / 2), ("S", B / 2))
    )  # fmt: skip


def box_trial(mass, x, y, z, drafts):
    """A test of the box as she is during the shifts, with drafts as given."""
    mean, tau, _ = box_equilibrium(mass, x, y, z)
    z_b = mean / 2 + L**2 * tau**2 / (24 * mean)
    gm = z_b + B**2 / (12 * mean) - z
    moments = [0.0, 30.0, 60.0, -30.0, -60.0, 0.0]
    t = trial(mass, 5.0, moments, {"P": [m / (mass * gm) for m in moments]}, {"P": None}, "tangent")
    sample = Sample(place="a", depth=None, density=RHO, temperature=None, share=1.0, where=HERE)
    return dataclasses.replace(
        t, drafts=drafts, samples=(sample,), table=box_table(trims=(0.0,)),
        vessel=dataclasses.replace(t.vessel, lpp=L, beam=B),
    )  # fmt: skip


def test_box_with_trim_and_list_is_found_again():
    mass, x, y, z = 2214.0, 29.2, 0.004, 4.2
    found = reduce(box_trial(mass, x, y, z, box_drafts(*box_equilibrium(mass, x, y, z)))).outcome
    light = found.lightship
    assert light.displacement.value == pytest.approx(mass, abs=1e-7)
    assert (light.vcg.value, light.lcg.value) == pytest.approx((z, x), abs=1e-9)
    assert light.tcg.value == pytest.approx(y, abs=1e-9)


@pytest.mark.parametrize("trims", [(0.0,), (-0.6, 0.0, 0.6, 1.2)])
def test_changes_between_drafts_and_shifts(trims):
    # Drafts read before 5 t came aboard off the centreline and 3 t went ashore: the ship of the
    # drafts is worked out here from the ship of the shifts by taking moments.
    mass, x, y, z = 2214.0, 29.5, 0.006, 4.2
    came, left = (5.0, Point(50.0, 2.0, 7.0)), (3.0, Point(10.0, -3.0, 5.0))
    before = mass - came[0] + left[0]
    centre = [
        (mass * g - came[0] * getattr(came[1], a) + left[0] * getattr(left[1], a)) / before
        for a, g in zip("xyz", (x, y, z), strict=True)
    ]
    t = box_trial(mass, x, y, z, box_drafts(*box_equilibrium(before, *centre)))
    t = dataclasses.replace(
        t,
        table=box_table(trims=trims),
        changes=(
            Change(change="aboard", name="crew and gear", mass=5.0, centre=came[1], where=HERE),
            Change(change="ashore", name="pump", mass=3.0, centre=left[1], where=HERE),
        ),
    )
    light = reduce(t).outcome.lightship
    assert light.displacement.value == pytest.approx(mass, abs=1e-7)
    assert light.vcg.value == pytest.approx(z, abs=1e-8)
    assert light.lcg.value == pytest.approx(x, abs=1e-8)
    assert light.tcg.value == pytest.approx(y, abs=1e-8)


def test_a_weight_that_also_rises():
    # Exact equilibrium of a circular hull, where KM t holds at every angle: with the weight moved by
    # (d, h), D (KM - KG) t = w d + w h t + D TCG, so t = w d / (D GM - w h).
    d, km, kg, w = 800.0, 5.0, 4.0, 6.0
    base = single_shift(1.0, 1.0, 0.1, 1.0, d, km)
    ys, zs = (0.0, 3.0, 6.0, -3.0, -6.0), (4.0, 4.0, 5.5, 4.0, 5.5)
    tangents = [w * y / (d * (km - kg) - w * (h - 4.0)) for y, h in zip(ys, zs, strict=True)]
    t = with_weight(base, w, 1.0)
    t = dataclasses.replace(
        t,
        weights=(Weight(id="W", mass=w, certificate="", x=30.0, z=4.0, where=HERE),),
        shifts=tuple(
            Shift(number=n, time="", moment=None, where=HERE,
                  moves=(Move(weight="W", y=y, x=None, z=h, where=HERE),))
            for n, (y, h) in enumerate(zip(ys, zs, strict=True))
        ),
        readings=tuple(
            dataclasses.replace(t.readings[0], shift=n, values=(v,)) for n, v in enumerate(tangents)
        ),
    )  # fmt: skip
    # Two corrections of the moment leave (w h / D GM)^3 of it: 1e-6 of GM.
    assert reduce(t).outcome.as_inclined.vcg == pytest.approx(kg, abs=2e-6)


def test_trimmed_ship_and_a_table_that_cannot_say_where_b_is():
    mass, x, z = 2214.0, 29.2, 4.2
    t = box_trial(mass, x, 0.0, z, box_drafts(*box_equilibrium(mass, x, 0.0, z)))
    bare = dataclasses.replace(t, table=box_table(bml=None))
    result = reduce(bare)
    assert result.outcome.lightship.lcg.value is None
    assert result.outcome.lightship.vcg.value is not None
    assert any(re.search(r"LCG is not determined.* mm", r) for r in result.remarks)
    assert codes(dataclasses.replace(t, table=box_table(bml=None, lcf=None))) == ["column-missing"]


def test_drafts_on_the_centreline_leave_tcg_open():
    mass, x, z = 2214.0, 29.8, 4.2
    mean, tau, _ = box_equilibrium(mass, x, 0.0, z)
    drafts = tuple(
        dataclasses.replace(d, side="C", y=0.0, draft=mean - tau * (d.x - L / 2))
        for d in box_drafts(mean, tau, 0.0)
    )
    result = reduce(box_trial(mass, x, 0.0, z, drafts))
    assert result.outcome.lightship.tcg.value is None
    assert result.outcome.lightship.vcg.value == pytest.approx(z, abs=1e-9)
    assert any("TCG is not determined" in r for r in result.remarks)


def test_an_inclinometer_reads_angles():
    base = single_shift(10, 12, 0.25, 10, 8000, 7.0)
    angles = tuple(
        dataclasses.replace(r, values=(math.atan(r.values[0] / 10.0),), quantity="angle")
        for r in base.readings
    )
    device = dataclasses.replace(base.devices[0], kind="inclinometer", length=None)
    t = dataclasses.replace(base, readings=angles, devices=(device,))
    assert reduce(t).outcome.heel.gm_fluid == pytest.approx(0.6, abs=1e-12)


def test_kg_limit_and_its_probability(workboat):
    vcg = reduce(workboat).outcome.lightship.vcg
    for sigmas, chance in ((0.0, 0.5), (1.0, 0.1587), (-1.0, 0.8413)):
        limit = vcg.value + sigmas * vcg.u
        t = dataclasses.replace(
            workboat, settings=dataclasses.replace(workboat.settings, kg_limit=limit)
        )
        result = reduce(t, draws=50_000)
        # Normal distribution table; 50 000 draws give the share to 0.002.
        assert result.outcome.kg_above_limit == pytest.approx(chance, abs=0.001)
        assert result.simulation.kg_above_limit == pytest.approx(chance, abs=0.012)


def test_level_ship_table_without_bml_and_changes():
    # The table cannot tell the new trim; a box's BM_L follows it closely enough for a box, so that
    # LCG comes out by moments and KG stays within the rise of B of a few millimetres of trim.
    mass, x, y, z = 2214.0, 30.02, 0.0, 4.2
    came = Point(50.0, 0.0, 7.0)
    before = mass - 2.0
    centre = [
        (mass * g - 2.0 * getattr(came, a)) / before for a, g in zip("xyz", (x, y, z), strict=True)
    ]
    shift_x = L / 2 - centre[0]  # the ship of the drafts floats level: G over B amidships
    centre[0] = L / 2
    x += shift_x * before / mass
    t = box_trial(mass, x, y, z, box_drafts(*box_equilibrium(before, *centre)))
    t = dataclasses.replace(
        t,
        table=box_table(bml=None),
        changes=(Change(change="aboard", name="gear", mass=2.0, centre=came, where=HERE),),
    )
    light = reduce(t).outcome.lightship
    assert light.displacement.value == pytest.approx(mass, abs=1e-6)
    assert light.vcg.value == pytest.approx(z, abs=1e-4)
    assert light.lcg.value == pytest.approx(x, abs=1e-4)
    assert light.lcg.u is not None
    assert math.isfinite(light.lcg.u)
    assert any("counts as part of the lightship" in r for r in reduce(t).remarks)


@pytest.mark.parametrize("table_trim", [-0.6, 0.5, 1.0])
def test_second_trim_correction_counts_from_the_tables_own_trim(table_trim):
    # A hull whose waterplane's moment of inertia grows with draft: a vee of half-breadth z over the
    # whole length. Volume at draft T amidships and slope tau, exactly: integral of (T - tau s)^2.
    drafts = tuple(np.arange(2.0, 4.01, 0.25))

    def exact(mean, tau):
        volume = L * mean**2 + tau**2 * L**3 / 12.0
        lcf = L / 2 - tau * L**2 / (12.0 * mean)
        inertia = 2.0 * (mean * L**3 / 12.0) - 2.0 * mean * L * (lcf - L / 2) ** 2
        return volume, lcf, inertia / volume

    tau0 = table_trim / L
    rows = [exact(d, tau0) for d in drafts]
    table = box_table(
        drafts=drafts, trims=(table_trim,), area=None,
        volume=(tuple(r[0] for r in rows),), lcf=(tuple(r[1] for r in rows),),
        bml=(tuple(r[2] for r in rows),),
    )  # fmt: skip
    curves = Curves(table, L, "cubic")
    for trim in (-0.5, 0.0, 1.2):
        found = curves.buoyancy(np.asarray(3.0), np.asarray(trim / L), None)
        # The correction is good to the third order of the trim: 1e-3 m3 of 540 here.
        assert found.volume == pytest.approx(
            exact(3.0, trim / L)[0], abs=2e-3 + 0.1 * abs(trim - table_trim) ** 3
        )


def test_few_water_samples_do_not_blow_up_the_interval(workboat):
    two = dataclasses.replace(workboat, samples=workboat.samples[:2])
    result = reduce(two, draws=50_000)
    displacement = result.outcome.lightship.displacement
    assert 2.1 * displacement.u > displacement.U
    simulated = result.simulation.results[0]
    assert simulated.u == pytest.approx(displacement.u, rel=0.03)
    assert simulated.agrees


def test_scatter_with_two_degrees_of_freedom_has_intervals_but_no_deviation():
    base = single_shift(10, 12, 0.25, 10, 8000, 7.0)
    odd = tuple(
        dataclasses.replace(r, values=(r.values[0] + e,))
        for r, e in zip(base.readings, (0.0, 0.002, 0.0), strict=True)
    )
    result = reduce(dataclasses.replace(base, readings=odd), draws=20_000)  # one degree of freedom
    assert result.outcome.slope_uncertainty.dof == 1
    kg = next(r for r in result.simulation.results if r.key == "vcg")
    assert (kg.mean, kg.u) == (None, None)
    first = result.outcome.lightship.vcg
    assert kg.tolerance < first.u
    assert kg.symmetric[0] < first.value < kg.symmetric[1]


def test_worse_drafts_never_shrink_the_uncertainty(workboat):
    def u_with(noise):
        rng = np.random.default_rng(5)
        errors = rng.normal(size=len(workboat.drafts))
        drafts = tuple(
            dataclasses.replace(d, draft=d.draft + noise * float(e))
            for d, e in zip(workboat.drafts, errors, strict=True)
        )
        return reduce(dataclasses.replace(workboat, drafts=drafts)).outcome.lightship.displacement.u

    sizes = [u_with(noise) for noise in (0.0, 0.005, 0.010, 0.013, 0.016, 0.02, 0.03)]
    assert all(b >= 0.98 * a for a, b in pairwise(sizes))  # other inputs move by 2 % with the draft


def test_stated_length_of_one_device_counts(workboat):
    from incline.record import Stated

    one = tuple(
        dataclasses.replace(d, stated={"length": Stated(0.04, "normal")}) if d.id == "P2" else d
        for d in workboat.devices
    )
    plain = reduce(workboat).outcome
    found = reduce(dataclasses.replace(workboat, devices=one)).outcome
    names = [line.name for line in found.budgets[1].lines]
    assert "device P2, length" in names
    assert "device P1, length" not in names
    assert found.lightship.vcg.u > plain.lightship.vcg.u


def test_vertical_moves_count_from_the_heel_of_the_shifts():
    # 20 t came aboard 3 m off the centreline after the drafts: the weights that rise feel that heel.
    mass, x, z = 2214.0, 29.5, 4.2
    came = Point(30.0, 3.0, 6.0)
    y = 20.0 * came.y / mass
    before = mass - 20.0
    centre = [
        (mass * g - 20.0 * getattr(came, a)) / before for a, g in zip("xyz", (x, y, z), strict=True)
    ]
    t = box_trial(mass, x, y, z, box_drafts(*box_equilibrium(before, *centre)))
    mean, tau, start = box_equilibrium(mass, x, y, z)
    gm = mean / 2 + L**2 * tau**2 / (24 * mean) + B**2 / (12 * mean) - z
    w, ys, zs = 15.0, (0.0, 3.0, 6.0, -3.0, -6.0, 0.0), (5.0, 5.0, 7.0, 5.0, 7.0, 5.0)
    # D GM t = w d + w h t + D TCG, exactly for a constant metacentre (small heel).
    tangents = [
        (w * d + mass * gm * start) / (mass * gm - w * (h - 5.0))
        for d, h in zip(ys, zs, strict=True)
    ]
    t = dataclasses.replace(
        t,
        changes=(Change(change="aboard", name="crane", mass=20.0, centre=came, where=HERE),),
        weights=(Weight(id="W", mass=w, certificate="", x=30.0, z=5.0, where=HERE),),
        shifts=tuple(
            Shift(number=n, time="", moment=None, where=HERE,
                  moves=(Move(weight="W", y=d, x=None, z=h, where=HERE),))
            for n, (d, h) in enumerate(zip(ys, zs, strict=True))
        ),
        readings=tuple(
            dataclasses.replace(t.readings[0], shift=n, values=(v,)) for n, v in enumerate(tangents)
        ),
    )  # fmt: skip
    assert reduce(t).outcome.as_inclined.vcg == pytest.approx(z, abs=1e-5)


def test_drafts_outside_the_table_are_refused_even_if_changes_bring_her_in():
    mass, x, z = 2214.0, 29.8, 4.2
    came = Point(30.0, 0.0, 4.0)
    t = box_trial(mass, x, 0.0, z, box_drafts(*box_equilibrium(mass - 20.0, x, 0.0, z)))
    t = dataclasses.replace(
        t,
        table=box_table(drafts=(2.99, 3.5, 4.0)),
        changes=(Change(change="aboard", name="load", mass=20.0, centre=came, where=HERE),),
    )
    assert codes(t) == ["waterline-outside-table"]


def test_absurd_heels_and_heights_are_refused(workboat):
    short = tuple(
        dataclasses.replace(d, length=d.length / 1000.0) if d.id == "P1" else d
        for d in workboat.devices
    )
    assert codes(dataclasses.replace(workboat, devices=short)) == ["heel-absurd"]
    heavy = tuple(dataclasses.replace(w, mass=w.mass * 4.0) for w in workboat.weights)
    assert codes(dataclasses.replace(workboat, weights=heavy)) == ["kg-absurd"]
