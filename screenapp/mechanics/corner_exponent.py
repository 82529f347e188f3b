"""How fast stress grows towards a sharp corner: the exponents of Williams (1952).

Near the tip of a wedge of angle ω the stresses go as r^(λ - 1).  λ is the root with the smallest
real part in (0, 1) of a characteristic equation that depends on how the two faces are held; no
root there means no singularity.  The growth rate α = 1 - λ is what a log-log plot of the peak
against the mesh size shows.

With the complex potentials φ = C z^λ, ψ = D z^λ (Muskhelishvili; from memory) the wedge has four
real amplitudes, and each face gives two homogeneous equations; λ is where their determinant
vanishes.  For free and fixed faces that is what M. L. Williams gave ("Stress singularities
resulting from various boundary conditions in angular corners of plates in extension", J. Appl.
Mech. 19 (1952) 526-528, from memory); the determinant also knows faces that are held along one
direction and slide across it.
"""

from __future__ import annotations

import functools
import math
from typing import Literal

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import brentq

from screenapp.model.part import WallState

Complex = NDArray[np.complex128]

Face = Literal["free", "fixed"] | float
"""How a face is held: a number is the one direction that is held, as an angle [rad] from the face's
own direction away from the corner, turning as the wedge opens from its first face (π/2: the face
slides along itself)."""

SLIDING = 0.5 * math.pi
"""A face that is held along its normal."""

_LEAST, _MOST = 0.005, 0.985
"""Roots are looked for between these.  Below lie corners of sliding faces that are straight within
half a degree, above growth that no seven passes could show."""


def growth_rate(angle: float, faces: tuple[Face, Face], poisson: float, state: WallState) -> float:
    """Growth rate α = 1 - λ of the stress at a corner of interior `angle` [rad]; 0 for none.

    Args:
        angle: in (0, 2π].
        faces: the face at angle 0 and the one at `angle`.
        poisson: ν of the wall.
        state: whether κ is that of plane stress or plane strain.

    Example:
        >>> round(growth_rate(1.5 * math.pi, ("free", "free"), 0.3, "plane stress"), 4)
        0.4555
    """
    if faces == ("free", "free"):
        return 1.0 - _free(angle)
    kappa = (3.0 - poisson) / (1.0 + poisson) if state == "plane stress" else 3.0 - 4.0 * poisson
    return 1.0 - _smallest_root(round(angle, 9), faces, kappa)


def _free(angle: float) -> float:
    """Free faces: the symmetric mode governs, sin λω + λ sin ω = 0, and its root is real."""
    if angle <= math.pi + 1e-9:
        return 1.0
    if angle > 2.0 * math.pi - 1e-9:
        return 0.5
    return float(
        brentq(
            lambda x: math.sin(x * angle) + x * math.sin(angle), 0.5, math.pi / angle, xtol=1e-12
        )
    )


@functools.lru_cache(maxsize=4096)
def _smallest_root(angle: float, faces: tuple[Face, Face], kappa: float) -> float:
    """The smallest real part of a root in the strip; 1 if there is none.

    Roots may be complex (the stress then also oscillates), so Newton starts from a grid of
    complex numbers, all at once.
    """
    real, imaginary = np.meshgrid(np.linspace(0.02, 0.98, 17), [0.0, 0.1, 0.3, 0.6])
    x = (real + 1j * imaginary).ravel()
    step = 1e-5
    for _ in range(20):
        here, ahead, behind = (_determinant(x + d, angle, faces, kappa) for d in (0, step, -step))
        slope = (ahead - behind) / (2.0 * step)
        move = np.divide(here, slope, out=np.zeros_like(here), where=np.abs(slope) > 1e-300)
        size = np.abs(move)
        x = x - move * np.minimum(1.0, 0.1 / np.maximum(size, 1e-300))
        x = np.where(np.abs(x - 0.5) < 3.0, x, 0.5 + 0.5j)
    inside = (x.real > _LEAST) & (x.real < _MOST) & (np.abs(x.imag) < 3.0) & (size < 1e-6)
    return float(x.real[inside].min(initial=1.0))


def _determinant(x: Complex, angle: float, faces: tuple[Face, Face], kappa: float) -> Complex:
    """The characteristic function at each of some λ, (n,); two rigid translations are divided out,
    so that λ = 0 is no root."""
    first = _conditions(x, 0.0, faces[0], kappa)
    last = _conditions(x, angle, faces[1], kappa)
    return np.asarray(np.linalg.det(np.concatenate([first, last], axis=1)) / x**2)


def _conditions(x: Complex, theta: float, face: Face, kappa: float) -> Complex:
    """Two rows over the amplitudes Re C, Im C, Re D, Im D, (n, 2, 4); factors r and λ left out."""
    minus, plus = (x - 1.0) * theta, (x + 1.0) * theta
    c1, s1, c2, s2 = np.cos(minus), np.sin(minus), np.cos(plus), np.sin(plus)
    u_r = np.stack([(kappa - x) * c1, -(kappa - x) * s1, -c2, s2], axis=-1)
    u_t = np.stack([(kappa + x) * s1, (kappa + x) * c1, s2, c2], axis=-1)
    sigma = np.stack([(x + 1.0) * c1, -(x + 1.0) * s1, c2, -s2], axis=-1)
    tau = np.stack([(x - 1.0) * s1, (x - 1.0) * c1, s2, c2], axis=-1)
    if face == "free":
        rows = (sigma, tau)
    elif face == "fixed":
        rows = (u_r, u_t)
    else:
        c, s = math.cos(face), math.sin(face)
        rows = (c * u_r + s * u_t, c * sigma - s * tau)
    return np.stack(rows, axis=1)
