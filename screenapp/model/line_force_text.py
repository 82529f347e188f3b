"""The largest force per length of a weld or a bed of springs, in words."""

from __future__ import annotations

from screenapp.model.estimate_text import estimate_text
from screenapp.model.findings import Estimate, LineForce
from screenapp.model.part import DisplayUnits
from screenapp.model.units import format_quantity


def line_force_text(force: LineForce, units: DisplayUnits) -> str:
    """What it gives at most, where, across and along, and a weld's stress in the throat.

    A weld's throat stress is the resultant over the throat, whatever its direction (EN 1993-1-8,
    4.5.3.3, simplified method, from memory); what it may be is not judged.
    """
    if force.largest.value == 0.0:
        return "gives nothing along its length"
    x, y = (format_quantity(v, "length", units) for v in force.at)
    across, along = (
        format_quantity(abs(v), "line_load", units) for v in (force.normal, force.along)
    )
    way = "pulling across" if force.normal >= 0.0 else "pressing across"
    largest = estimate_text(force.largest, "line load", units)
    text = f"gives most at ({x}, {y}): {largest} ({across} {way}, {along} along)"
    if force.throat is None:
        return text
    most, throat = force.largest, force.throat
    stress = Estimate(most.value / throat, most.low / throat, most.high / throat, most.trust)
    in_it = estimate_text(stress, "stress", units)
    return f"{text}, {in_it} in the throat of {format_quantity(throat, 'length', units)}"
