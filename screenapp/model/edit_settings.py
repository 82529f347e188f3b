"""Edits of what is said of the whole part: title, wall, limits, mesh wishes and probes."""

from __future__ import annotations

from dataclasses import replace

from screenapp.model.edit_rules import (
    EditError,
    must_be_point,
    must_find,
    new_id,
    settle,
    without_stale_formulas,
)
from screenapp.model.part import (
    DisplayUnits,
    ElementName,
    Limit,
    Material,
    MeshWishes,
    Part,
    Point,
    Probe,
    WallState,
)


def set_title(part: Part, title: str) -> Part:
    """Name the part; an empty title becomes "Untitled part"."""
    return replace(part, title=" ".join(title.split()) or Part().title)


def set_notes(part: Part, notes: str) -> Part:
    """Write the part's notes."""
    return replace(part, notes=notes)


def set_units(part: Part, units: DisplayUnits) -> Part:
    """Choose the units that numbers are shown in."""
    return settle(part, replace(part, display_units=units))


def set_thickness(part: Part, thickness: float) -> Part:
    """Make the wall `thickness` [mm] thick."""
    return settle(part, replace(part, wall=replace(part.wall, thickness=float(thickness))))


def set_wall_state(part: Part, state: WallState) -> Part:
    """Choose plane stress or plane strain."""
    return settle(part, replace(part, wall=replace(part.wall, state=state)))


def set_material(part: Part, material: Material) -> Part:
    """Make the wall of a material: its record is copied into the part, unused ones are dropped.

    Raises:
        EditError: the material has a property that cannot be, or lacks one that a limit needs.
    """
    wall = replace(part.wall, material=material.name)
    return settle(part, replace(part, wall=wall, materials=(material,)))


def add_limit(part: Part, limit: Limit) -> Part:
    """Add a limit; an empty id becomes `new_id(part, "g")`."""
    new = replace(limit, id=limit.id or new_id(part, "g"))
    return settle(part, replace(part, limits=(*part.limits, new)))


def replace_limit(part: Part, limit: Limit) -> Part:
    """Put a limit in the place of the one with the same id; its kind may be another."""
    must_find(part, limit.id, "limit")
    limits = tuple(limit if g.id == limit.id else g for g in part.limits)
    return settle(part, replace(part, limits=limits))


def set_mesh(
    part: Part,
    *,
    element: ElementName | None = None,
    tolerance: float | None = None,
    across: int | None = None,
) -> Part:
    """Change mesh wishes; what is None stays.  For the size see `set_mesh_size`."""
    old = part.mesh
    new = MeshWishes(
        element if element is not None else old.element,
        float(tolerance) if tolerance is not None else old.tolerance,
        old.size,
        across if across is not None else old.across,
    )
    return settle(part, replace(part, mesh=new))


def set_mesh_size(part: Part, size: float | None) -> Part:
    """Set the largest element side [mm], or None to leave it to the program."""
    wanted = None if size is None else float(size)
    return settle(part, replace(part, mesh=replace(part.mesh, size=wanted)))


def add_probe(part: Part, at: Point, name: str = "") -> Part:
    """Put a probe at a point; its id is `new_id(part, "p")`, an empty name "P" and a number."""
    id_ = new_id(part, "p")
    probe = Probe(id_, name.strip() or id_.upper(), must_be_point(at, "the probe"))
    return settle(part, replace(part, readings=(*part.readings, probe)))


def move_probe(part: Part, probe: str, to: Point) -> Part:
    """Move a probe."""
    must_find(part, probe, "probe")
    at = must_be_point(to, f"probe {probe}")
    readings = tuple(replace(p, at=at) if p.id == probe else p for p in part.readings)
    return without_stale_formulas(part, replace(part, readings=readings))


def rename_probe(part: Part, probe: str, name: str) -> Part:
    """Give a probe another name."""
    must_find(part, probe, "probe")
    if not name.strip():
        raise EditError("a probe needs a name", "give it one, e.g. “fillet”")
    readings = tuple(replace(p, name=name.strip()) if p.id == probe else p for p in part.readings)
    return replace(part, readings=readings)
