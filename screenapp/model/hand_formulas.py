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
