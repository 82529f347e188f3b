"""Structured nine-node meshes for tests, each with its part (outline drawn, wall set) and shape.

Only element corners are given; the rest follows the rules of `screenapp.model.mesh`: interior
sides straight, boundary sides with their middle node on the exact curve, centre nodes by the
transfinite blend.  Tests add supports and cases with `dataclasses.replace`, e.g.::

    plate = rectangle(10.0, 2.0, 5, 2)
    part = replace(plate.part, supports=(FixedSupport("s1", "e4"),), cases=(...,))

Features of the four-sided meshes: e1 bottom (η = 0), e2 right (ξ = 1), e3 top, e4 left; corners
c1 (ξ, η = 0, 0), c2 (1, 0), c3 (1, 1), c4 (0, 1).
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import ArrayLike, NDArray

from screenapp.model.curves import Curve
from screenapp.model.mesh import Mesh
from screenapp.model.part import (
    Case,
    CircleHole,
    Corner,
    Edge,
    ElementName,
    FixedSupport,
    ForceLoad,
    Loop,
    Material,
    MeshWishes,
    Part,
    Point,
    Wall,
)
from screenapp.model.shape import BoundaryCurve, Shape, shape_of

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Mapping = Callable[[Floats, Floats], tuple[Floats, Floats]]
"""Takes ξ, η in [0, 1] (arrays of one shape) to x, y [mm]."""

STEEL = Material(
    "steel", 210_000.0, 0.3, 7850.0, 235.0, 360.0, 12e-6, source="typical, from memory"
)
WALL = Wall(1.0, "steel")


@dataclass(frozen=True)
class Structured:
    """A part with no supports and cases yet, its exact boundary and a mesh of it."""

    part: Part
    shape: Shape
    mesh: Mesh


@dataclass(frozen=True)
class EllipticArc:
    """An arc of an axis-parallel ellipse with its centre at the origin; `t` runs in its angle.

    Parts have no ellipses; this one stands in for a curve of `screenapp.model.curves` so that
    the elliptic membrane can be meshed exactly.  `begin` and `sweep` are in the angle φ of
    (a cos φ, b sin φ) [rad].
    """

    a: float
    b: float
    begin: float
    sweep: float

    @property
    def start(self) -> Point:
        """First point [mm]."""
        return tuple(self.point(0.0))  # type: ignore[return-value]

    @property
    def end(self) -> Point:
        """Last point [mm]."""
        return tuple(self.point(1.0))  # type: ignore[return-value]

    def point(self, t: ArrayLike) -> Floats:
        """Points [mm], `t.shape + (2,)`."""
        phi = self.begin + self.sweep * np.asarray(t, dtype=float)
        return np.stack([self.a * np.cos(phi), self.b * np.sin(phi)], axis=-1)

    def tangent(self, t: ArrayLike) -> Floats:
        """Unit tangents, `t.shape + (2,)`."""
        phi = self.begin + self.sweep * np.asarray(t, dtype=float)
        d = np.stack([-self.a * np.sin(phi), self.b * np.cos(phi)], axis=-1) * self.sweep
        return np.asarray(d / np.linalg.norm(d, axis=-1, keepdims=True))

    def nearest(self, p: Point) -> float:
        """The parameter of a point that lies on the ellipse or close to it."""
        turned = math.atan2(p[1] / self.b, p[0] / self.a) - self.begin
        if self.sweep < 0.0:
            turned = -turned
        turned = (turned + 1e-9) % (2.0 * math.pi) - 1e-9
        return min(max(turned / abs(self.sweep), 0.0), 1.0)


def mesh_from_corners(points: Floats, quads: Ints, shape: Shape) -> Mesh:
    """A nine-node mesh from corner points (n, 2) [mm] and quads (n_elements, 4) by these points.

    Every side that belongs to one quad only must lie on a curve of the shape.
    """
    n = len(points)
    ends = np.stack([quads, np.roll(quads, -1, axis=1)], axis=2)  # (n_elements, 4, 2)
    _, first, inverse, count = np.unique(
        np.sort(ends.reshape(-1, 2), axis=1),
        axis=0,
        return_index=True,
        return_inverse=True,
        return_counts=True,
    )
    inverse = inverse.ravel()
    middles = points[ends.reshape(-1, 2)[first]].mean(axis=1)
    boundary = []
    for flat in first[count == 1]:
        start, end = ends.reshape(-1, 2)[flat]
        piece, t0, t1 = _piece_of(shape, points[start], points[end])
        middles[inverse[flat]] = shape.curves[piece].curve.point(0.5 * (t0 + t1))
        boundary.append((piece, t0, t1, flat // 4, flat % 4))
    boundary.sort()
    n_sides = len(first)
    nine = np.concatenate(
        [quads, n + inverse.reshape(-1, 4), n + n_sides + np.arange(len(quads))[:, None]], axis=1
    )
    partial = np.concatenate([points, middles])
    p = partial[nine[:, :8]]
    centres = 0.5 * p[:, 4:8].sum(axis=1) - 0.25 * p[:, :4].sum(axis=1)
    rows = np.array(boundary)
    return Mesh(
        nodes=np.concatenate([partial, centres]),
        quads=nine.astype(np.int64),
        sides=rows[:, 3:5].astype(np.int64),
        side_piece=rows[:, 0].astype(np.int64),
        side_t=rows[:, 1:3],
        corner_nodes={
            name: int(np.argmin(np.hypot(*(points - at).T))) for name, at in shape.sharp_corners
        },
        worst_jacobian=_worst_jacobian(points[quads]),
    )


def mapped_corners(mapping: Mapping, n_along: int, n_across: int) -> tuple[Floats, Ints]:
    """Corner points and quads of the unit square, divided evenly and mapped."""
    xi, eta = np.meshgrid(
        np.linspace(0.0, 1.0, n_along + 1), np.linspace(0.0, 1.0, n_across + 1), indexing="xy"
    )
    points = np.stack([np.broadcast_to(c, xi.shape).ravel() for c in mapping(xi, eta)], axis=1)
    at = np.arange(points.shape[0]).reshape(n_across + 1, n_along + 1)
    quads = np.stack([at[:-1, :-1], at[:-1, 1:], at[1:, 1:], at[1:, :-1]], axis=2).reshape(-1, 4)
    return np.asarray(points, dtype=float), quads


def mapped(mapping: Mapping, n_along: int, n_across: int, shape: Shape) -> Mesh:
    """The unit square mapped on to a four-sided shape."""
    return mesh_from_corners(*mapped_corners(mapping, n_along, n_across), shape)


def shaken(mesh: Mesh, shape: Shape, share: float, seed: int = 0) -> Mesh:
    """The same mesh with its inner corner nodes moved by up to `share` of the element size."""
    rng = np.random.default_rng(seed)
    used, inverse = np.unique(mesh.quads[:, :4], return_inverse=True)
    points = mesh.nodes[used].copy()
    inner = ~np.isin(used, mesh.side_nodes)
    size = share * float(mesh.element_sizes.min())
    points[inner] += rng.uniform(-size, size, (int(inner.sum()), 2))
    return mesh_from_corners(points, inverse.reshape(-1, 4), shape)


def down_and_along(case: Structured, element: ElementName) -> Part:
    """Its part fixed on e4, under two cases on e2: 100 N down, and 300 N along."""
    return replace(
        case.part,
        mesh=MeshWishes(element=element),
        supports=(FixedSupport("s", "e4"),),
        cases=(
            Case("k1", "down", (ForceLoad("f", "e2", 0.0, -100.0),)),
            Case("k2", "along", (ForceLoad("g", "e2", 300.0, 0.0),)),
        ),
    )


def outlined(
    corners: tuple[Point, ...],
    through: tuple[Point | None, ...] | None = None,
    wall: Wall = WALL,
    material: Material = STEEL,
) -> Part:
    """A part with this outline: corners c1, c2 ... and edges e1, e2 ..., arcs where a point is
    given."""
    vias = through if through is not None else (None,) * len(corners)
    loop = Loop(
        tuple(Corner(f"c{i + 1}", at) for i, at in enumerate(corners)),
        tuple(Edge(f"e{i + 1}", via) for i, via in enumerate(vias)),
    )
    return Part(outline=loop, wall=replace(wall, material=material.name), materials=(material,))


def four_sided(
    corners: tuple[Point, Point, Point, Point],
    n_along: int,
    n_across: int,
    wall: Wall = WALL,
    material: Material = STEEL,
) -> Structured:
    """Any straight quadrilateral, its sides divided evenly."""
    c1, c2, c3, c4 = (np.asarray(c, dtype=float) for c in corners)

    def blend(xi: Floats, eta: Floats) -> tuple[Floats, Floats]:
        both = [
            (1 - xi) * (1 - eta) * c1[k]
            + xi * (1 - eta) * c2[k]
            + xi * eta * c3[k]
            + (1 - xi) * eta * c4[k]
            for k in (0, 1)
        ]
        return both[0], both[1]

    part = outlined(corners, None, wall, material)
    shape = shape_of(part)
    return Structured(part, shape, mapped(blend, n_along, n_across, shape))


def rectangle(
    width: float,
    height: float,
    n_along: int,
    n_across: int,
    wall: Wall = WALL,
    material: Material = STEEL,
) -> Structured:
    """A rectangle with its lower left corner at the origin."""
    corners = ((0.0, 0.0), (width, 0.0), (width, height), (0.0, height))
    return four_sided(corners, n_along, n_across, wall, material)


def slanted_rectangle(
    width: float,
    height: float,
    n_along: int,
    slant: float,
    alternate: bool,
    wall: Wall = WALL,
    material: Material = STEEL,
) -> Structured:
    """A rectangle one element high whose inner upright lines lean by ± `slant` [mm] top to bottom.

    `alternate` leans every second line the other way (trapezoids); else all lean alike
    (parallelograms, but for the two ends).
    """
    base = rectangle(width, height, n_along, 1, wall, material)

    def lean(xi: Floats, eta: Floats) -> tuple[Floats, Floats]:
        line = np.rint(xi * n_along).astype(int)
        sign = np.where((line % 2 == 0) & alternate, -1.0, 1.0)
        inner = (line > 0) & (line < n_along)
        return width * xi + np.where(inner, sign * slant * (eta - 0.5), 0.0), height * eta

    return replace(base, mesh=mapped(lean, n_along, 1, base.shape))


def ring_sector(
    inner: float,
    outer: float,
    angle: float,
    n_around: int,
    n_across: int,
    wall: Wall = WALL,
    material: Material = STEEL,
    grading: float = 1.0,
) -> Structured:
    """A sector of a ring about the origin, from +x through `angle` [deg] counter-clockwise.

    Along ξ goes the radius (e4 is the inner arc, e2 the outer one), along η the angle (e1 lies on
    the x axis, e3 at `angle`).  `grading` > 1 makes the elements larger outwards.
    """
    end = math.radians(angle)

    def polar(r: float, a: float) -> Point:
        return r * math.cos(a), r * math.sin(a)

    part = outlined(
        (polar(inner, 0.0), polar(outer, 0.0), polar(outer, end), polar(inner, end)),
        (None, polar(outer, end / 2), None, polar(inner, end / 2)),
        wall,
        material,
    )
    shape = shape_of(part)

    def bend(xi: Floats, eta: Floats) -> tuple[Floats, Floats]:
        r = inner + (outer - inner) * xi**grading
        return r * np.cos(end * eta), r * np.sin(end * eta)

    return Structured(part, shape, mapped(bend, n_across, n_around, shape))


def full_ring(
    inner: float,
    outer: float,
    n_around: int,
    n_across: int,
    wall: Wall = WALL,
    material: Material = STEEL,
) -> Structured:
    """A whole ring about the origin: outline of two half circles (e1 above, e2 below), hole h1.

    `n_around` must be a multiple of 4, so that a node stands where pieces meet.
    """
    part = outlined(((outer, 0.0), (-outer, 0.0)), ((0.0, outer), (0.0, -outer)), wall, material)
    part = replace(part, holes=(CircleHole("h1", (0.0, 0.0), 2.0 * inner),))
    shape = shape_of(part)
    angle = 2.0 * np.pi * np.arange(n_around) / n_around
    radius = np.linspace(inner, outer, n_across + 1)
    points = np.stack(
        [np.outer(np.cos(angle), radius), np.outer(np.sin(angle), radius)], axis=2
    ).reshape(-1, 2)
    at = np.arange(len(points)).reshape(n_around, n_across + 1)
    nxt = np.roll(at, -1, axis=0)
    quads = np.stack([at[:, :-1], at[:, 1:], nxt[:, 1:], nxt[:, :-1]], axis=2).reshape(-1, 4)
    return Structured(part, shape, mesh_from_corners(points, quads, shape))


def elliptic_quarter(
    inner: tuple[float, float],
    outer: tuple[float, float],
    n_around: int,
    n_across: int,
    wall: Wall = WALL,
    material: Material = STEEL,
) -> Structured:
    """The quarter x, y >= 0 between two ellipses with half axes (a, b) along x and y.

    e1 lies on the x axis, e2 is the outer ellipse, e3 lies on the y axis, e4 is the inner ellipse.
    The part's outline stays empty (parts have no ellipses): pass the shape along.
    """
    (ai, bi), (ao, bo) = inner, outer
    straight = outlined(((ai, 0.0), (ao, 0.0), (0.0, bo), (0.0, bi)), None, wall, material)
    frame = shape_of(straight)
    half = math.pi / 2.0
    arcs: dict[str, EllipticArc] = {
        "e2": EllipticArc(ao, bo, 0.0, half),
        "e4": EllipticArc(ai, bi, half, -half),
    }
    curves = tuple(
        BoundaryCurve(c.feature, c.kind, _stand_in(arcs[c.feature]), 0) if c.feature in arcs else c
        for c in frame.curves
    )
    shape = replace(frame, curves=curves)

    def bend(xi: Floats, eta: Floats) -> tuple[Floats, Floats]:
        a, b = ai + (ao - ai) * xi, bi + (bo - bi) * xi
        return a * np.cos(half * eta), b * np.sin(half * eta)

    mesh = mapped(bend, n_across, n_around, shape)
    return Structured(replace(straight, outline=None), shape, mesh)


def _stand_in(arc: EllipticArc) -> Curve:
    return arc  # type: ignore[return-value]


def _piece_of(shape: Shape, start: Floats, end: Floats) -> tuple[int, float, float]:
    """The piece both points lie on, run the way of the side, and their parameters on it."""
    best: tuple[float, int, float, float] | None = None
    slack = 1e-7 * max(1e-30, float(np.hypot(*(end - start))))
    for i, c in enumerate(shape.curves):
        t0, t1 = (c.curve.nearest((float(p[0]), float(p[1]))) for p in (start, end))
        far = max(float(np.hypot(*(c.curve.point(t) - p))) for t, p in ((t0, start), (t1, end)))
        if far > slack or t1 <= t0:
            continue
        along = float(c.curve.tangent(0.5 * (t0 + t1)) @ (end - start))
        if best is None or along > best[0]:
            best = along, i, t0, t1
    if best is None:
        raise ValueError(f"the side from {start} to {end} lies on no curve of the shape")
    return best[1:]


def _worst_jacobian(p: Floats) -> float:
    """Smallest sine of the corner angles, (n_elements, 4, 2) -> scalar."""
    ahead, back = np.roll(p, -1, axis=1) - p, np.roll(p, 1, axis=1) - p
    cross = ahead[..., 0] * back[..., 1] - ahead[..., 1] * back[..., 0]
    return float((cross / (np.linalg.norm(ahead, axis=2) * np.linalg.norm(back, axis=2))).min())
