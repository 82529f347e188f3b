"""Which case governs: at a place of a painting of all cases, and among the readings of a probe."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import TypeVar

import numpy as np

from screenapp.mechanics.locate import PointLocator
from screenapp.model.combinations import loadings
from screenapp.model.findings import CutFindings, Estimate, Reading
from screenapp.model.mesh import Mesh
from screenapp.model.part import Part, Point
from screenapp.window.document import View
from screenapp.window.painted import Floats, Ints, Painting
from screenapp.window.read_values import read_value

Read = TypeVar("Read", Reading, CutFindings)

ENVELOPED = ("Utilisation", "Stress", "Displacement")
"""Lenses that can show all cases at once."""

_LARGEST = ("von_mises", "tresca", "sigma_1", "u", "use")
_LEAST = ("sigma_2",)


def envelope(values: Floats, component: str) -> tuple[Floats, Ints]:
    """The governing value at each place and the index of its case.

    Measures that only grow worse upwards take the largest, σ₂ the smallest, components with a sign
    the one that is largest in size, with its sign.  Of equals the first case governs.

    Args:
        values: (n_cases, ...).
    """
    if component in _LARGEST:
        cases = values.argmax(axis=0)
    elif component in _LEAST:
        cases = values.argmin(axis=0)
    else:
        cases = np.abs(values).argmax(axis=0)
    return np.take_along_axis(values, cases[None], axis=0)[0], cases


def governs(values: Sequence[float], component: str) -> int:
    """The index of the case that governs a single place, by the same rule."""
    return int(envelope(np.array(values, dtype=float), component)[1])


def component_of(view: View) -> str:
    """The component that the lens shows, as readings name it; the stress of most limits where it
    shows how much of them is used."""
    return {"Stress": view.stress, "Displacement": view.displacement}.get(view.lens, "von_mises")


def shows_all_cases(view: View, part: Part) -> bool:
    """Whether the lens shows the worst of several cases."""
    return view.envelope and view.lens in ENVELOPED and len(loadings(part)) > 1


def governing_reading(readings: Sequence[Reading], component: str) -> Reading | None:
    """The reading of the case that governs at a probe; what rises without end governs first."""
    known = [(r, v) for r in readings if (v := read_value(r, component)) is not None]
    return _first(known, component)


def governing_cut(cuts: Sequence[CutFindings]) -> CutFindings | None:
    """The cut in the case with the largest von Mises stress on it."""
    return _first([(cut, cut.largest) for cut in cuts], "von_mises")


def _first(known: list[tuple[Read, Estimate]], component: str) -> Read | None:
    known = [row for row in known if row[1].trust == "rising"] or known
    if not known:
        return None
    return known[governs([estimate.value for _, estimate in known], component)][0]


class Governing:
    """Tells the case that governs at places of one painting."""

    def __init__(self, mesh: Mesh, painting: Painting) -> None:
        self._mesh, self.painting = mesh, painting
        self._locator: PointLocator | None = None

    def at(self, place: Point) -> int | None:
        """Index of the case that governs at the nearest node [mm]; None off the part."""
        of = self.painting.governing
        if of is None or not math.isfinite(place[0] + place[1]):
            return None
        if self._locator is None:  # made once somebody points
            self._locator = PointLocator(self._mesh)
        element = int(self._locator.locate([place])[0][0])
        if element < 0:
            return None
        nodes = self._mesh.quads[element]
        near = int(np.hypot(*(self.painting.points[nodes] - place).T).argmin())
        return int(of[nodes[near]] if of.ndim == 1 else of[element, near])
