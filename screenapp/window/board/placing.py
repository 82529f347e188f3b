"""Holding and loading a place: the popover, its preview on the board, and the change made."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from PySide6.QtCore import QPoint, QPointF, Qt

from screenapp.model import edits
from screenapp.model.edge_parts import runs_backward
from screenapp.model.edits import EditError
from screenapp.model.features import find, place_name
from screenapp.model.part import (
    BodyLoad,
    Part,
    Support,
)
from screenapp.model.sized_vectors import given_vector
from screenapp.window.board.placing_kinds import (
    Record,
    Way,
    body_ways,
    bolting_ways,
    holding_ways,
    loading_ways,
    read_back,
    with_rest,
)
from screenapp.window.board.popover import Popover

if TYPE_CHECKING:
    from screenapp.window.board.canvas import Canvas


DOWNWARDS = -90.0
"""The direction of a vector whose angle was not typed [deg]."""

FIELDS = {"shear": "per_length"}
"""Values of the popover that the part file names otherwise."""


def _records(part: Part) -> tuple[Record, ...]:
    """Every support and load."""
    return (*part.supports, *(load for case in part.cases for load in case.loads))


class Placing:
    """One place at a time is being held or loaded, new or changed."""

    def __init__(self, canvas: Canvas) -> None:
        self._canvas = canvas
        self._on = ""
        self._id = ""
        self._now: Record | None = None
        self.popover = Popover(canvas)
        self.popover.changed.connect(self._show)
        self.popover.accepted.connect(self.accept)
        self.popover.dropped.connect(self.drop)

    @property
    def busy(self) -> bool:
        """Whether the popover is open."""
        return self.popover.isVisibleTo(self._canvas)

    def hold(self, on: str, near: QPoint) -> None:
        """Begin to hold a place."""
        part = self._canvas.document.part
        self._open(f"Hold {place_name(part, on)}", holding_ways(part, on), on, near)

    def hold_together(self, holes: tuple[str, ...], near: QPoint) -> bool:
        """Begin to hold several round holes by one group of bolts; False if they are no such."""
        part = self._canvas.document.part
        ways = bolting_ways(part, holes)
        self._open(f"Hold holes {', '.join(holes)}", ways, holes[0] if holes else "", near)
        return bool(ways)

    def load(self, on: str, near: QPoint) -> None:
        """Begin to load a place."""
        part = self._canvas.document.part
        ways = loading_ways(part, on, self._along(on, near))
        self._open(f"Load {place_name(part, on)}", ways, on, near)

    def _along(self, on: str, near: QPoint) -> float | None:
        """How far along an edge a place is [mm], to a tenth; None for what is no edge."""
        pieces = self._canvas.drawn.pieces_of(on)
        if len(pieces) != 1 or pieces[0].kind != "edge":
            return None
        curve = pieces[0].curve
        t = curve.nearest(self._canvas.frame_now.mm(QPointF(near)))
        if runs_backward(self._canvas.document.part, on):
            t = 1.0 - t
        return min(round(t * curve.length, 1), curve.length)

    def change(self, id_: str, near: QPoint) -> None:
        """Begin to change a support or load."""
        part = self._canvas.document.part
        found = find(part, id_)
        if found is None or found.kind not in ("support", "load"):
            return
        record = found.record
        title = ""
        if isinstance(record, BodyLoad):
            title, ways = body_ways(record)
        elif found.kind == "support":
            ways = holding_ways(part, record.on)  # type: ignore[union-attr]
        else:
            ways = loading_ways(part, record.on)  # type: ignore[union-attr]
        places = (getattr(record, key, None) for key in ("on", "zone", "support"))
        on = next((place for place in places if place), "")
        verb = "Hold" if found.kind == "support" else "Load"
        title = title or f"{verb} {place_name(part, on)}"
        self._open(title, ways, on, near, record)  # type: ignore[arg-type]

    def accept(self) -> bool:
        """Make the change; False, with the reason said, if it is not complete."""
        if not self.busy:
            return True
        record = self._record()
        if not self.popover.sound:
            return False
        if record is None:
            self.popover.complain("Type a value first.")
            return False
        name = ("change" if self._id else "add") + (
            " a support" if isinstance(record, Support) else " a load"
        )
        try:
            part = self._made(record)
        except EditError as fault:
            self.popover.complain(f"{fault.cause}: {fault.mend}.")
            return False
        texts = self._texts(part, record)
        self._close()
        with self._canvas.document.keeping(texts):
            self._canvas.document.apply(name, part)
        return True

    def drop(self) -> None:
        """Close without a change."""
        if self.busy:
            self._close()

    def settle(self) -> None:
        """Accept what is complete, drop what is not: a click elsewhere."""
        if self.busy and not (self.popover.sound and self._record() is not None and self.accept()):
            self.drop()

    def _open(
        self, title: str, ways: tuple[Way, ...], on: str, near: QPoint, now: Record | None = None
    ) -> None:
        if not ways:
            return
        self._on, self._id, self._now = on, now.id if now is not None else "", now
        part = self._canvas.document.part
        before = None if now is None else read_back(now)
        self.popover.open(title, ways, part.display_units, near, before, part.dimensions)
        self._show()

    def _record(self) -> Record | None:
        way = self.popover.way
        made = None if way is None else way.make(self._id, self._on, self.popover.values)
        size = self.popover.formulas.get("size")
        if size is not None and made is not None:
            angle = self.popover.values.get("angle", DOWNWARDS)
            x, y, _ = given_vector(self._canvas.document.part, "", size, angle)
            made = replace(made, x=x, y=y)  # type: ignore[arg-type]
        return made if made is None or self._now is None else with_rest(made, self._now)

    def _texts(self, part: Part, record: Record) -> dict[str, str | None]:
        """The expressions that were typed, by the fields that they give in the part made."""
        formulas = self.popover.formulas
        if not formulas:
            return {}
        cases = {load.id: load for case in part.cases for load in case.loads}
        made = part.supports if isinstance(record, Support) else tuple(cases.values())
        before = {r.id for r in _records(self._canvas.document.part)}
        id_ = self._id or next((r.id for r in made if r.id not in before), "")
        found = find(part, id_)
        if found is None:
            return {}
        texts: dict[str, str | None] = {}
        for name, text in formulas.items():
            if name == "size":
                angle = self.popover.values.get("angle", DOWNWARDS)
                texts.update(given_vector(part, found.field, text, angle)[2])
                continue
            key = FIELDS.get(name, name)
            if hasattr(found.record, key):
                texts[f"{found.field}.{key}"] = text
        return texts

    def _made(self, record: Record) -> Part:
        document = self._canvas.document
        part = document.part
        if isinstance(record, Support):
            if self._id:
                return edits.replace_support(part, record)
            return edits.add_support(part, record)
        if self._id:
            return edits.replace_load(part, record)
        if not part.cases:
            part = edits.add_case(part)
        case = part.cases[min(document.view.case, len(part.cases) - 1)]
        return edits.add_load(part, case.id, record)

    def _show(self) -> None:
        """Preview what Enter would put there."""
        record = self._record() if self.popover.sound else None
        if record is None:
            self._canvas.preview(None)
            return
        try:
            self._canvas.preview(self._made(record))
        except EditError as fault:
            self._canvas.preview(None)
            self.popover.complain(f"{fault.cause}: {fault.mend}.")

    def _close(self) -> None:
        self._canvas.setFocus(Qt.FocusReason.OtherFocusReason)
        self.popover.hide()
        self._canvas.preview(None)
