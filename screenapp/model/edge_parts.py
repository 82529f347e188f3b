"""Supports and loads on part of an edge: from one length along it to another.

Lengths are counted along what is left of the edge between the rounds or chamfers of its corners,
in the direction in which it was drawn, from its first corner.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Iterator, Mapping
from dataclasses import replace
from typing import Any

from screenapp.model.boundary_curve import BoundaryCurve
from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.features import Places, find, loops_of
from screenapp.model.loop_curves import runs_clockwise
from screenapp.model.part import BoltSupport, Load, Part, Point, PointLoad, Support
from screenapp.model.shape import Shape, shape_of
from screenapp.model.support_records import stands_on

Span = tuple[float | None, float | None]
"""From where to where [mm]; None is the edge's own start or end."""

WHOLE: Span = (None, None)
NEAR = 1e-7
"""Lengths that differ by less than this share of the part's size are one."""


def span_of(record: Support | Load) -> Span:
    """The part of its edge that a support or load stands on; empty for a force at a point of it."""
    if isinstance(record, PointLoad) and record.along is not None:
        half = 0.5 * (record.patch or 0.0)
        return record.along - half, record.along + half
    if not hasattr(record, "end"):
        return WHOLE
    return record.start, record.end  # type: ignore[union-attr]


def can_have_span(record: Support | Load) -> bool:
    """Whether its kind may stand on part of an edge."""
    return hasattr(record, "end") and hasattr(record, "on")


def placed(part: Part) -> Iterator[Support | Load]:
    """Every support and load on a place."""
    yield from part.supports
    yield from (load for case in part.cases for load in case.loads if hasattr(load, "on"))


def with_span_ends(part: Part, shape: Shape) -> Shape:
    """The shape with its pieces cut where a support or load on part of an edge begins or ends."""
    cuts: dict[str, set[float]] = {}
    for record in placed(part):
        for at in span_of(record):
            if at is not None and math.isfinite(at):
                cuts.setdefault(record.on, set()).add(at)  # type: ignore[union-attr]
    if not cuts:
        return shape
    pieces: list[BoundaryCurve] = []
    loops: list[tuple[int, int]] = []
    for first, last in shape.loops:
        begin = len(pieces)
        for piece in shape.curves[first:last]:
            if piece.kind == "edge" and piece.feature in cuts:
                pieces += _cut(piece, cuts[piece.feature], runs_backward(part, piece.feature),
                               NEAR * shape.size)  # fmt: skip
            else:
                pieces.append(piece)
        loops.append((begin, len(pieces)))
    return replace(shape, curves=tuple(pieces), loops=tuple(loops))


def _cut(
    piece: BoundaryCurve, lengths: set[float], backward: bool, near: float
) -> list[BoundaryCurve]:
    whole = piece.curve.length
    inside = [a for a in lengths if near < a < whole - near]
    t = sorted((whole - a if backward else a) / whole for a in inside)
    kept = [0.0]
    for each in t:
        if (each - kept[-1]) * whole > near:
            kept.append(each)
    ends = itertools.pairwise([*kept, 1.0])
    return [replace(piece, curve=piece.curve.part(a, b)) for a, b in ends]


def runs_backward(part: Part, edge: str) -> bool:
    """Whether the boundary, with the material on its left, runs against the edge as drawn."""
    for where, _, loop in loops_of(part):
        if any(e.id == edge for e in loop.edges):
            return runs_clockwise(loop) == (where == "outline")
    return False


def pieces_under(part: Part, shape: Shape, record: Support | Load) -> tuple[int, ...]:
    """Pieces of the boundary that a support or load stands on, in the direction of drawing."""
    if isinstance(record, BoltSupport):
        return tuple(k for on in stands_on(record) for k in shape.pieces_of(on))
    on: str = record.on  # type: ignore[union-attr]
    mine = shape.pieces_of(on)
    span = span_of(record)
    if runs_backward(part, on):
        mine = mine[::-1]
    if span == WHOLE:
        return mine
    start, end = span[0] or 0.0, math.inf if span[1] is None else span[1]
    lengths = [shape.curves[k].curve.length for k in mine]
    ends = list(itertools.accumulate(lengths))
    return tuple(
        k
        for k, long, upto in zip(mine, lengths, ends, strict=True)
        if start < upto - 0.5 * long < end
    )


def point_of(part: Part, shape: Shape, load: PointLoad) -> Point | None:
    """Where a force at a point, or the middle of its patch, is [mm]; None if it is nowhere.

    Args:
        shape: its pieces may be cut, or not yet, where loads begin and end.
    """
    if load.along is None:
        return dict(shape.sharp_corners).get(load.on)
    pieces, rest = shape.pieces_of(load.on), load.along
    backward = runs_backward(part, load.on)
    for number, k in enumerate(pieces[::-1] if backward else pieces):
        curve = shape.curves[k].curve
        last = number == len(pieces) - 1
        if rest <= curve.length or (last and rest <= curve.length + NEAR * shape.size):
            t = min(rest / curve.length, 1.0)
            x, y = curve.point(1.0 - t if backward else t)
            return float(x), float(y)
        rest -= curve.length
    return None


def edge_length(shape: Shape, edge: str) -> float:
    """Length of what the rounds leave of an edge [mm]."""
    return sum(shape.curves[k].curve.length for k in shape.pieces_of(edge))


def half_length(part: Part, edge: str) -> float | None:
    """Half of what the rounds leave of an edge [mm]; None for what is no edge, or has no sound
    shape."""
    found = find(part, edge)
    if found is None or found.kind != "edge":
        return None
    try:
        return 0.5 * edge_length(shape_of(part), edge) or None
    except InvalidPartError:
        return None


def span_faults(
    record: Support | Load, name: str, where: str, places: Places, shape: Shape | None
) -> Iterator[Fault]:
    """A span on what is no edge, that is empty, or that reaches beyond the edge."""
    span = span_of(record)
    if span == WHOLE:
        return
    on: str = record.on  # type: ignore[union-attr]
    ids = (record.id, on)
    found = places.get(on)
    if found is not None and found.kind != "edge":
        yield Fault(
            f"{name} is on part of {found.kind} {on}; only an edge has parts",
            "leave out its start and end, or put it on an edge",
            f"{where}.{'start' if span[0] is not None else 'end'}",
            ids,
        )
        return
    given: Mapping[str, float | None] = dict(zip(("start", "end"), span, strict=True))
    for field, value in given.items():
        if value is not None and not (math.isfinite(value) and value >= 0.0):
            yield Fault(
                f"the {field} of {name} is {value:g} mm along edge {on}",
                "give a length of zero or more from the edge's first corner",
                f"{where}.{field}",
                ids,
            )
            return
    start, end = span[0] or 0.0, span[1]
    if end is not None and end <= start:
        yield Fault(
            f"{name} ends at {end:g} mm along edge {on}, before it starts at {start:g} mm",
            "give an end beyond the start",
            f"{where}.end",
            ids,
        )
    elif shape is not None:
        whole = edge_length(shape, on)
        far, field = (start, "start") if end is None else (end, "end")
        if whole > 0.0 and (far > whole * (1.0 + 1e-9) or (end is None and start >= whole)):
            yield Fault(
                f"{name} reaches to {far:g} mm along edge {on}, which is {whole:.6g} mm long",
                f"give a {field} within the edge, or leave it out",
                f"{where}.{field}",
                ids,
            )


def without_span(record: Any) -> Any:
    """The record on the whole of its place."""
    return replace(record, start=None, end=None) if hasattr(record, "end") else record
