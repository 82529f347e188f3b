"""What the measure tool takes up, and what it finds between two of those."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

from screenapp.model import measuring
from screenapp.model.boundary_curve import BoundaryCurve
from screenapp.model.curves import Arc, Segment
from screenapp.model.features import place_name
from screenapp.model.measuring import Measured, Measurement
from screenapp.model.part import DisplayUnits, Point
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.quantity import written
from screenapp.window.board.tools.base import Place
from screenapp.window.board.tools.probe import on_material

POINTS = ("corner", "centre", "middle", "intersection", "start")


@dataclass(frozen=True)
class Taken:
    """Something that is measured: a point, an edge, fillet or hole, or the part's face."""

    kind: Literal["point", "thing", "face"]
    at: Point
    id: str = ""


def taken(drawn: DrawnPart, place: Place, first: bool) -> Taken:
    """What a click takes up: a point that draws the cursor, else what lies there, else the face."""
    snap, hit = place.snap, place.hit
    if snap.kind == "none":
        return Taken("point", place.raw)
    if snap.kind in POINTS and not snap.to:
        return Taken("point", snap.at, snap.id)
    if hit is not None and hit.kind in ("edge", "fillet", "hole"):
        return Taken("thing", hit.at, hit.id)
    if first and drawn.part.outline is not None and on_material(drawn, place.raw):
        return Taken("face", place.raw)
    return Taken("point", snap.at)


def measured(drawn: DrawnPart, one: Taken, other: Taken | None = None) -> Measurement | None:
    """The measurement of one thing, or between two; None if a thing is gone."""
    things = [t for t in (one, other) if t is not None]
    pieces = [_pieces(drawn, t) for t in things]
    if any(t.kind == "thing" and not p for t, p in zip(things, pieces, strict=True)):
        return None
    if other is None or (one.kind == "thing" and one == other):
        return _single(drawn, one, pieces[0])
    title = f"{_name(drawn, one)} to {_name(drawn, other)}"
    if one.kind == "point" and other.kind == "point":
        numbers = measuring.between_points(one.at, other.at)
        return Measurement(title, numbers, (one.at, other.at), _middle(one.at, other.at))
    if one.kind == "point" or other.kind == "point":
        point, curves = (one, pieces[1]) if one.kind == "point" else (other, pieces[0])
        gap, at = measuring.nearest_place(point.at, [p.curve for p in curves])
        numbers = (Measured("distance", gap), *_to_centre(point.at, curves))
        return Measurement(title, numbers, (point.at, at), _middle(point.at, at))
    return _of_two_things(drawn, title, pieces[0], pieces[1])


def lines_of(found: Measurement, units: DisplayUnits) -> list[str]:
    """The results in words, with units."""
    return [f"{n.name} {written(n.value, n.kind, units)}" for n in found.numbers]


def text_of(found: Measurement, units: DisplayUnits) -> str:
    """The whole measurement as text, for the clipboard."""
    return "\n".join([found.title, *lines_of(found, units)])


def _pieces(drawn: DrawnPart, one: Taken) -> tuple[BoundaryCurve, ...]:
    return drawn.pieces_of(one.id) if one.kind == "thing" else ()


def _name(drawn: DrawnPart, one: Taken) -> str:
    return place_name(drawn.part, one.id) if one.id else "the place"


def _single(drawn: DrawnPart, one: Taken, pieces: Sequence[BoundaryCurve]) -> Measurement:
    if one.kind == "point":
        numbers: tuple[Measured, ...] = (Measured("x", one.at[0]), Measured("y", one.at[1]))
        return Measurement(_name(drawn, one), numbers, None, one.at)
    if one.kind == "face":
        outline = measuring.of_ring([p.curve for p in drawn.loops[0].pieces])
        holes = [measuring.of_ring([p.curve for p in ring.pieces]) for ring in drawn.loops[1:]]
        area = outline[0].value - sum(h[0].value for h in holes)
        around = outline[1].value + sum(h[1].value for h in holes)
        numbers = (Measured("area", area, "area"), Measured("all boundaries", around))
        return Measurement("the face of the part", numbers, None, one.at)
    numbers = measuring.of_curves([p.curve for p in pieces])
    if one.id in drawn.holes:
        numbers = (*numbers, measuring.of_ring([p.curve for p in pieces])[0])
    return Measurement(_name(drawn, one), numbers, None, one.at)


def _of_two_things(
    drawn: DrawnPart, title: str, one: Sequence[BoundaryCurve], other: Sequence[BoundaryCurve]
) -> Measurement:
    gap, a, b = measuring.least_distance(one, other)
    numbers: list[Measured] = []
    if gap > 0.0:
        through = on_material(drawn, _middle(a, b))
        numbers.append(Measured("ligament" if through else "gap", gap))
    centres = [c for c in (_centre(one), _centre(other)) if c is not None]
    if len(centres) == 2:
        numbers.append(Measured("centre to centre", measuring.between_points(*centres)[0].value))
    straight = [p[0].curve for p in (one, other) if len(p) == 1]
    if len(straight) == 2 and all(isinstance(c, Segment) for c in straight):
        first, second = straight
        assert isinstance(first, Segment)
        assert isinstance(second, Segment)
        angle = measuring.angle_between(first, second)
        numbers.append(Measured("angle", angle, "angle"))
    if not numbers:
        numbers.append(Measured("distance", gap))
    return Measurement(title, tuple(numbers), (a, b) if gap > 0.0 else None, _middle(a, b))


def _to_centre(point: Point, pieces: Sequence[BoundaryCurve]) -> tuple[Measured, ...]:
    centre = _centre(pieces)
    if centre is None:
        return ()
    return (Measured("to the centre", measuring.between_points(point, centre)[0].value),)


def _centre(pieces: Sequence[BoundaryCurve]) -> Point | None:
    """The common centre of pieces that are arcs of one circle."""
    curves = [p.curve for p in pieces]
    numbers = measuring.of_curves(curves)
    first = curves[0]
    whole = any(n.name in ("diameter", "turns") for n in numbers)
    return first.centre if whole and isinstance(first, Arc) else None


def _middle(a: Point, b: Point) -> Point:
    return (a[0] + b[0]) / 2.0, (a[1] + b[1]) / 2.0
