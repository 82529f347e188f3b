"""Each limit in each case: how much of it is used, and whether it holds."""

from __future__ import annotations

from PySide6.QtWidgets import QWidget

from screenapp.model.combinations import loadings
from screenapp.model.estimate_text import value_text
from screenapp.model.findings import LimitFindings
from screenapp.model.part import (
    DisplacementLimit,
    FatigueLimit,
    JointLimit,
    Part,
    StrainLimit,
    StressLimit,
)
from screenapp.window.document import Document
from screenapp.window.figure_table import Column, FigureTable, Line
from screenapp.window.sheet.quantities import Quantities

COLUMNS = (
    Column("limit"),
    Column("case"),
    Column("use", number=True, tip="Share of the limit that is used; 1 is all of it"),
    Column("verdict", pill=True),
)


SHORT = {
    "von_mises": "von Mises",
    "tresca": "Tresca",
    "sigma_1": "tension",
    "tsai_hill": "Tsai–Hill",
    "largest_stress": "stress in axes",
}


class LimitsTable(FigureTable):
    """The limits with their verdicts."""

    def __init__(self, document: Document, parent: QWidget | None = None) -> None:
        super().__init__(document, "Limits and their verdicts", parent, grows=True)

    def show_limits(self, limits: tuple[LimitFindings, ...]) -> None:
        """Show what was found of each limit."""
        document = self.document
        names = {case.id: case.name for case in loadings(document.part)}
        several = len({found.case for found in limits}) > 1
        columns = COLUMNS if several else (COLUMNS[0], *COLUMNS[2:])
        lines = []
        for found in limits:
            texts = [
                _short_name(document.part, found),
                names.get(found.case, found.case),
                value_text(found.utilisation, "factor", document.part.display_units),
                found.verdict,
            ]
            if not several:
                del texts[1]
            tip = "\n".join(filter(None, (found.name, found.place, found.reason, found.assumed)))
            lines.append(Line(found.limit, tuple(texts), tip))
        stale = document.findings is not None and not document.current
        self.show_lines(columns, tuple(lines), stale)


def _short_name(part: Part, found: LimitFindings) -> str:
    """The limit in a few words; its full name stands in the tooltip."""
    limit = next((g for g in part.limits if g.id == found.limit), None)
    if isinstance(limit, StressLimit):
        measure = SHORT[limit.measure]
        against = "proof" if limit.against == "proof_stress" else "strength"
        return f"{measure} × {limit.factor:.4g} ≤ {against}"
    if isinstance(limit, DisplacementLimit):
        where = "" if limit.at is None else " there"
        return f"moves{where} ≤ {Quantities(part.display_units).show(limit.most, 'length')}"
    if isinstance(limit, JointLimit):
        return found.rule or f"{limit.on} pin"
    if isinstance(limit, FatigueLimit):
        return f"fatigue, {limit.cycles:.4g} cycles"
    if isinstance(limit, StrainLimit):
        return f"local strain ≤ {100.0 * limit.most:.4g} %"
    return found.name
