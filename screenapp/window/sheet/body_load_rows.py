"""Sentences of loads that act throughout the part: spin and change of temperature."""

from __future__ import annotations

from typing import Protocol

from screenapp.model.part import Part, SpinLoad, TemperatureLoad
from screenapp.window.sheet.load_changes import LoadChange
from screenapp.window.sheet.pieces import Choice, Piece, Value
from screenapp.window.sheet.quantities import Quantities

WHOLE = "the whole part"


class _Number(Protocol):
    def __call__(self, key: str, kind: str, name: str, hint: str = "") -> Value:
        """A number of the load, to be changed in place."""


def _numbers(
    load: SpinLoad | TemperatureLoad, change: LoadChange, q: Quantities, field: str
) -> _Number:
    def number(key: str, kind: str, name: str, hint: str = "") -> Value:
        return q.value(
            key, getattr(load, key), kind, name, change.setter(key), hint, f"{field}.{key}"
        )

    return number


def spin_pieces(
    load: SpinLoad, change: LoadChange, q: Quantities, field: str
) -> tuple[Piece | str, ...]:
    """How fast it turns, and about which point."""
    number = _numbers(load, change, q, field)
    pieces: tuple[Piece | str, ...] = (
        "spins at ",
        number("speed", "speed", "Speed of the spin", "turns in a minute"),
        " about x ",
        number("x", "length", "Place that it spins about, x"),
        ", y ",
        number("y", "length", "Place that it spins about, y"),
    )
    if load.factor != 1.0:
        pieces += (", its forces times ", number("factor", "number", "Factor on the forces"))
    return pieces


def temperature_pieces(
    part: Part, load: TemperatureLoad, change: LoadChange, q: Quantities, field: str
) -> tuple[Piece | str, ...]:
    """By how much it warms, from where, how that varies, and which zone."""
    number = _numbers(load, change, q, field)
    pieces: tuple[Piece | str, ...] = (
        "warmed by ",
        number("change", "temperature_change", "Change of temperature", "negative cools"),
        " from ",
        number("start", "temperature", "Temperature at which nothing is strained"),
        ", and by ",
        number("x", "temperature_gradient", "Gradient along x", "0 for an even change"),
        " along x, ",
        number("y", "temperature_gradient", "Gradient along y", "0 for an even change"),
        " along y",
    )
    if not part.zones and load.zone is None:
        return pieces
    zones = tuple(Choice(z.id, f"zone {z.id}", z.name) for z in part.zones)
    where = Value(
        "zone",
        WHOLE if load.zone is None else f"zone {load.zone}",
        "What changes its temperature",
        lambda key: change.setter("zone")(key if key != "*" else None),
        lambda: (Choice("*", WHOLE), *zones),
    )
    return (*pieces, ": ", where)
