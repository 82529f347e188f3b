"""Round holes in strips: pulled or bent bars with a hole, and lugs that a pin pulls."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from dataclasses import dataclass

import numpy as np

from screenapp.model.hand_formulas import (
    HOLE_BENDING_SOURCE,
    HOLE_MOST,
    HOLE_SOURCE,
    LUG_LEAST,
    LUG_MOST,
    LUG_SOURCE,
    OFF_CENTRE_MOST,
    OFF_CENTRE_SOURCE,
    hole_in_bending,
    hole_in_strip,
    hole_off_centre,
    pin_in_lug,
)
from screenapp.model.members import all_holes, whole_id
from screenapp.model.part import CircleHole, Part, Point
from screenapp.model.shape import Shape
from screenapp.screening.handbook_geometry import (
    CENTRAL,
    Frame,
    HandbookCase,
    Loading,
    Section,
    clear,
    opposite_edges,
)

AT_NET_SECTION = math.radians(45.0)
"""The peak of a lug must lie within this angle of the net section: the fit says nothing of the
stress under the pin."""


@dataclass(frozen=True)
class _Strip:
    """A hole between two parallel edges; distances along and across from its centre [mm].

    Attributes:
        low, high: where the edges are, across.
        reach: to each end of the shorter edge: backwards, forwards.
    """

    hole: CircleHole
    frame: Frame
    one: int
    other: int
    rim: tuple[int, ...]
    low: float
    high: float
    reach: tuple[float, float]

    @property
    def width(self) -> float:
        return self.high - self.low

    @property
    def central(self) -> bool:
        return abs(self.high + self.low) <= 2.0 * CENTRAL * self.width

    @property
    def long(self) -> float:
        """What the strip must be long on either side of the hole's centre [mm]."""
        return self.width + 0.5 * self.hole.diameter


def hole_cases(part: Part, shape: Shape) -> Iterator[HandbookCase]:
    """Every round hole of the part that lies in a strip of its own."""
    for hole in all_holes(part):
        if not isinstance(hole, CircleHole):
            continue
        for one, other in opposite_edges(shape):
            found = _strip(shape, hole, one, other)
            cases = list(_cases(part, shape, found)) if found is not None else []
            if cases:
                yield from cases
                break


def _strip(shape: Shape, hole: CircleHole, one: int, other: int) -> _Strip | None:
    frame = Frame(np.array(hole.centre), shape.curves[one].curve.tangent(0.0))
    ends = [frame.ends(shape, i) for i in (one, other)]
    low, high = float(ends[0][0, 1]), float(ends[1][0, 1])  # material is left of the first edge
    if not low < -0.5 * hole.diameter or not 0.5 * hole.diameter < high:
        return None
    own = shape.hole_ids.index(hole.id)
    rim = tuple(i for i, piece in enumerate(shape.curves) if piece.loop == own)
    reach = min(-float(e[:, 0].min()) for e in ends), min(float(e[:, 0].max()) for e in ends)
    return _Strip(hole, frame, one, other, rim, low, high, reach)


def _cases(part: Part, shape: Shape, strip: _Strip) -> Iterator[HandbookCase]:
    if min(strip.reach) >= strip.long and _clear(shape, strip, -strip.long, strip.long):
        if not strip.central:
            yield from _off_centre(part, shape, strip)
        elif strip.hole.diameter / strip.width <= HOLE_MOST:
            yield _pulled(part, shape, strip)
            yield _bent(part, shape, strip)
    if strip.central:
        back, ahead = strip.reach
        if back >= strip.long:
            yield from _lug(part, shape, strip, ahead, 1.0)
        if ahead >= strip.long:
            yield from _lug(part, shape, strip, back, -1.0)


def _pulled(part: Part, shape: Shape, strip: _Strip) -> HandbookCase:
    d, width, t = strip.hole.diameter, strip.width, part.wall.thickness
    return _between_edges(
        shape,
        strip,
        "round hole in the middle of a strip",
        "tension",
        lambda force, _: hole_in_strip(force, d, width, t),
        HOLE_SOURCE,
        f"{_share(strip)}; the fit is off by up to 0.5 %",
    )


def _bent(part: Part, shape: Shape, strip: _Strip) -> HandbookCase:
    d, width, t = strip.hole.diameter, strip.width, part.wall.thickness
    return _between_edges(
        shape,
        strip,
        "round hole in the middle of a strip",
        "bending",
        lambda _, moment: hole_in_bending(moment, d, width, t),
        HOLE_BENDING_SOURCE,
        f"{_share(strip)}; the formula reads up to 4 % high",
    )


def _off_centre(part: Part, shape: Shape, strip: _Strip) -> Iterator[HandbookCase]:
    radius, width, t = 0.5 * strip.hole.diameter, strip.width, part.wall.thickness
    near = min(-strip.low, strip.high)
    if radius / near > OFF_CENTRE_MOST:
        return
    yield _between_edges(
        shape,
        strip,
        "round hole off the middle of a strip",
        "tension",
        lambda force, _: hole_off_centre(force, radius, near, width, t),
        OFF_CENTRE_SOURCE,
        f"r/c up to {OFF_CENTRE_MOST:g}, here {radius / near:.3g} (c from the hole's centre to the "
        f"nearer edge, here {near / width:.3g} W); the formula reads up to 4 % low",
    )


def _between_edges(
    shape: Shape,
    strip: _Strip,
    kind: str,
    loading: Loading,
    stress: Callable[[float, float], float],
    source: str,
    valid: str,
) -> HandbookCase:
    """A case of a hole that nothing acts on, in a strip that goes on both ways."""
    edges = _edges(shape, strip)
    both = tuple(strip.frame.section(s, strip.low, strip.high) for s in (strip.long, -strip.long))
    return HandbookCase(
        kind=kind,
        features=(strip.hole.id,),
        place=_place(shape, strip),
        bare=frozenset({strip.hole.id, whole_id(strip.hole.id), *edges}),
        loading=loading,
        sections=lambda _: both,
        stress=stress,
        source=source,
        valid=f"{valid}; nothing else within {strip.long:.4g} mm of the hole",
    )


def _lug(
    part: Part, shape: Shape, strip: _Strip, beyond: float, sign: float
) -> Iterator[HandbookCase]:
    """A strip that ends square at a distance beyond the hole, forwards or (sign -1) backwards; the
    pull comes from its other side."""
    d, width, t = strip.hole.diameter, strip.width, part.wall.thickness
    begin, end = sorted((sign * beyond, -sign * strip.long))
    if (
        not LUG_LEAST <= d / width <= LUG_MOST
        or beyond < width * (1.0 - CENTRAL)
        or not _clear(shape, strip, begin, end)
        or not _ends_square(shape, strip, sign * beyond)
    ):
        return
    section = strip.frame.section(-sign * strip.long, strip.low, strip.high)
    outward = Section(
        section.middle, (sign * section.along[0], sign * section.along[1]), section.width
    )

    def sections(peak: Point) -> tuple[Section, ...]:
        s, n = strip.frame.local(np.array(peak))
        return (outward,) if abs(s) <= math.sin(AT_NET_SECTION) * math.hypot(s, n) else ()

    yield HandbookCase(
        kind="lug with a pin",
        features=(strip.hole.id,),
        place=_place(shape, strip),
        bare=frozenset(_edges(shape, strip)),
        loading="pin",
        sections=sections,
        stress=lambda force, _: pin_in_lug(force, d, width, t),
        source=LUG_SOURCE,
        valid=f"d/W from {LUG_LEAST:g} to {LUG_MOST:g}, here {d / width:.3g}; end of the bar at "
        f"least W from the hole's centre, here {beyond / width:.3g} W; tests with friction; "
        "a pin without friction gives 5 to 12 % less",
    )


def _ends_square(shape: Shape, strip: _Strip, at: float) -> bool:
    """Whether the outline crosses the strip straight at a distance along."""
    slack = 1e-6 * shape.size
    for i in range(*shape.loops[0]):
        ends = strip.frame.ends(shape, i)
        if (
            shape.curves[i].curve.curvature == 0.0
            and np.abs(ends[:, 0] - at).max() <= slack
            and abs(ends[:, 1].min() - strip.low) <= slack
            and abs(ends[:, 1].max() - strip.high) <= slack
        ):
            return True
    return False


def _clear(shape: Shape, strip: _Strip, begin: float, end: float) -> bool:
    own = (strip.one, strip.other, *strip.rim)
    return clear(shape, strip.frame, (begin, end), (strip.low, strip.high), own)


def _share(strip: _Strip) -> str:
    return f"d/W up to {HOLE_MOST:g}, here {strip.hole.diameter / strip.width:.3g}"


def _edges(shape: Shape, strip: _Strip) -> tuple[str, str]:
    return shape.curves[strip.one].feature, shape.curves[strip.other].feature


def _place(shape: Shape, strip: _Strip) -> str:
    one, other = _edges(shape, strip)
    return f"hole {strip.hole.id} between {one} and {other}"
