"""Closed forms that several checks hold against."""

from __future__ import annotations

import math


def curved_bar_deflection(inner: float, outer: float, thickness: float, e: float) -> float:
    """Deflection along a unit radial force at the end of a quarter ring clamped at the other.

    Source: Timoshenko & Goodier, Theory of Elasticity, art. 33 (from memory).
    """
    a2, b2 = inner**2, outer**2
    n = a2 - b2 + (a2 + b2) * math.log(outer / inner)
    return math.pi * (a2 + b2) / (e * thickness * n)
