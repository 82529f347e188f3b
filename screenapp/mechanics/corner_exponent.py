"""How fast stress grows towards a sharp corner: the exponents of Williams (1952).

Near the tip of a wedge of angle ω the stresses go as r^(λ - 1).  λ is the smallest root in (0, 1]
of a characteristic equation that depends on what the two faces are; λ = 1 means no singularity.
The growth rate α = 1 - λ is what a log-log plot of the peak against the mesh size shows.

Sources: M. L. Williams, "Stress singularities resulting from various boundary conditions in
angular corners of plates in extension", J. Appl. Mech. 19 (1952) 526-528 (free-free, clamped-free,
clamped-clamped, from memory); a face that slides without friction is a line of symmetry, so a
wedge with one such face is half of a wedge of twice the angle (derived).
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Callable
from typing import Literal

from screenapp.model.part import WallState

Face = Literal["free", "fixed", "sliding", "other"]


def growth_rate(angle: float, faces: tuple[Face, Face], poisson: float, state: WallState) -> float:
    """Growth rate α = 1 - λ of the stress at a corner of interior `angle` [rad].

    `faces` says how the boundary is held on both sides; "other" (held along one direction that is
    not the normal) is taken like "fixed", which is never the milder of the two.

    Example:
        >>> round(growth_rate(1.5 * math.pi, ("free", "free"), 0.3, "plane stress"), 4)
        0.4555
    """
    kinds = sorted("fixed" if face == "other" else face for face in faces)
    kappa = (3.0 - poisson) / (1.0 + poisson) if state == "plane stress" else 3.0 - 4.0 * poisson
    if kinds == ["free", "free"]:
        exponent = _free(angle)
    elif kinds == ["free", "sliding"]:
        exponent = _free(2.0 * angle)
    elif kinds == ["fixed", "free"]:
        exponent = _smallest_root(
            lambda x: (
                cmath.sin(x * angle) ** 2
                - ((kappa + 1.0) ** 2 - (2.0 * x * math.sin(angle)) ** 2) / (4.0 * kappa)
            )
        )
    elif kinds == ["fixed", "fixed"]:
        exponent = _clamped(angle, kappa)
    elif kinds == ["fixed", "sliding"]:
        exponent = _clamped(2.0 * angle, kappa)
    else:  # sliding on both faces: λ = π/ω - 1 (mirror images close the full circle)
        exponent = math.pi / angle - 1.0 if math.pi / 2.0 < angle < math.pi - 1e-9 else 1.0
        if angle > math.pi + 1e-9:
            exponent = abs(math.pi / angle - 1.0)
    return max(0.0, 1.0 - exponent)


def _free(angle: float) -> float:
    """Free faces, the symmetric (governing) mode: sin λω + λ sin ω = 0."""
    if angle <= math.pi + 1e-9:
        return 1.0
    return _smallest_root(lambda x: cmath.sin(x * angle) + x * math.sin(angle))


def _clamped(angle: float, kappa: float) -> float:
    """Clamped faces: κ² sin² λω = λ² sin² ω."""
    if angle <= math.pi + 1e-9:
        return 1.0
    return _smallest_root(
        lambda x: (kappa * cmath.sin(x * angle)) ** 2 - (x * math.sin(angle)) ** 2
    )


def _smallest_root(f: Callable[[complex], complex]) -> float:
    """Smallest real part in (0, 1) of a root of f; 1 if there is none.

    Roots may be complex (the stress then also oscillates), so Newton starts from a grid of
    complex numbers.
    """
    best = 1.0
    for real in range(1, 20):
        for imaginary in (0.0, 0.1, 0.3, 0.6):
            root = _newton(f, complex(0.05 * real, imaginary))
            if root is not None and 0.02 < root.real < best:
                best = root.real
    return best


def _newton(f: Callable[[complex], complex], x: complex) -> complex | None:
    step = 1e-6
    for _ in range(40):
        value = f(x)
        if abs(value) < 1e-13:
            return x
        slope = (f(x + step) - f(x - step)) / (2.0 * step)
        if slope == 0.0:
            return None
        x -= value / slope
        if abs(x) > 5.0:
            return None
    return x if abs(f(x)) < 1e-9 else None
