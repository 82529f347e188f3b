"""A cut as a small figure and in sentences: the stress across it with its band, what beam theory
gives beside it, and the section forces.

The window paints the figure and the record draws it, so nothing about it is worked out twice.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Literal

from screenapp.model.estimate_text import estimate_text, significant, unit_of
from screenapp.model.findings import CutFindings, Estimate, Trust
from screenapp.model.part import DisplayUnits
from screenapp.model.units import format_quantity

Line = tuple[tuple[float, float], ...]
"""x and y of its points, each from 0 to 1, y upwards."""

ROOM = 0.08
"""Room above and below what is shown, as a share of its height."""


@dataclass(frozen=True)
class CutFigure:
    """What is drawn.

    Attributes:
        name: of the cut.
        trust: of its largest stress.
        stress: the normal stress along each span.
        bands: the outline of each span's band.
        linear: membrane and bending part of each span.
        beam: what beam theory gives along each span; empty without a free body.
        zero: height at which the stress is zero.
        left, right: distances at the two ends, with their unit.
        values: heights and texts of what stands at the left.
        sentences: what the figure says, and the section forces.
    """

    name: str
    trust: Trust
    stress: tuple[Line, ...]
    bands: tuple[Line, ...]
    linear: tuple[Line, ...]
    beam: tuple[Line, ...]
    zero: float
    left: str
    right: str
    values: tuple[tuple[float, str], ...]
    sentences: tuple[str, ...]

    @property
    def words(self) -> str:
        """All of it for who cannot see it."""
        return " ".join(self.sentences)


def cut_figure(cut: CutFindings, units: DisplayUnits) -> CutFigure:
    """The figure of a cut that was read."""
    begin = cut.spans[0].distances[0]
    reach = cut.spans[-1].distances[-1] - begin
    levels = [0.0]
    for span in cut.spans:
        half = span.half_bands["normal"]
        for value, room in zip(span.values["normal"], half, strict=True):
            levels += [value, value - _finite(room), value + _finite(room)]
        levels += _ends(span.membrane, span.bending) + (span.beam or ())
    low, high = min(levels), max(levels)
    height = (high - low) or 1.0
    low, height = low - ROOM * height, (1.0 + 2.0 * ROOM) * height

    def at(distance: float, value: float) -> tuple[float, float]:
        return (distance - begin) / reach, (value - low) / height

    stress: list[Line] = []
    bands: list[Line] = []
    linear: list[Line] = []
    beam: list[Line] = []
    for span in cut.spans:
        d, v = span.distances, span.values["normal"]
        rooms = [_finite(h) for h in span.half_bands["normal"]]
        stress.append(tuple(at(x, y) for x, y in zip(d, v, strict=True)))
        upper = [at(x, y + h) for x, y, h in zip(d, v, rooms, strict=True)]
        lower = [at(x, y - h) for x, y, h in zip(d, v, rooms, strict=True)]
        bands.append((*upper, *reversed(lower)))
        one, two = _ends(span.membrane, span.bending)
        linear.append((at(d[0], one), at(d[-1], two)))
        if span.beam is not None:
            beam.append((at(d[0], span.beam[0]), at(d[-1], span.beam[1])))
    factor, _ = unit_of("stress", units)
    every = [v for span in cut.spans for v in span.values["normal"]]
    least, most = min(every), max(every)
    values = [((most - low) / height, significant(factor * most))]
    if most - least > 0.15 * height:
        values.append(((least - low) / height, significant(factor * least)))
    return CutFigure(
        cut.name,
        cut.trust,
        tuple(stress),
        tuple(bands),
        tuple(linear),
        tuple(beam),
        -low / height,
        format_quantity(_three(begin), "length", units),
        format_quantity(_three(begin + reach), "length", units),
        tuple(values),
        _sentences(cut, units),
    )


def _sentences(cut: CutFindings, units: DisplayUnits) -> tuple[str, ...]:
    """Largest stress, linear parts, section forces and what balances them."""
    out = [f"Largest von Mises stress {estimate_text(cut.largest, 'stress', units)}."]
    for number, span in enumerate(cut.spans, 1):
        which = f" of stretch {number}" if len(cut.spans) > 1 else ""
        out.append(
            f"Normal stress{which}: membrane {estimate_text(span.membrane, 'stress', units)}, "
            f"bending {estimate_text(span.bending, 'stress', units)} at its end."
        )
    applied = cut.applied
    force = max(abs(cut.normal.value), abs(cut.shear.value))
    forces: tuple[tuple[str, Estimate, Literal["force", "moment"], float | None, float], ...] = (
        ("N", cut.normal, "force", applied.normal if applied else None, force),
        ("V", cut.shear, "force", applied.shear if applied else None, force),
        ("M", cut.moment, "moment", applied.moment if applied else None, abs(cut.moment.value)),
    )
    told = []
    for letter, estimate, kind, given, largest in forces:
        text = f"{letter} {estimate_text(estimate, kind, units)}"
        if given is not None:
            said = 0.0 if abs(given) <= _ROUNDING * largest else given
            text += f" ({format_quantity(said, kind, units)})"
        told.append(text)
    by = "by the stress"
    if applied is not None:
        by += " (in brackets: by the loads on the free body)"
    out.append(f"Section forces {by}: {', '.join(told)}.")
    if applied is None:
        out.append("The cut does not divide the part, so no free body gives them too.")
    if cut.why:
        out.append(f"{cut.why[0].upper()}{cut.why[1:]}.")
    return tuple(out)


_ROUNDING = 1e-7
"""Share of the largest section force below which the loads on a free body are written as 0."""


def _ends(membrane: Estimate, bending: Estimate) -> tuple[float, float]:
    """The linear part of the stress at the two ends of a span [MPa]."""
    return membrane.value - bending.value, membrane.value + bending.value


def _finite(value: float) -> float:
    return value if math.isfinite(value) else 0.0


def _three(value: float) -> float:
    """Three significant digits; what is nothing but rounding is zero."""
    return 0.0 if abs(value) < 1e-6 else float(f"{value:.3g}")
