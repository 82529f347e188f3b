"""Which number's history is shown: a peak or a reading in one case, by what it stands on."""

from __future__ import annotations

import math
from dataclasses import dataclass

from screenapp.model.findings import Findings, Peak, Reading
from screenapp.model.history_figure import HistoryFigure, peak_figure, reading_figure
from screenapp.model.part import DisplayUnits, Point


@dataclass(frozen=True)
class Traced:
    """A chosen number.

    Attributes:
        case: id of its case.
        probe: id of the probe for a reading; empty for a peak.
        quantity, feature, at: of the peak; what is nearest to `at` on the same feature is meant,
            so that the choice outlives another screening.
    """

    case: str
    probe: str = ""
    quantity: str = "von_mises"
    feature: str = ""
    at: Point = (0.0, 0.0)

    @staticmethod
    def peak(case: str, peak: Peak) -> Traced:
        """The choice of a peak."""
        return Traced(case, "", peak.quantity, peak.feature, peak.at)


def traced_number(findings: Findings | None, traced: Traced | None) -> Peak | Reading | None:
    """What is chosen, as the findings have it; None if they do not."""
    if findings is None or traced is None:
        return None
    if traced.probe:
        return next(
            (r for r in findings.readings if (r.probe, r.case) == (traced.probe, traced.case)), None
        )
    peaks = [
        p
        for case in findings.cases
        if case.case == traced.case
        for p in case.peaks
        if (p.quantity, p.feature) == (traced.quantity, traced.feature)
    ]
    return min(peaks, key=lambda p: math.dist(p.at, traced.at), default=None)


def figure_of(number: Peak | Reading | None, units: DisplayUnits) -> HistoryFigure | None:
    """The figure of a peak or a reading."""
    if number is None:
        return None
    return peak_figure(number, units) if isinstance(number, Peak) else reading_figure(number, units)
