"""The numbers of a screening as CSV: peaks, readings and cuts."""

from __future__ import annotations

import csv
import io
import math

from screenapp.model.findings import CUT_QUANTITIES, READING_QUANTITIES, Findings


def peaks_csv(findings: Findings) -> str:
    """Every peak of every case (MPa, mm); an empty end of a band has no bound."""
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(
        ["case", "quantity", "value_MPa", "low_MPa", "high_MPa", "trust", "x_mm", "y_mm", "place"]
    )
    for case in findings.cases:
        for p in case.peaks:
            e = p.estimate
            low, high = _bound(e.low), _bound(e.high)
            writer.writerow([case.name, p.quantity, e.value, low, high, e.trust, *p.at, p.place])
    return text.getvalue()


def readings_csv(findings: Findings) -> str:
    """Every reading in every case: value, low and high of each quantity (MPa, mm)."""
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    columns = [f"{q}{end}" for q in READING_QUANTITIES for end in ("", "_low", "_high")]
    writer.writerow(["reading", "case", "x_mm", "y_mm", "trust", *columns])
    names = {case.case: case.name for case in findings.cases}
    for r in findings.readings:
        numbers: list[float | str] = []
        for q in READING_QUANTITIES:
            e = r.values[q]
            numbers += [e.value, _bound(e.low), _bound(e.high)]
        writer.writerow([r.name, names.get(r.case, r.case), *r.at, r.trust, *numbers])
    return text.getvalue()


def cuts_csv(findings: Findings) -> str:
    """Every place of every cut in every case: distance from its start and place [mm], and value,
    low and high of each stress [MPa]; an empty end of a band has no bound."""
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    columns = [f"{q}{end}_MPa" for q in CUT_QUANTITIES for end in ("", "_low", "_high")]
    writer.writerow(["cut", "case", "stretch", "distance_mm", "x_mm", "y_mm", "trust", *columns])
    names = {case.case: case.name for case in findings.cases}
    for cut in findings.cuts:
        length = math.dist(cut.start, cut.end)
        for number, span in enumerate(cut.spans, 1):
            for i, distance in enumerate(span.distances):
                share = distance / length
                x, y = (a + share * (b - a) for a, b in zip(cut.start, cut.end, strict=True))
                numbers: list[float | str] = []
                for q in CUT_QUANTITIES:
                    value, half = span.values[q][i], span.half_bands[q][i]
                    numbers += [value, _bound(value - half), _bound(value + half)]
                writer.writerow(
                    [cut.name, names[cut.case], number, distance, x, y, cut.trust, *numbers]
                )
    return text.getvalue()


def _bound(value: float) -> float | str:
    """An end of a band; empty where it has no bound."""
    return value if math.isfinite(value) else ""
