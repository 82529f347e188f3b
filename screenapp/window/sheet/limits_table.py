"""Each limit in each case: how much of it is used, and whether it holds."""

from __future__ import annotations

from PySide6.QtWidgets import QWidget

from screenapp.model.estimate_text import value_text
from screenapp.model.findings import LimitFindings
from screenapp.window.document import Document
from screenapp.window.figure_table import Column, FigureTable, Line

COLUMNS = (
    Column("limit"),
    Column("case"),
    Column("use", number=True, tip="Share of the limit that is used; 1 is all of it"),
    Column("verdict", pill=True),
)


class LimitsTable(FigureTable):
    """The limits with their verdicts."""

    def __init__(self, document: Document, parent: QWidget | None = None) -> None:
        super().__init__(document, "Limits and their verdicts", parent, grows=True)

    def show_limits(self, limits: tuple[LimitFindings, ...]) -> None:
        """Show what was found of each limit."""
        document = self.document
        names = {case.id: case.name for case in document.part.cases}
        several = len({found.case for found in limits}) > 1
        columns = COLUMNS if several else (COLUMNS[0], *COLUMNS[2:])
        lines = []
        for found in limits:
            texts = [
                found.name,
                names.get(found.case, found.case),
                value_text(found.utilisation, "factor", document.part.display_units),
                found.verdict,
            ]
            if not several:
                del texts[1]
            tip = f"{found.place}: {found.reason}" if found.reason else found.place
            lines.append(Line(found.limit, tuple(texts), tip))
        stale = document.findings is not None and not document.current
        self.show_lines(columns, tuple(lines), stale)
