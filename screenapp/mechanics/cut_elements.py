"""What a straight cut leaves of each element and side: exact, also where it runs through them.

Everything is measured from the cut's own line, `s` along it and `n` to its right, so that by
Green's theorem the integrals over what lies left of it (n < 0) are line integrals along the
element's sides alone: on the cut itself every integrand is zero::

    A = ∮ n ds    ∫ s = ∮ s n ds    ∫ n = ∮ n²/2 ds    ∫ s² = ∮ s² n ds   and so on

(clockwise, for n is to the right of s).  A side is a parabola, so it meets the cut where a
quadratic is zero, and a Gauss rule between these places is exact.
"""

from __future__ import annotations

from collections.abc import Callable
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.quadrature import gauss_line
from screenapp.mechanics.shape_functions import line_slopes, line_values
from screenapp.mechanics.straight_cut import StraightCut
from screenapp.model.mesh import Mesh

Floats = NDArray[np.float64]

NEAR = 1e-9
"""What comes nearer to the cut than this share of its length only touches it."""

BEYOND = 1e-3
"""A side is divided where the cut meets it within this share of the cut's length of a span: the
spans end on the exact boundary, the sides are parabolas."""

POINTS_OF_AREA = 4
"""Points that stand for an element: enough for a force that is linear in place."""

_MOMENT_POINTS = 4
"""Gauss points along a side: exact for s² n ds, of degree 7 in the side's parameter."""

_CORNERS = ([0, 1, 2, 3], [4, 5, 6, 7], [1, 2, 3, 0])
"""Begin, middle and end node of an element's four sides, counter-clockwise."""


def area_points(
    mesh: Mesh, cut: StraightCut, on_body: Callable[[Floats], NDArray[np.bool_]]
) -> tuple[Floats, Floats]:
    """Points that stand for what lies on the body left of the cut.

    `on_body` says of points (n, 2) whether the body holds them; it is asked for the elements that
    the cut does not divide.

    Returns:
        places (n_elements, POINTS_OF_AREA, 2) [mm] and the area that each stands for
        (n_elements, POINTS_OF_AREA) [mm²], zero for elements that are not on the body; together
        they have the area and the first and second moments of every element's share.
    """
    sides = np.stack([mesh.nodes[mesh.quads[:, column]] for column in _CORNERS], axis=2)
    middles = mesh.nodes[mesh.quads[:, :4]].mean(axis=1)
    axes = np.stack([cut.along, cut.normal], axis=1)
    # whole elements are measured from their own middles, which keeps all digits
    moments = _whole_moments((sides - middles[:, None, None]) @ axes)
    origin = (middles - cut.start) @ axes
    local = (sides - cut.start) @ axes
    divided = _divided(local, cut)
    whole = on_body(middles) & ~divided
    moments[~whole] = 0.0
    for element in np.flatnonzero(divided):
        moments[element] = _moments_left(local[element])
        origin[element] = 0.0
    places, areas = _stand_for(moments)
    return (places + origin[:, None]) @ axes.T + cut.start, areas


def side_pieces(nodes: Floats, cut: StraightCut) -> list[tuple[int, float, float]]:
    """Sides (n_sides, 3, 2) [mm] as pieces between their meetings with the cut: the index of the
    side, and the parameters in [-1, 1] from which to which it runs; what lies right of the cut on
    a side that it divides is left out."""
    axes = np.stack([cut.along, cut.normal], axis=1)
    local = (nodes - cut.start) @ axes
    out = []
    for side in range(len(local)):
        crossed = _divided(local[side][None, None], cut)[0]
        runs = _left_of(local[side]) if crossed else [(-1.0, 1.0)]
        out += [(side, a, b) for a, b in runs]
    return out


def _divided(local: Floats, cut: StraightCut) -> NDArray[np.bool_]:
    """Which elements or sides, given as (n, sides, 3, 2) from the cut's line, the cut divides."""
    n = local[..., 1].reshape(len(local), -1)
    near = NEAR * cut.length
    reach = 0.5 * np.ptp(cut.spans, axis=1) + BEYOND * cut.length
    out = np.asarray((n.min(axis=1) < -near) & (n.max(axis=1) > near))
    for i in np.flatnonzero(out):
        met = [float(_at(side, t)[0]) for side in local[i] for t in _meets(side[:, 1])]
        middle = 0.5 * (min(met) + max(met)) if met else np.inf
        out[i] = (np.abs(middle - cut.spans.mean(axis=1)) <= reach).any()
    return out


def _left_of(side: Floats) -> list[tuple[float, float]]:
    """The stretches of a side (3, 2) that lie left of the line, as parameters in [-1, 1]."""
    marks = [-1.0, *(t for t in _meets(side[:, 1]) if -1.0 < t < 1.0), 1.0]
    runs = pairwise(marks)
    return [(a, b) for a, b in runs if _at(side, 0.5 * (a + b))[1] < 0.0]


def _meets(n: Floats) -> list[float]:
    """Parameters in [-1, 1], rising, at which a side's distance from the line is zero."""
    a, b, c = 0.5 * (n[0] + n[2]) - n[1], 0.5 * (n[2] - n[0]), n[1]
    inner = b * b - 4.0 * a * c
    if inner < 0.0:
        return []
    q = -0.5 * (b + np.copysign(np.sqrt(inner), b))  # neither root loses digits
    roots = [top / below for top, below in ((q, a), (c, q)) if below != 0.0]
    return sorted({float(np.clip(t, -1.0, 1.0)) for t in roots if abs(t) <= 1.0 + NEAR})


def _at(side: Floats, t: float) -> Floats:
    """The place on a side (3, 2) at a parameter."""
    return np.asarray(line_values(np.array([t]))[0] @ side)


def _whole_moments(sides: Floats) -> Floats:
    """Area, ∫s, ∫n, ∫s², ∫sn, ∫n² within closed rings of sides (n, 4, 3, 2), (n, 6)."""
    t, weights = gauss_line(_MOMENT_POINTS)
    every = _line_integrals(line_values(t) @ sides, line_slopes(t) @ sides, weights)
    return np.asarray(every.sum(axis=1))


def _moments_left(ring: Floats) -> Floats:
    """The same of what a ring of sides (4, 3, 2) has left of the line, (6,)."""
    points, weights = gauss_line(_MOMENT_POINTS)
    total = np.zeros(6)
    for side in ring:
        for a, b in _left_of(side):
            half = 0.5 * (b - a)
            t = 0.5 * (a + b) + half * points
            total += _line_integrals(line_values(t) @ side, line_slopes(t) @ side, half * weights)
    return total


def _line_integrals(at: Floats, slope: Floats, weights: Floats) -> Floats:
    """The six integrals over points (..., p, 2) of a side with their slopes, (..., 6)."""
    s, n = at[..., 0], at[..., 1]
    # counter-clockwise in (x, y) is clockwise in (s, n)
    terms = np.stack([n, s * n, n**2 / 2.0, s**2 * n, s * n**2 / 2.0, n**3 / 3.0], axis=-1)
    return np.asarray((terms * (slope[..., 0] * weights)[..., None]).sum(axis=-2))


def _stand_for(moments: Floats) -> tuple[Floats, Floats]:
    """Four points on the principal axes and their areas, with the same moments (n, 6)."""
    area = np.maximum(moments[:, 0], 0.0)
    safe = np.where(area > 0.0, area, 1.0)[:, None]
    middle = moments[:, 1:3] / safe
    s2, sn, n2 = (moments[:, 3:] / safe).T
    spread = np.stack([np.stack([s2, sn], 1), np.stack([sn, n2], 1)], 1)
    spread = spread - middle[:, :, None] * middle[:, None, :]
    size, ways = np.linalg.eigh(spread)
    arms = np.sqrt(2.0 * np.maximum(size, 0.0))[:, None, :] * ways
    arms = np.moveaxis(arms, 2, 1)
    places = middle[:, None] + np.concatenate([arms, -arms], axis=1)
    return places, np.repeat(area[:, None] / POINTS_OF_AREA, POINTS_OF_AREA, axis=1)
