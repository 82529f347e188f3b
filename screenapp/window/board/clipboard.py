"""Holes to and from the clipboard."""

from __future__ import annotations

from PySide6.QtGui import QGuiApplication

from screenapp.model import edits
from screenapp.model.edits import EditError
from screenapp.model.part import Hole, LoopHole, Point
from screenapp.window.document import Document


def copy(document: Document) -> bool:
    """Put the selected holes on the clipboard; False, with the reason said, if there are none."""
    try:
        text = edits.copy_text(document.part, document.selection)
    except EditError as fault:
        document.said.emit(f"{fault.cause}: {fault.mend}.")
        return False
    QGuiApplication.clipboard().setText(text)
    return True


def cut(document: Document) -> None:
    """Copy the selected holes and take them out of the part."""
    if copy(document):
        part = document.part
        ids = [h.id for h in edits.holes_of(part, document.selection)]
        outcome = edits.remove(part, *ids)
        document.select()
        document.apply("cut holes", outcome.part)
        if outcome.lost:
            document.said.emit(f"Went with it: {', '.join(outcome.lost)}.")


def can_paste() -> bool:
    """Whether there are holes on the clipboard."""
    text = QGuiApplication.clipboard().text()
    return text.startswith("{") and '"holes"' in text


def paste(document: Document, at: Point | None, step: float) -> None:
    """Add the holes of the clipboard with their middle at a place, and select them.

    Without a place they stand `step` [mm] beside where they were copied from.
    """
    try:
        holes = edits.pasted_holes(QGuiApplication.clipboard().text())
        x, y = _middle(holes)
        dx, dy = (step, -step) if at is None else (at[0] - x, at[1] - y)
        part = edits.add_holes(document.part, holes, dx, dy)
    except EditError as fault:
        document.said.emit(f"{fault.cause}: {fault.mend}.")
        return
    document.apply("paste holes", part)
    document.select(*(h.id for h in part.holes[-len(holes) :]))


def _middle(holes: tuple[Hole, ...]) -> Point:
    """The middle of the bounds of all centres and corners."""
    places: list[Point] = []
    for hole in holes:
        if isinstance(hole, LoopHole):
            places += [c.at for c in hole.loop.corners]
        else:
            places.append(hole.centre)
    xs, ys = zip(*places, strict=True)
    return (min(xs) + max(xs)) / 2.0, (min(ys) + max(ys)) / 2.0
