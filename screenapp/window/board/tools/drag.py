"""Dragging corners, edges, holes, zones and probes: one of them, or all selected ones together."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from screenapp.model import edits
from screenapp.model.edit_dimensions import formulas_lost
from screenapp.model.expressions import names_in
from screenapp.model.features import find, loops_of, place_name
from screenapp.model.field_names import field_words
from screenapp.model.members import member_ids, whole_id
from screenapp.model.part import Part, Point
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.snapping import neighbours
from screenapp.window.board.tools.base import Place


@dataclass(frozen=True)
class Drag:
    """A drag under way.

    Attributes:
        part: the part before it.
        ids: what is dragged.
        grip: the place of it that follows the cursor and snaps [mm].
        pressed: where the button went down [mm].
    """

    part: Part
    ids: tuple[str, ...]
    grip: Point
    pressed: Point

    def aim(self, place: Place) -> Point:
        """Where the cursor would have the grip, before any snap [mm]."""
        x, y = place.raw
        return self.grip[0] + x - self.pressed[0], self.grip[1] + y - self.pressed[1]

    def moved(self, to: Point) -> Part:
        """The part with the grip at `to`.

        Raises:
            EditError: too far away.
        """
        found = find(self.part, self.ids[0])
        if len(self.ids) == 1 and found is not None:  # exactly there, without a sum
            if found.kind == "corner":
                return edits.move_corner(self.part, self.ids[0], to)
            if found.kind == "hole":
                return edits.move_hole(self.part, self.ids[0], to)
            if found.kind == "probe":
                return edits.move_probe(self.part, self.ids[0], to)
        return edits.move(self.part, self.ids, to[0] - self.grip[0], to[1] - self.grip[1])

    def held_by(self) -> str:
        """Why it cannot be dragged: numbers of it are given by expressions; "" if none is."""
        if not self.part.formulas:
            return ""
        try:
            away = edits.move(self.part, self.ids, 1.0, 1.0)
        except edits.EditError:
            return ""
        lost = formulas_lost(self.part, away)
        if not lost:
            return ""
        first = lost[0]
        names = " or ".join(sorted(names_in(first.text)))
        return (
            f"The {field_words(first.field)} is {first.text}: change {names or 'it there'}, "
            "or type a number in its place."
        )

    @property
    def name(self) -> str:
        """The name of the step."""
        if len(self.ids) > 1:
            return f"move {len(self.ids)} things"
        return f"move {place_name(self.part, self.ids[0])}"

    @cached_property
    def unsnapped(self) -> frozenset[str]:
        """What moves or bends along, which must not draw the cursor."""
        out = set(self.ids)
        for hole in self.part.holes:
            if any(whole_id(id_) == hole.id for id_ in self.ids):
                out |= {hole.id, *member_ids(hole)}
        for _, owner, loop in loops_of(self.part):
            if owner in self.ids:
                out |= {c.id for c in loop.corners} | {e.id for e in loop.edges}
            n = len(loop.corners)
            for i, edge in enumerate(loop.edges):
                if edge.id in self.ids:
                    for corner in (loop.corners[i].id, loop.corners[(i + 1) % n].id):
                        out |= neighbours(loop, corner)
            for corner in self.ids:
                out |= neighbours(loop, corner)
        return frozenset(out)


def grip_of(drawn: DrawnPart, id_: str) -> Point | None:
    """The place by which a thing is dragged [mm]; None for what follows others."""
    if id_ in drawn.corners:
        return drawn.corners[id_].at
    if id_ in drawn.holes:
        return edits.hole_centre(drawn.holes[id_])
    if id_ in drawn.zones:
        return edits.hole_centre(drawn.zones[id_].form)
    if id_ in drawn.probes:
        return drawn.probes[id_].at
    for cut in drawn.part.cuts:
        if cut.id == id_:
            return cut.start
    for _, _, loop in loops_of(drawn.part):
        for corner, edge in zip(loop.corners, loop.edges, strict=False):
            if edge.id == id_:
                return corner.at
    return None
