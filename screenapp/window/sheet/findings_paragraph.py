"""7 Findings: the largest stresses by place and case, displacements and reactions."""

from __future__ import annotations

import math

from screenapp.model.allowables import allowables
from screenapp.model.combinations import loadings
from screenapp.model.cut_figure import cut_figure
from screenapp.model.estimate_text import estimate_text, plain, value_text
from screenapp.model.findings import CaseFindings, Findings, Peak
from screenapp.model.part import Part, StressLimit
from screenapp.model.place_words import NAUGHT
from screenapp.window.cut_plot import CutPlot
from screenapp.window.figure_table import Column, FigureTable, Line
from screenapp.window.history_plot import HistoryPlot
from screenapp.window.load_amounts import together_id
from screenapp.window.sheet.paragraph import Paragraph
from screenapp.window.sheet.pieces import Piece, Words
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.reaction_rows import ROUNDING, reaction_rows, three, way_text
from screenapp.window.sheet.reasons import head_says
from screenapp.window.sheet.rows import RowOf
from screenapp.window.traced import Traced, figure_of, traced_number

MOST_PEAKS = 8
QUANTITIES = {
    "von_mises": "",
    "tresca": "Tresca at ",
    "sigma_1": "σ₁ at ",
    "sigma_2": "σ₂ at ",
    "tsai_hill": "Tsai–Hill at ",
    "largest_stress": "in axes at ",
}
HEADS = {
    "von_mises": "von Mises",
    "tresca": "Tresca",
    "sigma_1": "σ₁",
    "tsai_hill": "Tsai–Hill",
    "largest_stress": "in axes",
}


class FindingsParagraph(Paragraph):
    """What the screening found."""

    number = 7
    title = "Findings"
    fields = ("readings",)

    def build(self) -> None:
        """Peaks, what moves most, and what the supports give."""
        self.table = FigureTable(self.document, "Largest stresses", self, grows=True)
        self.body.addWidget(self.table)
        self.history = HistoryPlot(self)
        self.body.addWidget(self.history)
        self.cut = CutPlot(self)
        self.body.addWidget(self.cut)
        self._peaks: list[tuple[CaseFindings, Peak]] = []
        self.table.line_picked.connect(self._trace)
        self.why = self.rows(0)
        self.hand = self.rows(0)
        self.cases = self.rows(0)
        self.reactions = self.rows(92)
        self.document.view_changed.connect(self.refresh)
        self.document.selection_changed.connect(self._show_cut)
        self.document.traced_changed.connect(self._show_history)

    def fill(self) -> tuple[Piece | str, ...]:
        """Show the findings."""
        document = self.document
        findings = document.findings
        part = document.part
        self._peaks = peaks = _shown_peaks(part, findings) if findings else []
        self.table.show_lines(
            _columns(part), tuple(_line(part, c, p) for c, p in peaks), self.outdated()
        )
        self._show_history()
        self._show_cut()
        self.why.set([_why_row(i, p) for i, (_, p) in enumerate(_doubtful(peaks, findings))])
        self.hand.set(self._hand_rows(findings) if findings else [])
        self.cases.set([self._case_row(case) for case in findings.cases] if findings else [])
        case = _viewed(findings, document.view.case) if findings else None
        self.reactions.set(
            [*self._applied_rows(case), *reaction_rows(part, case, self.outdated())] if case else []
        )
        if findings is None:
            if any(fault.blocks for fault in document.faults):
                return ("Nothing yet: the open paragraphs above come first.",)
            return ("Nothing yet: screen the part to see where it is stressed most.",)
        return ()

    def outdated(self) -> bool:
        """They belong to an older part."""
        return self.document.findings is not None and not self.document.current

    def _trace(self, row: int) -> None:
        case, peak = self._peaks[row]
        self.document.trace(Traced.peak(case.case, peak))

    def _show_history(self) -> None:
        document = self.document
        traced = document.traced
        number = traced_number(document.findings, traced)
        names = {case.id: case.name for case in loadings(document.part)}
        case = names.get(traced.case, "") if traced is not None and len(names) > 1 else ""
        self.history.show_figure(figure_of(number, document.part.display_units), case)

    def _show_cut(self) -> None:
        """The selected cut, or the first one, under the case that is viewed."""
        document = self.document
        findings = document.findings
        cases = loadings(document.part)
        viewed = cases[document.view.case].id if document.view.case < len(cases) else ""
        present = {cut.id: (cut.start, cut.end) for cut in document.part.cuts}
        read = [
            cut
            for cut in (findings.cuts if findings is not None else ())
            if cut.case == viewed and present.get(cut.cut) == (cut.start, cut.end)
        ]
        chosen = [cut for cut in read if cut.cut in document.selection] or read
        figure = cut_figure(chosen[0], document.part.display_units) if chosen else None
        names = {case.id: case.name for case in cases} if len(cases) > 1 else {}
        self.cut.show_figure(figure, names.get(viewed, ""))

    def _hand_rows(self, findings: Findings) -> list[RowOf]:
        """Handbook formulas beside what was computed, in the case that is viewed."""
        units = self.document.part.display_units
        case = _viewed(findings, self.document.view.case)
        rows = []
        for check in findings.hand_checks:
            if case is None or check.case != case.case:
                continue
            text = (
                f"By hand, {check.kind}, {check.place}: "
                f"{Quantities(units).show(three(check.formula), 'stress')} where "
                f"{estimate_text(check.computed, 'stress', units)} was computed "
                f"({signed_percent(check.difference)}). {_sentence(check.source)} "
                f"Range: {check.valid}."
            )
            pieces = (Words(text, quiet=True),)
            rows.append(RowOf(f"hand {check.feature}", (), pieces, also=(check.feature,)))
        return rows

    def _case_row(self, case: CaseFindings) -> RowOf:
        units = self.document.part.display_units
        moved = estimate_text(case.displacement_max, "displacement", units)
        q = Quantities(units)
        x, y = (0.0 if abs(v) < NAUGHT else v for v in case.displacement_at)
        at = f"({q.bare(x, 'length')}, {q.show(y, 'length')})"
        text = f"{case.name}: moves by at most {moved} at {at}."
        return RowOf(case.case, (), (Words(text, quiet=self.outdated()),))

    def _applied_rows(self, case: CaseFindings) -> list[RowOf]:
        """The loads together, to stand beside what the supports give."""
        x, y, _ = case.applied
        size = math.hypot(x, y)
        q = Quantities(self.document.part.display_units)
        back = sum(math.hypot(r.x, r.y) for r in case.reactions)
        if size <= ROUNDING * back:
            return []
        text = f"amount to {q.show(three(size), 'force')} {way_text(x, y)} in {case.name}"
        words = Words(text, quiet=self.outdated())
        return [RowOf(together_id(case.case), ("the loads",), (words,))]


def _columns(part: Part) -> tuple[Column, ...]:
    unit = Quantities(part.display_units).show(1.0, "stress").split()[-1]
    columns = [Column("where")]
    if len(loadings(part)) > 1:
        columns.append(Column("case"))
    head = HEADS[_only_measure(part)]
    columns.append(Column(f"{head} {unit}", number=True))
    if any(isinstance(limit, StressLimit) for limit in part.limits):
        columns.append(
            Column("use", number=True, tip="Stress over what the limit allows; 1 is all of it")
        )
    columns.append(Column("trust", pill=True))
    return tuple(columns)


def _only_measure(part: Part) -> str:
    """The stress that the limits are on where they are all on one; else von Mises."""
    judged = {limit.measure for limit in part.limits if isinstance(limit, StressLimit)}
    return judged.pop() if len(judged) == 1 else "von_mises"


def _line(part: Part, case: CaseFindings, peak: Peak) -> Line:
    known = peak.quantity == _only_measure(part)  # the head of the column says it
    texts = [("" if known else QUANTITIES.get(peak.quantity, "")) + peak.place]
    if len(loadings(part)) > 1:
        texts.append(case.name)
    texts.append(value_text(peak.estimate, "stress", part.display_units, unit=False))
    if any(isinstance(limit, StressLimit) for limit in part.limits):
        texts.append(use_text(part, peak))
    texts.append(peak.estimate.trust)
    q = Quantities(part.display_units)
    x, y = (0.0 if abs(v) < NAUGHT else v for v in peak.at)
    at = f"at x {q.bare(x, 'length')}, y {q.show(y, 'length')}"
    tip = "\n".join(filter(None, (at, peak.why, peak.mend)))
    return Line(peak.feature or f"peak {case.case} {peak.at}", tuple(texts), tip)


def use_text(part: Part, peak: Peak) -> str:
    """Share of the allowable stress that the peak uses; a dash where no limit is on it."""
    uses = []
    for limit in part.limits:
        if isinstance(limit, StressLimit) and limit.measure == peak.quantity:
            allowed = allowables(limit, part)
            if allowed:
                number = {zone.id: k + 1 for k, zone in enumerate(part.zones)}
                uses.append(peak.estimate.value / allowed[number.get(peak.zone, 0)])
    if not uses:
        return "–"
    text = plain(max(uses), 2)
    return f"≥ {text}" if peak.estimate.trust == "rising" else text


def _shown_peaks(part: Part, findings: Findings) -> list[tuple[CaseFindings, Peak]]:
    """The largest peaks over all cases, of the stresses that are judged."""
    judged = {limit.measure for limit in part.limits if isinstance(limit, StressLimit)}
    judged = judged or {"von_mises"}
    peaks = [(c, p) for c in findings.cases for p in c.peaks if p.quantity in judged]
    rank = {"rising": 0, "unsettled": 1, "settled": 1}
    peaks.sort(key=lambda cp: (rank[cp[1].estimate.trust], -abs(cp[1].estimate.value)))
    return peaks[:MOST_PEAKS]


def _doubtful(
    peaks: list[tuple[CaseFindings, Peak]], findings: Findings | None
) -> list[tuple[CaseFindings, Peak]]:
    """Peaks whose reason is still to be told: not those that the head of the sheet tells."""
    seen: set[str] = {p.why for _, p in peaks if findings and head_says(findings, p.why)}
    kept = []
    for case, peak in peaks:
        if peak.why and peak.why not in seen:
            seen.add(peak.why)
            kept.append((case, peak))
    return kept[:3]


def _why_row(number: int, peak: Peak) -> RowOf:
    mend = f" {_sentence(peak.mend)}" if peak.mend else ""
    colour = "bad" if peak.estimate.trust == "rising" else "doubt"
    why = peak.why if peak.place in peak.why else f"{peak.place}: {peak.why}"
    text = f"{_sentence(why)}{mend}"
    return RowOf(f"why {number}", (), (Words(text, colour=colour),), also=(peak.feature,))


def signed_percent(share: float) -> str:
    """A difference as a percentage with its sign and one decimal.

    Example:
        >>> signed_percent(-0.0123)
        '−1.2 %'
    """
    sign = "+" if share >= 0.0 else "−"
    return f"{sign}{plain(abs(100.0 * share), 1)} %"


def _sentence(text: str) -> str:
    text = text.strip().rstrip(".")
    return f"{text[:1].upper()}{text[1:]}."


def _viewed(findings: Findings, case: int) -> CaseFindings | None:
    if not findings.cases:
        return None
    return findings.cases[min(case, len(findings.cases) - 1)]
