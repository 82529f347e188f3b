"""Expressions of a place that was typed by its length and angle from another place."""

from __future__ import annotations

import math
from collections.abc import Mapping

from screenapp.model.expressions import LONGEST, plain_number
from screenapp.model.part import Point

Texts = Mapping[str, str | None]
"""By the name of a field, the expression typed into it (stored units); None for a plain number."""

LEVEL = 1e-9
"""A direction is level or upright within this share of the length."""


def place_expressions(
    start: Point, given: Texts, taken: Texts, at: Point, share: float = 1.0
) -> tuple[dict[str, str | None], str]:
    """What gives x and y of a place, and why a typed expression could not be kept ("" if it is).

    Args:
        start: the place that length and angle are counted from [mm].
        given: what gives x and y of `start`.
        taken: what was typed for `at`.
        at: the place [mm].
        share: of the typed length that `at` is away; 0.5 for the middle between both places.
    """
    if not {"length", "angle"} & taken.keys():
        return dict(taken), ""
    long, turn = taken.get("length"), taken.get("angle")
    dx, dy = at[0] - start[0], at[1] - start[1]
    length = math.hypot(dx, dy)
    if not (long or turn or given.get("x") or given.get("y")) or length == 0.0:
        return {}, ""
    degrees = math.degrees(math.atan2(dy, dx))
    level, upright = abs(dy) <= LEVEL * length, abs(dx) <= LEVEL * length
    size = f"({long})" if long else plain_number(length)
    if long and share != 1.0:
        size = f"{size}*{plain_number(share)}"
    if not turn and not level and not upright and "angle" not in taken:
        if not long:
            return {}, ""
        return {}, (
            f"The length is kept as a number, {plain_number(round(length, 4))} mm: "
            "type the angle too, and its expression is kept."
        )
    angle = turn or plain_number(round(degrees, 9))
    steps = {"x": f"{size}*cos({angle})", "y": f"{size}*sin({angle})"}
    if not turn and (level or upright):
        along, across = ("x", "y") if level else ("y", "x")
        ahead = (dx if level else dy) > 0.0
        steps = {along: size if ahead else f"-{size}", across: ""}
    texts: dict[str, str | None] = {}
    for axis, name in enumerate("xy"):
        texts[name] = _sum(start[axis], given.get(name), steps[name], bool(long or turn))
    if any(text is not None and len(text) > LONGEST for text in texts.values()):
        return {}, f"What gives this place has over {LONGEST} characters: it is kept as a number."
    return texts, ""


def _sum(start: float, given: str | None, step: str, varies: bool) -> str | None:
    """One coordinate: where it starts and what is added; None where no expression is in it."""
    if not step:
        return given
    if given is None and not varies:
        return None
    begin = given or ("" if start == 0.0 else plain_number(start))
    if step.startswith("-"):
        return f"{begin} - {step[1:]}" if begin else step
    return f"{begin} + {step}" if begin else step
