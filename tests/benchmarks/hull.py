"""What the integrated hull costs, as ratios within one run: ``python tests/benchmarks/hull.py``.

A waterline of the program against trimesh's cut of a mesh with the same stations and points, by CPU
time; a whole process with the hull against the same trial by the straight line, five pairs in turn,
medians given; a million Monte Carlo draws against drawing the numbers alone.
"""

import importlib.util
import itertools
import shutil
import statistics
import sys
import tempfile
import time
from pathlib import Path

import numpy as np
import trimesh
from cost import ROOT, cpu, draws, said

sys.path.insert(0, str(ROOT / "tests"))

from drawn import drawn, pose
from hull_forms import Ship
from hull_mesh import meshes as fine_meshes
from hull_ships import PATROL, ROUND_BILGE, stations
from trimesh.intersections import slice_faces_plane
from trimesh.transformations import rotation_matrix
from trimesh.triangles import mass_properties

from incline import read_offsets
from incline.hull import Hull
from incline.record import Offsets

Mesh = tuple[np.ndarray, np.ndarray]
Places = list[tuple[float, np.ndarray]]

DEMO = ROOT / "demo_trials" / "chine-metric"
BATCH = 2_000


def reducing(folder: Path) -> str:
    words = ["incline", "reduce", str(folder)]
    return f"import sys; sys.argv = {words!r}; from incline.cli import main; main()"


def mesh_of(places: Places) -> Mesh:
    """Vertices and faces of a closed mesh: two triangles between two points of two stations."""
    rings = [np.concatenate([side[:0:-1] * [-1.0, 1.0], side]) for _, side in places]
    width = len(rings[0])
    vertices = [(x, *yz) for (x, _), ring in zip(places, rings, strict=True) for yz in ring]
    faces = []
    for n in range(len(rings) - 1):
        a, b = n * width, (n + 1) * width
        for i, j in itertools.pairwise([*range(width), 0]):
            faces += [(a + i, b + j, b + i), (a + i, a + j, b + j)]
    last = (len(rings) - 1) * width
    for i in range(1, width - 1):
        faces += [(0, i + 1, i), (last, last + i, last + i + 1)]
    return np.array(vertices), np.array(faces)


def cut_mesh(meshes: list[Mesh], mean: float, tau: float, t: float, half: float) -> np.ndarray:  # fmt: skip
    """Volume and its moments below a plane waterline, no cap needed (see `hull_mesh`)."""
    normal = np.array([tau, -t, 1.0]) / np.sqrt(1.0 + tau**2 + t**2)
    turn = rotation_matrix(np.arccos(normal[2]), np.cross(normal, [0.0, 0.0, 1.0]))[:3, :3]
    origin = np.array([half, 0.0, mean])
    total = np.zeros(4)
    for vertices, faces in meshes:
        wet, cut, _ = slice_faces_plane((vertices - origin) @ turn.T, faces, [0, 0, -1], [0, 0, 0])
        found = mass_properties(wet[cut], density=1.0, skip_inertia=True)
        total += found.volume * np.array([1.0, *(turn.T @ found.center_mass + origin)])
    return total


def whole_cut(meshes: list[Mesh], mean: float, tau: float, t: float, half: float):
    """The library's own cut of a mesh with its cap, as a call; None where it cannot make caps.

    Caps need the packages shapely and mapbox_earcut beside trimesh.
    """
    if not all(importlib.util.find_spec(name) for name in ("shapely", "mapbox_earcut")):
        return None
    bodies = [trimesh.Trimesh(*mesh) for mesh in meshes]
    below = np.array([-tau, t, -1.0]) / np.sqrt(1.0 + tau**2 + t**2)
    origin = np.array([half, 0.0, mean])
    return lambda: sum(
        b.slice_plane(origin, below, cap=True, engine="earcut").volume for b in bodies
    )


def per_call(work, least: float = 0.4) -> float:
    """CPU seconds of one call, the median of five runs of as many calls as fill ``least`` seconds."""
    began, count = time.process_time(), 0
    while time.process_time() - began < least:
        work()
        count += 1
    runs = []
    for _ in range(5):
        began = time.process_time()
        for _ in range(count):
            work()
        runs.append((time.process_time() - began) / count)
    return statistics.median(runs)


def compare(title: str, ship: Ship, offsets: Offsets, places: list[Places]) -> None:
    """One waterline, and one of many at a time, against two meshes.

    The first has the stations and points of the offsets and is flat between them; the second, that
    of `hull_mesh`, comes nearer to the curved hull.
    """
    hull, half, tau, t = Hull(offsets, ship.lpp), ship.lpp / 2.0, 0.006, 0.05
    truth = ship.below(ship.draft, tau, 0.0, t).volume
    one = pose(ship.draft, tau, 0.0, t)
    many = pose(ship.draft, tau, 0.0, np.linspace(0.02, 0.08, BATCH))
    alone = per_call(lambda: hull.displaced(one))
    together = per_call(lambda: hull.displaced(many)) / BATCH
    off = 100.0 * (float(hull.displaced(one).volume) / truth - 1.0)
    print(
        f"{title}: {1e3 * alone:.2f} ms a waterline, {1e3 * together:.3f} ms of {BATCH} together,"
        f" {off:+.4f} % volume"
    )
    for meshes in ([mesh_of(p) for p in places], list(fine_meshes(ship))):
        took = per_call(lambda m=meshes: cut_mesh(m, ship.draft, tau, t, half))
        off = 100.0 * (cut_mesh(meshes, ship.draft, tau, t, half)[0] / truth - 1.0)
        print(
            f"  trimesh, {sum(len(f) for _, f in meshes)} triangles: {1e3 * took:.2f} ms,"
            f" {took / alone:.1f} times; {took / together:.0f} times one of many; {off:+.4f} % volume"
        )
        capped = whole_cut(meshes, ship.draft, tau, t, half)
        if capped is not None:
            took = per_call(capped)
            print(f"    cut and capped: {1e3 * took:.2f} ms, {took / alone:.1f} times")


def main() -> None:
    record = read_offsets(DEMO)
    demo = [
        [(s.x, np.array([(p.y, p.z) for p in s.starboard])) for s in body.stations]
        for body in record.offsets.bodies
    ]
    compare("demo trial", PATROL, record.offsets, demo)
    for count, arc in ((31, 12), (31, 48)):
        (form,) = ROUND_BILGE.forms
        places = [
            (x, np.array([p[:2] for p in points])) for x, points in stations(form, count, arc)
        ]
        title = f"round bilge, {count} stations of {len(places[0][1])} points"
        compare(title, ROUND_BILGE, drawn(ROUND_BILGE, count, arc), [places])
    with tempfile.TemporaryDirectory() as name:
        line = Path(name) / "line"
        shutil.copytree(DEMO, line)
        toml = line / "trial.toml"
        text = toml.read_text(encoding="utf-8") + '\n[method]\nheel = "straight-line"\n'
        toml.write_text(text, encoding="utf-8")
        cpu(reducing(DEMO))
        pairs = [(cpu(reducing(line)), cpu(reducing(DEMO))) for _ in range(5)]
    straight, hull = (statistics.median(p[i] for p in pairs) for i in (0, 1))
    ratio = statistics.median(h / s for s, h in pairs)
    print(f"reduce {hull:.2f} s, by the straight line {straight:.2f} s: {ratio:.2f} times")
    drawing, whole, peak = said(draws(DEMO))
    print(
        f"a million draws {whole:.2f} s, drawing the numbers alone {drawing:.2f} s:"
        f" {whole / drawing:.2f} times, peak memory {peak:.0f} MB"
    )
    print(time.strftime("%Y-%m-%d"))


if __name__ == "__main__":
    main()
