"""A group of bolts in words: which holes belong to it, and how stiff each bolt is."""

from __future__ import annotations

from screenapp.model.features import everything, name_of
from screenapp.model.members import whole_id
from screenapp.model.part import BoltSupport, CircleHole, Part
from screenapp.model.support_records import stands_on
from screenapp.window.sheet.pieces import SEPARATOR, Choice, Link, Piece, Value
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.support_changes import SupportChange

LEAVE = "leave it out"


def bolt_pieces(
    part: Part, support: BoltSupport, change: SupportChange, q: Quantities
) -> tuple[Piece | str, ...]:
    """ ", together with h2, each 50 kN/mm · + hole"."""
    pieces: list[Piece | str] = []
    for number, hole in enumerate(support.also):
        pieces += [", together with " if number == 0 else ", ", _other(support, hole, change)]
    pieces += [
        ", each ",
        q.optional_value(
            "stiffness",
            support.stiffness,
            "spring_stiffness",
            "Shear stiffness of each bolt",
            change.setter("stiffness"),
            "rigid",
            f"supports.{support.id}.stiffness",
        ),
    ]
    more = _free_holes(part, support)
    if more:

        def add(hole: str) -> None:
            change.put({"also": (*support.also, hole)})

        pieces += [
            SEPARATOR,
            Link("more", "+ hole", add, "Another hole of the group", lambda: more),
        ]
    return tuple(pieces)


def _other(support: BoltSupport, hole: str, change: SupportChange) -> Value:
    def leave(_key: str) -> None:
        change.put({"also": tuple(h for h in support.also if h != hole)})

    lines = (Choice("leave", LEAVE),)
    return Value(
        f"also {hole}", hole, f"Hole {hole} of the group", leave, lambda: lines, about=hole
    )


def _free_holes(part: Part, support: BoltSupport) -> tuple[Choice, ...]:
    """Round holes and patterns of them that the group does not have yet."""
    mine = {*stands_on(support)}
    wholes = {whole_id(on) for on in mine}
    return tuple(
        Choice(f.record.id, name_of(f), f"Ø {f.record.diameter:.4g}")
        for f in everything(part)
        if isinstance(f.record, CircleHole)
        and f.kind == "hole"
        and f.record.id not in mine
        and whole_id(f.record.id) not in mine
        and not (f.record.pattern is not None and f.record.id in wholes)
    )
