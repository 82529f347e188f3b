"""Stresses in the axes of an orthotropic sheet, and how near they are to its strength.

Two rules of strength in plane stress (R. M. Jones, Mechanics of Composite Materials, ch. 2, from
memory):

* Tsai–Hill: (σ1/X)² - σ1 σ2/X² + (σ2/Y)² + (τ12/S)² reaches 1, with X and Y those of tension or
  compression by the sign of σ1 and σ2, and the larger of the two under σ1 σ2 (Jones has X there,
  his 1-axis being the strong one: across the wall a sheet is as weak as along its weak axis).  Its
  root rises with the load, so the root counts;
* largest stress: the largest of |σ1|/X, |σ2|/Y and |τ12|/S reaches 1; it says which way it breaks,
  but takes no account of one stress helping another.

Both are given as the tension along the 1-axis that would use as much of the strength: the share
times Xt [MPa].  An isotropic sheet has X = Y = √3 S, for which Tsai–Hill is the von Mises stress;
in isotropic zones beside an orthotropic one both rules stand for that.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from screenapp.model.material_records import AXIS_STRENGTHS, Material

Floats = NDArray[np.float64]

RULES = ("tsai_hill", "largest_stress")
"""Stress measures in a material's own axes."""


def turn(axis: float) -> tuple[float, float]:
    """Cosine and sine of an angle [deg], exact at whole quarters of a turn."""
    if axis % 90.0 == 0.0:
        return ((1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0))[int(axis // 90.0) % 4]
    return math.cos(math.radians(axis)), math.sin(math.radians(axis))


def in_axes(stress: Floats, axis: float) -> Floats:
    """σ1, σ2, τ12 [MPa] of stresses σx, σy, τxy (..., 3); `axis` [deg] is that of the 1-axis."""
    c, s = turn(axis)
    x, y, xy = stress[..., 0], stress[..., 1], stress[..., 2]
    return np.stack(
        [
            x * c * c + y * s * s + 2.0 * xy * c * s,
            x * s * s + y * c * c - 2.0 * xy * c * s,
            (y - x) * c * s + xy * (c * c - s * s),
        ],
        axis=-1,
    )


def strength_share(rule: str, stress: Floats, material: Material, axis: float) -> Floats:
    """Share of its strength that an orthotropic sheet uses, by one of `RULES`; proportional to the
    load.  Infinite where a strength is not known.

    Args:
        stress: σx, σy, τxy (..., 3) [MPa].
        axis: direction of the 1-axis from +x [deg].
    """
    given = [getattr(material, name) for name in AXIS_STRENGTHS]
    if any(value is None or not value > 0.0 for value in given):
        return np.full(stress.shape[:-1], np.inf)
    xt, xc, yt, yc, s = (float(value) for value in given)
    own = in_axes(stress, axis)
    along, across, shear = own[..., 0], own[..., 1], own[..., 2] / s
    x, y = np.where(along >= 0.0, xt, xc), np.where(across >= 0.0, yt, yc)
    if rule == "largest_stress":
        return np.asarray(
            np.maximum(np.maximum(np.abs(along) / x, np.abs(across) / y), np.abs(shear))
        )
    squares = (
        (along / x) ** 2 - along * across / np.maximum(x, y) ** 2 + (across / y) ** 2 + shear**2
    )
    return np.asarray(np.sqrt(np.maximum(squares, 0.0)))
