"""Handbook formulas of stress concentration, with their sources and the range they are valid in.

Stresses in MPa, forces in N, moments in N·mm, lengths in mm.
"""

from __future__ import annotations

import math

HOLE_SOURCE = (
    "Heywood's fit to Howland 1930, as in Pilkey & Pilkey, Peterson's Stress Concentration "
    "Factors, chart 4.1, from memory"
)
HOLE_MOST = 0.5
"""Howland's own figures end at this d/W."""


def hole_in_strip(force: float, diameter: float, width: float, thickness: float) -> float:
    """Largest stress [MPa] at a round hole in the middle of a strip in tension.

    Ktn = 2 + 0.284 (1 - d/W) - 0.600 (1 - d/W)² + 1.32 (1 - d/W)³ on the net section.

    Example:
        >>> round(hole_in_strip(1000.0, 20.0, 100.0, 1.0) / 10.0, 2)  # Howland: 3.14
        3.15
    """
    left = 1.0 - diameter / width
    factor = 2.0 + 0.284 * left - 0.600 * left**2 + 1.32 * left**3
    return factor * force / ((width - diameter) * thickness)


OFF_CENTRE_SOURCE = (
    "Roark's Formulas for Stress and Strain, table of stress concentration, after Sjöström 1950, "
    "from memory"
)

OFF_CENTRE_MOST = 0.4
"""Of (hole's radius) / (distance c of its centre from the nearer edge).  The formula was checked
against this program: up to 3.5 % low at 0.4, 6 % at 0.5, 17 % at 0.7 (c = 0.3 W each)."""


def hole_off_centre(
    force: float, radius: float, near: float, width: float, thickness: float
) -> float:
    """Largest stress [MPa], towards the nearer edge, at a round hole that is off the middle of a
    strip in tension; `near` is the distance from the hole's centre to that edge.

    Kt = 3.00 - 3.13 r/c + 3.66 (r/c)² - 1.53 (r/c)³ on a stress that shares the force between the
    two sides of the hole.
    """
    x, share = radius / near, near / width
    root = math.sqrt(1.0 - x * x)
    nominal = root / (1.0 - x) * (1.0 - share) / (1.0 - share * (2.0 - root))
    factor = 3.00 - 3.13 * x + 3.66 * x**2 - 1.53 * x**3
    return factor * nominal * force / (width * thickness)


HOLE_BENDING_SOURCE = (
    "factor 2 of a small hole in a linear field (derived: on the rim (sin θ - sin 3θ) q r), on the "
    "net section, which is that of Howland & Stevenson 1933 by memory"
)


def hole_in_bending(moment: float, diameter: float, width: float, thickness: float) -> float:
    """Largest stress [MPa] at a round hole in the middle of a strip bent in its plane:
    twice the net section's 6 M d / ((W³ - d³) t).
    """
    return 2.0 * 6.0 * moment * diameter / ((width**3 - diameter**3) * thickness)


SHOULDER_SOURCE = (
    "fit of Pilkey & Pilkey, Peterson's Stress Concentration Factors, chart 3.1, from memory"
)
SHOULDER_BENDING_SOURCE = (
    "fit of Pilkey & Pilkey, Peterson's Stress Concentration Factors, chart 3.7, from memory"
)
SHOULDER_LEAST, SHOULDER_MOST = 0.1, 20.0
"""Range of (height of the shoulder) / (radius) of both fits."""

_TENSION = (
    (
        (1.006, 1.008, -0.044),
        (-0.115, -0.584, 0.315),
        (0.245, -1.006, -0.257),
        (-0.135, 0.582, -0.017),
    ),
    (
        (1.020, 1.009, -0.048),
        (-0.065, -0.165, -0.007),
        (-3.459, 1.266, -0.016),
        (3.505, -2.109, 0.069),
    ),
)
_BENDING = (
    (
        (1.006, 0.967, 0.013),
        (-0.270, -2.372, 0.708),
        (0.662, 1.157, -0.908),
        (-0.405, 0.249, 0.200),
    ),
    (
        (1.058, 1.002, -0.038),
        (-3.652, 1.639, -0.436),
        (6.170, -5.687, 1.175),
        (-2.558, 3.046, -0.701),
    ),
)
"""For h/r up to 2 and above: C1 to C4, each of 1, √(h/r) and h/r; in every set the C add up to 1
within 0.02 (0.02 of √(h/r) and h/r), for where nothing is left of the narrow bar nothing is
concentrated."""


def shoulder_in_tension(
    force: float, wide: float, narrow: float, radius: float, thickness: float
) -> float:
    """Largest stress [MPa] at the two equal fillets of a flat bar that steps from `wide` to
    `narrow` in tension: Kt = C1 + C2 (2h/D) + C3 (2h/D)² + C4 (2h/D)³ on the narrow section.
    """
    return _shoulder(_TENSION, wide, narrow, radius) * force / (narrow * thickness)


def shoulder_in_bending(
    moment: float, wide: float, narrow: float, radius: float, thickness: float
) -> float:
    """The same of a bar bent in its plane, on the narrow section's 6 M / (d² t)."""
    return _shoulder(_BENDING, wide, narrow, radius) * 6.0 * moment / (narrow**2 * thickness)


def _shoulder(
    fits: tuple[tuple[tuple[float, float, float], ...], ...],
    wide: float,
    narrow: float,
    radius: float,
) -> float:
    h = 0.5 * (wide - narrow)
    x, ratio = h / radius, 2.0 * h / wide
    rows = fits[0] if x <= 2.0 else fits[1]
    c = [a + b * math.sqrt(x) + e * x for a, b, e in rows]
    return c[0] + c[1] * ratio + c[2] * ratio**2 + c[3] * ratio**3


def shoulder_length(wide: float, narrow: float, radius: float) -> float:
    """Length [mm] that the wide part must have at least for the fit: chart 3.1, from memory."""
    return wide * (-1.89 * (radius / narrow - 0.15) + 5.5)


NOTCH_SOURCE = (
    "fit of Pilkey & Pilkey, Peterson's Stress Concentration Factors, opposite semicircular "
    "notches, from memory"
)

NOTCH_LEAST, NOTCH_MOST = 0.05, 0.7
"""Range of (both notches' depth) / (width): where this program stays within 1 % of the fit."""


def opposite_notches(force: float, radius: float, width: float, thickness: float) -> float:
    """Largest stress [MPa] at two opposite half-round notches in the edges of a strip in tension:
    Kt = 3.065 - 3.472 (2r/W) + 1.009 (2r/W)² + 0.405 (2r/W)³ on the net section.
    """
    x = 2.0 * radius / width
    factor = 3.065 - 3.472 * x + 1.009 * x**2 + 0.405 * x**3
    return factor * force / ((width - 2.0 * radius) * thickness)


LUG_SOURCE = (
    "fit of Pilkey, Formulas for Stress, Strain and Structural Matrices, to Frocht & Hill 1940 "
    "(tests with a close-fitting pin), from memory"
)
LUG_LEAST, LUG_MOST = 0.25, 0.5
"""Range of (hole) / (width); the fit is given for 0.15 to 0.75, but beyond these the largest stress
is under the pin, or a pin without friction gives a fifth less than the tests."""


def pin_in_lug(force: float, diameter: float, width: float, thickness: float) -> float:
    """Largest stress [MPa] at the hole of a bar that a close-fitting pin pulls, the bar ending at
    least its width beyond the hole's centre:
    Kt = 12.882 - 52.714 d/W + 89.762 (d/W)² - 51.667 (d/W)³ on the net section.
    """
    x = diameter / width
    factor = 12.882 - 52.714 * x + 89.762 * x**2 - 51.667 * x**3
    return factor * force / ((width - diameter) * thickness)


CURVED_SOURCE = "curved-beam theory of Winkler and Bach (derived)"
CURVED_LEAST, CURVED_MOST = 1.05, 2.5
"""Range of (outer) / (inner radius)."""


def curved_bar(
    force: float, moment: float, inner: float, outer: float, thickness: float
) -> tuple[float, float]:
    """Stress [MPa] along a curved bar at its inner and its outer edge, tension positive.

    Plane sections stay plane: σ = N/A + M (rn - y)/(A e y) at radius y, with rn = h / ln(ro/ri)
    and e = rc - rn; `moment` is about the middle of the section and stretches the inner edge.

    Example:
        >>> round(curved_bar(0.0, 1.0, 1.0, 2.0, 1.0)[0], 3)  # exact (Golovin): 7.755
        7.725
    """
    height = outer - inner
    area, neutral = height * thickness, height / math.log(outer / inner)
    off = 0.5 * (inner + outer) - neutral
    at_inner, at_outer = (
        force / area + moment * (neutral - y) / (area * off * y) for y in (inner, outer)
    )
    return at_inner, at_outer
