"""Which dimensions a drawing shows: values and the places they join.

Nothing here knows pixels; the board and the record draw the marks, each at its own scale.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from typing import Literal, Protocol

from screenapp.model.curves import Arc
from screenapp.model.edit_dimensions import formula_at
from screenapp.model.features import find, loops_of
from screenapp.model.kinds import KindName
from screenapp.model.members import members
from screenapp.model.part import CircleHole, Corner, Edge, Loop, Part, Point, SlotHole
from screenapp.model.shape import BoundaryCurve

MOST_ROWS = 6
"""No more rows of hole positions than this on a side: the rest is shown when it is selected."""

DimensionsShown = Literal["plain", "all", "none"]
"""Overall sizes and those of what is selected; all of them; none."""


class Measured(Protocol):
    """A part and where its boundary runs."""

    @property
    def part(self) -> Part:
        """The part."""

    @property
    def exact_bounds(self) -> tuple[float, float, float, float] | None:
        """Smallest x, y and largest x, y [mm] of the outline."""

    def pieces_of(self, feature: str) -> Sequence[BoundaryCurve]:
        """Pieces of an edge, a fillet or a hole."""


What = Literal["overall", "place", "diameter", "size", "length", "radius", "arc"]


@dataclass(frozen=True)
class Mark:
    """One dimension.

    Attributes:
        what: what it measures; `of` is the id of the thing, "" for overall sizes.
        name: which number of it: "width", "x", "diameter", "length" ...
        value: [mm].
        a, b: the places it joins [mm]; of a diameter the ends across, of a radius the centre and a
            place on the arc.
        along: direction that it is measured in (unit vector); its line stands beside the places.
        away: direction from the places to its line (unit vector).
        row: how many rows away its line stands; 0 is right beside; -1 is between the places.
        lead: text before the value: "⌀ ", "R ", "4 × ⌀ ".
        given: whether an expression gives it.
        kind: what is measured.
    """

    what: What
    of: str
    name: str
    value: float
    a: Point
    b: Point
    along: Point
    away: Point
    row: int = 0
    lead: str = ""
    given: bool = False
    kind: KindName = "length"

    @property
    def key(self) -> tuple[str, str, str]:
        """Names the mark from one part to the next."""
        return self.what, self.of, self.name

    @property
    def words(self) -> str:
        """What it is, for the accessible name of its field."""
        if self.what == "overall":
            return f"Overall {self.name}"
        word = {"place": f"{self.name} from the {'left' if self.name == 'x' else 'lower'} side"}
        return f"{word.get(self.what, self.name).capitalize()} of {self.of}"


RIGHT, UP, LEFT, DOWN = (1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0)


def marks_of(drawn: Measured, selection: Iterable[str], everything: bool) -> tuple[Mark, ...]:
    """Overall sizes and those of what is selected, or of everything."""
    part, box = drawn.part, drawn.exact_bounds
    if box is None or part.outline is None:
        return ()
    chosen = tuple(selection)
    marks: list[Mark] = []
    holes = [h for h in part.holes if isinstance(h, CircleHole | SlotHole)]
    wanted = [h for h in holes if everything or h.id in chosen]
    places = list(_places(part, wanted, box))
    marks += places
    rows = [max((m.row + 1 for m in places if m.away == way), default=0) for way in (DOWN, LEFT)]
    marks += _overall(box, rows)
    marks += _sizes(part, wanted, everything, set(chosen))
    if everything:
        marks += _all_radii(part, drawn)
    shown = {m.key for m in marks}
    for id_ in chosen[:12]:
        marks += [m for m in _of_selected(drawn, id_) if m.key not in shown]
        shown |= {m.key for m in marks}
    return tuple(marks)


def rows_of(marks: Iterable[Mark]) -> tuple[int, int]:
    """How many rows stand below the part and how many beside it."""
    listed = list(marks)
    below, beside = (
        max(
            (m.row + 1 for m in listed if m.what in ("overall", "place") and m.away == w), default=0
        )
        for w in (DOWN, LEFT)
    )
    return below, beside


def _overall(box: tuple[float, float, float, float], rows: list[int]) -> Iterator[Mark]:
    x0, y0, x1, y1 = box
    below, beside = rows
    yield Mark("overall", "", "width", x1 - x0, (x0, y0), (x1, y0), RIGHT, DOWN, below + 1)
    yield Mark("overall", "", "height", y1 - y0, (x0, y0), (x0, y1), UP, LEFT, beside + 1)


def _places(
    part: Part, holes: list[CircleHole | SlotHole], box: tuple[float, float, float, float]
) -> Iterator[Mark]:
    """From the left and the lower side to each hole's centre; one for each distance."""
    x0, y0, _, _ = box
    for axis, name, along, away in ((0, "x", RIGHT, DOWN), (1, "y", UP, LEFT)):
        start = (x0, y0)[axis]
        seen: dict[float, CircleHole | SlotHole] = {}
        for hole in sorted(holes, key=lambda h: h.centre[axis]):
            gap = round(hole.centre[axis] - start, 9)
            if gap > 1e-9:
                seen.setdefault(gap, hole)
        for row, (gap, hole) in enumerate(list(seen.items())[:MOST_ROWS]):
            given = formula_at(part, f"holes.{hole.id}.centre.{axis}") is not None
            yield Mark(
                "place", hole.id, name, gap, (x0, y0), hole.centre, along, away, row, given=given
            )


def _sizes(
    part: Part, holes: list[CircleHole | SlotHole], everything: bool, chosen: set[str]
) -> Iterator[Mark]:
    """Diameters, those that are alike told once; length and width of slots."""
    alike: dict[float, int] = {}
    for hole in holes:
        if isinstance(hole, CircleHole):
            alike[hole.diameter] = alike.get(hole.diameter, 0) + len(members(hole))
    told: set[float] = set()
    for hole in holes:
        if isinstance(hole, SlotHole):
            yield from _slot_sizes(part, hole)
            continue
        if everything and hole.diameter in told and hole.id not in chosen:
            continue
        told.add(hole.diameter)
        count = alike[hole.diameter] if everything else len(members(hole))
        lead = f"{count} × ⌀\u2009" if count > 1 else "⌀\u2009"
        one = next(iter(members(hole)), hole)  # a bolt circle's own centre is no hole
        (x, y), r = one.centre if isinstance(one, CircleHole) else hole.centre, hole.diameter / 2.0
        slant = (math.cos(math.radians(40.0)), math.sin(math.radians(40.0)))
        a, b = (x - r * slant[0], y - r * slant[1]), (x + r * slant[0], y + r * slant[1])
        given = formula_at(part, f"holes.{hole.id}.diameter") is not None
        yield Mark("diameter", hole.id, "diameter", hole.diameter, a, b, slant, UP, -1, lead, given)


def _slot_sizes(part: Part, slot: SlotHole) -> Iterator[Mark]:
    turn = math.radians(slot.angle)
    along, away = (math.cos(turn), math.sin(turn)), (-math.sin(turn), math.cos(turn))
    x, y = slot.centre
    for name, value, way, off in (
        ("length", slot.length, along, away),
        ("width", slot.width, away, along),
    ):
        half = value / 2.0
        a = (x - half * way[0], y - half * way[1])
        b = (x + half * way[0], y + half * way[1])
        beyond = (slot.width if name == "length" else slot.length) / 2.0
        a, b = ((p[0] + beyond * off[0], p[1] + beyond * off[1]) for p in (a, b))
        given = formula_at(part, f"holes.{slot.id}.{name}") is not None
        yield Mark("size", slot.id, name, value, a, b, way, off, 0, given=given)


def _all_radii(part: Part, drawn: Measured) -> Iterator[Mark]:
    """The radii of fillets, those that are alike told once, and of arcs."""
    count: dict[float, int] = {}
    first: dict[float, tuple[str, Corner]] = {}
    for where, _, loop in loops_of(part):
        for corner in loop.corners:
            if corner.round > 0.0:
                count[corner.round] = count.get(corner.round, 0) + 1
                first.setdefault(corner.round, (where, corner))
        for edge in loop.edges:
            if edge.through is not None:
                yield from _arc_radius(drawn, edge)
    for radius, (where, corner) in first.items():
        yield from _round(drawn, where, corner, count[radius])


def _of_selected(drawn: Measured, id_: str) -> Iterator[Mark]:
    found = find(drawn.part, id_)
    if found is None:
        return
    record = found.record
    if isinstance(record, Edge):
        loop = next((lp for _, owner, lp in loops_of(drawn.part) if owner == found.owner), None)
        if record.through is not None:
            yield from _arc_radius(drawn, record)
        elif loop is not None:
            yield from _edge_length(drawn, loop, record)
    elif isinstance(record, Corner):
        yield from _round(drawn, found.field.rsplit(".corners.", 1)[0], record, 1)
        for _, owner, loop in loops_of(drawn.part):
            if owner == found.owner and record in loop.corners:
                i = loop.corners.index(record)
                for edge in (loop.edges[i - 1], loop.edges[i]):
                    if edge.through is None:
                        yield from _edge_length(drawn, loop, edge)


def _edge_length(drawn: Measured, loop: Loop, edge: Edge) -> Iterator[Mark]:
    """The length from corner to corner, on the side where there is no material."""
    i = loop.edges.index(edge)
    a, b = loop.corners[i].at, loop.corners[(i + 1) % len(loop.corners)].at
    length = math.dist(a, b)
    if length == 0.0:
        return
    along = ((b[0] - a[0]) / length, (b[1] - a[1]) / length)
    away = (along[1], -along[0])
    pieces = drawn.pieces_of(edge.id)
    if pieces:  # these have the material on their left
        dx, dy = pieces[0].curve.tangent(0.5)
        away = (float(dy), -float(dx))
    yield Mark("length", edge.id, "length", length, a, b, along, away)


def _round(drawn: Measured, where: str, corner: Corner, count: int) -> Iterator[Mark]:
    if not corner.round > 0.0:
        return
    for piece in drawn.pieces_of(corner.id):
        if isinstance(piece.curve, Arc):
            x, y = piece.curve.point(0.5)
            lead = f"{count} × R\u2009" if count > 1 else "R\u2009"
            given = formula_at(drawn.part, f"{where}.corners.{corner.id}.round") is not None
            at = (float(x), float(y))
            yield _radial("radius", corner.id, corner.round, piece.curve.centre, at, lead, given)
            return


def _arc_radius(drawn: Measured, edge: Edge) -> Iterator[Mark]:
    for piece in drawn.pieces_of(edge.id):
        if isinstance(piece.curve, Arc):
            x, y = piece.curve.point(0.5)
            curve, at = piece.curve, (float(x), float(y))
            yield _radial("arc", edge.id, curve.radius, curve.centre, at, "R\u2009", False)
            return


def _radial(
    what: What, of: str, radius: float, centre: Point, at: Point, lead: str, given: bool
) -> Mark:
    along = ((at[0] - centre[0]) / radius, (at[1] - centre[1]) / radius)
    return Mark(what, of, "radius", radius, centre, at, along, along, -1, lead, given)
