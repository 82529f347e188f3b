"""Which part of its edge a support or load stands on, and how a load varies along it, in words."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from screenapp.model.edge_parts import WHOLE, can_have_span, half_length, span_of
from screenapp.model.features import find
from screenapp.model.part import LineLoad, Load, Part, PressureLoad, Support
from screenapp.window.sheet.pieces import SEPARATOR, Link, Piece
from screenapp.window.sheet.quantities import Quantities

Put = Callable[[dict[str, Any]], None]
"""Sets several fields of the record at once."""


def span_pieces(
    part: Part, record: Support | Load, where: str, put: Put, q: Quantities, field: str
) -> tuple[Piece | str, ...]:
    """ ", from 10 mm to 40 mm along it", or a link that begins it; nothing off an edge."""
    if not can_have_span(record):
        return ()
    on = record.on  # type: ignore[union-attr]
    found = find(part, on)
    span = span_of(record)
    if span == WHOLE and (found is None or found.kind != "edge"):
        return ()
    if span == WHOLE:

        def begin(_key: str) -> None:
            half = half_length(part, on)
            put({"start": 0.0, "end": None if half is None else float(f"{half:.3g}")})

        return (SEPARATOR, Link("span", "on part of it", begin, f"Take only part of {where}"))
    begins = f"Start on {where}"
    start = q.optional_value(
        "start",
        span[0],
        "length",
        begins,
        lambda v: put({"start": v}),
        "its start",
        f"{field}.start",
    )
    end = q.optional_value(
        "end",
        span[1],
        "length",
        f"End on {where}",
        lambda v: put({"end": v}),
        "its end",
        f"{field}.end",
    )
    return (", from ", start, " to ", end, " along it")


def varying_pieces(
    part: Part, load: Load, where: str, put: Put, q: Quantities, field: str
) -> tuple[Piece | str, ...]:
    """ ", to 0 MPa at its end", or a link that begins it; nothing off an edge."""
    if not isinstance(load, PressureLoad | LineLoad):
        return ()
    names = ("end_pressure",) if isinstance(load, PressureLoad) else ("end_x", "end_y")
    kind = "stress" if isinstance(load, PressureLoad) else "line load"
    given = {name: getattr(load, name) for name in names}
    if all(value is None for value in given.values()):
        found = find(part, load.on)
        if found is None or found.kind != "edge":
            return ()
        fresh = dict.fromkeys(names, 0.0)
        tip = f"Let it vary evenly along {where}"
        return (SEPARATOR, Link("vary", "varying", lambda _key: put(fresh), tip))
    pieces: tuple[Piece | str, ...] = (", and at its end ",)
    for number, (name, value) in enumerate(given.items()):
        axis = {"end_x": "x ", "end_y": "y "}.get(name, "")

        def set_(v: float | None, name: str = name) -> None:
            put({name: v})

        pieces += (
            (", " if number else "") + axis,
            q.optional_value(
                name, value, kind, f"At the end of {where}", set_, "the same", f"{field}.{name}"
            ),
        )
    return pieces
