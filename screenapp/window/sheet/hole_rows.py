"""Rows of the sheet for holes: sizes, place, and how they are repeated."""

from __future__ import annotations

from typing import Protocol

from screenapp.model.features import hole_word
from screenapp.model.part import CircleHole, Hole, LoopHole, SlotHole
from screenapp.model.pattern import BoltCircle, GridPattern, Pattern, RowPattern
from screenapp.window.document import Document
from screenapp.window.sheet import changes
from screenapp.window.sheet.pieces import Choice, Link, Piece, Value
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.rows import RowOf

PATTERNS = {
    "row": "a row",
    "grid": "a grid",
    "bolt circle": "a bolt circle",
}


def hole_row(document: Document, hole: Hole, q: Quantities) -> RowOf:
    """The row of a hole; of a pattern one row for all its members."""
    change = changes.HoleChange(document, hole.id)
    where = f"hole {hole.id}"

    def number(key: str, value: float, what: str, kind: str = "length") -> Value:
        at = {"x": "centre.0", "y": "centre.1"}.get(key, key)
        field = f"holes.{hole.id}.{at}"
        return q.value(key, value, kind, f"{what} of {where}", change.setter(key), field=field)

    pieces: tuple[Piece | str, ...]
    if isinstance(hole, LoopHole):
        pieces = (f"{hole_word(hole)} of {count_of(len(hole.loop.edges), 'edge')}",)
    else:
        place = (
            number("x", hole.centre[0], "Centre x"),
            ", ",
            number("y", hole.centre[1], "Centre y"),
        )
        if isinstance(hole, CircleHole):
            pieces = ("round, Ø ", number("diameter", hole.diameter, "Diameter"), " at ", *place)
        else:
            pieces = (
                "slot ",
                number("length", hole.length, "Length"),
                " × ",
                number("width", hole.width, "Width"),
                " at ",
                *place,
                ", turned ",
                number("angle", hole.angle, "Angle", "angle"),
            )
        pieces = (*pieces, *_pattern(document, hole, q))
    return RowOf(
        hole.id,
        (where,),
        pieces,
        lambda: changes.remove(document, hole.id),
        f"Remove {where}",
    )


def _pattern(
    document: Document, hole: CircleHole | SlotHole, q: Quantities
) -> tuple[Piece | str, ...]:
    """How a hole is repeated, or a link that repeats it."""
    pattern = hole.pattern
    if pattern is None:
        return (
            "; ",
            Link(
                "repeat",
                "repeat",
                lambda key: changes.repeat_hole(document, hole.id, key),
                f"Repeat hole {hole.id} as a row, grid or bolt circle",
                lambda: tuple(Choice(k, text) for k, text in PATTERNS.items()),
            ),
        )

    def number(key: str, kind: str = "length") -> Value:
        value = float(getattr(pattern, key))
        words = key.replace("_", " ").capitalize()
        set_ = changes.pattern_setter(document, hole.id, key)
        name = f"{words} of pattern {hole.id}"
        field = "" if kind == "count" else f"holes.{hole.id}.pattern.{key}"
        return q.value(f"pattern {key}", value, kind, name, set_, field=field)

    single = Link(
        "break up",
        "break up",
        lambda _key: changes.break_pattern(document, hole.id),
        f"Make the members of pattern {hole.id} holes of their own",
    )
    return (*_words(pattern, number), "; ", single)


class _Number(Protocol):
    def __call__(self, key: str, kind: str = "length") -> Value: ...


def _words(pattern: Pattern, number: _Number) -> tuple[Piece | str, ...]:
    if isinstance(pattern, RowPattern):
        return (
            ", ",
            number("count", "count"),
            " in a row, ",
            number("pitch"),
            " apart, turned ",
            number("angle", "angle"),
        )
    if isinstance(pattern, GridPattern):
        return (
            ", ",
            number("columns", "count"),
            " columns ",
            number("pitch_x"),
            " apart, ",
            number("rows", "count"),
            " rows ",
            number("pitch_y"),
            " apart, turned ",
            number("angle", "angle"),
        )
    assert isinstance(pattern, BoltCircle)
    return (
        ", ",
        number("count", "count"),
        " on a circle of radius ",
        number("radius"),
        " round there, the first at ",
        number("start", "angle"),
    )


def count_of(n: int, word: str) -> str:
    """The number of something: "no holes", "1 hole", "3 holes"."""
    return f"{n or 'no'} {word}{'' if n == 1 else 's'}"
