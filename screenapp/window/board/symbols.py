"""Supports, loads and probes on the board, at constant screen size."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from PySide6.QtCore import QPointF, Qt
from PySide6.QtGui import QColor, QPainter, QPen

from screenapp.model.combinations import loadings
from screenapp.model.part import BearingLoad, BodyLoad, ForceLoad, Load, Support
from screenapp.model.shape import BoundaryCurve
from screenapp.model.support_records import stands_on
from screenapp.window import theme
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Floats, Frame, polygon
from screenapp.window.board.hit_test import HitKind
from screenapp.window.board.load_marks import load_mark
from screenapp.window.board.marks import Mark
from screenapp.window.board.screen_item import Z_PROBES, Z_SYMBOLS, ReadingsItem, ScreenItem
from screenapp.window.board.support_marks import support_mark

FARTHEST_PAN = 2000.0
"""Symbols are worked out afresh after a pan of this length [px]."""


def support_marks(drawn: DrawnPart, frame: Frame, support: Support) -> list[Mark]:
    """The symbol of a support, or one on each hole of a pattern or a group."""
    places = [each for on in stands_on(support) for each in drawn.members_of(on) or (on,)]
    marks = [support_mark(drawn, frame, replace(support, on=on)) for on in places]
    for mark in marks[1:]:
        mark.label = ""
    return marks


def load_marks(drawn: DrawnPart, frame: Frame, load: Load) -> list[Mark]:
    """The symbol of a load, or one on each hole of a pattern; the value stands once."""
    places = () if isinstance(load, BodyLoad) else drawn.members_of(load.on)
    if isinstance(load, BodyLoad) or not places:
        return [load_mark(drawn, frame, load)]
    marks = [load_mark(drawn, frame, replace(load, on=on)) for on in places]
    if marks[0].label and isinstance(load, ForceLoad | BearingLoad):
        marks[0].label += " in all"
    for mark in marks[1:]:
        mark.label = ""
    return marks


def _places(record: Support | Load) -> tuple[str, ...]:
    """Ids of what a support or load is on."""
    if isinstance(record, Support):
        return stands_on(record)
    return () if isinstance(record, BodyLoad) else (record.on,)


@dataclass(frozen=True)
class _Kept:
    """The symbols of a support or load and the pieces of the boundary that it is on."""

    record: Support | Load
    pieces: tuple[BoundaryCurve, ...]
    marks: list[Mark]


class SymbolsItem(ScreenItem):
    """The symbols of the supports and of the present case's loads."""

    def __init__(self) -> None:
        super().__init__(Z_SYMBOLS)
        self.drawn: DrawnPart | None = None
        self.case = 0
        self.selected: tuple[str, ...] = ()
        self.hovered: str | None = None
        self._marks: list[Mark] = []
        self._for: tuple[DrawnPart, int, Frame] | None = None
        self._strokes: _Strokes | None = None
        self._kept: dict[tuple[int, str], _Kept] = {}

    def show_part(self, drawn: DrawnPart, case: int) -> None:
        """Show the supports and the loads of case number `case` from now on."""
        self.drawn, self.case = drawn, case
        self.update()

    def marks(self, frame: Frame) -> list[Mark]:
        """The symbols as they stand at this zoom, at `shift` from where the view now is."""
        if self.drawn is None:
            return []
        if not self._fits(frame):
            if self._for is None or not self._for[2].same_as(frame):
                self._kept = {}
            self._for = self.drawn, self.case, frame
            self._marks, self._strokes = self._made(self.drawn, frame), None
        return self._marks

    def _made(self, drawn: DrawnPart, frame: Frame) -> list[Mark]:
        """The symbols of a part; those on what a drag leaves as it is are taken over."""
        part = drawn.part
        records: list[Support | Load] = [*part.supports]
        if self.case < len(loadings(part)):
            records += loadings(part)[self.case].loads
        before, self._kept = self._kept, {}
        marks: list[Mark] = []
        for record in records:
            pieces = tuple(piece for on in _places(record) for piece in drawn.pieces_of(on))
            key = id(record), part.display_units
            kept = before.get(key)
            if kept is None or not pieces or kept.pieces != pieces:
                if isinstance(record, Support):
                    made = support_marks(drawn, frame, record)
                else:
                    made = load_marks(drawn, frame, record)
                kept = _Kept(record, pieces, made)
            self._kept[key] = kept
            marks += kept.marks
        return marks

    def shift(self, frame: Frame) -> QPointF:
        """How far the view was panned since the symbols were worked out [px]."""
        return QPointF() if self._for is None else self._for[2].shift_to(frame)

    def nearest(self, px: QPointF, frame: Frame, within: float) -> tuple[HitKind, str] | None:
        """Kind and id of the nearest symbol that is nearer than `within` [px]."""
        marks = self.marks(frame)
        if not marks:
            return None
        if self._strokes is None:
            self._strokes = _Strokes(marks)
        found = self._strokes.nearest(px - self.shift(frame), within)
        return None if found is None else (marks[found].kind, marks[found].id)

    def _fits(self, frame: Frame) -> bool:
        """Whether the symbols at hand belong to this part, case and zoom."""
        had = self._for
        if had is None or had[0] is not self.drawn or had[1] != self.case:
            return False
        return had[2].pans_to(frame, FARTHEST_PAN)

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """Paint all symbols; their texts are `LabelsItem`'s."""
        palette = theme.current()
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        marks = self.marks(frame)
        painter.translate(self.shift(frame))
        for mark in marks:
            chosen = mark.id in self.selected
            name = palette.support if mark.kind == "support" else palette.load
            colour = QColor(palette.accent if chosen else name)
            width = 2.6 if mark.id == self.hovered else 1.6
            _paint(painter, mark, colour, width)


class ProbesItem(ReadingsItem):
    """The places of the probes."""

    def __init__(self) -> None:
        super().__init__(Z_PROBES)

    def draw(self, painter: QPainter, frame: Frame) -> None:
        """A ring with a dot."""
        if self.drawn is None:
            return
        palette = theme.current()
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        for probe in self.drawn.part.readings:
            colour = QColor(palette.accent if probe.id in self.selected else palette.ink)
            p = frame.px(probe.at)
            painter.setBrush(QColor(palette.paper))
            painter.setPen(QPen(colour, 2.6 if probe.id == self.hovered else 1.6))
            painter.drawEllipse(p, 4.5, 4.5)
            painter.setBrush(colour)
            painter.setPen(Qt.PenStyle.NoPen)
            painter.drawEllipse(p, 1.4, 1.4)


def _paint(painter: QPainter, mark: Mark, colour: QColor, width: float) -> None:
    pen = QPen(colour, width)
    pen.setCapStyle(Qt.PenCapStyle.RoundCap)
    pen.setJoinStyle(Qt.PenJoinStyle.RoundJoin)
    painter.setPen(pen)
    painter.setBrush(Qt.BrushStyle.NoBrush)
    for line in mark.lines:
        painter.drawPolyline(polygon(line))
    for centre, radius in mark.circles:
        painter.drawEllipse(QPointF(*centre), radius, radius)
    painter.setBrush(colour)
    pen.setWidthF(1.0)
    painter.setPen(pen)
    for fill in mark.fills:
        painter.drawPolygon(polygon(fill))


def _rims(mark: Mark) -> list[Floats]:
    turn = np.linspace(0.0, 2.0 * np.pi, 17)
    ring = np.stack([np.cos(turn), np.sin(turn)], axis=-1)
    return [centre + radius * ring for centre, radius in mark.circles]


class _Strokes:
    """All strokes of all symbols as one array of straight pieces, to find the nearest."""

    def __init__(self, marks: list[Mark]) -> None:
        starts: list[Floats] = []
        runs: list[Floats] = []
        owners: list[int] = []
        for i, mark in enumerate(marks):
            closed = [np.vstack([f, f[:1]]) for f in mark.fills]
            for line in (*mark.lines, *closed, *_rims(mark)):
                starts.append(line[:-1])
                runs.append(np.diff(line, axis=0))
                owners += [i] * (len(line) - 1)
        none = np.empty((0, 2))
        self._start, self._run = np.vstack([none, *starts]), np.vstack([none, *runs])
        self._owner = np.array(owners, dtype=int)
        self._square = np.maximum((self._run**2).sum(axis=1), 1e-12)

    def nearest(self, px: QPointF, within: float) -> int | None:
        """Number of the symbol nearest to `px`, if nearer than `within` [px]."""
        if not len(self._owner):
            return None
        p = np.array([px.x(), px.y()])
        t = np.clip(((p - self._start) * self._run).sum(axis=1) / self._square, 0.0, 1.0)
        far = np.hypot(*(self._start + t[:, None] * self._run - p).T)
        best = int(np.argmin(far))
        return int(self._owner[best]) if far[best] < within else None
