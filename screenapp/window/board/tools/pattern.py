"""Rows, grids and bolt circles of holes: new ones, or of the round hole or slot selected."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING, ClassVar

from PySide6.QtCore import Qt
from PySide6.QtGui import QKeyEvent, QPainter

from screenapp.model import edits
from screenapp.model.edits import Outcome
from screenapp.model.features import find
from screenapp.model.hole_loops import loop_of_hole
from screenapp.model.loop_curves import edge_curves
from screenapp.model.members import members
from screenapp.model.part import CircleHole, Part, Point, SlotHole
from screenapp.model.pattern import (
    MOST_MEMBERS,
    Pattern,
    size_of,
)
from screenapp.window.board import sketch
from screenapp.window.board.frame import Frame
from screenapp.window.board.quantity import written
from screenapp.window.board.tools.base import Place, Tool
from screenapp.window.board.tools.drawing import PLACE_FIELDS, DrawTool
from screenapp.window.board.typed_entry import EntryField

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas

DIAMETER = EntryField("diameter", "diameter")
FIRST_DIAMETER = {"mm-N-MPa": 6.0, "in-lbf-ksi": 6.35}
"""Of the first hole of a part [mm]."""


class PatternTool(DrawTool):
    """Where it begins, then how far it goes; the counts change by arrow keys or by typing."""

    group: ClassVar[str] = "holes"
    fields: ClassVar[tuple[EntryField, ...]] = ()
    counts: ClassVar[dict[str, int]] = {}
    keys: ClassVar[dict[Qt.Key, tuple[str, int]]] = {}
    word: ClassVar[str] = ""

    def __init__(self, canvas: Canvas) -> None:
        super().__init__(canvas)
        self.centre: Point | None = None
        self.hole: str | None = None
        self._counts = dict(self.counts)
        self._given: dict[str, str | None] = {}

    def start(self) -> None:
        """Repeat the hole that is selected, if one is."""
        selection = self.canvas.document.selection
        found = find(self.canvas.document.part, selection[0]) if len(selection) == 1 else None
        record = found.record if found is not None and found.kind == "hole" else None
        if isinstance(record, CircleHole | SlotHole) and record.pattern is None:
            self.hole = record.id
            self.take_up(record)

    def take_up(self, hole: CircleHole | SlotHole) -> None:
        """Begin at a hole that is there."""
        self.centre = hole.centre

    def stop(self, following: Tool | None) -> None:
        """Drop what is half done."""
        self.centre = self.hole = None
        self.typed = {}

    def part_changed(self) -> None:
        """The hole may be gone."""
        if self.hole is not None:
            self.centre = self.hole = None

    def step_back(self) -> bool:
        """Drop the centre and the hole that is repeated."""
        had = self.centre is not None or self.hole is not None
        self.centre = self.hole = None
        return had

    def entry_fields(self) -> tuple[EntryField, ...]:
        """A place, then what makes the pattern."""
        if self.centre is None:
            return PLACE_FIELDS
        return self.fields if self.hole is not None else (*self.fields, DIAMETER)

    def key_press(self, event: QKeyEvent) -> bool:
        """Arrows change the counts."""
        step = self.keys.get(Qt.Key(event.key()))
        if self.centre is None or step is None:
            return super().key_press(event)
        name, more = step
        self._counts[name] = max(1, self._counts[name] + more)
        if size_of(self.pattern_to((0.0, 0.0))) > MOST_MEMBERS:
            self._counts[name] -= more
        return True

    @property
    def diameter(self) -> float:
        """That of new holes [mm]: as typed, else as the last round hole."""
        if "diameter" in self.typed:
            return self.typed["diameter"]
        part = self.canvas.document.part
        rounds = [h.diameter for h in part.holes if isinstance(h, CircleHole)]
        return rounds[-1] if rounds else FIRST_DIAMETER[part.display_units]

    def count(self, name: str) -> int:
        """A count as typed, else as set by the arrows."""
        if name in self.typed and math.isfinite(self.typed[name]):
            return max(1, min(MOST_MEMBERS + 1, round(self.typed[name])))
        return self._counts[name]

    def pattern_to(self, at: Point) -> Pattern:
        """The pattern that reaches to a place."""
        raise NotImplementedError

    def numbers(self, pattern: Pattern) -> dict[str, float]:
        """Its values by the names of the fields."""
        return {f.name: float(getattr(pattern, f.name)) for f in self.fields}

    def sample(self, pattern: Pattern) -> CircleHole | SlotHole | None:
        """The hole with this pattern, as a click would leave it."""
        if self.centre is None:
            return None
        found = find(self.canvas.document.part, self.hole) if self.hole is not None else None
        if found is not None and isinstance(found.record, CircleHole | SlotHole):
            return replace(found.record, centre=self.centre, pattern=pattern)
        return CircleHole("new", self.centre, self.diameter, pattern)

    def typed_point(self, cursor: Point | None) -> Point | None:
        """Once it has begun, any place will do."""
        if self.centre is None:
            return super().typed_point(cursor)
        return cursor if cursor is not None else self.centre

    def entry_live(self) -> dict[str, float]:
        """Place, or the pattern's numbers."""
        at = self.point()
        if self.centre is None or at is None:
            return super().entry_live()
        return self.numbers(self.pattern_to(at)) | {"diameter": self.diameter}

    def accept_point(self, at: Point) -> None:
        """Where it begins, then how far it goes."""
        if self.centre is None:
            self.centre, self._given = at, self.canvas.entry.taken
        else:
            self._draw(self.pattern_to(at))

    def entry_accept(self, values: dict[str, float]) -> None:
        """Typed numbers draw it; counts must be whole."""
        if self.centre is not None:
            for name in self.counts:
                if name in values and values[name] != round(values[name]):
                    self.say(f"{values[name]:g} is no whole number of holes: give 2, 3 ...")
                    return
            self.typed = dict(values)
            self.enter()
            self.typed = {}
        else:
            super().entry_accept(values)

    def press(self, place: Place) -> None:
        """What is typed counts for a click too."""
        if self.centre is None:
            super().press(place)
            return
        self.canvas.entry.forget()
        self._draw(self.pattern_to(place.at))
        self.typed = {}

    def enter(self) -> None:
        """Take what is shown."""
        at = self.point()
        if self.centre is not None and at is not None:
            self._draw(self.pattern_to(at))

    def _draw(self, pattern: Pattern) -> None:
        hole = self.sample(pattern)
        if hole is None:
            return
        part, old = self.canvas.document.part, self.hole
        taken, given = self.canvas.entry.taken, self._given

        def make() -> Part | Outcome:
            if old is not None:
                moved = edits.move_hole(part, old, hole.centre)
                return edits.set_pattern(moved, old, pattern)
            assert isinstance(hole, CircleHole)
            new = edits.add_circle_hole(part, hole.centre, hole.diameter)
            return edits.set_pattern(new, new.holes[-1].id, pattern)

        def keep(made: Part) -> dict[str, str | None]:
            if old is not None:
                return {f"holes.{old}.pattern.{f.name}": taken.get(f.name) for f in self.fields}
            where = f"holes.{made.holes[-1].id}"
            kept = {f"{where}.pattern.{f.name}": taken.get(f.name) for f in self.fields}
            return kept | {
                f"{where}.centre.0": given.get("x"),
                f"{where}.centre.1": given.get("y"),
                f"{where}.diameter": taken.get("diameter"),
            }

        if self.apply(f"draw a {self.word}", make, keep):
            made = self.canvas.document.part
            self.canvas.document.select(old if old is not None else made.holes[-1].id)
            self.centre = self.hole = None
            self.canvas.tool_wanted.emit("Select")

    def paint(self, painter: QPainter, frame: Frame) -> None:
        """Every hole that a click would make, and what is asked for."""
        at = self.point()
        if at is None:
            return
        if self.centre is None:
            if self.typed:
                sketch.dot(painter, frame, at)
            return
        pattern = self.pattern_to(at)
        hole = self.sample(pattern)
        if hole is None or size_of(pattern) > MOST_MEMBERS:
            return
        for member in members(hole):
            for curve in edge_curves(loop_of_hole(member)):
                sketch.curve(painter, frame, curve)
        self.paint_guide(painter, frame, pattern)

    def paint_guide(self, painter: QPainter, frame: Frame, pattern: Pattern) -> None:
        """What it is laid out by, with its sizes."""

    def words(self, value: float) -> str:
        """A length in the units shown."""
        return written(value, "length", self.canvas.part.display_units)
