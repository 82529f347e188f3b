"""One pass of the adaptive screening, ready to be read: fields, doubts, peaks, any point.

A `Pass` is made from `Fields` alone, so the passes of an earlier screening (from the cache) can be
read again for a new probe without solving.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics import shape_functions
from screenapp.mechanics.elasticity import wall_material
from screenapp.mechanics.element_walls import element_hooke
from screenapp.mechanics.energy_error import pointwise_jump
from screenapp.mechanics.point_reading import PointReader
from screenapp.mechanics.recovery import extrapolated_stress
from screenapp.model.findings import Fields
from screenapp.model.part import Part
from screenapp.model.shape import Shape
from screenapp.screening import peaks

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class PointValues:
    """What a pass says at some points.

    Attributes:
        stress: (n_cases, n_points, 3) [MPa], NaN outside the part.
        displacement: (n_cases, n_points, 2) [mm].
        doubt: gap between the recovered von Mises stress and the elements' own,
            (n_cases, n_points) [MPa].
        size: size of the element there [mm], (n_points,).
    """

    stress: Floats
    displacement: Floats
    doubt: Floats
    size: Floats


class Pass:
    """The fields of one mesh with what is read from them, each worked out once."""

    def __init__(self, part: Part, shape: Shape, fields: Fields) -> None:
        self.part = part
        self.shape = shape
        self.fields = fields
        self._peaks: dict[tuple[str, int], list[peaks.RawPeak]] = {}

    @cached_property
    def reader(self) -> PointReader:
        """Reads stress and displacement at any point."""
        f = self.fields
        return PointReader(self.part, self.shape, f.mesh, f.solution, f.stress)

    @cached_property
    def doubt(self) -> Floats:
        """Gap between recovered and own von Mises stress, (n_cases, n_fields) as
        `StressField.nodal`."""
        f, material = self.fields, wall_material(self.part)
        own = extrapolated_stress(f.mesh, f.solution, element_hooke(self.part, f.mesh))
        poisson = material.poissons_ratio if self.part.wall.state == "plane strain" else 0.0
        return pointwise_jump(f.mesh, own, f.stress.nodal, f.stress.side, poisson)

    @cached_property
    def sizes(self) -> Floats:
        """Element sizes [mm], (n_elements,)."""
        return self.fields.mesh.element_sizes

    def peaks(self, measure: str, case: int) -> list[peaks.RawPeak]:
        """Separate maxima of a measure in a case, largest first."""
        key = (measure, case)
        if key not in self._peaks:
            self._peaks[key] = peaks.find(measure, self.part, self.shape, self.fields, case)
        return self._peaks[key]

    def measure_max(self, measure: str, case: int) -> float:
        """Largest value of a measure in a case, over nodes and boundary sides [MPa]."""
        f = self.fields
        return max(
            float(peaks.measure(measure, f.stress.nodal[case], self.part).max(initial=0.0)),
            float(peaks.measure(measure, f.stress.side[case], self.part).max(initial=0.0)),
        )

    def read(self, points: Floats) -> PointValues:
        """Everything at `points` (n, 2) [mm]."""
        mesh = self.fields.mesh
        stress, displacement = self.reader.read(points)
        element, xi = self.reader.locator.locate(points)
        weights = shape_functions.values(4, xi)
        corners = mesh.field_quads[element, :4]
        doubt = (self.doubt[:, corners] * weights).sum(axis=-1)
        return PointValues(stress, displacement, doubt, self.sizes[element])


def passes_of(part: Part, shape: Shape, fields: Sequence[Fields]) -> list[Pass]:
    """The passes of a finished screening."""
    return [Pass(part, shape, f) for f in fields]
