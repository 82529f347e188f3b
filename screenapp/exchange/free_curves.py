"""Ellipses and splines as they stand in drawings, to be fitted by arcs afterwards."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.interpolate import BSpline

from screenapp.model.part import Point

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class EllipseArc:
    """The points `centre + major cos t + minor sin t`, t from `begin` to `end` [rad].

    `major` and `minor` are conjugate half-diameters (x, y); `end` > `begin`.
    """

    centre: Point
    major: Point
    minor: Point
    begin: float
    end: float

    @property
    def breaks(self) -> tuple[float, ...]:
        """Parameters between which the curve turns by a quarter at most."""
        n = max(1, math.ceil((self.end - self.begin) / (0.5 * math.pi) - 1e-9))
        return tuple(np.linspace(self.begin, self.end, n + 1).tolist())

    def point(self, t: ArrayLike) -> Floats:
        """Points at `t`, shape `t.shape + (2,)`."""
        t = np.asarray(t, dtype=float)[..., None]
        return np.asarray(
            np.asarray(self.centre)
            + np.cos(t) * np.asarray(self.major)
            + np.sin(t) * np.asarray(self.minor)
        )

    def derivative(self, t: ArrayLike) -> Floats:
        """First derivatives at `t`, shape `t.shape + (2,)`."""
        t = np.asarray(t, dtype=float)[..., None]
        return np.asarray(np.cos(t) * np.asarray(self.minor) - np.sin(t) * np.asarray(self.major))

    def scaled(self, factor: float) -> EllipseArc:
        """The same in another unit of length."""
        centre, major, minor = (
            (p[0] * factor, p[1] * factor) for p in (self.centre, self.major, self.minor)
        )
        return EllipseArc(centre, major, minor, self.begin, self.end)


@dataclass(frozen=True)
class Spline:
    """A rational B-spline.

    Attributes:
        degree: p.
        knots: n + p + 1 values that never fall.
        control: n points.
        weights: n positive numbers.
    """

    degree: int
    knots: tuple[float, ...]
    control: tuple[Point, ...]
    weights: tuple[float, ...]

    @cached_property
    def breaks(self) -> tuple[float, ...]:
        """The knots within the domain, each once: between them the curve is smooth."""
        p = self.degree
        inner = np.unique(np.asarray(self.knots[p : len(self.knots) - p]))
        wide = float(inner[-1] - inner[0]) if len(inner) else 0.0
        kept = [float(inner[0])] if len(inner) else []
        for value in inner[1:].tolist():
            if value - kept[-1] > 1e-12 * wide:
                kept.append(value)
        return tuple(kept)

    @cached_property
    def _homogeneous(self) -> tuple[BSpline, BSpline]:
        w = np.asarray(self.weights)[:, None]
        points = np.hstack([np.asarray(self.control) * w, w])
        curve = BSpline(np.asarray(self.knots), points, self.degree)
        return curve, curve.derivative()

    def point(self, t: ArrayLike) -> Floats:
        """Points at `t`, shape `t.shape + (2,)`."""
        whole = self._homogeneous[0](np.asarray(t, dtype=float))
        return np.asarray(whole[..., :2] / whole[..., 2:])

    def derivative(self, t: ArrayLike) -> Floats:
        """First derivatives at `t` (quotient rule), shape `t.shape + (2,)`."""
        t = np.asarray(t, dtype=float)
        whole, change = self._homogeneous[0](t), self._homogeneous[1](t)
        w = whole[..., 2:]
        at = whole[..., :2] / w
        return np.asarray((change[..., :2] - at * change[..., 2:]) / w)

    def scaled(self, factor: float) -> Spline:
        """The same in another unit of length."""
        control = tuple((x * factor, y * factor) for x, y in self.control)
        return Spline(self.degree, self.knots, control, self.weights)
