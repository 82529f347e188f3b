"""Symbols of what acts throughout the part, and of a moment: turning arrows and a thermometer."""

from __future__ import annotations

import math

import numpy as np

from screenapp.model.part import MomentLoad, SpinLoad, TemperatureLoad
from screenapp.model.units import format_quantity
from screenapp.window.board.drawn_part import DrawnPart
from screenapp.window.board.frame import Floats, Frame
from screenapp.window.board.marks import Mark, radius_px

SPIN_RADIUS = 20.0
"""Of the arrow of a spin [px]."""

STEM = 22.0
"""Length of a thermometer's stem [px]."""


def turning_arrow(mark: Mark, at: Floats, radius: float, clockwise: bool) -> None:
    """Three quarters of a circle that ends in an arrow."""
    sign = 1.0 if clockwise else -1.0  # y runs down
    turn = -0.5 * math.pi + sign * np.linspace(0.0, 1.4 * math.pi, 25)
    ring = at + radius * np.stack([np.cos(turn), np.sin(turn)], axis=-1)
    mark.lines.append(ring)
    along = ring[-1] - ring[-2]
    mark.arrow(ring[-1], ring[-1] + 9.0 * along / float(np.hypot(*along)), 9.0)


def moment_mark(mark: Mark, drawn: DrawnPart, frame: Frame, load: MomentLoad, at: Floats) -> None:
    """An arrow round the inside of the hole."""
    if load.moment == 0.0:
        return
    radius = radius_px(drawn, frame, load.on)
    size = max(0.7 * radius if math.isfinite(radius) else SPIN_RADIUS, 7.0)
    mark.circle(at, 2.0)
    turning_arrow(mark, at, size, load.moment < 0.0)
    mark.say("", at + np.array([0.0, max(radius, size) + 12.0]))


def spin_mark(mark: Mark, drawn: DrawnPart, frame: Frame, load: SpinLoad) -> None:
    """An arrow round the point that the part turns about."""
    if load.speed == 0.0:
        return
    at = frame.pxs((load.x, load.y))
    mark.circle(at, 3.0)
    turning_arrow(mark, at, SPIN_RADIUS, load.speed < 0.0)
    text = format_quantity(abs(load.speed), "speed", drawn.part.display_units)
    mark.say(text, at + np.array([0.0, -SPIN_RADIUS - 12.0]))


def temperature_mark(mark: Mark, drawn: DrawnPart, load: TemperatureLoad, at: Floats) -> None:
    """A thermometer, filled high where it warms and low where it cools."""
    if load.change == load.x == load.y == 0.0:
        return
    foot, top = at + np.array([0.0, 12.0]), at + np.array([0.0, 12.0 - STEM])
    for side in (-3.0, 3.0):
        mark.line(foot + np.array([side, -3.5]), top + np.array([side, 0.0]))
    arc = math.pi * (1.0 + np.linspace(0.0, 1.0, 9))
    mark.lines.append(top + 3.0 * np.stack([np.cos(arc), np.sin(arc)], axis=-1))
    mark.circle(foot, 5.0)
    ring = np.linspace(0.0, 2.0 * math.pi, 17)
    mark.fills.append(foot + 3.2 * np.stack([np.cos(ring), np.sin(ring)], axis=-1))
    full = 0.8 if load.change >= 0.0 else 0.35
    mark.line(foot, foot + np.array([0.0, -full * STEM]))
    units = drawn.part.display_units
    text = format_quantity(load.change, "temperature_change", units)
    sign = "+" if load.change > 0.0 else ""
    mark.say(f"{sign}{text}" + (", graded" if load.x or load.y else ""), at + np.array([40.0, 0.0]))
