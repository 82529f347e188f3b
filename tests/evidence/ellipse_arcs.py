"""An ellipse as a chain of true arcs with a common tangent where they meet (biarcs).

A part has straight edges and arcs only.  Points of the ellipse are joined in pairs by two arcs that
have the ellipse's own tangents at the points and one tangent where they meet, so that the chain
has no corner; the more pairs, the closer the chain runs (the gap falls with the cube of the step).
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np

from screenapp.model.curves import Arc, arc_through
from screenapp.model.part import Point


@dataclass(frozen=True)
class ArcChain:
    """Arcs end to end: `points` (n + 1) they run between, `through` (n) a point on each."""

    points: tuple[Point, ...]
    through: tuple[Point, ...]

    @property
    def arcs(self) -> list[Arc]:
        """The arcs themselves."""
        ends = zip(self.points[:-1], self.through, self.points[1:], strict=True)
        made = [arc_through(*three) for three in ends]
        return [arc for arc in made if isinstance(arc, Arc)]


def elliptic_chain(a: float, b: float, start: float, stop: float, pairs: int) -> ArcChain:
    """Arcs along (a cos φ, b sin φ) [mm] from φ = `start` to `stop` [rad]."""
    angles = np.linspace(start, stop, pairs + 1)
    way = math.copysign(1.0, stop - start)
    knots = np.stack([a * np.cos(angles), b * np.sin(angles)], axis=1)
    tangents = way * np.stack([-a * np.sin(angles), b * np.cos(angles)], axis=1)
    tangents /= np.linalg.norm(tangents, axis=1, keepdims=True)
    points, through = [knots[0]], []
    for k in range(pairs):
        p, q, t, u = knots[k], knots[k + 1], tangents[k], tangents[k + 1]
        # Control points p + d t and q - d u whose distance is 2 d; the arcs meet half way.
        v, s = q - p, t + u
        c = 4.0 - s @ s
        d = (-(v @ s) + math.sqrt((v @ s) ** 2 + c * (v @ v))) / c
        meet = 0.5 * (p + d * t + q - d * u)
        for begin, along, end in ((p, t, meet), (meet, _tangent(p, t, meet), q)):
            through.append(_middle(begin, along, end))
            points.append(end)
    return ArcChain(
        tuple((float(x), float(y)) for x, y in points),
        tuple((float(x), float(y)) for x, y in through),
    )


def largest_gap(chain: ArcChain, a: float, b: float) -> float:
    """Largest distance of the chain from the ellipse with half axes a, b [mm]."""
    worst = 0.0
    for arc in chain.arcs:
        x, y = arc.point(np.linspace(0.0, 1.0, 33)).T
        level = np.hypot(x / a, y / b)
        slope = np.hypot(x / a**2, y / b**2) / level
        worst = max(worst, float(np.abs((level - 1.0) / slope).max()))
    return worst


def _tangent(start: np.ndarray, along: np.ndarray, end: np.ndarray) -> np.ndarray:
    """Tangent at the end of the arc that leaves `start` along a direction."""
    chord = (end - start) / np.linalg.norm(end - start)
    return np.asarray(2.0 * (along @ chord) * chord - along)


def _middle(start: np.ndarray, along: np.ndarray, end: np.ndarray) -> np.ndarray:
    """Middle of the arc that leaves `start` along a direction."""
    chord = end - start
    length = float(np.linalg.norm(chord))
    chord = chord / length
    turn = math.atan2(chord[0] * along[1] - chord[1] * along[0], float(chord @ along))
    left = np.array([-chord[1], chord[0]])
    return np.asarray(0.5 * (start + end) + 0.5 * length * math.tan(0.5 * turn) * left)
