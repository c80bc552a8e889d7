"""Sections clipped plainly, and what any hull does: mirror, shift, equilibrium, layers of water."""

import itertools
from dataclasses import replace

import numpy as np
import pytest
from drawn import drawn, levers, one, pose, slopes, station
from hull_ships import BOX, HIGH_CHINE, PATROL, ROUND_BILGE
from hypothesis import given
from hypothesis import strategies as st

from incline.errors import Where
from incline.hull import Hull, lever_slope, settle
from incline.hull.loft import runs_of
from incline.hull.sections import cut
from incline.record import Sample
from incline.setup import layers_of

# --- one section -----------------------------------------------------------------------------------


@st.composite
def outlines(draw):
    """Corners round a point, from the port deck edge down and up to starboard: star-shaped."""
    count = draw(st.integers(3, 12))
    # no step as large as half a turn: the corners go round
    shares = np.array(draw(st.lists(st.floats(0.6, 1.0), min_size=count, max_size=count)))
    angles = 2.0 * np.pi * np.cumsum(shares) / shares.sum() + np.pi / 2.0
    radii = np.array(draw(st.lists(st.floats(0.3, 6.0), min_size=count, max_size=count)))
    centre = draw(st.floats(-3.0, 3.0)), draw(st.floats(-3.0, 3.0))
    return centre[0] + radii * np.cos(angles), centre[1] + radii * np.sin(angles)


def clipped(y, u):
    """The corners of the part below u = 0, and the places where edges meet it, one edge at a time."""
    corners, water = [], []
    for (a, b), (c, d) in itertools.pairwise([*zip(y, u, strict=True), (y[0], u[0])]):
        if b < 0.0:
            corners.append((a, b))
        if (b < 0.0) != (d < 0.0):
            at = a + (c - a) * b / (b - d)
            corners.append((at, 0.0))
            water.append(at)
    return corners, sorted(water)


def shoelace(corners):
    """Area, and the integrals of y and u over it."""
    total = np.zeros(3)
    for (a, b), (c, d) in itertools.pairwise([*corners, *corners[:1]]):
        cross = a * d - b * c
        total += cross * np.array([1.0 / 2.0, (a + c) / 6.0, (b + d) / 6.0])
    return total


@given(outlines(), st.floats(-4.0, 4.0), st.floats(-1.0, 1.0))
def test_section_is_cut_as_a_polygon_is_clipped(outline, level, t):
    y, z = outline
    u = z - level - t * y
    found = cut(y, u)
    corners, water = clipped(y, u)
    area = shoelace(corners)
    got = (found.area, found.about_y, found.about_u)
    assert np.array(got) == pytest.approx(area, rel=1e-9, abs=1e-9)
    stretches = list(zip(water[::2], water[1::2], strict=True))
    for k, value in enumerate((found.breadth, found.breadth_1, found.breadth_2), start=1):
        assert value == pytest.approx(sum((b**k - a**k) / k for a, b in stretches), rel=1e-9, abs=1e-9)  # fmt: skip


@given(outlines(), st.floats(-3.0, 3.0), st.floats(-5.0, 5.0))
def test_section_set_off_to_one_side(outline, level, off):
    y, u = outline[0], outline[1] - level
    a, b = cut(y, u), cut(y + off, u)
    moved = (
        a.area, a.about_y + off * a.area, a.about_u, a.breadth, a.breadth_1 + off * a.breadth,
        a.breadth_2 + 2.0 * off * a.breadth_1 + off**2 * a.breadth,
    )  # fmt: skip
    got = (b.area, b.about_y, b.about_u, b.breadth, b.breadth_1, b.breadth_2)
    assert np.array(got) == pytest.approx(np.array(moved), rel=1e-9, abs=1e-8)


@given(outlines(), st.floats(-3.0, 3.0), st.floats(1e-4, 1.0))
def test_water_rises_on_a_section(outline, level, rise):
    # Area grows by the breadths between, and u falls by the rise all over the part already wet.
    y, z = outline
    heights = np.linspace(level, level + rise, 9)
    u = z - heights[:, None]
    found = cut(np.broadcast_to(y, u.shape), u)
    assert np.all(np.diff(found.area) >= -1e-12)
    corners = np.unique(
        np.concatenate([[level, level + rise], z[(z > level) & (z < level + rise)]])
    )
    between = 0.0  # the breadth is straight from corner to corner
    for a, b in itertools.pairwise(corners):
        middle = cut(y, z - 0.5 * (a + b))
        between += (b - a) * middle.breadth
    assert found.area[-1] - found.area[0] == pytest.approx(between, rel=1e-9, abs=1e-9)


# --- one hull --------------------------------------------------------------------------------------

LPP = 40.0


@st.composite
def hulls(draw, sides=False):
    """A hull of five stations, a chine and a flared side; ``sides`` draws port by itself."""
    number = st.floats
    x = np.array([0.0, 9.0, 20.0, 32.0, 40.0])
    forward = np.linspace(0.0, 1.0, 5)
    ends, rake = draw(number(0.3, 1.0)), draw(number(0.0, 1.5))

    def side():
        chine, flare, rise = draw(number(2.5, 4.5)), draw(number(-0.3, 1.2)), draw(number(0.3, 2.5))
        wave = np.array(draw(st.lists(number(-0.1, 0.1), min_size=5, max_size=5)))
        plan = np.array([ends, 0.95, 1.0, 0.9, 0.4]) + wave
        keel = rake * forward**3
        return [
            [(0.0, k), (chine * p, k + rise), ((chine + flare) * p, 6.5 + 0.3 * f)]
            for k, p, f in zip(keel, plan, forward, strict=True)
        ]

    starboard = side()
    port = side() if sides else starboard
    return one(*(station(*place) for place in zip(x, starboard, port, strict=True)))


waterlines = st.tuples(
    st.floats(2.6, 3.6), st.floats(-0.02, 0.02), st.floats(-0.1, 0.1), st.floats(-0.15, 0.15)
)
NAMES = (
    "volume",
    "of_x",
    "of_y",
    "of_z",
    "area",
    "area_x",
    "area_y",
    "area_xx",
    "area_xy",
    "area_yy",
)
ACROSS = {"of_y", "area_y", "area_xy"}


def mirrored(offsets):
    """The hull seen from the other end of the yard: port for starboard."""
    (body,) = offsets.bodies
    turned = tuple(replace(s, starboard=s.port, port=s.starboard) for s in body.stations)
    return replace(offsets, bodies=(replace(body, stations=turned),))


@given(hulls(sides=True), waterlines)
def test_mirror_image(offsets, waterline):
    mean, tau, deflection, t = waterline
    a = Hull(offsets, LPP).displaced(pose(mean, tau, deflection, t))
    b = Hull(mirrored(offsets), LPP).displaced(pose(mean, tau, deflection, -t))
    for name in NAMES:
        sign = -1.0 if name in ACROSS else 1.0
        assert getattr(a, name) == pytest.approx(sign * getattr(b, name), rel=1e-11, abs=1e-8)


@given(hulls(), waterlines, st.floats(1.0, 9.0), st.floats(-3.0, 3.0))
def test_a_body_moved_with_its_mirror_image(offsets, waterline, off, lift):
    # Two hulls side by side at y = +-off, lifted with their water: sums of one hull at each place.
    mean, tau, deflection, t = waterline
    raised = tuple(
        replace(s, starboard=side, port=side)
        for s in offsets.bodies[0].stations
        for side in [tuple(replace(p, z=p.z + lift) for p in s.starboard)]
    )
    pair = replace(
        offsets, bodies=(replace(offsets.bodies[0], stations=raised, y=off, mirrored=True),)
    )
    found = Hull(pair, LPP).displaced(pose(mean + lift, tau, deflection, t))
    single = Hull(offsets, LPP)
    a, b = (single.displaced(pose(mean + t * y, tau, deflection, t)) for y in (off, -off))
    assert found.volume == pytest.approx(a.volume + b.volume, rel=1e-11)
    assert found.of_z == pytest.approx(a.of_z + b.of_z + lift * found.volume, rel=1e-10, abs=1e-8)
    across = a.of_y + b.of_y + off * (a.volume - b.volume)
    assert found.of_y == pytest.approx(across, rel=1e-10, abs=1e-7)
    inertia = a.area_yy + b.area_yy + 2.0 * off * (a.area_y - b.area_y) + off**2 * (a.area + b.area)
    assert found.area_yy == pytest.approx(inertia, rel=1e-10)


@given(hulls(), waterlines)
def test_volume_rises_with_draft_by_the_waterplane(offsets, waterline):
    mean, tau, deflection, t = waterline
    hull, step = Hull(offsets, LPP), 1e-4
    low, mid, high = (
        hull.displaced(pose(mean + s, tau, deflection, t)) for s in (-step, 0.0, step)
    )
    assert low.volume < mid.volume < high.volume
    # a corner within the step turns the slope by a share of it at most
    assert (high.volume - low.volume) / (2.0 * step) == pytest.approx(float(mid.area), rel=1e-4)
    assert (high.of_x - low.of_x) / (2.0 * step) == pytest.approx(float(mid.area_x), rel=1e-4)


@given(hulls(), waterlines, st.floats(2.0, 5.0))
def test_settling_keeps_volume_and_trimming_moment(offsets, waterline, vcg):
    # The waterline asked for is found again from another one; y_B + z_B t is then that of the hull.
    mean, tau, deflection, t = waterline
    hull = Hull(offsets, LPP)
    there = hull.displaced(pose(mean, tau, deflection, t))
    lcg = there.x + tau * (vcg - there.z)
    asked = (np.asarray(float(v)) for v in (there.volume, vcg, lcg))
    at, found = settle(hull, pose(mean + 0.15, 0.0, deflection, t), *asked)
    assert found.volume == pytest.approx(float(there.volume), rel=1e-9)
    assert found.x + at.tau * (vcg - found.z) == pytest.approx(float(lcg), abs=1e-9 * LPP)
    assert (at.mean, at.tau) == pytest.approx((mean, tau), abs=1e-6)
    assert (at.deflection, at.tangent) == (deflection, t)


@given(hulls(sides=True), waterlines, st.floats(2.0, 5.0))
def test_slope_of_levers_is_their_difference(offsets, waterline, vcg):
    mean, _, _, t = waterline
    hull, step = Hull(offsets, LPP), 1e-4
    n = levers(hull, mean, np.array([t - step, t + step]), vcg)
    # The corner of a chine that the waterline passes within the step: its breadth bends there.
    assert slopes(hull, mean, np.array([t]), vcg)[0] == pytest.approx((n[1] - n[0]) / (2.0 * step), rel=2e-4)  # fmt: skip


@pytest.mark.parametrize("deflection, share", [(0.0, 1e-6), (0.02, 1e-5)])
@pytest.mark.parametrize("ship", [HIGH_CHINE, ROUND_BILGE, PATROL], ids=lambda s: s.name)
def test_slope_of_levers_of_a_ship(ship, deflection, share):
    # Trimmed. The slope leaves deflection out, for a hundred-thousandth; upright it is KB + BM, and
    # what trim and heel do with one another is nothing.
    hull, step = Hull(drawn(ship, 31, 24), ship.lpp), 2e-5
    lean = np.array([-0.1, 0.03, 0.0])
    start = pose(ship.draft, 0.005, deflection, 0.0 * lean)
    at = hull.displaced(start)
    asked = at.volume, ship.vcg + 0.0 * lean, at.x + 0.005 * (ship.vcg - at.z)

    def n(t):
        _, found = settle(hull, replace(start, tangent=t), *asked)
        return found.y + found.z * t

    settled, found = settle(hull, replace(start, tangent=lean), *asked)
    slope = lever_slope(hull, settled, found, ship.vcg)
    assert slope == pytest.approx((n(lean + step) - n(lean - step)) / (2.0 * step), rel=share)
    assert slope[2] == pytest.approx(found.z[2] + found.bmt[2], rel=1e-9)


# --- which points go together ----------------------------------------------------------------------


def scaled(shares, extra=(), lines=()):
    """Sections alike but for their size about the keel; ``extra`` stations have one point more."""
    section = [(0.0, 0.0), (3.0, 0.4), (4.5, 2.0), (5.0, 6.0)]
    names = ["", "", *lines, ""] if lines else []
    places = []
    for n, (x, share) in enumerate(zip(np.linspace(0.0, LPP, len(shares)), shares, strict=True)):
        points = [(y * share, z * share) for y, z in section]
        named = list(names)
        if n in extra:
            points.insert(2, tuple(0.3 * np.array(points[1]) + 0.7 * np.array(points[2])))
            named[2:2] = [""] * bool(names)
        places.append(station(x, points, lines=named))
    return one(*places)


@given(
    st.lists(st.floats(0.8, 1.2), min_size=4, max_size=7), st.sets(st.integers(0, 6), min_size=1),
    st.sampled_from([(), ("knuckle",)]), waterlines,
)  # fmt: skip
def test_points_by_order_and_by_girth_give_the_same_hull(shares, extra, lines, waterline):
    # A point more in the middle of a straight edge, in some stations only, calls for shares of girth;
    # these are the same in sections alike, so that the surface is the same.
    by_order = Hull(scaled(shares), LPP).displaced(pose(*waterline))
    by_girth = Hull(scaled(shares, extra, lines), LPP).displaced(pose(*waterline))
    for name in NAMES:
        assert getattr(by_order, name) == pytest.approx(getattr(by_girth, name), rel=1e-9, abs=1e-8)


def test_lines_hold_a_knuckle_where_it_is():
    # Along the line the half-breadths are a parabola; by girth alone the knuckle would wander.
    x = np.linspace(0.0, LPP, 5)
    chine = [(4.0 - 0.002 * (a - 20.0) ** 2, 1.0 + 0.02 * a) for a in x]
    places = []
    for n, (a, (y, z)) in enumerate(zip(x, chine, strict=True)):
        points, names = [(0.0, 0.0), (y, z), (5.0, 6.0)], ["", "chine", "deck edge"]
        if n % 2:
            points.insert(1, (0.4 * y, 0.4 * z))
            names.insert(1, "")
        places.append(station(a, points, lines=names))
    (run,) = runs_of(one(*places).bodies[0])
    at = np.linspace(0.0, LPP, 17)
    y, z = run.at(at)
    corner = np.argmin(np.abs(y[0] - chine[0][0]) + np.abs(z[0] - chine[0][1]))
    assert y[:, corner] == pytest.approx(4.0 - 0.002 * (at - 20.0) ** 2, rel=1e-12)
    assert z[:, corner] == pytest.approx(1.0 + 0.02 * at, rel=1e-12)


# --- water in layers -------------------------------------------------------------------------------


def sample(depth, density, share=1.0):
    return Sample(
        place="", depth=depth, density=density, temperature=None, share=share, where=Where("density.csv")
    )  # fmt: skip


def test_layers_of_samples():
    # A layer reaches half-way to the next depth; samples of one depth are one by their shares.
    some = [
        sample(0.5, 1.000),
        sample(2.5, 1.020),
        sample(2.5, 1.026, 2.0),
        sample(4.5, 1.026, 0.5),
    ]
    mean = (1.000 + 1.020 + 2.0 * 1.026 + 0.5 * 1.026) / 4.5
    low, deep = 1.000, (1.020 + 2.0 * 1.026) / 3.0
    steps = np.array([[0.0, low], [1.5, deep - low], [3.5, 1.026 - deep]]) / [1.0, mean]
    assert np.array(layers_of(some)) == pytest.approx(steps, rel=1e-12, abs=1e-15)


@given(hulls(), waterlines, st.floats(1.0, 1.03))
def test_layers_of_equal_density_are_mixed_water(offsets, waterline, density):
    layers = layers_of([sample(d, density) for d in (0.5, 1.5, 2.5)])
    a = Hull(offsets, LPP).displaced(pose(*waterline))
    b = Hull(offsets, LPP, layers).displaced(pose(*waterline))
    for name in NAMES:
        assert getattr(a, name) == pytest.approx(getattr(b, name), rel=1e-12, abs=1e-9)


@given(st.floats(2.5, 3.5), st.floats(0.2, 2.0), st.floats(-0.08, 0.08), st.floats(-0.1, 0.1))
def test_box_in_two_layers(mean, depth, t, step):
    # Closed form: fresh water to a depth measured along gravity, heavier water by ``step`` below it.
    # Each is a box up to a plane at height h: volume A h, moments I t and A h^2/2 + I t^2/2.
    hull = Hull(drawn(BOX), 60.0, ((0.0, 1.0), (depth, step)))
    area, inertia = 720.0, 60.0 * 12.0**3 / 12.0
    found = hull.displaced(pose(mean, 0.0, 0.0, t))
    volume = of_y = of_z = 0.0
    for h, share in ((mean, 1.0), (mean - depth * np.hypot(1.0, t), step)):
        volume += share * area * h
        of_y += share * inertia * t
        of_z += share * (area * h * h + inertia * t * t) / 2.0
    assert (found.volume, found.of_z) == pytest.approx((volume, of_z), rel=1e-12)
    assert found.of_y == pytest.approx(of_y, rel=1e-12, abs=1e-9)
    # The interface adds its own I to BM: that of the whole is (1 + step) I over the weighted volume.
    assert found.bmt == pytest.approx((1.0 + step) * inertia / volume, rel=1e-12)


@pytest.mark.parametrize("ship", [BOX, ROUND_BILGE, HIGH_CHINE], ids=lambda s: s.name)
def test_metacentre_in_layered_water_is_the_slope_of_levers(ship):
    # KB + BM with the interface's term, against levers at the displacement of the layers. Four per
    # cent more density from 0.7 m down.
    hull = Hull(drawn(ship, 31, 24), ship.lpp, ((0.0, 0.97), (0.7, 0.04)))
    upright = hull.displaced(pose(ship.draft))
    t = 1e-3
    n = levers(hull, ship.draft, np.array([-t, t]), ship.vcg)
    # the levers' cubic term, BM t^2 / 2, is 5e-7 of BM
    assert (n[1] - n[0]) / (2.0 * t) == pytest.approx(float(upright.z + upright.bmt), rel=3e-6)
    slope = slopes(hull, ship.draft, np.array([0.08]), ship.vcg)
    a, b = levers(hull, ship.draft, np.array([0.08 - 1e-4, 0.08 + 1e-4]), ship.vcg)
    assert slope[0] == pytest.approx((b - a) / 2e-4, rel=1e-4)
