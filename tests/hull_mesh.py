"""Hulls as closed meshes of triangles, cut by trimesh: a reference from outside the project.

The deflection bends the mesh, so that the waterline is a plane. The cut is not capped: with z = 0 on
the water and the other axes in it, the integrals of trimesh over a cap vanish one by one.
"""

from __future__ import annotations

import itertools
from functools import cache

import numpy as np
import trimesh
from hull_forms import Arc, Floats, Form, Ship
from trimesh.intersections import slice_faces_plane
from trimesh.transformations import rotation_matrix
from trimesh.triangles import mass_properties

Mesh = tuple[Floats, Floats]
"""Vertices and faces, their normals outward."""

STEPS = 60
"""Steps of the coarse mesh between breaks, and on an arc; the fine one has twice as many."""


def mesh_of(form: Form, steps: int) -> Mesh:
    """A closed mesh with vertices on the form's lines, four triangles to a panel.

    Four about the panel's middle, for the two halves of a warped panel lie to one side of it.
    """
    edges = np.unique([form.ends[0], *form.breaks, *form.knuckles, form.ends[1]])
    spans = itertools.pairwise(edges)
    x = np.unique(np.concatenate([np.linspace(a, b, steps + 1) for a, b in spans]))
    side = [np.stack(form.parts[0].at(x, np.zeros_like(x)), axis=-1)]
    for part in form.parts:
        count = steps if isinstance(part, Arc) else 4
        side += [
            np.stack(part.at(x, np.full_like(x, k / count)), axis=-1) for k in range(1, count + 1)
        ]
    ring = np.stack([*(p * [-1.0, 1.0] for p in side[:0:-1]), *side])  # port deck edge to starboard
    corners = np.concatenate([np.broadcast_to(x, ring.shape[:2])[..., None], ring], axis=-1)
    index = np.arange(len(ring) * len(x)).reshape(len(ring), len(x))
    around, at = np.vstack([index, index[:1]]), np.concatenate([corners, corners[:1]])
    a, b, c, d = (around[i, j] for i, j in _PANEL)
    middles = sum(at[i, j] for i, j in _PANEL) / 4.0
    m = index.size + np.arange(middles[..., 0].size).reshape(a.shape)
    faces = [np.stack(f, axis=-1) for f in ((a, b, m), (b, c, m), (c, d, m), (d, a, m))]
    keel = len(ring) // 2
    for port, starboard in ((index[:, 0], index[::-1, 0]), (index[::-1, -1], index[:, -1])):
        p, s = port[: keel + 1], starboard[: keel + 1]  # strips across the ends
        faces += [np.stack([p[:-1], s[:-1], p[1:]], -1), np.stack([s[:-2], s[1:-1], p[1:-1]], -1)]
    vertices = np.concatenate([corners.reshape(-1, 3), middles.reshape(-1, 3)])
    return vertices, np.concatenate([f.reshape(-1, 3) for f in faces])


_LOW, _HIGH = slice(None, -1), slice(1, None)
_PANEL = (_LOW, _LOW), (_HIGH, _LOW), (_HIGH, _HIGH), (_LOW, _HIGH)


@cache
def meshes(ship: Ship, steps: int = STEPS) -> tuple[Mesh, ...]:
    """A mesh for every body of a ship."""
    found: list[Mesh] = []
    for form in ship.forms:
        vertices, faces = mesh_of(form, steps)
        found.extend((vertices + np.array([0.0, y, 0.0]), faces) for y in form.places())
    return tuple(found)


def _moments_below(ship: Ship, steps: int, waterline: tuple[float, float, float, float]) -> Floats:
    """Volume and its moments in x, y, z below a waterline, of the meshes with so many steps."""
    mean, tau, deflection, t = waterline
    half = ship.lpp / 2.0
    normal = np.array([tau, -t, 1.0]) / np.sqrt(1.0 + tau**2 + t**2)
    turn, axis = np.eye(3), np.cross(normal, [0.0, 0.0, 1.0])
    if np.any(axis):
        turn = rotation_matrix(np.arccos(normal[2]), axis)[:3, :3]
    origin = np.array([half, 0.0, mean])
    total = np.zeros(4)
    for vertices, faces in meshes(ship, steps):
        bent = vertices.copy()
        bent[:, 2] -= deflection * (1.0 - (vertices[:, 0] / half - 1.0) ** 2)
        wet, cut, _ = slice_faces_plane((bent - origin) @ turn.T, faces, [0, 0, -1], [0, 0, 0])
        found = mass_properties(wet[cut], density=1.0)
        centre = turn.T @ found.center_mass + origin
        # unbent again: the deflection is a parabola, and the inertia holds the second moment of x
        inertia = turn.T @ found.inertia @ turn
        spread = 0.5 * (inertia[1, 1] + inertia[2, 2] - inertia[0, 0]) / found.volume
        arm = centre[0] / half - 1.0
        centre[2] += deflection * (1.0 - arm**2 - spread / half**2)
        total += found.volume * np.array([1.0, *centre])
    return total


def mesh_below(
    ship: Ship, mean: float, tau: float = 0.0, deflection: float = 0.0, t: float = 0.0
) -> tuple[float, Floats]:
    """Volume [m3] and centre [m] below the waterline, in the axes of the unbent ship.

    Flat triangles miss a curved hull by the square of the step: two meshes, carried to none.
    """
    coarse, fine = (_moments_below(ship, n, (mean, tau, deflection, t)) for n in (STEPS, 2 * STEPS))
    found = (4.0 * fine - coarse) / 3.0
    return float(found[0]), found[1:] / found[0]


def closed(ship: Ship) -> bool:
    """Whether every mesh is watertight with its faces outward."""
    found = [trimesh.Trimesh(v, f) for v, f in meshes(ship)]
    for mesh in found:  # where both sides meet in a stem line, faces have fewer than three corners
        mesh.update_faces((mesh.faces != np.roll(mesh.faces, 1, axis=1)).all(axis=1))
    return all(m.is_watertight and m.is_winding_consistent and m.volume > 0.0 for m in found)
