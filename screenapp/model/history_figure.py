"""How a number came to its value over the passes, as a small figure: plain points in a unit square.

Across runs the size of the elements there, coarse at the left, by its logarithm; upwards the value.
The window paints the figure and the record draws it, so nothing about it is worked out twice.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from screenapp.model.estimate_text import estimate_text, significant, unit_of, value_text
from screenapp.model.findings import Estimate, Peak, Reading, Trust
from screenapp.model.part import DisplayUnits
from screenapp.model.units import format_quantity

Spot = tuple[float, float]
"""x and y, each from 0 to 1, y upwards."""

Span = tuple[float, float]

ROOM = 0.08
"""Room above and below what is shown, as a share of its height."""

LEAST_HEIGHT = 0.01
"""Least height of the figure relative to the value: what is steady shall look steady."""

CURVE = 24
"""Points of the fitted growth."""


@dataclass(frozen=True)
class HistoryFigure:
    """What is drawn.

    Attributes:
        name: what the number is of, e.g. "hole h2, 268°".
        trust: of its last value.
        points: the value on each pass, oldest first.
        band: lower and upper end of the last value's band; None where there is none.
        allowed: the band within which it would count as settled, round the last value; None where
            it is not known or means nothing.
        growth: the fitted growth of a rising number, on beyond the last pass; else empty.
        left, right: sizes of the elements on the first and the last pass, with their unit.
        bottom, top: least and largest value as texts, with where they stand.
        note: the band or the growth in a few words, e.g. "grows as size^−0.46".
        words: all of it in one sentence for who cannot see it.
    """

    name: str
    trust: Trust
    points: tuple[Spot, ...]
    band: Span | None
    allowed: Span | None
    growth: tuple[Spot, ...]
    left: str
    right: str
    bottom: tuple[float, str]
    top: tuple[float, str]
    note: str
    words: str


def peak_figure(peak: Peak, units: DisplayUnits) -> HistoryFigure | None:
    """The figure of a peak; None where its history was not kept."""
    return history_figure(peak.place, peak, peak.estimate, units)


def reading_figure(reading: Reading, units: DisplayUnits) -> HistoryFigure | None:
    """The figure of a reading's von Mises stress; None where its history was not kept."""
    return history_figure(reading.name, reading, reading.values["von_mises"], units)


def history_figure(
    name: str, number: Peak | Reading, last: Estimate, units: DisplayUnits
) -> HistoryFigure | None:
    """The figure of a number whose last value is `last`."""
    values = number.history
    if not values or not all(math.isfinite(v) for v in values):
        return None
    sizes = number.sizes
    if len(sizes) != len(values) or not all(size > 0.0 for size in sizes):
        sizes = ()
    rising = last.trust == "rising"
    rate = number.rate if rising and sizes else None
    band = _finite_span(last.low, last.high) if not rising and len(values) > 1 else None
    allowed = None
    if not rising and number.allowed is not None and math.isfinite(number.allowed):
        allowed = values[-1] - number.allowed, values[-1] + number.allowed
    across = _across(sizes, len(values), 0.8 if rate else 1.0)
    grown = values[-1]
    if rate:
        grown = values[-1] * _ahead(sizes, 1.0 / 0.8 - 1.0) ** rate
    low, high = _range([*values, grown, *(band or ()), *(allowed or ())], abs(values[-1]))

    def up(value: float) -> float:
        return (value - low) / (high - low)

    def span(ends: Span | None) -> Span | None:
        return None if ends is None else (up(ends[0]), up(ends[1]))

    note = _note(number, last, rate, units)
    factor, unit = unit_of("stress", units)
    least, most = min(values), max(values)
    return HistoryFigure(
        name,
        last.trust,
        tuple((x, up(v)) for x, v in zip(across, values, strict=True)),
        span(band),
        span(allowed),
        tuple((x, up(v)) for x, v in _growth(sizes, values, rate)),
        format_quantity(float(f"{sizes[0]:.2g}"), "length", units) if sizes else "pass 1",
        format_quantity(float(f"{sizes[-1]:.2g}"), "length", units)
        if sizes
        else f"pass {len(values)}",
        (up(least), significant(factor * least)),
        (up(most), significant(factor * most)),
        note,
        _words(name, values, sizes, last, note, factor, unit, units),
    )


def _finite_span(low: float, high: float) -> Span | None:
    return (low, high) if math.isfinite(low) and math.isfinite(high) else None


def _range(shown: Sequence[float], value: float) -> Span:
    low, high = min(shown), max(shown)
    least = max(LEAST_HEIGHT * value, 1e-12)
    if high - low < least:
        middle = 0.5 * (low + high)
        low, high = middle - 0.5 * least, middle + 0.5 * least
    room = ROOM * (high - low)
    return low - room, high + room


def _across(sizes: Sequence[float], count: int, share: float) -> list[float]:
    """Where each pass stands across, the first at 0, the finest at `share`."""
    if count == 1:
        return [0.5 * share]
    if not sizes:
        return [share * i / (count - 1) for i in range(count)]
    logs = [-math.log(size) for size in sizes]
    low, high = min(logs), max(logs)
    if high - low < 1e-9:
        return [share * i / (count - 1) for i in range(count)]
    return [share * (value - low) / (high - low) for value in logs]


def _ahead(sizes: Sequence[float], beyond: float) -> float:
    """How many times smaller the elements are at the right edge than on the finest pass."""
    return float((max(sizes) / min(sizes)) ** beyond)


def _growth(sizes: Sequence[float], values: Sequence[float], rate: float | None) -> list[Spot]:
    """Place across and value of the growth fitted through the last pass."""
    if not rate or len(values) < 2 or max(sizes) <= min(sizes) * (1.0 + 1e-9):
        return []
    x_last = _across(sizes, len(values), 0.8)[-1]
    first = max(0.0, x_last - 0.55)
    whole = math.log(max(sizes) / min(sizes)) / 0.8  # of ln(size) over the full width
    steps = [first + (1.0 - first) * i / (CURVE - 1) for i in range(CURVE)]
    return [(x, values[-1] * math.exp(rate * whole * (x - x_last))) for x in steps]


def _note(number: Peak | Reading, last: Estimate, rate: float | None, units: DisplayUnits) -> str:
    if last.trust == "rising":
        return f"grows as size^−{rate:.2f}" if rate and rate > 0.0 else "keeps growing"
    if not math.isfinite(last.high) or number.allowed is None:
        return ""
    half = max(last.high - last.value, last.value - last.low)
    factor, unit = unit_of("stress", units)
    shown = significant(factor * half, 2)
    return f"band ± {shown}, allowed ± {significant(factor * number.allowed, 2)} {unit}"


def _words(
    name: str,
    values: Sequence[float],
    sizes: Sequence[float],
    last: Estimate,
    note: str,
    factor: float,
    unit: str,
    units: DisplayUnits,
) -> str:
    count = f"{len(values)} pass{'' if len(values) == 1 else 'es'}"
    shown = ", ".join(significant(factor * v, 4) for v in values)
    text = f"{name}: {count}, {shown} {unit}"
    if sizes:
        begin, end = (
            format_quantity(float(f"{s:.2g}"), "length", units) for s in (sizes[0], sizes[-1])
        )
        text += f"; elements there from {begin} to {end}"
    stands = estimate_text(last, "stress", units)
    if last.trust == "settled":
        stands = f"{value_text(last, 'stress', units)}, settled"
    return f"{text}; {stands}{f' ({note})' if note else ''}"
