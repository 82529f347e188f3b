"""Hand checks: where a feature is a handbook case, the formula's stress beside the computed one.

Geometry (`handbook_cases`) and load are matched strictly; where anything differs from the
handbook's case, nothing is said.
"""

from __future__ import annotations

from collections.abc import Sequence

from screenapp.mechanics.free_body import section_forces
from screenapp.mechanics.straight_cut import straight_cut
from screenapp.model.combinations import loadings
from screenapp.model.findings import CaseFindings, HandCheck, SectionForces
from screenapp.model.members import whole_id
from screenapp.model.part import BearingLoad, BodyLoad, Case, Part, PinSupport
from screenapp.model.shape import Shape
from screenapp.screening.handbook_cases import handbook_cases
from screenapp.screening.handbook_geometry import HandbookCase, Loading, Section
from screenapp.screening.passes import Pass

PURE = 0.01
"""What else the bar carries may add at most this share of the stress that the formula rests on."""


def hand_checks(
    part: Part, shape: Shape, passes: Sequence[Pass], cases: Sequence[CaseFindings]
) -> tuple[HandCheck, ...]:
    """Every handbook case that the part has, in every load case that is one of its own."""
    if part.zones or part.wall.state != "plane stress" or part.uses_orthotropic():
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
    if known.loading == "pin" and not _pin_alone(part, case, known):
        return None
    peaks = sorted(
        (
            p
            for p in found.peaks
            if p.quantity == "von_mises"
            and p.feature in known.features
            and p.estimate.trust != "rising"
        ),
        key=lambda p: -p.estimate.value,
    )
    for peak in peaks:
        sections = known.sections(peak.at)
        carried = _carried(part, shape, last, k, known.loading, sections) if sections else None
        if carried is not None:
            return HandCheck(
                kind=f"{known.kind}{_loaded(known.loading, carried)}",
                case=case.id,
                feature=peak.feature,
                place=known.place,
                at=peak.at,
                computed=peak.estimate,
                formula=abs(known.stress(carried.normal, carried.moment)),
                source=known.source,
                valid=known.valid,
                nominal=_nominal(known.loading, carried, sections[0], part.wall.thickness),
            )
    return None


def _loaded(loading: Loading, carried: SectionForces) -> str:
    if loading == "tension":
        return " in tension" if carried.normal > 0.0 else " in compression"
    return " bent in its plane" if loading == "bending" else ""


def _nominal(loading: Loading, carried: SectionForces, section: Section, thickness: float) -> str:
    force, moment = f"N = {carried.normal:.4g} N", f"M = {abs(carried.moment):.4g} N·mm"
    said = {"bending": moment, "both": f"{force} and {moment}"}.get(loading, force)
    return (
        f"{said} in a section of {section.width:.4g} × {thickness:.4g} mm, by the balance of the "
        "free body"
    )


def _pin_alone(part: Part, case: Case, known: HandbookCase) -> bool:
    """Whether nothing but a pin that pushes acts on the hole: a bearing load, or a support."""
    names = {*known.features, *(whole_id(feature) for feature in known.features)}
    loads = [load for load in case.loads if not isinstance(load, BodyLoad) and load.on in names]
    supports = [s for s in part.supports if s.on in names]
    if supports:
        return not loads and len(supports) == 1 and isinstance(supports[0], PinSupport)
    return len(loads) == 1 and isinstance(loads[0], BearingLoad)


def _carried(
    part: Part,
    shape: Shape,
    last: Pass,
    k: int,
    loading: Loading,
    sections: Sequence[Section],
) -> SectionForces | None:
    """What the first section carries; None where that, or another section, is not as `loading`
    says."""
    forces = [_section_forces(part, shape, last, k, section) for section in sections]
    given = [force for force in forces if force is not None]
    if len(given) < len(forces):
        return None
    first = given[0]
    if loading == "both":
        return first if first.normal != 0.0 or first.moment != 0.0 else None
    for force, section in zip(given, sections, strict=True):
        bent = 6.0 / section.width * abs(force.moment)
        sheared, pulled = 1.5 * abs(force.shear), abs(force.normal)
        most = PURE * (bent if loading == "bending" else pulled)
        if most == 0.0 or sheared > most or (pulled if loading == "bending" else bent) > most:
            return None
    main = [f.moment if loading == "bending" else f.normal for f in given]
    if any(abs(m - main[0]) > PURE * abs(main[0]) for m in main):
        return None
    return None if loading == "pin" and first.normal < 0.0 else first


def _section_forces(
    part: Part, shape: Shape, last: Pass, k: int, section: Section
) -> SectionForces | None:
    (x, y), (ux, uy) = section.middle, section.along
    half = 0.5 * section.width * (1.0 + 1e-3)
    cut = straight_cut(shape, (x - half * uy, y + half * ux), (x + half * uy, y - half * ux))
    if len(cut.spans) != 1 or abs(cut.length - section.width) > 1e-6 * section.width:
        return None
    fields = last.fields
    return section_forces(part, shape, fields.mesh, fields.solution, k, cut)
