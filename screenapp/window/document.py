"""The open document: the part, its history, its findings and what the user points at.

Board, sheet and readings each show this one object and change it through it; they never talk to
one another.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Literal

from PySide6.QtCore import QObject, Signal

from screenapp.model.combinations import loadings
from screenapp.model.edit_dimensions import with_formulas
from screenapp.model.errors import Fault
from screenapp.model.field_names import field_words
from screenapp.model.findings import Findings
from screenapp.model.history import History
from screenapp.model.part import Part
from screenapp.model.part_json import screening_key
from screenapp.model.shape import Shape
from screenapp.model.validity import examine
from screenapp.window.load_amounts import Amounts, amounts_of
from screenapp.window.traced import Traced

Lens = Literal["Shape", "Mesh", "Utilisation", "Stress", "Displacement", "Trust"]
StressComponent = Literal[
    "von_mises", "tresca", "sigma_1", "sigma_2", "sigma_x", "sigma_y", "tau_xy"
]
DisplacementComponent = Literal["u", "u_x", "u_y"]


@dataclass(frozen=True)
class View:
    """What is painted on the part.

    `deformation` is the factor on the drawn displacement; None lets the board choose one that can
    be seen; 0 draws the part undeformed.  `case` indexes the cases and combinations; with
    `envelope` all of them are shown at once, by lenses that can, and loads drawn are its.
    `crosses` shows the principal directions, in lenses of stress.
    """

    lens: Lens = "Shape"
    stress: StressComponent = "von_mises"
    displacement: DisplacementComponent = "u"
    case: int = 0
    deformation: float | None = None
    envelope: bool = False
    crosses: bool = False


class Document(QObject):
    """Holds the state and says when it changes.

    Signals:
        part_changed: the part is another one (also after undo, redo, open).
        findings_changed: other findings, or they became out of date or current.
        selection_changed, hovered_changed: ids of corners, edges, holes, supports, loads,
            readings, limits.
        traced_changed: the history of another number, or of none, is to be shown.
        view_changed: another lens, component, case or deformation.
        path_changed: saved, saved as, opened; also when "unsaved" turns.
        said: a sentence for the status line.
        live_faults_changed: other faults of a change under way.
    """

    part_changed = Signal()
    findings_changed = Signal()
    selection_changed = Signal()
    hovered_changed = Signal()
    traced_changed = Signal()
    view_changed = Signal()
    path_changed = Signal()
    said = Signal(str)
    live_faults_changed = Signal()

    def __init__(self, part: Part | None = None, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self.history = History(part if part is not None else Part())
        self.path: Path | None = None
        self.findings: Findings | None = None
        self.selection: tuple[str, ...] = ()
        self.hovered: str | None = None
        self.traced: Traced | None = None
        self.view = View()
        self.live_faults: tuple[Fault, ...] = ()
        self._saved = self.history.part
        self._key_of: tuple[Part, str] | None = None
        self._examined: tuple[Part, tuple[Fault, ...], Shape | None] | None = None
        self._amounts_of: tuple[Part, Amounts] | None = None
        self._kept: Mapping[str, str | None] = {}

    @property
    def part(self) -> Part:
        """The part as it now is."""
        return self.history.part

    @property
    def faults(self) -> tuple[Fault, ...]:
        """Everything that is wrong with the part, worked out once for each part."""
        return self._looked_through()[1]

    @property
    def amounts(self) -> Amounts:
        """What the loads of each case amount to, worked out once for each part."""
        if self._amounts_of is None or self._amounts_of[0] is not self.part:
            self._amounts_of = (self.part, amounts_of(self.part, self._looked_through()[2]))
        return self._amounts_of[1]

    @property
    def key(self) -> str:
        """Key of everything that findings depend on, worked out once for each part."""
        if self._key_of is None or self._key_of[0] is not self.part:
            self._key_of = (self.part, screening_key(self.part))
        return self._key_of[1]

    @property
    def current(self) -> bool:
        """Whether the findings belong to the part as it now is."""
        return self.findings is not None and self.findings.key == self.key

    @property
    def unsaved(self) -> bool:
        """Whether the part differs from what was last opened or saved."""
        return self.part != self._saved

    def apply(self, name: str, part: Part) -> None:
        """Make `part` the present one as a named, undoable step; nothing happens if it is equal."""
        part = with_formulas(part, self._kept)
        if part == self.part:
            return
        self.history.push(name, part)
        self._told_part()

    @contextmanager
    def keeping(self, texts: Mapping[str, str | None]) -> Iterator[None]:
        """Steps made inside carry these expressions at these fields (None: plain numbers).

        An expression is kept where it gives the number that the step put there.
        """
        before = self.part
        self._kept = texts
        try:
            yield
            if self.part is before and texts:
                self.apply(", ".join(map(field_words, texts)), before)
        finally:
            self._kept = {}

    def undo(self) -> None:
        """Step back once, if there is a step."""
        if self.history.can_undo:
            self.said.emit(f"Undone: {self.history.undo()}")
            self._told_part()

    def redo(self) -> None:
        """Step forward once, if there is a step."""
        if self.history.can_redo:
            self.said.emit(f"Redone: {self.history.redo()}")
            self._told_part()

    def open(self, part: Part, path: Path | None) -> None:
        """Show another part, with a fresh history."""
        self.history = History(part)
        self._saved = part
        self.path = path
        self.findings = None
        self.selection = ()
        self.hovered = None
        self.trace(None)
        self.view = View(lens=self.view.lens)
        self._told_part()
        self.findings_changed.emit()
        self.selection_changed.emit()
        self.view_changed.emit()

    def mark_saved(self, path: Path) -> None:
        """The part as it now is stands in `path`."""
        self.path = path
        self._saved = self.part
        self.path_changed.emit()

    def set_findings(self, findings: Findings | None) -> None:
        """Show other findings."""
        self.findings = findings
        self.findings_changed.emit()

    def select(self, *ids: str) -> None:
        """Select these ids and nothing else; the history of a number is shown no more."""
        if ids != self.selection:
            self.selection = ids
            self.trace(None)
            self.selection_changed.emit()

    def trace(self, traced: Traced | None) -> None:
        """Show the history of this number, under its case, or of none."""
        if traced != self.traced:
            self.traced = traced
            cases = [case.id for case in loadings(self.part)]
            if traced is not None and traced.case in cases:
                self.look(case=cases.index(traced.case))
            self.traced_changed.emit()

    def tell_live_faults(self, faults: tuple[Fault, ...]) -> None:
        """What is wrong with a change that is under way on the board; nothing once it is made."""
        if faults != self.live_faults:
            self.live_faults = faults
            self.live_faults_changed.emit()

    def hover(self, id_: str | None) -> None:
        """Light one id on the board and in the sheet, or none."""
        if id_ != self.hovered:
            self.hovered = id_
            self.hovered_changed.emit()

    def look(self, **changes: object) -> None:
        """Change the view, e.g. `look(lens="Stress", case=1)`.

        Who chooses a case wants it alone, not the envelope.
        """
        if "case" in changes:
            changes.setdefault("envelope", False)
        view = replace(self.view, **changes)  # type: ignore[arg-type]
        if view != self.view:
            self.view = view
            self.view_changed.emit()

    def _looked_through(self) -> tuple[Part, tuple[Fault, ...], Shape | None]:
        if self._examined is None or self._examined[0] is not self.part:
            self._examined = (self.part, *examine(self.part))
        return self._examined

    def _told_part(self) -> None:
        if self.view.case >= max(1, len(loadings(self.part))):
            self.look(case=0)
        self.part_changed.emit()
        self.findings_changed.emit()
        self.path_changed.emit()
