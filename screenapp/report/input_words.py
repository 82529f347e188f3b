"""The drawn inputs of a part in words and rows for the record: outline, holes, patterns, named
dimensions, expressions, combinations.

Lengths stand as the user sees them; angles in degrees.
"""

from __future__ import annotations

from screenapp.model.field_names import field_words
from screenapp.model.part import (
    CircleHole,
    Combination,
    DisplayUnits,
    Edge,
    Hole,
    JobDetails,
    Loop,
    Material,
    Part,
    Point,
    SlotHole,
)
from screenapp.model.pattern import GridPattern, Pattern, RowPattern
from screenapp.model.units import format_quantity

Row = tuple[str, ...]


def job_words(details: JobDetails) -> str:
    """Job, drawing and revision, as far as they are given: "Job 41, drawing A-7, revision C"."""
    given = (("job", details.job), ("drawing", details.drawing), ("revision", details.revision))
    words = ", ".join(f"{name} {text}" for name, text in given if text)
    return words[:1].upper() + words[1:]


def material_words(material: Material, axis: float | None, units: DisplayUnits) -> str:
    """The figures of a material; of an orthotropic sheet with the direction of its 1-axis [deg]."""

    def stress(value: float | None) -> str:
        return format_quantity(value, "stress", units) if value else "not given"

    source = f"(source: {material.source or 'not given'})"
    if not material.orthotropic:
        return (
            f"E {stress(material.youngs_modulus)}, ν {material.poissons_ratio:g}, "
            f"{material.density:g} kg/m³, proof stress {stress(material.proof_stress)}, "
            f"strength {stress(material.strength)} {source}"
        )
    return (
        f"orthotropic, its 1-axis at {axis or 0.0:g}° from x: E1 {stress(material.youngs_modulus)}"
        f", E2 {stress(material.youngs_modulus_2)}, ν12 {material.poissons_ratio:g}, "
        f"G12 {stress(material.shear_modulus)}, {material.density:g} kg/m³; strengths along 1 "
        f"{stress(material.tension_1)} in tension and {stress(material.compression_1)} in "
        f"compression, along 2 {stress(material.tension_2)} and {stress(material.compression_2)}, "
        f"in shear {stress(material.shear_strength)} {source}"
    )


def hole_words(hole: Hole, units: DisplayUnits) -> str:
    """A hole (or a zone's form) in words: its form, size, place and pattern."""
    if isinstance(hole, CircleHole):
        words = f"round, ⌀ {_length(hole.diameter, units)} at {_place(hole.centre, units)}"
    elif isinstance(hole, SlotHole):
        words = (
            f"slot, {_length(hole.length, units)} × {_length(hole.width, units)} at "
            f"{_place(hole.centre, units)}, turned {hole.angle:g}°"
        )
    else:
        return f"a ring of {len(hole.loop.corners)} corners, as below"
    if hole.pattern is None:
        return words
    return f"{words}; {pattern_words(hole.pattern, units)}"


def pattern_words(pattern: Pattern, units: DisplayUnits) -> str:
    """How the members of a pattern stand."""
    if isinstance(pattern, RowPattern):
        return (
            f"{pattern.count} in a row, {_length(pattern.pitch, units)} apart along "
            f"{pattern.angle:g}°"
        )
    if isinstance(pattern, GridPattern):
        return (
            f"{pattern.columns} × {pattern.rows} in a grid, {_length(pattern.pitch_x, units)} and "
            f"{_length(pattern.pitch_y, units)} apart along {pattern.angle:g}°"
        )
    return (
        f"{pattern.count} on a bolt circle of radius {_length(pattern.radius, units)}, "
        f"the first at {pattern.start:g}°"
    )


def rings(part: Part) -> tuple[tuple[str, Loop], ...]:
    """Every ring of corners with its name: the outline, holes and zones that are rings."""
    found = [] if part.outline is None else [("outline", part.outline)]
    forms = [*part.holes, *(zone.form for zone in part.zones)]
    for form in forms:
        if not isinstance(form, CircleHole | SlotHole):
            found.append((form.id, form.loop))
    return tuple(found)


def ring_rows(loop: Loop, units: DisplayUnits) -> tuple[Row, ...]:
    """Each corner: id, x, y, fillet or chamfer, and the edge that follows it."""
    rows: list[Row] = []
    for corner, edge in zip(loop.corners, loop.edges, strict=True):
        end = "sharp"
        if corner.round:
            end = f"fillet {_length(corner.round, units)}"
        elif corner.chamfer:
            end = f"chamfer {_length(corner.chamfer, units)}"
        x, y = (_length(value, units) for value in corner.at)
        rows.append((corner.id, x, y, end, edge_words(edge, units)))
    return tuple(rows)


def edge_words(edge: Edge, units: DisplayUnits) -> str:
    """An edge: straight, or an arc through a point."""
    if edge.through is None:
        return f"{edge.id}, straight"
    return f"{edge.id}, arc through {_place(edge.through, units)}"


def dimension_rows(part: Part) -> tuple[Row, ...]:
    """Each named dimension: name, value, bounds."""

    def written(value: float | None, measures: str) -> str:
        if value is None:
            return "none"
        if measures == "length":
            return _length(value, part.display_units)
        return f"{value:g}°" if measures == "angle" else f"{value:g}"

    return tuple(
        (d.name, *(written(v, d.measures) for v in (d.value, d.lower, d.upper)))
        for d in part.dimensions
    )


def formula_rows(part: Part) -> tuple[Row, ...]:
    """Each expression: what it gives, and its text (in mm, N and degrees)."""
    return tuple((field_words(f.field), f.text) for f in part.formulas)


def combination_words(combination: Combination, part: Part) -> str:
    """The cases of a combination with their factors."""
    names = {case.id: case.name for case in part.cases}
    terms = (f"{term.factor:g} × {names.get(term.case, term.case)}" for term in combination.terms)
    return " + ".join(terms)


def _length(value: float, units: DisplayUnits) -> str:
    return format_quantity(value, "length", units)


def _place(at: Point, units: DisplayUnits) -> str:
    return f"({_length(at[0], units)}, {_length(at[1], units)})"
