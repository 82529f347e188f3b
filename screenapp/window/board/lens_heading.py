"""The words over the board's upper left corner: what is painted, of which case, and what to know
about it."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtWidgets import QComboBox, QHBoxLayout, QLabel, QLineEdit, QVBoxLayout, QWidget

from screenapp.model.combinations import loadings
from screenapp.model.findings import Trust
from screenapp.window import theme
from screenapp.window.board.colour_bar import TAKEN
from screenapp.window.board.overlay import Anchor
from screenapp.window.board.trust_marks import TrustLegend
from screenapp.window.document import Document
from screenapp.window.fields import DISPLACEMENT_NAMES, STRESS_NAMES
from screenapp.window.governing import ENVELOPED

MARGIN = 16
AUTOMATIC = "auto"
ALL_CASES = "all cases"


class LensHeading(QWidget):
    """Choosers of component, case and deformation, and the caption below them."""

    def __init__(self, document: Document, host: QWidget) -> None:
        super().__init__(host)
        self._document = document
        self._host = host
        self._filling = False
        self.setAttribute(Qt.WidgetAttribute.WA_NoSystemBackground)
        self.stress = self._chooser("Stress component", STRESS_NAMES)
        self.displacement = self._chooser("Displacement component", DISPLACEMENT_NAMES)
        self.case = QComboBox()
        self.case.setAccessibleName("Case")
        self.case.setToolTip(
            "The load case that is painted; the last line takes the worst of all at each place"
        )
        self.deformation = QLineEdit()
        self.deformation.setAccessibleName("Factor on the drawn deformation")
        self.deformation.setToolTip(
            "How many times larger than true the deformation is drawn; "
            f"0 draws the part undeformed, {AUTOMATIC} lets the board choose"
        )
        self.deformation.setFixedWidth(72)
        self._times = QLabel("drawn ×")
        self._under = QLabel("under")
        self.caption = QLabel()
        self.caption.setAccessibleName("What is painted")
        self.legend = TrustLegend()
        self.warning = QLabel()
        self.warning.setAccessibleName("Caution about what is painted")
        for label in (self._times, self._under, self.caption, self.warning):
            label.setAttribute(Qt.WidgetAttribute.WA_TransparentForMouseEvents)
        self._row = QWidget()
        row = QHBoxLayout(self._row)
        row.setContentsMargins(0, 0, 0, 0)
        row.setSpacing(8)
        for widget in (
            self.stress,
            self.displacement,
            self._under,
            self.case,
            self._times,
            self.deformation,
        ):
            row.addWidget(widget)
        row.addStretch(1)
        column = self._column = QVBoxLayout(self)
        column.setContentsMargins(0, 0, 0, 0)
        column.setSpacing(4)
        column.addWidget(self._row)
        column.addWidget(self.warning, 0, Qt.AlignmentFlag.AlignLeft)
        column.addWidget(self.caption, 0, Qt.AlignmentFlag.AlignLeft)
        column.addWidget(self.legend, 0, Qt.AlignmentFlag.AlignLeft)
        self._connect()
        Anchor(host, self.settle, self)
        theme.notifier.changed.connect(self.apply_theme)
        self.apply_theme()
        self.sync()

    # --- for others -----------------------------------------------------------------------

    def say(
        self, caption: str, warning: str = "", legend: tuple[tuple[Trust, str], ...] = ()
    ) -> None:
        """Show these words, and what marks mean."""
        self.legend.show_entries(legend)
        for label, text in ((self.caption, caption), (self.warning, warning)):
            label.setText(text)
            label.setVisible(bool(text))
        self.settle()

    def sync(self) -> None:
        """Show the choices that belong to the lens, as the document has them."""
        view, part = self._document.view, self._document.part
        self._filling = True
        stress, displacement = view.lens == "Stress", view.lens == "Displacement"
        cases = len(loadings(part)) > 1 and view.lens not in ("Shape", "Mesh")
        self.stress.setCurrentIndex(self.stress.findData(view.stress))
        self.displacement.setCurrentIndex(self.displacement.findData(view.displacement))
        names = [case.name or case.id for case in loadings(part)]
        count = len(names)
        if cases and view.lens in ENVELOPED:
            names.append(ALL_CASES)
        if names != [self.case.itemText(i) for i in range(self.case.count())]:
            self.case.clear()
            self.case.addItems(names)
        whole = view.envelope and len(names) > count
        self.case.setCurrentIndex(count if whole else min(view.case, count - 1))
        if not self.deformation.hasFocus() or not self.deformation.isModified():
            factor = view.deformation
            self.deformation.setText(AUTOMATIC if factor is None else f"{factor:g}")
        self._under.setText("under" if stress or displacement else "Case")
        for widget, shown in (
            (self.stress, stress),
            (self.displacement, displacement),
            (self._under, cases),
            (self.case, cases),
            (self._times, displacement),
            (self.deformation, displacement),
        ):
            widget.setVisible(shown)
        self._row.setVisible(stress or displacement or cases)
        self._filling = False
        self.settle()

    def settle(self) -> None:
        """Take the place at the host's upper left corner, no larger than what is shown."""
        room = max(160, self._host.width() - 2 * MARGIN - TAKEN)
        self.legend.keep_within(room)
        self._wrap_caption(room)
        self._column.activate()
        size = self.sizeHint()
        width = min(size.width(), max(80, self._host.width() - 2 * MARGIN))
        self.setGeometry(MARGIN, MARGIN, width, size.height())
        self.raise_()

    def _wrap_caption(self, room: int) -> None:
        """Let the caption wrap where it is wider than the room [px], and only there."""
        label = self.caption
        label.setWordWrap(False)
        label.setMinimumSize(0, 0)  # or its height for a width is the one it had
        label.setMaximumSize(room, 10_000)
        if label.sizeHint().width() > room:
            label.setWordWrap(True)
            label.setFixedSize(room, label.heightForWidth(room))
        else:
            label.setFixedSize(label.sizeHint())

    def apply_theme(self) -> None:
        """Take the colours of the theme in force."""
        p = theme.current()
        ground = theme.colour("paper", 0.85).name(theme.colour("paper").NameFormat.HexArgb)
        body = f"background: {ground}; border-radius: 3px; padding: 1px 4px;"
        self.caption.setStyleSheet(f"QLabel {{ color: {p.quiet}; {body} }}")
        self.warning.setStyleSheet(
            f"QLabel {{ color: {p.doubt}; {body} border: 1px dashed {p.doubt}; padding: 2px 6px; }}"
        )
        for label in (self._times, self._under):
            label.setStyleSheet(f"QLabel {{ color: {p.quiet}; {body} }}")
        for widget in self.findChildren(QWidget):
            widget.setFont(theme.font(theme.TEXT_BODY))

    # --- choosing -------------------------------------------------------------------------

    def _connect(self) -> None:
        self.stress.activated.connect(
            lambda _i: self._document.look(stress=self.stress.currentData())
        )
        self.displacement.activated.connect(
            lambda _i: self._document.look(displacement=self.displacement.currentData())
        )
        self.case.activated.connect(self._take_case)
        self.deformation.editingFinished.connect(self._take_factor)

    def _take_case(self, index: int) -> None:
        if index < len(loadings(self._document.part)):
            self._document.look(case=index)
        else:
            self._document.look(envelope=True)

    def _take_factor(self) -> None:
        text = self.deformation.text().strip().removesuffix("×").strip().replace(",", ".")
        self.deformation.setModified(False)
        if text in ("", AUTOMATIC):
            self._document.look(deformation=None)
        else:
            try:
                factor = float(text)
            except ValueError:
                factor = -1.0
            if not 0.0 <= factor <= 1e9:
                self._document.said.emit(
                    f'"{text}" is no factor for the deformation: give a number like 50, '
                    f"0, or {AUTOMATIC}"
                )
            else:
                self._document.look(deformation=factor)
        self.sync()

    @staticmethod
    def _chooser(name: str, choices: dict[str, str]) -> QComboBox:
        box = QComboBox()
        box.setAccessibleName(name)
        box.setToolTip(f"{name} that is painted")
        for key, words in choices.items():
            box.addItem(words, key)
        return box
