"""Hand checks: where a feature is a handbook case, the formula's stress beside the computed one.

Geometry (`handbook_cases`) and load are matched strictly; where anything differs from the
handbook's case, nothing is said.
"""

from __future__ import annotations

from collections.abc import Sequence

from screenapp.mechanics.free_body import section_forces
from screenapp.mechanics.straight_cut import straight_cut
from screenapp.model.combinations import loadings
from screenapp.model.findings import CaseFindings, HandCheck
from screenapp.model.part import BodyLoad, Case, Part
from screenapp.model.shape import Shape
from screenapp.screening.handbook_cases import HandbookCase, Section, handbook_cases
from screenapp.screening.passes import Pass

PURE = 0.01
"""Bending and shear in the bar may add at most this share of the tension."""


def hand_checks(
    part: Part, shape: Shape, passes: Sequence[Pass], cases: Sequence[CaseFindings]
) -> tuple[HandCheck, ...]:
    """Every handbook case that the part has, in every load case that is one of its own."""
    if part.zones or part.wall.state != "plane stress":
        return ()
    known = handbook_cases(part, shape)
    return tuple(
        check
        for k, (case, found) in enumerate(zip(loadings(part), cases, strict=True))
        for one in known
        if (check := _check(part, shape, passes[-1], k, case, found, one)) is not None
    )


def _check(
    part: Part,
    shape: Shape,
    last: Pass,
    k: int,
    case: Case,
    found: CaseFindings,
    known: HandbookCase,
) -> HandCheck | None:
    if any(isinstance(load, BodyLoad) or load.on in known.bare for load in case.loads):
        return None
    peaks = [
        p
        for p in found.peaks
        if p.quantity == "von_mises"
        and p.feature in known.features
        and p.estimate.trust != "rising"
    ]
    force = _tension(part, shape, last, k, known.sections) if peaks else None
    if force is None:
        return None
    peak = max(peaks, key=lambda p: p.estimate.value)
    width, thickness = known.sections[0].width, part.wall.thickness
    return HandCheck(
        kind=f"{known.kind} in {'tension' if force > 0.0 else 'compression'}",
        case=case.id,
        feature=peak.feature,
        place=known.place,
        at=peak.at,
        computed=peak.estimate,
        formula=known.stress(abs(force)),
        source=known.source,
        valid=known.valid,
        nominal=f"N = {force:.4g} N in a section of {width:.4g} × {thickness:.4g} mm, by the "
        "balance of the free body",
    )


def _tension(
    part: Part, shape: Shape, last: Pass, k: int, sections: Sequence[Section]
) -> float | None:
    """The force [N] in all the sections, tension positive; None where it is no pure tension or
    compression."""
    forces = [_pure_force(part, shape, last, k, section) for section in sections]
    given = [force for force in forces if force is not None]
    if len(given) < len(forces) or given[0] == 0.0:
        return None
    alike = all(abs(force - given[0]) <= PURE * abs(given[0]) for force in given)
    return given[0] if alike else None


def _pure_force(part: Part, shape: Shape, last: Pass, k: int, section: Section) -> float | None:
    (x, y), (ux, uy) = section.middle, section.along
    half = 0.5 * section.width * (1.0 + 1e-3)
    cut = straight_cut(shape, (x - half * uy, y + half * ux), (x + half * uy, y - half * ux))
    if len(cut.spans) != 1 or abs(cut.length - section.width) > 1e-6 * section.width:
        return None
    fields = last.fields
    given = section_forces(part, shape, fields.mesh, fields.solution, k, cut)
    if given is None:
        return None
    most = PURE * abs(given.normal)
    if abs(given.shear) * 1.5 > most or abs(given.moment) * 6.0 / section.width > most:
        return None
    return given.normal
