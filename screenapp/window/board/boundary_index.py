"""The nearest piece of a boundary, found for all pieces at once: the cursor asks at every move."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.model.curves import Arc, Segment
from screenapp.model.part import Point
from screenapp.model.shape import BoundaryCurve
from screenapp.window.board.frame import Floats

FULL = 2.0 * math.pi


@dataclass(frozen=True)
class Foot:
    """The nearest place on a piece.

    Attributes:
        piece: which piece.
        t: parameter on its curve.
        at: the place [mm].
        far: distance to it [mm].
    """

    piece: BoundaryCurve
    t: float
    at: Point
    far: float


class BoundaryIndex:
    """Pieces as arrays: segments and arcs."""

    def __init__(
        self,
        straight: list[BoundaryCurve],
        round_: list[BoundaryCurve],
        lines: Floats,
        arcs: Floats,
        ends: Floats,
    ) -> None:
        self._parts = straight, round_, lines, arcs, ends
        self._pieces = [*straight, *round_]
        self._start, self._run = lines[:, :2], lines[:, 2:] - lines[:, :2]
        self._square = np.maximum((self._run**2).sum(axis=1), 1e-300)
        self._centre, self._radius = arcs[:, :2], arcs[:, 2]
        self._begin, self._sweep = arcs[:, 3], arcs[:, 4]
        self._ends = ends
        self._left_out: tuple[frozenset[str], NDArray[np.bool_]] | None = None

    @classmethod
    def of(cls, pieces: Sequence[BoundaryCurve]) -> BoundaryIndex:
        """The index of some pieces."""
        segments = [(p, p.curve) for p in pieces if isinstance(p.curve, Segment)]
        arcs = [(p, p.curve) for p in pieces if isinstance(p.curve, Arc)]
        return cls(
            [p for p, _ in segments],
            [p for p, _ in arcs],
            np.array([(*c.start, *c.end) for _, c in segments], dtype=float).reshape(-1, 4),
            np.array(
                [(*c.centre, c.radius, c.begin, c.sweep) for _, c in arcs], dtype=float
            ).reshape(-1, 5),
            np.array([(*c.start, *c.end) for _, c in arcs], dtype=float).reshape(-1, 2, 2),
        )

    @classmethod
    def joined(cls, indices: Sequence[BoundaryIndex]) -> BoundaryIndex:
        """One index of several."""
        parts = [i._parts for i in (*indices, cls.of(()))]
        return cls(
            [piece for p in parts for piece in p[0]],
            [piece for p in parts for piece in p[1]],
            np.concatenate([p[2] for p in parts]),
            np.concatenate([p[3] for p in parts]),
            np.concatenate([p[4] for p in parts]),
        )

    def nearest(self, at: Point, without: frozenset[str] = frozenset()) -> Foot | None:
        """The nearest place on any piece whose feature is not in `without`."""
        if not self._pieces:
            return None
        far = self._distances(np.asarray(at))
        if without:
            far[self._mask(without)] = np.inf
        best = int(np.argmin(far))
        if not math.isfinite(far[best]):
            return None
        piece = self._pieces[best]
        t = piece.curve.nearest(at)
        x, y = piece.curve.point(t)
        return Foot(piece, t, (float(x), float(y)), float(far[best]))

    def within(
        self, at: Point, reach: float, without: frozenset[str] = frozenset()
    ) -> list[BoundaryCurve]:
        """The pieces no farther than `reach` [mm] from a place, nearest first."""
        if not self._pieces:
            return []
        far = self._distances(np.asarray(at))
        near = np.flatnonzero(far <= reach)
        found = [self._pieces[i] for i in near[np.argsort(far[near])]]
        return [p for p in found if p.feature not in without]

    def _mask(self, without: frozenset[str]) -> NDArray[np.bool_]:
        """Which pieces are left out (n,); a drag leaves out the same ones at every move."""
        if self._left_out is None or self._left_out[0] is not without:
            left_out = np.array([p.feature in without for p in self._pieces], dtype=bool)
            self._left_out = without, left_out
        return self._left_out[1]

    def _distances(self, p: Floats) -> Floats:
        """Distance to every piece (n,)."""
        t = np.clip(((p - self._start) * self._run).sum(axis=1) / self._square, 0.0, 1.0)
        straight = np.hypot(*(self._start + t[:, None] * self._run - p).T)
        gap = p - self._centre
        angle = np.arctan2(gap[:, 1], gap[:, 0])
        turned = ((angle - self._begin) * np.sign(self._sweep)) % FULL
        on = turned <= np.abs(self._sweep)
        rim = np.abs(np.hypot(gap[:, 0], gap[:, 1]) - self._radius)
        ends = np.hypot(self._ends[..., 0] - p[0], self._ends[..., 1] - p[1]).min(axis=1)
        return np.concatenate([straight, np.where(on, rim, ends)])
