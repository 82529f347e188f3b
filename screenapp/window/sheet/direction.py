"""Directions in words: "down", "right", or an angle counter-clockwise from +x."""

from __future__ import annotations

import math

from screenapp.model.errors import ScreenappError

WORDS = {"right": 0.0, "up": 90.0, "left": 180.0, "down": 270.0}
"""Angles [deg] of the plain directions."""


def direction_of(x: float, y: float) -> float:
    """The direction of a vector [deg], one of the plain ones where it is as good as that; down for
    none."""
    text = direction_text(x, y)
    return WORDS[text] if text in WORDS else math.degrees(math.atan2(y, x)) % 360.0


def direction_text(x: float, y: float) -> str:
    """The direction of a vector in words; "down" for none.

    Example:
        >>> direction_text(0.0, -5.0), direction_text(1.0, 1.0)
        ('down', '45°')
    """
    if x == 0.0 and y == 0.0:
        return "down"
    angle = math.degrees(math.atan2(y, x)) % 360.0
    for word, at in WORDS.items():
        if abs((angle - at + 180.0) % 360.0 - 180.0) < 1e-9:
            return word
    return f"{angle:.4g}°"


def read_direction(text: str) -> float:
    """The angle [deg] of a word or a number.

    Raises:
        ScreenappError: it is neither.
    """
    bare = text.strip().lower()
    if bare in WORDS:
        return WORDS[bare]
    for ending in ("°", "deg", "degrees"):
        bare = bare.removesuffix(ending).strip()
    try:
        angle = float(bare.replace("−", "-"))
    except ValueError:
        angle = math.nan
    if not math.isfinite(angle):
        raise ScreenappError(
            f"“{text}” is not a direction",
            "type right, up, left or down, or an angle from +x such as 225°",
        )
    return angle


def components(size: float, angle: float) -> tuple[float, float]:
    """x and y of a vector; exact zeros along the axes."""
    quarter = angle % 360.0 / 90.0
    if quarter == int(quarter):
        ways = ((1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0))
        c, s = ways[int(quarter) % 4]
    else:
        c, s = math.cos(math.radians(angle)), math.sin(math.radians(angle))
    return size * c + 0.0, size * s + 0.0
