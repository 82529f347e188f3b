"""Where the boundary of the mesh has its nodes: an even number of sides on every piece.

Interfaces between zones are divided likewise, once for both banks.

The sides follow the wanted sizes: equal shares of the integral of ds / h.  Every second node is
given to the triangulator, the nodes between them become the middles that its subdivision makes.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import shapely
from numpy.typing import NDArray

from screenapp.meshing.size_field import GRADATION, SizeField
from screenapp.model.curve_table import CurveTable
from screenapp.model.errors import MeshingError
from screenapp.model.shape import BoundaryCurve, Region, Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

FEWEST = 9
"""Points of each piece at which the size is read at first."""

MOST_SIDES = 500_000
"""More sides than a mesh that fits into the memory of a laptop can have."""

MENDS = 8
"""How often crossing chords are split before giving up."""


@dataclass(frozen=True, eq=False)
class BoundaryPoints:
    """Nodes on the boundary, loop by loop.

    Attributes:
        piece: the piece of the shape on which each side lies, (n,); side i starts at node i and
            ends at the next node of the same loop.
        t0, t1: parameters of the side's ends on its piece, (n,).
        points: the start point of each side [mm], (n, 2).
        angles: the angle of the material at that point [rad], (n,); π where the boundary is
            smooth.
        loops: first and past-the-last side of each loop.
    """

    piece: Ints
    t0: Floats
    t1: Floats
    points: Floats
    angles: Floats
    loops: tuple[tuple[int, int], ...]

    @property
    def following(self) -> Ints:
        """The node at the end of each side, (n,)."""
        following = np.arange(1, len(self.piece) + 1)
        for first, last in self.loops:
            following[last - 1] = first
        return following


def count_sides(shape: Shape, sizes: SizeField) -> float:
    """The integral of ds / h over the whole boundary and both banks of interfaces: about how many
    sides they will have."""
    found = [float(running[-1]) for _, running in _integrals(shape, sizes)]
    return sum(found) + sum(found[len(shape.curves) :])


def place_points(shape: Shape, sizes: SizeField) -> tuple[BoundaryPoints, ...]:
    """Divide every piece by the wanted sizes, more where the chords would cross.

    Returns the points round each of `shape.parts`.

    Raises:
        MeshingError: more than `MOST_SIDES`, or the chords still cross after splitting: the shape
            touches itself.
    """
    integrals = _integrals(shape, sizes)
    total = sum(float(running[-1]) for _, running in integrals)
    if not total < MOST_SIDES:
        raise MeshingError(
            f"the boundary would be divided into {total:.3g} sides",
            f"ask for larger elements: at most {MOST_SIDES} sides can be handled",
        )
    parameters = [_equal_shares(t, running) for t, running in integrals]
    for _ in range(MENDS):
        own = [_own(part, parameters) for part in shape.parts]
        crossing = {
            part.pieces[k]
            for part, mine in zip(shape.parts, own, strict=True)
            for k in _crossing_pieces(part.shape, mine)
        }
        if not crossing:
            return tuple(
                _collect(part.shape, mine) for part, mine in zip(shape.parts, own, strict=True)
            )
        for piece in crossing:
            parameters[piece] = _doubled(parameters[piece])
    where = ", ".join(sorted({_every_curve(shape)[i].feature for i in crossing}))
    raise MeshingError(
        f"the boundary crosses or touches itself at {where}",
        "move the outline and holes apart so that material is left between them",
    )


def _every_curve(shape: Shape) -> tuple[BoundaryCurve, ...]:
    """The pieces of the boundary, then the interfaces."""
    inner = (BoundaryCurve(i.zone, "edge", i.curve, len(shape.loops)) for i in shape.interfaces)
    return (*shape.curves, *inner)


def _own(part: Region, parameters: list[Floats]) -> list[Floats]:
    """The parameters on the curves of one region."""
    return [
        parameters[piece] if forward else 1.0 - parameters[piece][::-1]
        for piece, forward in zip(part.pieces, part.forward, strict=True)
    ]


def _integrals(shape: Shape, sizes: SizeField) -> list[tuple[Floats, Floats]]:
    """For every piece and interface: parameters from 0 to 1, and the running integral of ds / h up
    to each.

    Parameters are added until the size is known closely enough between them.
    """
    table = CurveTable.of(_every_curve(shape)) if shape.interfaces else shape.table
    piece = np.repeat(np.arange(len(table)), FEWEST)
    t = np.tile(np.linspace(0.0, 1.0, FEWEST), len(table))
    h = sizes.at(table.points(piece, t))
    lengths = table.lengths
    while True:
        order = np.lexsort((t, piece))
        piece, t, h = piece[order], t[order], h[order]
        gap = np.diff(t) * lengths[piece[:-1]]
        # A size that changes by 0.3 per distance can fall by this much between two samples.
        lowest = 0.5 * (h[:-1] + h[1:] - GRADATION * gap)
        split = np.flatnonzero(
            (piece[:-1] == piece[1:]) & (lowest < 0.8 * np.minimum(h[:-1], h[1:]))
        )
        split = split[gap[split] > 1e-9 * shape.size]
        if not len(split):
            break
        middle = 0.5 * (t[split] + t[split + 1])
        piece, t = np.append(piece, piece[split]), np.append(t, middle)
        h = np.append(h, sizes.at(table.points(piece[-len(split) :], middle)))
    bounds = np.searchsorted(piece, np.arange(len(table) + 1))
    found = []
    for k in range(len(table)):
        own_t, own_h = t[bounds[k] : bounds[k + 1]], h[bounds[k] : bounds[k + 1]]
        density = 0.5 * (1.0 / own_h[:-1] + 1.0 / own_h[1:])
        steps = np.diff(own_t) * lengths[k] * density
        found.append((own_t, np.concatenate([[0.0], np.cumsum(steps)])))
    return found


def _equal_shares(t: Floats, running: Floats) -> Floats:
    """Parameters that cut a piece into an even number of sides of equal integral of ds / h."""
    count = 2 * max(1, round(0.5 * running[-1] + 0.1))
    inner = np.interp(np.arange(1, count) / count * running[-1], running, t)
    inner = np.round(inner, 10)  # what lies behind is the rounding of this machine
    return np.concatenate([[0.0], inner, [1.0]])


def _doubled(parameters: Floats) -> Floats:
    """Twice as many sides."""
    middles = 0.5 * (parameters[:-1] + parameters[1:])
    both = np.empty(2 * len(parameters) - 1)
    both[::2], both[1::2] = parameters, middles
    return both


def _crossing_pieces(shape: Shape, parameters: list[Floats]) -> set[int]:
    """Pieces of which a chord over two sides meets a chord that is not its neighbour."""
    chords: list[Floats] = []
    owner: list[int] = []
    loop_of: list[tuple[int, int]] = []
    for first, last in shape.loops:
        points = np.concatenate(
            [shape.curves[k].curve.point(parameters[k][:-1:2]) for k in range(first, last)]
        )
        chords.append(np.stack([points, np.roll(points, -1, axis=0)], axis=1))
        owner += [k for k in range(first, last) for _ in parameters[k][:-1:2]]
        loop_of += [(len(loop_of), len(points))] * len(points)
    lines = shapely.linestrings(np.concatenate(chords))
    a, b = shapely.STRtree(lines).query(lines, predicate="intersects")
    a, b = a[a < b], b[a < b]
    start = np.array([s for s, _ in loop_of])
    count = np.array([n for _, n in loop_of])
    step = (b - start[a]) - (a - start[a])
    neighbours = (start[a] == start[b]) & ((step == 1) | (step == count[a] - 1))
    owners = np.array(owner)
    met = np.concatenate([a[~neighbours], b[~neighbours]])
    return {int(k) for k in owners[met]}


def _collect(shape: Shape, parameters: list[Floats]) -> BoundaryPoints:
    """Side by side, loop by loop."""
    piece = np.concatenate([np.full(len(s) - 1, k) for k, s in enumerate(parameters)])
    points = np.concatenate(
        [c.curve.point(s[:-1]) for c, s in zip(shape.curves, parameters, strict=True)]
    )
    ends = np.concatenate([[0], np.cumsum([len(s) - 1 for s in parameters])])
    angles = np.full(len(points), np.pi)
    angles[ends[:-1]] = joint_angles(shape)
    return BoundaryPoints(
        piece,
        np.concatenate([s[:-1] for s in parameters]),
        np.concatenate([s[1:] for s in parameters]),
        points,
        angles,
        tuple((int(ends[first]), int(ends[last])) for first, last in shape.loops),
    )


def joint_angles(shape: Shape) -> Floats:
    """The angle of the material at the start of each piece [rad], in [0, 2π], (n_pieces,)."""
    table = shape.table
    every = np.arange(len(table))
    before = every - 1
    for first, last in shape.loops:
        before[first] = last - 1
    arriving = table.tangents(before, np.ones(len(table)))
    leaving = table.tangents(every, np.zeros(len(table)))
    cross = arriving[:, 0] * leaving[:, 1] - arriving[:, 1] * leaving[:, 0]
    return np.asarray(np.pi - np.arctan2(cross, (arriving * leaving).sum(axis=1)))
