"""Everything that is wrong with a part, found before anything is meshed.

`faults_of` looks at any part, however broken, and never raises; `check` is the door that every
screening goes through.
"""

from __future__ import annotations

from screenapp.model.cautions import cautions_of
from screenapp.model.combinations import combination_faults
from screenapp.model.crossings import boundary_faults
from screenapp.model.curve_table import CurveTable
from screenapp.model.edge_parts import with_span_ends
from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.features import places_of
from screenapp.model.limit_faults import limit_faults, limit_material_faults
from screenapp.model.load_faults import load_faults
from screenapp.model.material_faults import material_faults
from screenapp.model.part import Part
from screenapp.model.shape import Shape, shape_of
from screenapp.model.size_faults import id_faults, size_faults
from screenapp.model.support_faults import support_faults
from screenapp.model.value_faults import (
    dimension_faults,
    element_count_faults,
    mesh_faults,
    reading_faults,
    wall_faults,
)
from screenapp.model.zone_faults import zone_cautions, zone_value_faults
from screenapp.model.zone_shape_faults import divided_shape


def faults_of(part: Part) -> tuple[Fault, ...]:
    """All faults of a part, those that block first, outline before wall before supports ...

    Example:
        >>> faults_of(Part())[0].cause
        'the part has no outline'
    """
    return examine(part)[0]


def check(part: Part) -> Shape:
    """The exact boundary of a part that can be screened.

    Raises:
        InvalidPartError: with every fault that blocks.
    """
    faults, shape = examine(part)
    blocking = tuple(f for f in faults if f.blocks)
    if blocking or shape is None:
        raise InvalidPartError.of(blocking)
    return shape


def examine(part: Part) -> tuple[tuple[Fault, ...], Shape | None]:
    """All faults as `faults_of`, and the shape as of `check` if nothing is wrong with it."""
    shape, table, shape_faults = _sound_shape(part)
    places = places_of(part)
    faults = [
        *id_faults(part),
        *shape_faults,
        *wall_faults(part),
        *zone_value_faults(part),
        *zone_cautions(part),
        *material_faults(part),
        *dimension_faults(part),
        *support_faults(part, places, shape),
        *load_faults(part, places, shape),
        *limit_faults(part),
        *combination_faults(part),
        *limit_material_faults(part),
        *mesh_faults(part.mesh),
        *reading_faults(part),
    ]
    if shape is not None and table is not None:
        faults += element_count_faults(part.mesh, shape)
        faults += cautions_of(part, shape, table)
    ordered = [f for f in faults if f.blocks] + [f for f in faults if not f.blocks]
    return tuple(ordered), shape


def _sound_shape(part: Part) -> tuple[Shape | None, CurveTable | None, list[Fault]]:
    """The shape and its curves if the boundary is sound, and all that is wrong with it."""
    faults = size_faults(part)
    if faults:
        return None, None, faults
    try:
        shape = shape_of(part)
    except InvalidPartError as error:
        return None, None, list(error.faults)
    table = shape.table
    faults = boundary_faults(shape, table)
    if not faults and (whole := with_span_ends(part, shape)) is not shape:
        shape, table = whole, whole.table
    if faults or not part.zones:
        return (None, None, faults) if faults else (shape, table, [])
    divided, faults = divided_shape(part, shape)
    if divided is None:
        return None, None, faults
    return divided, CurveTable.of(divided.curves), faults
