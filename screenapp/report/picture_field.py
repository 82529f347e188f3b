"""What the record's picture paints: the field that the verdict rests on, and the place it names."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.model.allowables import allowables
from screenapp.model.estimate_text import estimate_text, unit_of, value_text
from screenapp.model.findings import CaseFindings, Fields, Findings, LimitFindings
from screenapp.model.part import DisplacementLimit, Part, Point, StressLimit
from screenapp.model.stress_measures import stress_measure
from screenapp.report import colours
from screenapp.report.colours import Scale

Floats = NDArray[np.float64]

_WORDS = {
    "von_mises": "von Mises stress",
    "tresca": "Tresca stress",
    "sigma_1": "Largest principal stress",
    "tsai_hill": "Tsai–Hill, as tension along 1,",
    "largest_stress": "Largest stress in the axes, as tension along 1,",
}


@dataclass(frozen=True, eq=False)
class PaintedField:
    """A field of one case, ready to be painted.

    Attributes:
        title: what is painted, with its unit.
        values: in stored units, at the nodes (n_nodes,), or where zones meet at those of each
            element (n_elements, 9).
        scale: its colours.
        factor: from a stored value to the one written at the colour bar.
        case: name of the case.
        at: place of the value that the picture points at [mm]; None if there is none.
        value, detail: that value with its band, and where it is.
        doubtful: places in this case whose stress is not settled [mm].
    """

    title: str
    values: Floats
    scale: Scale
    factor: float
    case: str
    at: Point | None
    value: str
    detail: str
    doubtful: tuple[Point, ...]


def governing_field(part: Part, findings: Findings) -> PaintedField:
    """The field of the limit that the verdict rests on; von Mises stress where there is none.

    Raises:
        ValueError: only the record of the findings was kept, not its fields.
    """
    fields = findings.last
    if fields is None:
        raise ValueError("findings without fields have nothing to paint")
    rests_on = findings.governing
    limit = next((x for x in part.limits if rests_on and x.id == rests_on.limit), None)
    if rests_on is not None and isinstance(limit, StressLimit):
        allowed = allowables(limit, part)
        if allowed is not None:
            return _utilisation(part, findings, fields, rests_on, limit, allowed)
    if rests_on is not None and isinstance(limit, DisplacementLimit):
        return _displacement(part, findings, fields, rests_on)
    return _stress(part, findings, fields)


def measured(part: Part, fields: Fields, case: int, measure: str) -> Floats:
    """A stress measure [MPa] in the numbers of `Mesh.field_quads`, (n_fields,); tension alone of a
    principal stress."""
    stress = fields.stress.nodal[case]
    return np.maximum(stress_measure(measure, stress, part, fields.mesh.field_zones), 0.0)


def _utilisation(
    part: Part,
    findings: Findings,
    fields: Fields,
    rests_on: LimitFindings,
    limit: StressLimit,
    allowed: tuple[float, ...],
) -> PaintedField:
    index, case = _case_of(findings, rests_on)
    shares = measured(part, fields, index, limit.measure)
    values = fields.mesh.paintable(shares / np.array(allowed)[fields.mesh.field_zones + 1])
    used = value_text(rests_on.utilisation, "factor", part.display_units)
    peak = next(
        (p for p in case.peaks if p.quantity == limit.measure and p.at == rests_on.at), None
    )
    if peak is None:
        value = f"use {estimate_text(rests_on.utilisation, 'factor', part.display_units)}"
        detail = rests_on.place
    else:
        value = estimate_text(peak.estimate, "stress", part.display_units)
        # beside a rising peak, what is judged may be its structural stress
        counted = rests_on.utilisation.trust == peak.estimate.trust
        beside = "use" if counted else "structural use"
        detail = f"{rests_on.place} · {beside} {used}"
    what = _WORDS[limit.measure]
    return PaintedField(
        f"{what} over the allowable "
        + ", ".join(value_text_of(a, part) for a in dict.fromkeys(allowed)),
        values,
        colours.utilisation(float(values.max(initial=0.0))),
        1.0,
        case.name,
        rests_on.at if case.peaks else None,
        value,
        detail,
        _doubtful(case, limit.measure),
    )


def value_text_of(stress: float, part: Part) -> str:
    """A given stress (which has no band) with its unit."""
    factor, unit = unit_of("stress", part.display_units)
    return f"{factor * stress:.4g} {unit}"


def _displacement(
    part: Part, findings: Findings, fields: Fields, rests_on: LimitFindings
) -> PaintedField:
    index, case = _case_of(findings, rests_on)
    values = np.hypot(*fields.solution.displacements[index].T)
    factor, unit = unit_of("displacement", part.display_units)
    used = value_text(rests_on.utilisation, "factor", part.display_units)
    return PaintedField(
        f"Displacement, {unit}",
        np.asarray(values),
        _from_nothing(values),
        factor,
        case.name,
        case.displacement_at,
        estimate_text(case.displacement_max, "displacement", part.display_units),
        f"largest displacement · use {used}",
        (),
    )


def _stress(part: Part, findings: Findings, fields: Fields) -> PaintedField:
    peaks = [
        (k, p)
        for k, case in enumerate(findings.cases)
        for p in case.peaks
        if p.quantity == "von_mises"
    ]
    index, top = max(peaks, key=lambda row: row[1].estimate.value, default=(0, None))
    case = findings.cases[index]
    values = fields.mesh.paintable(measured(part, fields, index, "von_mises"))
    factor, unit = unit_of("stress", part.display_units)
    return PaintedField(
        f"{_WORDS['von_mises']}, {unit}",
        values,
        _from_nothing(values),
        factor,
        case.name,
        top.at if top else None,
        estimate_text(top.estimate, "stress", part.display_units) if top else "",
        top.place if top else "",
        _doubtful(case, "von_mises"),
    )


def _case_of(findings: Findings, rests_on: LimitFindings) -> tuple[int, CaseFindings]:
    return next((k, case) for k, case in enumerate(findings.cases) if case.case == rests_on.case)


def _doubtful(case: CaseFindings, measure: str) -> tuple[Point, ...]:
    return tuple(
        p.at for p in case.peaks if p.quantity == measure and p.estimate.trust != "settled"
    )


def _from_nothing(values: Floats) -> Scale:
    """The scale of values that are nowhere negative."""
    return colours.cividis(0.0, max(float(values.max(initial=0.0)), 1e-12))
