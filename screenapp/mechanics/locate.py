"""Which element a point lies in, and where inside it: the inverse of the curved nine-node map.

A uniform grid over the mesh lists, for every cell, the elements whose boxes touch it.  The few
candidates of a point are then settled by Newton's method on the element's map.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from screenapp.mechanics import shape_functions
from screenapp.model.mesh import Mesh

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

NEWTON_STEPS = 12
INSIDE = 1e-9  # slack on ξ, η: the shared side of two elements must belong to at least one
PAIRS_AT_A_TIME = 400_000


def _monomials() -> Floats:
    """Turns nine nodal values into coefficients of ξ^i η^j, (9, 9), row 3 i + j."""
    x, y = shape_functions.LOCAL_NODES.T
    powers = np.stack([x**i * y**j for i in range(3) for j in range(3)], axis=1)
    return np.asarray(np.linalg.inv(powers))


MONOMIALS = _monomials()


class PointLocator:
    """Finds the elements of many points.

    Example:
        element, xi = PointLocator(mesh).locate([(1.0, 2.0)])
    """

    def __init__(self, mesh: Mesh) -> None:
        self._mesh = mesh
        p = mesh.nodes[mesh.quads]
        low, high = p.min(axis=1), p.max(axis=1)
        size = (high - low).max(axis=1)
        # a curved side may bulge past its nodes, by a share of the element
        self._low, self._high = low - 0.05 * size[:, None], high + 0.05 * size[:, None]
        self._slack = _curve_slack(mesh) + 1e-9 * float(np.ptp(mesh.nodes, axis=0).max())
        # to six figures, so that equals are told apart by their number, not by rounding
        self._size = np.round(np.log(np.maximum(size, 1e-300)), 6)
        self._make_grid()

    def locate(self, points: ArrayLike) -> tuple[Ints, Floats]:
        """Element and (ξ, η) of each of the points (n, 2) [mm].

        A point off the mesh gets element -1 and ξ, η NaN.  A curved side of the mesh departs a
        little from the true curve; a point outside by no more than that is taken as on the side.

        Returns:
            elements (n,), local coordinates (n, 2) within [-1, 1].
        """
        points = np.asarray(points, dtype=float).reshape(-1, 2)
        element = np.full(len(points), -1, dtype=np.int64)
        local = np.full((len(points), 2), np.nan)
        cell = self._cell_of(points)
        within = np.flatnonzero(cell >= 0)
        counts = self._start[cell[within] + 1] - self._start[cell[within]]
        for rows in _batches(counts):
            some = within[rows]
            who, candidates = self._candidates(points[some], cell[some])
            found, xi = self._settle(points[some], who, candidates)
            element[some], local[some] = found, xi
        return element, local

    def _make_grid(self) -> None:
        low, high = self._low, self._high
        self._origin = low.min(axis=0)
        extent = high.max(axis=0) - self._origin
        wanted = max(2 * len(low), 1)
        self._step = np.sqrt(extent.prod() / wanted)
        self._shape = np.maximum(np.ceil(extent / self._step).astype(np.int64), 1)
        first = np.floor((low - self._origin) / self._step).astype(np.int64)
        last = np.floor((high - self._origin) / self._step).astype(np.int64)
        last = np.minimum(last, self._shape - 1)
        wide = last - first + 1
        count = wide.prod(axis=1)
        owner = np.repeat(np.arange(len(low)), count)
        rank = np.arange(len(owner)) - np.repeat(np.cumsum(count) - count, count)
        ix = first[owner, 0] + rank % wide[owner, 0]
        iy = first[owner, 1] + rank // wide[owner, 0]
        cell = iy * self._shape[0] + ix
        self._members = owner[np.argsort(cell, kind="stable")]
        filled = np.bincount(cell, minlength=int(self._shape.prod()))
        self._start = np.concatenate([[0], np.cumsum(filled)])

    def _cell_of(self, points: Floats) -> Ints:
        """Cell of each point, -1 off the grid (or not a number)."""
        place = (points - self._origin) / self._step
        good = np.isfinite(place).all(axis=1)
        place = np.where(good[:, None], np.floor(place), -1.0)
        good &= ((place >= 0) & (place < self._shape)).all(axis=1)
        index = np.where(good[:, None], place, 0.0).astype(np.int64)
        return np.where(good, index[:, 1] * self._shape[0] + index[:, 0], -1)

    def _candidates(self, points: Floats, cell: Ints) -> tuple[Ints, Ints]:
        """Pairs (point, element) whose boxes hold the point."""
        begin, count = self._start[cell], self._start[cell + 1] - self._start[cell]
        who = np.repeat(np.arange(len(cell)), count)
        rank = np.arange(len(who)) - np.repeat(np.cumsum(count) - count, count)
        member = self._members[begin[who] + rank]
        p = points[who]
        hold = ((p >= self._low[member]) & (p <= self._high[member])).all(axis=1)
        return who[hold], member[hold]

    def _settle(self, points: Floats, who: Ints, element: Ints) -> tuple[Ints, Floats]:
        """The best element of each point among its candidates."""
        found = np.full(len(points), -1, dtype=np.int64)
        local = np.full((len(points), 2), np.nan)
        if not len(who):
            return found, local
        nodes = self._mesh.nodes[self._mesh.quads[element]]
        xi = invert_map(nodes, points[who])
        clamped = np.clip(xi, -1.0, 1.0)
        over = np.abs(xi).max(axis=1) - 1.0
        miss = np.zeros(len(who))
        out = over > INSIDE
        if out.any():
            shapes = shape_functions.values(9, clamped[out])
            back = (shapes[:, None, :] @ nodes[out])[:, 0]
            miss[out] = np.hypot(*(back - points[who[out]]).T)
        fits = ~out | (miss <= self._slack[element])
        who, element, clamped, over = who[fits], element[fits], clamped[fits], over[fits]
        # a point on a common side is in both elements but for rounding: the smaller one has it
        order = np.lexsort((element, self._size[element], np.round(over, 9), who))
        who, element, clamped = who[order], element[order], clamped[order]
        best = np.concatenate([[True], who[1:] != who[:-1]]) if len(who) else np.zeros(0, bool)
        found[who[best]], local[who[best]] = element[best], clamped[best]
        return found, local


def invert_map(nodes: Floats, points: Floats) -> Floats:
    """(ξ, η), (n, 2), at which the map of nine-node quads (n, 9, 2) meets points (n, 2) [mm].

    Points far outside their quad get some (ξ, η) far outside [-1, 1]².
    """
    coefficients = MONOMIALS @ nodes  # (n, 9, 2)
    c = coefficients.reshape(-1, 3, 3, 2)
    xi = np.zeros((len(points), 2))
    for _ in range(NEWTON_STEPS):
        x, y = xi[:, :1, None], xi[:, 1:, None]
        rows = c[:, 0] + x * (c[:, 1] + x * c[:, 2])  # (n, 3, 2): by powers of η
        by_x = c[:, 1] + 2.0 * x * c[:, 2]
        y = y[:, 0]
        gap = points - (rows[:, 0] + y * (rows[:, 1] + y * rows[:, 2]))
        dx = by_x[:, 0] + y * (by_x[:, 1] + y * by_x[:, 2])
        dy = rows[:, 1] + 2.0 * y * rows[:, 2]
        det = dx[:, 0] * dy[:, 1] - dx[:, 1] * dy[:, 0]
        det = np.where(np.abs(det) > 1e-300, det, 1e-300)
        step = np.stack(
            [
                (gap[:, 0] * dy[:, 1] - gap[:, 1] * dy[:, 0]) / det,
                (dx[:, 0] * gap[:, 1] - dx[:, 1] * gap[:, 0]) / det,
            ],
            axis=1,
        )
        step = np.clip(step, -1.0, 1.0)
        xi = np.clip(xi + step, -3.0, 3.0)
        if np.abs(step).max(initial=0.0) < 1e-12:
            break
    return xi


def _curve_slack(mesh: Mesh) -> Floats:
    """How far the true curve may lie off each element's quadratic sides [mm], (n_elements,).

    A circle over an angle θ departs from its parabola by L θ³/512 (the next term of its series);
    the sagitta gives θ = 8 s/L.  Twice that is allowed.
    """
    slack = np.zeros(mesh.n_elements)
    a, middle, b = np.swapaxes(mesh.nodes[mesh.side_nodes], 0, 1)
    chord = np.hypot(*(b - a).T)
    sagitta = np.hypot(*(middle - 0.5 * (a + b)).T)
    np.maximum.at(slack, mesh.sides[:, 0], 2.0 * chord * (8.0 * sagitta / chord) ** 3 / 512.0)
    return slack


def _batches(counts: Ints) -> list[slice]:
    """Slices of the points whose candidate pairs stay below the working size."""
    if not len(counts):
        return []
    batch = np.cumsum(counts) // PAIRS_AT_A_TIME
    edges = np.flatnonzero(np.diff(batch)) + 1
    return [
        slice(int(a), int(b))
        for a, b in zip(np.append(0, edges), np.append(edges, len(counts)), strict=True)
    ]
