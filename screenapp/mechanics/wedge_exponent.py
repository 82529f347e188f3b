"""How fast stress grows towards a point where stretches of different wall meet.

About such a point the part is a fan of wedges, each with its own thickness and material.  In each
the Airy function is r^(λ + 1) F(θ), with the displacements of Williams (1952); neighbours share
displacements and forces per length (stress times thickness), the outer faces are free, fixed or
sliding, or the fan closes round the point.  λ is the root of smallest real part in (0, 1) of the
determinant of these conditions; α = 1 - λ is the growth rate.

Sources: M. L. Williams, J. Appl. Mech. 19 (1952) 526-528; for two materials D. B. Bogy, J. Appl.
Mech. 35 (1968) 460-466 and 38 (1971) 377-386 (both from memory).
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.corner_exponent import Face

Complexes = NDArray[np.complex128]

_REAL = np.arange(0.04, 1.0, 0.04)
_IMAGINARY = np.array([0.0, 0.1, 0.3, 0.6])
_STEPS = 40
"""Starts of the search for λ, and the most steps from each."""


@dataclass(frozen=True)
class Wedge:
    """A stretch of wall round the point: its angle [rad], E [MPa], ν and thickness [mm]."""

    angle: float
    modulus: float
    poisson: float
    thickness: float


def fan_growth_rate(wedges: Sequence[Wedge], faces: tuple[Face, Face] | None) -> float:
    """Growth rate α = 1 - λ of the stress where wedges meet, in plane stress; 0 if it stays finite.

    Args:
        wedges: counter-clockwise.
        faces: how the first and the last outer face are held, as in `corner_exponent`; None where
            the fan closes round the point.

    Example:
        >>> half = Wedge(0.75 * math.pi, 210e3, 0.3, 2.0)
        >>> round(fan_growth_rate([half, half], ("free", "free")), 4)
        0.4555
    """
    return _rate(tuple(wedges), faces)


@lru_cache(maxsize=512)
def _rate(wedges: tuple[Wedge, ...], faces: tuple[Face, Face] | None) -> float:
    real, imaginary = np.meshgrid(_REAL, _IMAGINARY)
    roots = _roots(wedges, faces, (real + 1j * imaginary).ravel())
    singular = roots.real[(roots.real > 0.01) & (roots.real < 0.999)]
    return 1.0 - float(singular.min()) if len(singular) else 0.0


def _roots(wedges: tuple[Wedge, ...], faces: tuple[Face, Face] | None, x: Complexes) -> Complexes:
    """Roots of the determinant that Newton's method finds from starts x (n,), applied to f / f':
    where symmetric fans make the determinant only touch zero, it still converges at once."""
    h = 1e-4
    found: list[Complexes] = []
    for _ in range(_STEPS):
        around = np.concatenate([x - h, x, x + h])
        below, here, above = _determinant(wedges, faces, around).reshape(3, -1)
        slope, bend = (above - below) / (2.0 * h), (above - 2.0 * here + below) / h**2
        bottom = slope**2 - here * bend
        sound = bottom != 0.0
        x, step = x[sound], here[sound] * slope[sound] / bottom[sound]
        x = x - step
        near = (np.abs(x.imag) < 1.5) & (x.real > -0.2) & (x.real < 1.2)
        done = near & (np.abs(step) < 1e-9)
        found.append(x[done])
        x = x[near & ~done]
        if not len(x):
            break
    return np.concatenate(found)


def _determinant(
    wedges: tuple[Wedge, ...], faces: tuple[Face, Face] | None, exponents: Complexes
) -> Complexes:
    """The determinant of all conditions at each λ, (n,)."""
    n = len(wedges)
    stiff = max(w.modulus * w.thickness for w in wedges)
    rows = np.zeros((len(exponents), 4 * n, 4 * n), dtype=complex)
    start = [_state(w, exponents, 0.0, stiff) for w in wedges]
    end = [_state(w, exponents, w.angle, stiff) for w in wedges]
    for k in range(n - 1):
        rows[:, 4 * k : 4 * k + 4, 4 * k : 4 * k + 4] = end[k]
        rows[:, 4 * k : 4 * k + 4, 4 * k + 4 : 4 * k + 8] = -start[k + 1]
    last = 4 * (n - 1)
    if faces is None:
        rows[:, last:, last:] += end[-1]
        rows[:, last:, :4] -= start[0]
    else:
        rows[:, last : last + 2, :4] = _face_rows(start[0], faces[0])
        rows[:, last + 2 :, last:] = _face_rows(end[-1], faces[1])
    return np.asarray(np.linalg.det(rows))


def _face_rows(state: Complexes, face: Face) -> Complexes:
    """What vanishes on a face, as two rows (n, 2, 4) of the state (n, 4, 4) there."""
    if face == "free":
        return state[:, :2]
    if face == "fixed":
        return state[:, 2:]
    along, across = math.cos(face), math.sin(face)  # the held direction in (r, θ)
    held = along * state[:, 2] + across * state[:, 3]
    sliding = along * state[:, 0] - across * state[:, 1]
    return np.stack([held, sliding], axis=1)


def _state(wedge: Wedge, exponents: Complexes, angle: float, stiff: float) -> Complexes:
    """Force per length across the ray at `angle` (normal, shear) and displacements (radial,
    circumferential) for each of the four constants of F, (n, 4, 4); the latter times `stiff`
    [N/mm], the largest E t, so that all are of one size.

    F = A cos (λ + 1)θ + B sin (λ + 1)θ + C cos (λ - 1)θ + D sin (λ - 1)θ,
    σθ = λ (λ + 1) F, τ = -λ F', 2μ ur = -(λ + 1) F + G' / (1 + ν),
    2μ uθ = -F' + (λ - 1) G / (1 + ν) with G' = 4 (C cos (λ - 1)θ + D sin (λ - 1)θ).
    """
    lam = exponents
    p, m = lam + 1.0, lam - 1.0
    cp, sp, cm, sm = np.cos(p * angle), np.sin(p * angle), np.cos(m * angle), np.sin(m * angle)
    f = np.stack([cp, sp, cm, sm], axis=1)
    slope = np.stack([-p * sp, p * cp, -m * sm, m * cm], axis=1)
    zero = np.zeros_like(lam)
    g_slope = np.stack([zero, zero, 4.0 * cm, 4.0 * sm], axis=1)
    g = np.stack([zero, zero, 4.0 * sm, -4.0 * cm], axis=1)  # (λ - 1) G
    yielding = stiff * (1.0 + wedge.poisson) / wedge.modulus  # 1 / 2μ
    lam, p = lam[:, None], p[:, None]
    t = wedge.thickness
    return np.stack(
        [
            t * lam * p * f,
            -t * lam * slope,
            yielding * (-p * f + g_slope / (1.0 + wedge.poisson)),
            yielding * (-slope + g / (1.0 + wedge.poisson)),
        ],
        axis=1,
    )
