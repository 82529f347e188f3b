"""The two complex numbers on which plane fields in an orthotropic sheet depend.

With Airy's function F(x + μ y) compatibility asks for

    S11 μ⁴ - 2 S16 μ³ + (2 S12 + S66) μ² - 2 S26 μ + S22 = 0,

whose roots are two pairs of conjugates (S. G. Lekhnitskii, Anisotropic Plates, from memory); for
isotropic material i twice.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.elasticity import strains_to_axes

Floats = NDArray[np.float64]


def characteristic_roots(hooke: Floats, heading: float = 0.0) -> tuple[complex, complex]:
    """μ1 and μ2, their imaginary parts positive, in axes whose x points along `heading` [deg].

    Args:
        hooke: turns εx, εy, γxy into stresses [MPa], (3, 3).
    """
    turned = strains_to_axes(heading)
    s = turned @ np.linalg.inv(hooke) @ turned.T
    found = np.roots([s[0, 0], -2.0 * s[0, 2], 2.0 * s[0, 1] + s[2, 2], -2.0 * s[1, 2], s[1, 1]])
    one, two = sorted((complex(r) for r in found if r.imag > 0.0), key=lambda r: r.imag)
    return one, two


def tangential_growth(hooke: Floats, heading: float) -> float:
    """How much faster the stress along a straight edge grows where a shear load on it stops than in
    an isotropic sheet.

    On the edge σt = i (μ1 + μ2) F + its conjugate, F that of the shear alone, so the logarithm
    comes with Im(μ1 + μ2), which is 2 for isotropic material (derived).

    Args:
        heading: direction of the edge [deg].
    """
    one, two = characteristic_roots(hooke, heading)
    return 0.5 * (one + two).imag
