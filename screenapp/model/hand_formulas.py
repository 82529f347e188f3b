"""Handbook formulas of stress concentration, with their sources and the range they are valid in.

Stresses in MPa, forces in N, lengths in mm.
"""

from __future__ import annotations

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


SHOULDER_SOURCE = (
    "fit of Pilkey & Pilkey, Peterson's Stress Concentration Factors, chart 3.1, from memory"
)
SHOULDER_LEAST, SHOULDER_MOST = 0.1, 20.0
"""Range of (height of the shoulder) / (radius) of the fit."""


def shoulder_in_tension(
    force: float, wide: float, narrow: float, radius: float, thickness: float
) -> float:
    """Largest stress [MPa] at the two equal fillets of a flat bar that steps from `wide` to
    `narrow` in tension: Kt = C1 + C2 (2h/D) + C3 (2h/D)² + C4 (2h/D)³ on the narrow section.
    """
    h = 0.5 * (wide - narrow)
    x, root, ratio = h / radius, (h / radius) ** 0.5, 2.0 * h / wide
    if x <= 2.0:
        c = (
            1.006 + 1.008 * root - 0.044 * x,
            -0.115 - 0.584 * root + 0.315 * x,
            0.245 - 1.006 * root - 0.257 * x,
            -0.135 + 0.582 * root - 0.017 * x,
        )
    else:
        c = (
            1.020 + 1.009 * root - 0.048 * x,
            -0.065 - 0.165 * root - 0.007 * x,
            -3.459 + 1.266 * root - 0.016 * x,
            3.505 - 2.109 * root + 0.069 * x,
        )
    factor = c[0] + c[1] * ratio + c[2] * ratio**2 + c[3] * ratio**3
    return float(factor * force / (narrow * thickness))


def shoulder_length(wide: float, narrow: float, radius: float) -> float:
    """Length [mm] that the wide part must have at least for the fit: chart 3.1, from memory."""
    return wide * (-1.89 * (radius / narrow - 0.15) + 5.5)
