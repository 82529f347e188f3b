"""Ways to select more than what is clicked: a box, everything, the next thing."""

from __future__ import annotations

from PySide6.QtCore import QRectF

from screenapp.model.features import Found, everything
from screenapp.model.part import Part
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Frame

KINDS = ("corner", "edge", "hole", "support", "load", "probe")


def in_box(drawn: DrawnPart, frame: Frame, box: QRectF) -> list[str]:
    """Corners, holes and probes whose place stands in a box [px]."""
    spots = [(id_, c.at) for id_, c in drawn.corners.items()]
    spots += [(id_, drawn.centre_of(h)) for id_, h in drawn.holes.items()]
    spots += [(id_, p.at) for id_, p in drawn.probes.items()]
    return [id_ for id_, at in spots if box.contains(frame.px(at))]


def all_of(drawn: DrawnPart) -> list[str]:
    """Every corner, hole and probe."""
    return [*drawn.corners, *drawn.holes, *drawn.probes]


def next_after(part: Part, case: int, selection: tuple[str, ...], step: int) -> Found | None:
    """The thing `step` after the selected one, round and round; loads are of case number `case`."""
    here = part.cases[case].id if case < len(part.cases) else ""
    found = [
        f for f in everything(part) if f.kind in KINDS and (f.kind != "load" or f.owner == here)
    ]
    if not found:
        return None
    ids = [f.record.id for f in found]
    if selection and selection[0] in ids:
        return found[(ids.index(selection[0]) + step) % len(found)]
    return found[0 if step > 0 else -1]
