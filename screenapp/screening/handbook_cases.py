"""Features of a part that are a handbook's case by their geometry, matched strictly."""

from __future__ import annotations

from screenapp.model.part import Part
from screenapp.model.shape import Shape
from screenapp.model.support_records import stands_on
from screenapp.screening.handbook_curved import curved_cases
from screenapp.screening.handbook_geometry import HandbookCase
from screenapp.screening.handbook_notches import notch_cases
from screenapp.screening.handbook_shoulders import shoulder_cases
from screenapp.screening.handbook_strips import hole_cases

EVERY = (hole_cases, shoulder_cases, notch_cases, curved_cases)


def handbook_cases(part: Part, shape: Shape) -> tuple[HandbookCase, ...]:
    """Every handbook case of the part that nothing holds."""
    supported = {on for s in part.supports for on in stands_on(s)}
    found = [case for match in EVERY for case in match(part, shape)]
    return tuple(case for case in found if not case.bare & supported)
