"""Edits of what is said of the whole part: title, wall, limits and mesh wishes."""

from __future__ import annotations

from dataclasses import replace

from screenapp.model.edit_rules import (
    must_find,
    new_id,
    settle,
)
from screenapp.model.part import (
    DisplayUnits,
    ElementName,
    Limit,
    Material,
    MeshWishes,
    Part,
    WallState,
)


def set_title(part: Part, title: str) -> Part:
    """Name the part; an empty title becomes "Untitled part"."""
    return replace(part, title=" ".join(title.split()) or Part().title)


def set_notes(part: Part, notes: str) -> Part:
    """Write the part's notes."""
    return replace(part, notes=notes)


def set_job_details(part: Part, **texts: str) -> Part:
    """Say who did and who checked the screening, or what it belongs to, by the fields of
    `JobDetails`; each text becomes one line."""
    lines = {field: " ".join(text.split()) for field, text in texts.items()}
    return replace(part, record=replace(part.record, **lines))


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
