"""Shoulders of flat bars that step from wide to narrow by two equal fillets."""

from __future__ import annotations

from collections.abc import Callable, Iterator

import numpy as np

from screenapp.model.curves import Arc, Segment
from screenapp.model.hand_formulas import (
    SHOULDER_BENDING_SOURCE,
    SHOULDER_LEAST,
    SHOULDER_MOST,
    SHOULDER_SOURCE,
    shoulder_in_bending,
    shoulder_in_tension,
    shoulder_length,
)
from screenapp.model.part import Part
from screenapp.model.shape import Shape
from screenapp.screening.handbook_geometry import (
    CENTRAL,
    PARALLEL,
    Frame,
    HandbookCase,
    Loading,
    clear,
)

ACCURACY = (
    "the chart rests on photoelastic tests: with r/d of 0.1 and more the computed stress is within "
    "5 % of it, with sharper fillets up to 11 % above"
)


def shoulder_cases(part: Part, shape: Shape) -> Iterator[HandbookCase]:
    first, last = shape.loops[0]
    fillets = [
        i
        for i in range(first, last)
        if shape.curves[i].kind == "fillet" and shape.curves[i].curve.curvature < 0.0
    ]
    for i in fillets:
        for j in fillets:
            if i != j:
                yield from _shoulder(part, shape, i, j)


def _shoulder(part: Part, shape: Shape, i: int, j: int) -> Iterator[HandbookCase]:
    """The step from a wide to a narrow bar by fillets `i` and `j`, if it is one::

    wide ----+                       wide, shoulder, i, narrow: as the outline runs;
             | j     narrow          the other side: narrow, j, shoulder, wide
             (-----------------
             i
             (-----------------
    wide ----+
    """
    count = shape.loops[0][1]
    pieces = [(i - 2) % count, (i - 1) % count, i, (i + 1) % count]
    pieces += [(j - 1) % count, j, (j + 1) % count, (j + 2) % count]
    curves = [shape.curves[k].curve for k in pieces]
    arcs = curves[2], curves[5]
    straight = [c for c in curves if isinstance(c, Segment)]
    if len(set(pieces)) < 8 or len(straight) < 6:
        return
    u = curves[3].tangent(0.0)
    n = np.array([-u[1], u[0]])
    wanted = (u, n, u, -u, n, -u)
    if any(float(np.hypot(*(c.tangent(0.0) - w))) > PARALLEL
           for c, w in zip(straight, wanted, strict=True)):  # fmt: skip
        return
    one, other = arcs
    if not (isinstance(one, Arc) and isinstance(other, Arc)):
        return
    frame = Frame(np.array(one.centre), u)
    slack = PARALLEL * shape.size
    wide1, shoulder1, narrow1, narrow2, shoulder2, wide2 = (
        frame.ends(shape, pieces[k]) for k in (0, 1, 3, 4, 6, 7)
    )
    d = float(narrow2[0, 1] - narrow1[0, 1])
    wide = float(wide2[0, 1] - wide1[0, 1])
    r = one.radius
    off = abs(float(wide1[0, 1] + wide2[0, 1] - narrow1[0, 1] - narrow2[0, 1]))
    if (
        not 0.0 < d < wide
        or abs(other.radius - r) > slack
        or abs(float(shoulder1[0, 0] - shoulder2[0, 0])) > slack
        or off > 2.0 * CENTRAL * d
        or not SHOULDER_LEAST <= 0.5 * (wide - d) / r <= SHOULDER_MOST
    ):
        return
    step = float(shoulder1[0, 0])
    length = min(float(np.ptp(wide1[:, 0])), float(np.ptp(wide2[:, 0])))
    thin = min(float(narrow1[:, 0].max()), float(narrow2[:, 0].max()))
    least = max(shoulder_length(wide, d, r), wide)
    inner, outer = (
        (float(narrow1[0, 1]), float(narrow2[0, 1])),
        (float(wide1[0, 1]), float(wide2[0, 1])),
    )
    if length < least or thin < 2.0 * d:
        return
    if not clear(shape, frame, (step - least, step), outer, pieces) or not clear(
        shape, frame, (step, 2.0 * d), inner, pieces
    ):
        return
    features = shape.curves[i].feature, shape.curves[j].feature
    t = part.wall.thickness
    both = frame.section(d, *inner), frame.section(step - wide, *outer)
    shapes = f"h/r from {SHOULDER_LEAST:g} to {SHOULDER_MOST:g}, here {0.5 * (wide - d) / r:.3g}"
    ways: tuple[tuple[Loading, Callable[[float, float], float], str], ...] = (
        ("tension", lambda f, _: shoulder_in_tension(f, wide, d, r, t), SHOULDER_SOURCE),
        ("bending", lambda _, m: shoulder_in_bending(m, wide, d, r, t), SHOULDER_BENDING_SOURCE),
    )
    for loading, stress, source in ways:
        yield HandbookCase(
            kind="shoulder fillets of a stepped flat bar",
            features=features,
            place=f"fillets {features[0]} and {features[1]}",
            bare=frozenset(shape.curves[k].feature for k in pieces),
            loading=loading,
            sections=lambda _: both,
            stress=stress,
            source=source,
            valid=f"{shapes}; wide part longer than {shoulder_length(wide, d, r):.4g} mm, here "
            f"{length:.4g} mm; {ACCURACY}",
        )
