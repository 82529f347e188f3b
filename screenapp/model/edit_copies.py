"""Copies of holes: by the clipboard, and mirrored."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from screenapp.model.edit_rules import EditError, must_be_point, new_id, new_ids, settle
from screenapp.model.errors import PartFileError
from screenapp.model.members import whole_id
from screenapp.model.part import Hole, Loop, LoopHole, Part
from screenapp.model.part_json import part_from_text, part_to_text


def holes_of(part: Part, ids: Iterable[str]) -> tuple[Hole, ...]:
    """The holes that are named, in the order of the part; a member or corner names its whole."""
    wanted = {whole_id(id_) for id_ in ids}
    return tuple(h for h in part.holes if wanted & _names(h))


def _names(hole: Hole) -> set[str]:
    if not isinstance(hole, LoopHole):
        return {hole.id}
    return {hole.id, *(c.id for c in hole.loop.corners), *(e.id for e in hole.loop.edges)}


def copy_text(part: Part, ids: Iterable[str]) -> str:
    """The named holes as text for the clipboard: a part file with nothing else in it.

    Raises:
        EditError: there is no hole among them.
    """
    holes = holes_of(part, ids)
    if not holes:
        raise EditError("there is no hole in what is selected", "select the holes to copy")
    return part_to_text(Part(holes=holes))


def pasted_holes(text: str) -> tuple[Hole, ...]:
    """The holes of a text from the clipboard.

    Raises:
        EditError: it holds none.
    """
    try:
        holes = part_from_text(text).holes
    except PartFileError:
        holes = ()
    if not holes:
        raise EditError("there are no holes on the clipboard", "copy holes of a part first")
    return holes


def add_holes(part: Part, holes: Iterable[Hole], dx: float = 0.0, dy: float = 0.0) -> Part:
    """Add copies of holes, moved by (dx, dy) [mm], with ids of their own."""
    for hole in holes:
        copy = with_fresh_ids(part, moved_hole(hole, dx, dy))
        part = settle(part, replace(part, holes=(*part.holes, copy)))
    return part


def with_fresh_ids(part: Part, hole: Hole) -> Hole:
    """The hole with ids that the part does not use yet."""
    id_ = new_id(part, "h")
    if not isinstance(hole, LoopHole):
        return replace(hole, id=id_)
    n = len(hole.loop.corners)
    corners = zip(hole.loop.corners, new_ids(part, "c", n), strict=True)
    edges = zip(hole.loop.edges, new_ids(part, "e", n), strict=True)
    return LoopHole(
        id_,
        Loop(
            tuple(replace(c, id=name) for c, name in corners),
            tuple(replace(e, id=name) for e, name in edges),
        ),
    )


def moved_hole(hole: Hole, dx: float, dy: float) -> Hole:
    """The hole elsewhere."""

    def moved(p: tuple[float, float]) -> tuple[float, float]:
        return must_be_point((p[0] + dx, p[1] + dy), f"hole {hole.id}")

    if not isinstance(hole, LoopHole):
        return replace(hole, centre=moved(hole.centre))
    return LoopHole(
        hole.id,
        Loop(
            tuple(replace(c, at=moved(c.at)) for c in hole.loop.corners),
            tuple(
                replace(e, through=None if e.through is None else moved(e.through))
                for e in hole.loop.edges
            ),
        ),
    )
