"""Puts what the lens paints on the board, and keeps it there as part, view and findings change."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Protocol

from PySide6.QtCore import QObject, QPointF, QRectF
from PySide6.QtGui import QPainterPath

from screenapp.model.combinations import loadings
from screenapp.model.findings import Fields, Findings
from screenapp.model.part import Point
from screenapp.report.colours import Scale
from screenapp.window import theme
from screenapp.window.board.callouts import Callout, CalloutItem
from screenapp.window.board.canvas import Canvas
from screenapp.window.board.colour_bar import TAKEN, ColourBar
from screenapp.window.board.crosses_item import CrossesItem
from screenapp.window.board.field_item import FieldItem
from screenapp.window.board.hatching import HatchItem, Zone
from screenapp.window.board.labels import PointValue
from screenapp.window.board.lens_colours import bar_content, scale_of
from screenapp.window.board.lens_heading import LensHeading
from screenapp.window.board.mesh_item import MeshItem
from screenapp.window.board.outline_path import mesh_path, region_path
from screenapp.window.board.rim_item import RimItem
from screenapp.window.board.trust_marks import TrustMarkItem
from screenapp.window.document import Document
from screenapp.window.fields import moved
from screenapp.window.governing import Governing
from screenapp.window.painted import Painting, Source
from screenapp.window.painting import WAITING, paint

FADED = 0.35
"""Strength at which findings that are out of date are painted."""

FADED_WORDS = 0.6
"""Strength of their numbers, which have to stay readable."""

SCALE_WIDE, SCALE_TALL = 224.0, 46.0
"""What the scale bar takes of the lower left corner [px]."""

Range = tuple[float, float]


class BoardLike(Protocol):
    """What the painter needs of the board."""

    canvas: Canvas

    def set_outline_faint(self, faint: bool) -> None:
        """Draw the undeformed outline faintly."""


@dataclass(frozen=True, eq=False)
class _Shown:
    """What is on the board: the arrays and all that decides how they are painted."""

    fields: Fields
    key: tuple[object, ...]
    painting: Painting


class LensPainter(QObject):
    """Listens to the document and paints on the board's canvas."""

    def __init__(self, document: Document, board: BoardLike) -> None:
        super().__init__(board.canvas)
        self._document = document
        self._board = board
        self._pass: tuple[Fields, int] | None = None
        self._findings_at_pass: Findings | None = None
        self._passes = 0
        self._shown: _Shown | None = None
        self._governing: Governing | None = None
        self._typed: dict[tuple[str, str], Range] = {}
        self._path = QPainterPath()
        self.field, self.mesh = FieldItem(), MeshItem()
        self.hatch, self.rim, self.callouts = HatchItem(), RimItem(), CalloutItem()
        self.marks, self.crosses = TrustMarkItem(), CrossesItem()
        under = (self.field, self.mesh, self.hatch, self.crosses, self.rim)
        for item in (*under, self.marks, self.callouts):
            board.canvas.view_box.addItem(item, ignoreBounds=True)
        self.bar = ColourBar(board.canvas)
        self.heading = LensHeading(document, board.canvas)
        board.canvas.pressed_first = self._press
        board.canvas.remark_at = self.remark_at
        board.canvas.labels.cards = self.callouts.cards
        board.canvas.labels.overlays = self.callouts.overlays = self._overlays
        self.bar.range_wanted.connect(self._take_range)
        self.bar.said.connect(document.said)
        for picture in (self.field, self.mesh):
            picture.failed.connect(
                lambda fault: document.said.emit(f"The board could not be painted: {fault}")
            )
        for signal in (
            document.findings_changed,
            document.view_changed,
            document.traced_changed,
            document.part_changed,
            theme.notifier.changed,
        ):
            signal.connect(self.refresh)
        self.refresh()

    # --- for others -----------------------------------------------------------------------

    def show_pass(self, fields: Fields | None) -> None:
        """Paint a pass that is not judged yet, in place of older findings; None goes back to them.

        New findings end it by themselves.
        """
        self._passes = 0 if fields is None else self._passes + 1
        self._pass = None if fields is None else (fields, self._passes)
        if fields is not None:
            self._findings_at_pass = self._document.findings
        self.refresh()

    def wait(self) -> None:
        """Make sharp pictures at once (to save an image of the board)."""
        for item in (self.field, self.mesh):
            item.refresh_now()

    def remark_at(self, at: Point) -> str:
        """The case that governs at a place [mm], where all of them are shown; else ""."""
        known = self._shown
        if known is None or known.painting.governing is None:
            return ""
        if self._governing is None or self._governing.painting is not known.painting:
            self._governing = Governing(known.fields.mesh, known.painting)
        case = self._governing.at(at)
        names = [one.name or one.id for one in loadings(self._document.part)]
        return f"“{names[case]}” governs" if case is not None and case < len(names) else ""

    def _press(self, px: QPointF) -> bool:
        """Choose the number whose card is pressed."""
        callout = self.callouts.at(px)
        if callout is None or callout.number is None:
            return False
        number = callout.number
        self._document.select(*filter(None, (number.probe or number.feature,)))
        self._document.trace(number)
        return True

    def _overlays(self) -> list[QRectF]:
        """Where choosers, words, the colour bar and the scale bar lie over the canvas [px]."""
        canvas = self._board.canvas
        boxes = [QRectF(0.0, canvas.height() - SCALE_TALL, SCALE_WIDE, SCALE_TALL)]
        if self.heading.isVisible():
            boxes.append(QRectF(self.heading.geometry()))
        if self.bar.isVisible():
            boxes.append(self.bar.covered())
        return boxes

    # --- painting -------------------------------------------------------------------------

    def refresh(self) -> None:
        """Bring the board up to date; arrays that are painted already are not painted again."""
        document = self._document
        self.heading.sync()
        if self._pass is not None and document.findings is not self._findings_at_pass:
            self._pass, self._passes = None, 0
        source, why = self._source()
        if source is None:
            self._clear()
            empty = document.part.outline is None
            self.heading.say("" if empty else why)
            return
        painting = paint(document.view, source)
        if painting is None:
            self._clear()
            self.heading.say("")
            return
        key = self._key(source)
        known = self._shown
        if known is None or known.fields is not source.fields or known.key != key:
            self._put(source, painting)
        self._shown = _Shown(source.fields, key, painting)
        self._put_numbers(source, painting)
        self._put_strength(source, painting)

    def _key(self, source: Source) -> tuple[object, ...]:
        """All that the painted field depends on besides the arrays."""
        part = self._document.part
        trusts: tuple[object, ...] = ()
        if (found := source.case_findings) is not None:
            trusts = tuple((p.at, p.estimate.trust) for p in found.peaks)
        return (
            source.case,
            self._document.view,
            part.materials,
            part.wall,
            part.zones,
            part.limits,
            part.mesh.tolerance,
            part.display_units,
            trusts,
            theme.current().name,
        )

    def _source(self) -> tuple[Source | None, str]:
        """What is to be painted, or the words for why nothing is."""
        document = self._document
        part, view = document.part, document.view
        if self._pass is not None:
            fields = self._pass[0]
            cases = len(fields.solution.displacements)
            return (Source(fields, min(view.case, cases - 1), part) if cases else None), ""
        findings = document.findings
        if findings is None:
            return None, WAITING[view.lens]
        if findings.last is None:
            return None, WAITING[view.lens] and (
                "Only the numbers of this screening were kept: screen the part again to paint it"
            )
        wanted = loadings(part)[view.case].id if view.case < len(loadings(part)) else ""
        ids = [case.case for case in findings.cases]
        if wanted not in ids:
            return None, WAITING[view.lens] and "This case has not been screened yet"
        return Source(findings.last, ids.index(wanted), part, findings, document.traced), ""

    def _clear(self) -> None:
        self._shown = None
        self.field.clear()
        self.mesh.clear()
        self.hatch.show_zones(())
        self.rim.show_path(None)
        self.marks.show_marks(())
        self.crosses.show_crosses(None)
        self.callouts.show_callouts((), (), QPainterPath())
        self._board.canvas.labels.show_values(())
        self.bar.show_content(None)
        self._board.set_outline_faint(False)

    def _put(self, source: Source, painting: Painting) -> None:
        mesh, points = source.fields.mesh, painting.points
        self._path = mesh_path(mesh, points)
        if painting.values is None:
            self.field.clear()
            self.bar.show_content(None)
        else:
            scale = self._scale(painting)
            self.field.show_field(points, mesh.quads, painting.values, scale, self._path)
            self._put_bar(painting, scale)
        if painting.mesh > 0.0:
            # colours of fields are the same in every theme, so the lines over them are too
            colour = theme.PAPER.ink if painting.values is not None else theme.current().ink
            self.mesh.show_mesh(mesh, points, colour, painting.mesh)
        else:
            self.mesh.clear()
        self.hatch.show_zones(
            tuple(
                Zone(
                    region_path(mesh, zone.elements, points),
                    "bad" if zone.trust == "rising" else "doubt",
                    zone.trust == "unsettled",
                )
                for zone in painting.zones
            )
        )
        deformed = painting.deformation != 0.0
        self.rim.show_path(self._path if deformed else None)
        self._board.set_outline_faint(deformed)

    def _put_numbers(self, source: Source, painting: Painting) -> None:
        callouts = tuple(
            Callout(
                moved(source.fields, source.case, painting.deformation, card.at),
                card.head,
                card.detail,
                card.trust,
                card.history,
                card.number,
            )
            for card in painting.cards
        )
        self.marks.show_marks(painting.marks)
        self.crosses.show_crosses(painting.crosses)
        values = tuple(PointValue(at, text) for at, text in painting.probes)
        self.callouts.right_margin = float(TAKEN) if self.bar.content else 0.0
        probes = tuple(probe.at for probe in self._document.part.readings)
        self.callouts.show_callouts(callouts, probes, self._path)
        self._board.canvas.labels.show_values(values)

    def _put_strength(self, source: Source, painting: Painting) -> None:
        old = source.findings is not None and not self._document.current
        warning = ""
        if old:
            warning = "Out of date: the part has changed since it was screened"
        elif self._pass is not None:
            warning = f"Pass {self._pass[1]}: nothing is settled yet"
        for item in (self.field, self.mesh, self.hatch, self.crosses, self.rim, self.marks):
            item.setOpacity(FADED if old else 1.0)
        self.callouts.setOpacity(FADED_WORDS if old else 1.0)
        # numbers that are out of date need no legend, and the warning takes its place
        self.heading.say(painting.caption, warning, () if old else painting.legend)

    # --- colours and their range ----------------------------------------------------------

    def _slot(self) -> tuple[str, str]:
        view = self._document.view
        component = {"Stress": view.stress, "Displacement": view.displacement}
        return view.lens, component.get(view.lens, "")

    def _scale(self, painting: Painting) -> Scale:
        return scale_of(self._document.view.lens, painting, self._typed.get(self._slot()))

    def _put_bar(self, painting: Painting, scale: Scale) -> None:
        view, units = self._document.view, self._document.part.display_units
        self.bar.show_content(
            bar_content(view.lens, painting, scale, units, self._slot() in self._typed)
        )

    def _take_range(self, low: float | None, high: float | None) -> None:
        if low is None or high is None:
            self._typed.pop(self._slot(), None)
        else:
            self._typed[self._slot()] = (low, high)
        if self._shown is not None and self._shown.painting.values is not None:
            scale = self._scale(self._shown.painting)
            self.field.set_scale(scale)
            self._put_bar(self._shown.painting, scale)
