"""Where a force at a point of an edge acts, and over which patch it is spread, in words."""

from __future__ import annotations

from screenapp.model.edge_parts import edge_length
from screenapp.model.errors import InvalidPartError
from screenapp.model.features import edges_at, find, loops_of
from screenapp.model.part import Load, Part, PointLoad
from screenapp.model.shape import shape_of
from screenapp.window.sheet.pieces import SEPARATOR, Choice, Link, Piece
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.span_pieces import Put

NO_LENGTH = "no length"


def point_pieces(
    part: Part, load: Load, where: str, put: Put, q: Quantities, field: str
) -> tuple[Piece | str, ...]:
    """ ", 20 mm along it, spread over 5 mm"; at a corner a link that puts it beside it."""
    if not isinstance(load, PointLoad):
        return ()
    if load.along is None:
        return _from_corner(part, load, where, put)
    along = q.value(
        "along",
        load.along,
        "length",
        f"Place along {where}",
        lambda v: put({"along": v}),
        "from the edge's first corner",
        f"{field}.along",
    )
    patch = q.optional_value(
        "patch",
        load.patch,
        "length",
        f"Patch of {where} that it is spread over",
        lambda v: put({"patch": v}),
        NO_LENGTH,
        f"{field}.patch",
    )
    return (", ", along, " along it, spread over ", patch)


def _from_corner(part: Part, load: PointLoad, where: str, put: Put) -> tuple[Piece | str, ...]:
    found = find(part, load.on)
    ring = next(
        (loop for _, owner, loop in loops_of(part) if found and owner == found.owner
         and edges_at(loop, load.on)), None
    )  # fmt: skip
    edges = edges_at(ring, load.on) if ring is not None else None
    if edges is None:
        return ()

    def spread(edge: str) -> None:
        try:
            whole = edge_length(shape_of(part), edge)
        except InvalidPartError:
            return
        patch = float(f"{min(2.0 * part.wall.thickness, 0.5 * whole):.3g}")
        at = whole - 0.5 * patch if edge == edges[0].id else 0.5 * patch
        put({"on": edge, "along": at, "patch": patch})

    def choices() -> tuple[Choice, ...]:
        return tuple(Choice(e.id, f"edge {e.id}", f"beside {where}") for e in edges)

    tip = "Spread it over a patch of an edge: at a corner two edges meet, so choose one"
    return (SEPARATOR, Link("patch", "over a patch", spread, tip, choices))
