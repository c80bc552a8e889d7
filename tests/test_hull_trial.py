"""Trials made on hulls of closed form are in equilibrium, by the mesh library too."""

import csv

import numpy as np
import pytest
from box_liquid import liquid_centre
from hull_mesh import mesh_below
from hull_ships import BOX, CYLINDER, HIGH_CHINE, PATROL
from hull_trial import truth_of, write_hull_trial
from simulate import SlackTank

TANK = SlackTank("day tank", "gas oil", "slack", 0.85, 1.5, 9.0, 0.8, 1.1, 1.5, 2.0, 1.2)


def rows(folder, file):
    with (folder / file).open(encoding="utf-8", newline="") as text:
        return list(csv.DictReader(text))


@pytest.mark.parametrize("more", [{}, {"rise": 0.8, "tanks": (TANK,), "allowance": 0.006}], ids=["plain", "free"])  # fmt: skip
@pytest.mark.parametrize("ship", [HIGH_CHINE, PATROL], ids=lambda s: s.name)
def test_b_and_g_are_on_one_line_at_every_shift(ship, more, tmp_path):
    truth = write_hull_trial(tmp_path, ship, degrees=(0.0, 4.0, -8.0), **more)
    whole = truth.inclined
    for moment, lift, t in zip(truth.moments, truth.lifts, truth.tangents, strict=True):
        at = truth.scene.state(moment, lift)
        volume, (x, y, z) = mesh_below(ship, at.mean, at.tau, truth.deflection, t)
        liquid = sum(k.mass * np.array(k.moved(t, at.tau)) for k in truth.scene.tanks)
        gx, gy, gz = (
            np.array([whole.x, whole.y, whole.z])
            + (np.array([0.0, moment, lift]) + liquid) / whole.mass
        )
        # the mesh is good to 1e-6 of its length, breadth and draft
        assert volume * truth.scene.density * (1.0 + truth.scene.allowance) == pytest.approx(
            whole.mass, rel=1e-6
        )
        assert y + z * t == pytest.approx(gy + gz * t, abs=1e-6 * ship.beam)
        assert x == pytest.approx(gx - at.tau * (gz - z), abs=1e-6 * ship.lpp)


def test_files_hold_the_waterline_and_the_tangents(tmp_path):
    truth = write_hull_trial(tmp_path, PATROL, list_tan=-0.003, tau=0.004)
    lengths, zeros = truth.scene.lengths, truth.scene.zeros
    found = {
        (int(r["shift"]), r["device"]): float(r["reading [mm]"]) / 1000.0 / lengths[r["device"]]
        - zeros[r["device"]]
        for r in rows(tmp_path, "readings.csv")
    }
    for n, degrees in enumerate((0.0, 2.0, 4.0, 8.0, 0.0, -2.0, -4.0, -8.0, 0.0)):
        expected = np.tan(np.radians(degrees)) if degrees else -0.003
        for device in lengths:
            assert found[n, device] == pytest.approx(expected, abs=1e-10)
    drafts = rows(tmp_path, "drafts.csv")
    assert len(drafts) == 6
    for row in drafts:
        x, y = float(row["x [m]"]), float(row["y [m]"]) * (1 if row["side"] == "S" else -1)
        level = PATROL.draft - 0.004 * (x - 10.2) + 0.020 * (1.0 - (x / 10.2 - 1.0) ** 2)
        assert float(row["draft [m]"]) == pytest.approx(level - 0.003 * y, abs=1e-10)
    assert not (tmp_path / "hydrostatics.csv").exists()


def test_lightship_and_ledger_add_up_to_the_ship_as_inclined(tmp_path):
    truth = write_hull_trial(tmp_path, PATROL, tanks=(TANK,))
    parts = [(truth.displacement, truth.lcg, truth.tcg, truth.vcg)]
    axes = ("x [m]", "y [m]", "z [m]")
    start = {r["weight"]: float(r["y [m]"]) for r in rows(tmp_path, "shifts.csv")[:2]}
    parts += [
        (float(r["mass [t]"]), float(r["x [m]"]), start[r["id"]], float(r["z [m]"]))
        for r in rows(tmp_path, "weights.csv")
    ]
    for r in rows(tmp_path, "ledger.csv"):
        sign = -1.0 if r["action"] == "add" else 1.0
        parts.append((sign * float(r["mass [t]"]), *(float(r[a]) for a in axes)))
    parts.append((0.08, 0.45 * PATROL.lpp, 0.2, 0.95 * PATROL.depth))
    parts.append((TANK.mass, TANK.x, TANK.y, TANK.z))
    mass, *centre = np.array(parts).T
    whole = truth.inclined
    assert mass.sum() == pytest.approx(whole.mass, rel=1e-12)
    for at, expected in zip(centre, (whole.x, whole.y, whole.z), strict=True):
        assert (mass * at).sum() / mass.sum() == pytest.approx(expected, abs=1e-12)


def test_box_needs_the_moments_of_its_closed_form(tmp_path):
    # M = D ((KB + BM - KG) t + BM t^3 / 2) on an even keel, at any deflection
    truth = write_hull_trial(tmp_path, BOX, list_tan=0.0, tau=0.0)
    b, d = truth.buoyancy, truth.inclined.mass
    bm = 60.0 * 12.0**3 / 12.0 / b.volume
    for t, moment in zip(truth.tangents, truth.moments, strict=True):
        expected = d * ((b.z + bm - truth.inclined.z) * t + 0.5 * bm * t**3)
        assert moment == pytest.approx(expected, rel=1e-9, abs=1e-8)


def test_cylinder_needs_moments_in_proportion_to_the_tangent(tmp_path):
    truth = write_hull_trial(tmp_path, CYLINDER, list_tan=0.0, deflection=0.0, tau=0.0)
    for t, moment in zip(truth.tangents, truth.moments, strict=True):
        assert moment == pytest.approx(truth.inclined.mass * 1.2 * t, rel=1e-9, abs=1e-8)


@pytest.mark.parametrize(
    "depth, degrees, ratio",
    [(0.05, 2, 0.773), (0.05, 4, 0.483), (0.2, 4, 1.001), (0.2, 8, 0.776), (2.9, 2, 0.999), (2.9, 4, 0.773)],
)  # fmt: skip
def test_box_tank_whose_liquid_meets_bottom_or_top(depth, degrees, ratio):
    # Closed forms for a tank 6 m broad and 3 m deep: exact moment over the fixed one.
    t = np.tan(np.radians(degrees))
    across, up = liquid_centre(6.0, 3.0, depth, t)
    assert 6.0 * depth * (across + up * t) / (18.0 * t) == pytest.approx(ratio, abs=5e-4)


def test_slack_box_tank():
    # Closed form: 8 m broad, 2 m deep at 3 degrees.
    found = liquid_centre(8.0, 4.0, 2.0, np.tan(np.radians(3.0)))
    assert found == pytest.approx((0.139754, 0.003662), abs=5e-7)


def test_truth_does_not_depend_on_which_shift_was_solved_first(tmp_path):
    truth = write_hull_trial(tmp_path, HIGH_CHINE)
    again = truth_of(truth.scene)
    assert again.tangents == truth.tangents
    assert np.degrees(np.arctan(truth.tangents[3])) == pytest.approx(8.0, abs=1e-9)
