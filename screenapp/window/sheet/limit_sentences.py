"""The sentences of the kinds of limit, with their values to be changed in place."""

from __future__ import annotations

from screenapp.model.combinations import loadings
from screenapp.model.errors import ScreenappError
from screenapp.model.features import place_name
from screenapp.model.joint_rules import joint_rules
from screenapp.model.part import (
    CircleHole,
    DisplacementLimit,
    FatigueLimit,
    JointLimit,
    Part,
    StrainLimit,
)
from screenapp.window.sheet.limit_changes import LimitChange
from screenapp.window.sheet.pieces import Choice, Piece, Value
from screenapp.window.sheet.quantities import Quantities

ANYWHERE, AT_POINT = "anywhere", "point"


def displacement_pieces(
    part: Part, limit: DisplacementLimit, change: LimitChange, q: Quantities
) -> tuple[Piece | str, ...]:
    """Nothing, or one point, moves by more than so much."""
    most = q.value(
        "most",
        limit.most,
        "displacement",
        "Most displacement",
        change.setter("most"),
        field=f"limits.{limit.id}.most",
    )
    where = Value(
        "where",
        "Nothing" if limit.at is None else "The point",
        "What must not move by more",
        lambda key: change.set("at", _place(part, limit, key)),
        lambda: _places(part),
    )
    along = q.optional_value(
        "angle",
        limit.angle,
        "angle",
        "Direction in which the movement counts",
        change.setter("angle"),
        "any direction",
        f"limits.{limit.id}.angle",
    )
    said: tuple[Piece | str, ...] = (" moves by more than ", most, " in ", along, ".")
    if limit.angle is not None:
        said = (" moves by more than ", most, " along ", along, ".")
    if limit.at is None:
        return (where, *said)
    x, y = limit.at
    numbers = [
        q.value(
            axis,
            value,
            "length",
            f"{axis} of the point",
            lambda to, i=i: change.set("at", (to, y) if i == 0 else (x, to)),  # type: ignore[misc]
            field=f"limits.{limit.id}.at.{i}",
        )
        for i, (axis, value) in enumerate((("x", x), ("y", y)))
    ]
    return (where, " x ", numbers[0], ", y ", numbers[1], " never", *said)


def joint_pieces(
    part: Part, limit: JointLimit, change: LimitChange, q: Quantities
) -> tuple[Piece | str, ...]:
    """A hole keeps to the rules of a handbook for its pin."""
    where = f"limits.{limit.id}"
    on = Value(
        "on",
        place_name(part, limit.on),
        "Hole that carries a pin",
        change.setter("on"),
        lambda: round_holes(part),
        about=limit.on,
    )
    rules = Value(
        "rules",
        limit.rules,
        "Which rules",
        change.setter("rules"),
        lambda: tuple(Choice(r.name, r.name, r.title) for r in joint_rules().values()),
    )
    factor = q.value(
        "factor", limit.factor, "number", "Factor on the force", change.setter("factor"),
        field=f"{where}.factor",
    )  # fmt: skip
    pin = q.optional_value(
        "pin", limit.pin, "length", "Diameter of the pin", change.setter("pin"),
        "as large as the hole", f"{where}.pin",
    )  # fmt: skip
    strength = q.optional_value(
        "pin_strength", limit.pin_strength, "stress", "Tensile strength of the pin",
        change.setter("pin_strength"), "at least the wall's", f"{where}.pin_strength",
    )  # fmt: skip
    return (
        *("The pin in ", on, " keeps to ", rules, " under its force times ", factor),
        *("; pin ", pin, ", its strength ", strength, "."),
    )


MEANS = {"goodman": "Goodman", "smith_watson_topper": "Smith–Watson–Topper"}
NOTCHES = {
    "none": "count in full",
    "peterson": "count less by Peterson",
    "neuber": "count less by Neuber",
}


def fatigue_pieces(
    part: Part, limit: FatigueLimit, change: LimitChange, q: Quantities
) -> tuple[Piece | str, ...]:
    """The stress swings between two cases so many times."""
    where = f"limits.{limit.id}"
    names = {case.id: case.name for case in loadings(part)}

    def cases() -> tuple[Choice, ...]:
        return tuple(Choice(id_, name) for id_, name in names.items())

    def end(key: str, case: str | None, none: bool) -> Value:
        return Value(
            key,
            "no load" if case is None else names.get(case, case),
            "Case at the other end" if none else "Case",
            lambda chosen: change.set(key, None if chosen == "no load" else chosen),
            lambda: (*((Choice("no load", "no load"),) if none else ()), *cases()),
        )

    cycles = q.value(
        "cycles", limit.cycles, "number", "Number of cycles", change.setter("cycles"),
        field=f"{where}.cycles",
    )  # fmt: skip
    factor = q.value(
        "factor", limit.factor, "number", "Factor on the amplitude", change.setter("factor"),
        field=f"{where}.factor",
    )  # fmt: skip
    mean = Value(
        "mean",
        MEANS.get(limit.mean, limit.mean),
        "How the mean stress counts",
        change.setter("mean"),
        lambda: tuple(Choice(k, t) for k, t in MEANS.items()),
    )
    notch = Value(
        "notch",
        NOTCHES.get(limit.notch, limit.notch),
        "How sharp notches count",
        change.setter("notch"),
        lambda: tuple(Choice(k, t) for k, t in NOTCHES.items()),
    )
    return (
        *("Swings between ", end("case", limit.case, False), " and "),
        *(end("other", limit.other, True), " ", cycles, " times, amplitude times ", factor),
        *("; mean stress by ", mean, ", notches ", notch, "."),
    )


def strain_pieces(
    limit: StrainLimit, change: LimitChange, q: Quantities
) -> tuple[Piece | str, ...]:
    """The local strain stays under so much."""
    most = q.value(
        "most", limit.most, "share", "Most local strain", change.setter("most"),
        field=f"limits.{limit.id}.most",
    )  # fmt: skip
    return ("The local strain by Neuber's rule is nowhere above ", most, ".")


def round_holes(part: Part) -> tuple[Choice, ...]:
    """The round holes and their patterns."""
    found = []
    for hole in part.holes:
        if isinstance(hole, CircleHole):
            remark = f"Ø {hole.diameter:.4g}"
            found.append(Choice(hole.id, place_name(part, hole.id), remark))
    return tuple(found)


def _places(part: Part) -> tuple[Choice, ...]:
    """Everywhere, a point, or where a probe stands."""
    probes = tuple(Choice(p.id, p.name, "where this probe stands") for p in part.readings)
    return (
        Choice(ANYWHERE, "nothing", "the whole part"),
        Choice(AT_POINT, "a point", "given by x and y"),
        *((Choice("-", "Probes"), *probes) if probes else ()),
    )


def _place(part: Part, limit: DisplacementLimit, key: str) -> tuple[float, float] | None:
    """The place that a line of the chooser stands for."""
    if key == ANYWHERE:
        return None
    for probe in part.readings:
        if probe.id == key:
            return probe.at
    if limit.at is not None:
        return limit.at
    if part.outline is None:
        raise ScreenappError("the part has no outline yet", "draw it first")
    return part.outline.corners[0].at
