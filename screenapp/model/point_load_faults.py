"""Forces at a point of the boundary, or on a patch of an edge, that cannot act there."""

from __future__ import annotations

import math
from collections.abc import Iterator

from screenapp.model.edge_parts import edge_length
from screenapp.model.errors import Fault
from screenapp.model.features import Found, edges_at, loops_of
from screenapp.model.part import Part, PointLoad
from screenapp.model.shape import Shape


def point_load_faults(
    part: Part, load: PointLoad, found: Found, name: str, where: str, shape: Shape | None
) -> Iterator[Fault]:
    """What is wrong with its place, which is there; at most one fault."""
    ids = (load.id, load.on)
    along, patch = load.along, load.patch
    if found.kind not in ("corner", "edge"):
        yield Fault(
            f"{name} cannot act on {found.kind} {load.on}",
            "put it on a sharp corner or an edge, or use a force",
            f"{where}.on",
            ids,
        )
    elif patch is not None and not (math.isfinite(patch) and patch > 0.0):
        yield Fault(
            f"the patch of {name} is {patch:g} mm",
            "give a length above zero, or leave it out",
            f"{where}.patch",
            ids,
        )
    elif found.kind == "corner":
        yield from _at_corner(part, load, found, name, where)
    elif along is None:
        yield Fault(
            f"{name} is on edge {load.on}, but not said where along it",
            "give the length along the edge from its first corner, or use a force spread evenly",
            f"{where}.along",
            ids,
        )
    elif not (math.isfinite(along) and along >= 0.0):
        yield Fault(
            f"{name} is {along:g} mm along edge {load.on}",
            "give a length of zero or more from the edge's first corner",
            f"{where}.along",
            ids,
        )
    elif shape is not None:
        half = 0.5 * (patch or 0.0)
        whole, slack = edge_length(shape, load.on), 1e-9
        if whole > 0.0 and (along - half < -slack * whole or along + half > whole * (1.0 + slack)):
            what = "its patch reaches" if patch else "it is"
            first, last = along - half, along + half
            yield Fault(
                f"{name} leaves edge {load.on}: {what} "
                f"{f'from {first:g} to {last:g}' if patch else f'at {along:g}'} mm along it, "
                f"and the edge is {whole:.6g} mm long",
                "move it away from the end" + (", or narrow its patch" if patch else ""),
                f"{where}.along",
                ids,
            )


def _at_corner(part: Part, load: PointLoad, found: Found, name: str, where: str) -> Iterator[Fault]:
    """A corner is one point: two edges meet there, and neither is the patch's."""
    ids = (load.id, load.on)
    if load.patch is not None:
        edges = next(
            (
                e
                for _, owner, loop in loops_of(part)
                if owner == found.owner and (e := edges_at(loop, load.on)) is not None
            ),
            None,
        )
        either = f"edge {edges[0].id} or {edges[1].id}" if edges else "one of its edges"
        yield Fault(
            f"{name} is spread over {load.patch:g} mm at corner {load.on}, where two edges meet",
            f"put it on {either}, {0.5 * load.patch:g} mm or more from the corner, or leave out "
            "its patch",
            f"{where}.patch",
            ids,
        )
    elif load.along is not None:
        yield Fault(
            f"{name} is {load.along:g} mm along corner {load.on}, which has no length",
            "leave that out, or put it on an edge",
            f"{where}.along",
            ids,
        )
