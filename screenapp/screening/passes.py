"""One pass of the adaptive screening, ready to be read: fields, doubts, peaks, any point.

A `Pass` is made from `Fields` alone, so the passes of an earlier screening (from the cache) can be
read again for a new probe without solving.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics import shape_functions
from screenapp.mechanics.bed_ends import with_bed_ends
from screenapp.mechanics.element_walls import element_hooke
from screenapp.mechanics.energy_error import pointwise_jump
from screenapp.mechanics.point_reading import PointReader
from screenapp.mechanics.recovery import extrapolated_stress, split_corner_nodes
from screenapp.mechanics.singular_spot import SingularSpot, spot_at
from screenapp.mechanics.singular_spots import singular_spots
from screenapp.model.allowables import demands
from screenapp.model.combinations import loadings
from screenapp.model.findings import Fields
from screenapp.model.material_axes import RULES
from screenapp.model.part import Part
from screenapp.model.shape import Shape
from screenapp.model.solution import StressField
from screenapp.model.stress_measures import stress_measure
from screenapp.screening import peaks
from screenapp.screening.level import level, round_spots
from screenapp.screening.peaks import RawPeak

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]
Bools = NDArray[np.bool_]


@dataclass(frozen=True, eq=False)
class PointValues:
    """What a pass says at some points.

    Attributes:
        stress: (n_cases, n_points, 3) [MPa], NaN outside the part.
        displacement: (n_cases, n_points, 2) [mm].
        doubt: gap between the recovered stress and the elements' own, by von Mises if not said,
            (n_cases, n_points) [MPa].
        size: size of the element there [mm], (n_points,).
        zones: the zone whose stress it is, -1 for the wall itself, (n_cases, n_points).
    """

    stress: Floats
    displacement: Floats
    doubt: Floats
    size: Floats
    zones: Ints


def doubted_by(measure: str) -> str:
    """The measure whose gap is the doubt of another: von Mises but for strengths in the material's
    axes, which weigh the components quite otherwise."""
    return measure if measure in RULES else "von_mises"


class Pass:
    """The fields of one mesh with what is read from them, each worked out once."""

    def __init__(
        self,
        part: Part,
        shape: Shape,
        fields: Fields,
        spots: Sequence[SingularSpot] | None = None,
    ) -> None:
        """`spots` are the part's singular places, where they are known already."""
        self.part = part
        self.shape = shape
        self.fields = fields
        self.spots = tuple(singular_spots(part, shape) if spots is None else spots)
        self._cases = [case.id for case in loadings(part)]
        self._near: dict[int, Bools] = {}
        self._doubts: dict[str, Floats] = {}
        self._peaks: dict[tuple[str, int], list[RawPeak]] = {}

    @cached_property
    def reader(self) -> PointReader:
        """Reads stress and displacement at any point."""
        f = self.fields
        return PointReader(self.part, self.shape, f.mesh, f.solution, f.stress)

    @property
    def doubt(self) -> Floats:
        """Gap between recovered and own von Mises stress, (n_cases, n_fields) as
        `StressField.nodal`."""
        return self.doubt_of("von_mises")

    def doubt_of(self, measure: str) -> Floats:
        """The same of a stress measure, by `doubted_by`."""
        rule = doubted_by(measure)
        f = self.fields
        if rule not in self._doubts:
            zones = f.mesh.element_zones[:, None]
            own = extrapolated_stress(f.mesh, f.solution, element_hooke(self.part, f.mesh))
            split = split_corner_nodes(self.part, self.shape, f.mesh, f.solution)
            self._doubts[rule] = pointwise_jump(
                f.mesh,
                own,
                f.stress.nodal,
                f.stress.side,
                lambda stress: stress_measure(rule, stress, self.part, zones),
                split,
            )
        return self._doubts[rule]

    @cached_property
    def sizes(self) -> Floats:
        """Element sizes [mm], (n_elements,)."""
        return self.fields.mesh.element_sizes

    @cached_property
    def spot_sizes(self) -> Floats:
        """Size of the element at each of `spots` [mm], (n_spots,)."""
        element, _ = self.reader.locator.locate(np.array([s.at for s in self.spots]))
        return self.sizes[element]

    def peaks(self, measure: str, case: int) -> list[RawPeak]:
        """Separate maxima of a measure in a case, largest first.

        Those at singular places and all others are bounded apart: neither crowd the other out.
        """
        key = (measure, case)
        if key not in self._peaks:
            level = self.counted_level(measure, case)
            found = peaks.find(measure, self.part, self.shape, self.fields, case, level)
            self._peaks[key] = self._bounded(found, (case,))
        return self._peaks[key]

    def swing_peaks(self, case: int, other: int) -> list[RawPeak]:
        """Peaks of the von Mises stress of the difference of two cases, largest first."""
        stress = self.fields.stress
        swing = StressField(
            (stress.nodal[case] - stress.nodal[other])[None],
            (stress.side[case] - stress.side[other])[None],
            stress.energy_error[:1],
        )
        near = self.round_spots(case) | self.round_spots(other)
        level = self._level("von_mises", swing, 0, near, demands("von_mises", self.part))
        fields = replace(self.fields, stress=swing)
        found = peaks.find("von_mises", self.part, self.shape, fields, 0, level)
        return self._bounded(found, (case, other))

    def _bounded(self, found: list[RawPeak], cases: tuple[int, ...]) -> list[RawPeak]:
        """The largest `peaks.MOST` at singular places and the largest of the others."""
        kept: list[RawPeak] = []
        left = {True: peaks.MOST, False: peaks.MOST}
        for peak in found:
            reach = peaks.REACH * peak.size
            at_spot = any(spot_at(self.spots, peak.at, self._cases[k], reach) for k in cases)
            if left[at_spot]:
                left[at_spot] -= 1
                kept.append(peak)
        return kept

    @cached_property
    def node_sizes(self) -> Floats:
        """Smallest size of the elements round each node [mm], (n_nodes,)."""
        mesh = self.fields.mesh
        size = np.full(mesh.n_nodes, np.inf)
        np.minimum.at(size, mesh.quads, np.broadcast_to(self.sizes[:, None], mesh.quads.shape))
        return size

    def round_spots(self, case: int) -> Bools:
        """Nodes too near to a singular place of the case for their stress to count, (n_nodes,)."""
        if case not in self._near:
            own = [s for s in self.spots if s.case in ("", self._cases[case])]
            mesh = self.fields.mesh
            self._near[case] = round_spots(own, self.shape, mesh, self.node_sizes, self.sizes)
        return self._near[case]

    def level(self, measure: str, case: int) -> float:
        """What is large in a case [MPa]: the largest value of a measure over nodes and boundary
        sides, but for what lies round singular places (see `level`)."""
        weights = [1.0] * (1 + len(self.part.zones))
        return self._level(measure, self.fields.stress, case, self.round_spots(case), weights)

    def counted_level(self, measure: str, case: int) -> float:
        """The same of the values times their demand (`allowables.demands`), as peaks count."""
        weights = demands(measure, self.part)
        return self._level(measure, self.fields.stress, case, self.round_spots(case), weights)

    def _level(
        self, measure: str, stress: StressField, case: int, near: Bools, weights: Sequence[float]
    ) -> float:
        mesh, weight = self.fields.mesh, np.array(weights)
        behind = mesh.element_zones[mesh.sides[:, 0], None]
        nodal = stress_measure(measure, stress.nodal[case], self.part, mesh.field_zones)
        side = stress_measure(measure, stress.side[case], self.part, behind)
        values = [nodal * weight[mesh.field_zones + 1], (side * weight[behind + 1]).ravel()]
        where = [near[mesh.field_nodes], near[mesh.side_nodes].ravel()]
        return level(np.concatenate(values), np.concatenate(where))

    def measure_max(self, measure: str, case: int) -> float:
        """Largest value of a measure in a case, over nodes and boundary sides [MPa]."""
        f = self.fields
        return max(
            float(stress_measure(measure, stress[case], self.part, zones).max(initial=0.0))
            for stress, zones in (
                (f.stress.nodal, f.mesh.field_zones),
                (f.stress.side, f.mesh.element_zones[f.mesh.sides[:, 0], None]),
            )
        )

    def read(self, points: Floats, measure: str = "von_mises") -> PointValues:
        """Everything at `points` (n, 2) [mm]; the doubt is that of a stress measure."""
        mesh = self.fields.mesh
        stress, displacement, zones = self.reader.read_with_zones(points)
        element, xi = self.reader.locator.locate(points)
        weights = shape_functions.values(4, xi)
        corners = mesh.field_quads[element, :4]
        doubt = (self.doubt_of(measure)[:, corners] * weights).sum(axis=-1)
        return PointValues(stress, displacement, doubt, self.sizes[element], zones)


def passes_of(part: Part, shape: Shape, fields: Sequence[Fields]) -> list[Pass]:
    """The passes of a finished screening."""
    spots = singular_spots(part, shape)
    return [
        Pass(part, shape, f, with_bed_ends(part, shape, f.mesh, f.solution, spots)) for f in fields
    ]
