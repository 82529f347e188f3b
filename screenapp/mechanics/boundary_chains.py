"""The boundary sides of a mesh as closed loops: what follows what, and where the boundary bends.

The junction of a side is the place where it ends and the following side begins.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.model.mesh import Mesh
from screenapp.model.shape import Shape
from screenapp.model.solution import StressField

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]

SMOOTH_TURN = math.radians(0.5)
"""A boundary that turns by less than this at a junction counts as smooth [rad].  Exact tangency
gives 1e-12; half a degree forgives drawings whose arcs were rounded, and a corner that flat
disturbs the stress by less than 1 % (Williams exponent 0.994)."""


@dataclass(frozen=True, eq=False)
class BoundaryChains:
    """How the boundary sides of a mesh follow one another.

    Attributes:
        loops: (first, past the last) side of each closed loop, outline first.
        following: the side that begins where each side ends, (n_sides,).
        preceding: the side that ends where each side begins, (n_sides,).
        lengths: length of each side [mm], (n_sides,).
        turn: signed angle by which the boundary turns at each side's end [rad], (n_sides,);
            positive at a convex corner of the material.
        curvature: signed curvature of each side's curve [1/mm], positive where the material is
            convex, (n_sides,).
        tangents: exact unit tangents at start, middle and end of each side, (n_sides, 3, 2).
        same_wall: whether the same zone goes on past each side's end, (n_sides,).
    """

    loops: tuple[tuple[int, int], ...]
    following: Ints
    preceding: Ints
    lengths: Floats
    turn: Floats
    curvature: Floats
    tangents: Floats
    same_wall: Bools

    @property
    def smooth(self) -> Bools:
        """Whether the boundary goes on without a bend or a change of the wall at each side's end,
        (n_sides,)."""
        return np.asarray((np.abs(self.turn) < SMOOTH_TURN) & self.same_wall)

    @property
    def normals(self) -> Floats:
        """Unit normals that point out of the material, (n_sides, 3, 2)."""
        return np.stack([self.tangents[..., 1], -self.tangents[..., 0]], axis=-1)


def boundary_chains(shape: Shape, mesh: Mesh) -> BoundaryChains:
    """Order the boundary sides of `mesh` into closed loops and measure them on the exact curves."""
    n = len(mesh.sides)
    loop_of_piece = np.array([c.loop for c in shape.curves])
    loop = loop_of_piece[mesh.side_piece]
    firsts = np.flatnonzero(np.concatenate([[True], loop[1:] != loop[:-1]]))
    loops = tuple((int(a), int(b)) for a, b in zip(firsts, np.append(firsts[1:], n), strict=True))
    following = np.arange(1, n + 1)
    for first, past in loops:
        following[past - 1] = first
    preceding = np.empty(n, dtype=np.int64)
    preceding[following] = np.arange(n)

    tangents = np.empty((n, 3, 2))
    thirds = np.stack([mesh.side_t[:, 0], mesh.side_t.mean(axis=1), mesh.side_t[:, 1]], axis=1)
    for piece in np.unique(mesh.side_piece):
        on = np.flatnonzero(mesh.side_piece == piece)
        curve = shape.curves[piece].curve
        tangents[on] = curve.tangent(thirds[on])
    lengths = side_lengths(mesh, np.array([1.0]))[:, 0]
    turn = _angle(tangents[:, 2], tangents[following, 0])
    curvature = _angle(tangents[:, 0], tangents[:, 2]) / lengths
    zone = mesh.element_zones[mesh.sides[:, 0]]
    same_wall = zone == zone[following]
    return BoundaryChains(
        loops, following, preceding, lengths, turn, curvature, tangents, same_wall
    )


def side_lengths(mesh: Mesh, places: Floats) -> Floats:
    """Distance [mm] along each side from its start to local places in -1..1, (n_sides, n_places).

    Measured on the quadratic side itself by four Gauss points, which differs from the exact arc
    by less than 1e-6 of the length for sides that turn by up to 45°.
    """
    p = mesh.nodes[mesh.side_nodes]
    at, weight = np.polynomial.legendre.leggauss(4)
    half = 0.5 * (places + 1.0)
    xi = -1.0 + half[:, None] * (at + 1.0)  # (places, 4)
    slopes = np.stack([xi - 0.5, -2.0 * xi, xi + 0.5], axis=-1)
    speed = np.linalg.norm(np.einsum("pgn,snk->spgk", slopes, p), axis=-1)
    return np.asarray((speed * weight).sum(axis=-1) * half)


def _angle(a: Floats, b: Floats) -> Floats:
    """Signed angle from vectors a to b, (n, 2) each [rad]."""
    cross = a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0]
    return np.asarray(np.arctan2(cross, (a * b).sum(axis=1)))


@dataclass(frozen=True, eq=False)
class BoundaryProfile:
    """The recovered stress of one case along one closed loop of the boundary.

    Attributes:
        loop: index of the loop, 0 for the outline.
        sides: indices of the boundary sides in order, (n,).
        arc: distance along the loop at start, middle and end of each side [mm], (n, 3).
        points: the same places [mm], (n, 3, 2).
        stress: σx, σy, τxy there [MPa], (n, 3, 3).
        piece: index into `Shape.curves` of each side, (n,).
        smooth: whether the boundary goes on without a bend or a change of the wall at the end of
            each side, (n,).
    """

    loop: int
    sides: Ints
    arc: Floats
    points: Floats
    stress: Floats
    piece: Ints
    smooth: Bools


def boundary_profile(
    shape: Shape, mesh: Mesh, stress: StressField, case: int
) -> tuple[BoundaryProfile, ...]:
    """The edge stress of case number `case` along every loop, outline first."""
    chains = boundary_chains(shape, mesh)
    points = mesh.nodes[mesh.side_nodes]
    profiles = []
    for number, (first, past) in enumerate(chains.loops):
        sides = np.arange(first, past)
        ends = np.cumsum(chains.lengths[sides])
        starts = ends - chains.lengths[sides]
        profiles.append(
            BoundaryProfile(
                number,
                sides,
                np.stack([starts, 0.5 * (starts + ends), ends], axis=1),
                points[sides],
                stress.side[case, sides],
                mesh.side_piece[sides],
                chains.smooth[sides],
            )
        )
    return tuple(profiles)
