"""Ways to select more than what is clicked: a box, everything, the next thing."""

from __future__ import annotations

from PySide6.QtCore import QRectF

from screenapp.model.features import Found, everything
from screenapp.model.members import whole_id
from screenapp.model.part import Part
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Frame
from screenapp.window.board.hit_test import Hit

KINDS = ("corner", "edge", "hole", "zone", "support", "load", "probe", "cut")


def in_box(drawn: DrawnPart, frame: Frame, box: QRectF) -> list[str]:
    """Corners, holes, zones and probes that stand in a box [px]; patterns that do so whole."""
    spots = [(id_, [c.at]) for id_, c in drawn.corners.items()]
    for hole in drawn.part.holes:
        every = [drawn.holes[id_] for id_ in drawn.members_of(hole.id) or (hole.id,)]
        spots.append((hole.id, [drawn.centre_of(one) for one in every]))
    spots += [(id_, [at]) for id_ in drawn.zones if (at := drawn.anchor_of(id_)) is not None]
    spots += [(id_, [p.at]) for id_, p in drawn.probes.items()]
    return [id_ for id_, places in spots if all(box.contains(frame.px(at)) for at in places)]


def all_of(drawn: DrawnPart) -> list[str]:
    """Every corner, hole, zone and probe."""
    return [*drawn.corners, *(h.id for h in drawn.part.holes), *drawn.zones, *drawn.probes]


def meant(hit: Hit, selection: tuple[str, ...]) -> str:
    """The id that a click on something selects: of a pattern the whole.

    A member counts by itself once it is selected.
    """
    if hit.kind != "hole" or hit.id in selection:
        return hit.id
    return whole_id(hit.id)


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
