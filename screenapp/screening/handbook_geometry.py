"""What a handbook's case is made of, and questions about a bar that all cases ask."""

from __future__ import annotations

from collections.abc import Callable, Collection, Iterator
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from screenapp.model.curves import Segment
from screenapp.model.part import Point
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]

PARALLEL = 1e-6
"""Edges are parallel within this angle [rad], lines the same within this share of the part."""

CENTRAL = 0.005
"""A hole or a step is in the middle within this share of the width."""

Loading = Literal["tension", "bending", "pin", "both"]
"""What the sections must carry: a pure force, a pure moment, the pull of a pin, or any of both."""


@dataclass(frozen=True)
class Section:
    """A section that the force is read in: its middle [mm], unit vector along the bar, width."""

    middle: Point
    along: Point
    width: float


@dataclass(frozen=True)
class HandbookCase:
    """A feature with its formula.

    Attributes:
        kind: in words.
        features: ids of the places of its largest stress.
        place: in words.
        bare: ids on which nothing may act.
        loading: what the sections must carry.
        sections: for the place of the peak [mm], where that is read; none where the formula says
            nothing of that place.
        stress: from the force [N] and the moment [N·mm] in the first section to the largest
            stress [MPa].
        source, valid: of the formula.
    """

    kind: str
    features: tuple[str, ...]
    place: str
    bare: frozenset[str]
    loading: Loading
    sections: Callable[[Point], tuple[Section, ...]]
    stress: Callable[[float, float], float]
    source: str
    valid: str


@dataclass(frozen=True)
class Frame:
    """Coordinates along and across a bar from an origin [mm]."""

    origin: Floats
    along: Floats

    def local(self, points: Floats) -> Floats:
        """Points (..., 2) as (along, across) [mm]."""
        across = np.array([-self.along[1], self.along[0]])
        return np.asarray((points - self.origin) @ np.stack([self.along, across], axis=1))

    def ends(self, shape: Shape, piece: int) -> Floats:
        """Both ends of a piece of the boundary, (2, 2) [mm]."""
        curve = shape.curves[piece].curve
        return self.local(np.array([curve.start, curve.end]))

    def section(self, s: float, low: float, high: float) -> Section:
        """The section at a distance along, from `low` to `high` across [mm]."""
        across = np.array([-self.along[1], self.along[0]])
        x, y = self.origin + s * self.along + 0.5 * (low + high) * across
        ax, ay = self.along
        return Section((float(x), float(y)), (float(ax), float(ay)), high - low)


def opposite_edges(shape: Shape) -> Iterator[tuple[int, int]]:
    """Pairs of straight pieces of the outline that run opposite ways, as both edges of a strip."""
    first, last = shape.loops[0]
    straight = [i for i in range(first, last) if isinstance(shape.curves[i].curve, Segment)]
    ways = {i: shape.curves[i].curve.tangent(0.0) for i in straight}
    for n, i in enumerate(straight):
        for j in straight[n + 1 :]:
            # the outline runs round the material: two edges of a strip run opposite ways
            if float(np.hypot(*(ways[i] + ways[j]))) < PARALLEL:
                yield i, j


def clear(
    shape: Shape,
    frame: Frame,
    along: tuple[float, float],
    across: tuple[float, float],
    own: Collection[int],
) -> bool:
    """Whether no other piece of the boundary enters a rectangle."""
    slack = 1e-9 * shape.size
    t = np.linspace(0.0, 1.0, 65)
    for i, piece in enumerate(shape.curves):
        if i in own:
            continue
        s, n = frame.local(piece.curve.point(t)).T
        inside = (s > along[0] + slack) & (s < along[1] - slack)
        inside &= (n > across[0] + slack) & (n < across[1] - slack)
        if inside.any():
            return False
    return True
