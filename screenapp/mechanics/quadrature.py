"""Gauss-Legendre rules on the line [-1, 1] and the square [-1, 1]²."""

from __future__ import annotations

from functools import cache

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]


@cache
def gauss_line(n: int) -> tuple[Floats, Floats]:
    """Points and weights, (n,) each; exact for polynomials of degree 2n - 1."""
    points, weights = np.polynomial.legendre.leggauss(n)
    return _locked(points), _locked(weights)


@cache
def gauss_square(n: int) -> tuple[Floats, Floats]:
    """Points (n², 2) in (ξ, η), ξ running fastest, and weights (n²,)."""
    x, w = gauss_line(n)
    eta, xi = np.meshgrid(x, x, indexing="ij")
    points = np.stack([xi.ravel(), eta.ravel()], axis=1)
    return _locked(points), _locked(np.outer(w, w).ravel())


def _locked(array: Floats) -> Floats:
    """The rules are shared by every caller, so nobody may write into them."""
    array = np.ascontiguousarray(array, dtype=float)
    array.flags.writeable = False
    return array
