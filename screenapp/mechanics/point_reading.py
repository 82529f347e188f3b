"""Stress and displacement at any point of the part.

Inside, the recovered nodal field is interpolated with the nine-node shape functions.  A point on
the boundary reads what the edge recovery gave there.
"""

from __future__ import annotations

from typing import Protocol

import numpy as np
from numpy.typing import ArrayLike, NDArray

from screenapp.mechanics import shape_functions
from screenapp.mechanics.boundary_chains import boundary_chains
from screenapp.mechanics.element_walls import element_hooke
from screenapp.mechanics.energy_error import rim_nodal
from screenapp.mechanics.interface_reading import other_hands, zones_at
from screenapp.mechanics.locate import PointLocator
from screenapp.mechanics.strain_displacement import strains_at
from screenapp.model.curves import Arc, Segment
from screenapp.model.mesh import Mesh
from screenapp.model.out_of_plane import out_of_plane_ratios
from screenapp.model.part import Part, Point
from screenapp.model.shape import Shape
from screenapp.model.solution import Solution, StressField, von_mises

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

ON_CURVE = 1e-6  # share of the part's size within which a point counts as on the boundary

_ASIDE = 0.1
"""A side drawn through three points of its curve runs nearer to it than this share of its length
(an arc of 45°, the coarsest: 0.001)."""


class AnyCurve(Protocol):
    """A curve that knows its parameter nearest to a point."""

    def nearest(self, p: Point) -> float: ...


class PointReader:
    """Reads one solution at any number of points.

    Attributes:
        locator: finds the elements of points.
        stress: the recovered field that it reads.

    Example:
        reader = PointReader(part, shape, mesh, solution, stress)
        stress, displacement = reader.read([(10.0, 4.0)])
    """

    def __init__(
        self, part: Part, shape: Shape, mesh: Mesh, solution: Solution, stress: StressField
    ) -> None:
        self._hooke = element_hooke(part, mesh)
        self._poisson = out_of_plane_ratios(part)
        self._shape, self._mesh, self._solution, self.stress = shape, mesh, solution, stress
        self.locator = PointLocator(mesh)
        self._chains = boundary_chains(shape, mesh)
        rim, self._rim_nodal = rim_nodal(mesh, stress.nodal, stress.side)
        self._rim_row = np.full(mesh.n_elements, -1, dtype=np.int64)
        self._rim_row[rim] = np.arange(len(rim))
        self._near = ON_CURVE * shape.size

    def read(self, points: ArrayLike) -> tuple[Floats, Floats]:
        """Recovered stress σx, σy, τxy [MPa] and displacement [mm] of all cases.

        Exactly at a sharp corner or on a line between two zones, where the two sides may differ,
        the side with the larger von Mises stress speaks.

        Args:
            points: (n, 2) [mm].

        Returns:
            (n_cases, n, 3) and (n_cases, n, 2), NaN off the part.
        """
        return self.read_with_zones(points)[:2]

    def read_with_zones(self, points: ArrayLike) -> tuple[Floats, Floats, Ints]:
        """As `read`, and the zone whose stress it is (-1: the wall itself), (n_cases, n)."""
        points = np.asarray(points, dtype=float).reshape(-1, 2)
        element, local = self.locator.locate(points)
        side, place = self._on_boundary(points, element)
        n_cases = len(self.stress.nodal)
        stress = np.full((n_cases, len(points), 3), np.nan)
        displacement = np.full((n_cases, len(points), 2), np.nan)
        zones = np.repeat(self._mesh.element_zones[element][None], n_cases, axis=0)
        hit = np.flatnonzero(element >= 0)
        quads, fields = self._mesh.quads[element[hit]], self._mesh.field_quads[element[hit]]
        shapes = shape_functions.values(9, local[hit])[:, None, :]
        row = self._rim_row[element[hit]]
        at_rim = row >= 0
        for case in range(n_cases):
            nodal = self.stress.nodal[case][fields]
            nodal[at_rim] = self._rim_nodal[case, row[at_rim]]
            stress[case, hit] = (shapes @ nodal)[:, 0]
            displacement[case, hit] = (shapes @ self._solution.displacements[case][quads])[:, 0]
        for who, other, at in zip(
            *other_hands(self._mesh, self.locator, points, element, self._near), strict=True
        ):
            nodal = self.stress.nodal[:, self._mesh.field_quads[other]]
            rival = (shape_functions.values(9, at[None]) @ nodal)[:, 0]
            zone = self._mesh.element_zones[other]
            stronger = self._size(rival, zone) > self._size(stress[:, who], zones[:, who])
            stress[:, who] = np.where(stronger[:, None], rival, stress[:, who])
            zones[:, who] = np.where(stronger, zone, zones[:, who])
        on = np.flatnonzero((side >= 0) & (element >= 0))
        stress[:, on], zones[:, on] = self._edge_values(side[on], place[on])
        return stress, displacement, zones

    def zones_at(self, points: ArrayLike) -> list[tuple[int, ...]]:
        """The zones that meet at each point (-1 for the wall itself); none off the part."""
        points = np.asarray(points, dtype=float).reshape(-1, 2)
        return zones_at(self._mesh, self.locator, points, self._near)

    def raw(self, points: ArrayLike) -> Floats:
        """Stress [MPa] straight from the element's own strains, (n_cases, n, 3), for comparison."""
        points = np.asarray(points, dtype=float).reshape(-1, 2)
        element, local = self.locator.locate(points)
        stress = np.full((len(self._solution.displacements), len(points), 3), np.nan)
        hit = np.flatnonzero(element >= 0)
        strains = strains_at(self._mesh, self._solution, element[hit], local[hit])
        stiff = self._hooke if self._hooke.ndim == 2 else self._hooke[element[hit]]
        stress[:, hit] = (strains[..., None, :] @ stiff)[..., 0, :]
        return stress

    def on_boundary(self, points: ArrayLike) -> tuple[Ints, Floats]:
        """The boundary side each point lies on, -1 for none, and where along it (0 to 1).

        A point counts as on the boundary within 1e-6 of the part's size of the exact curve, or of
        the mesh's own side.
        """
        points = np.asarray(points, dtype=float).reshape(-1, 2)
        element, _ = self.locator.locate(points)
        return self._on_boundary(points, element)

    def _size(self, stress: Floats, zones: Ints) -> Floats:
        return von_mises(stress, self._poisson[zones + 1])

    def _on_boundary(self, points: Floats, element: Ints) -> tuple[Ints, Floats]:
        """As `on_boundary`, looking only at points in elements at the rim."""
        side = np.full(len(points), -1, dtype=np.int64)
        place = np.zeros(len(points))
        near = np.flatnonzero((element >= 0) & (self._rim_row[element] >= 0))
        if not len(near):
            return side, place
        closest = np.full(len(near), np.inf)
        mesh, side_nodes = self._mesh, self._mesh.side_nodes
        for piece in np.unique(mesh.side_piece):
            curve = self._shape.curves[piece].curve
            t = nearest_parameters(curve, points[near])
            own = np.flatnonzero(mesh.side_piece == piece)
            k = np.searchsorted(mesh.side_t[own, 1], t).clip(0, len(own) - 1)
            begin, end = mesh.side_t[own[k]].T
            far = np.hypot(*(curve.point(t) - points[near]).T)
            if (far > self._near + _ASIDE * self._chains.lengths[own[k]]).all():
                continue
            along = ((t - begin) / (end - begin)).clip(0.0, 1.0)
            drawn, off = _nearest_on_side(mesh.nodes[side_nodes[own[k]]], points[near], along)
            along = np.where((far > self._near) & (off <= self._near), drawn, along)
            far = np.minimum(far, off)
            better = (far <= self._near) & (far < closest)
            closest[better] = far[better]
            side[near[better]], place[near[better]] = own[k[better]], along[better]
        return side, place

    def _edge_values(self, side: Ints, place: Floats) -> tuple[Floats, Ints]:
        """Edge stresses (n_cases, n, 3) at places 0 to 1 along sides, and their zones."""
        values = self.stress.side
        behind = self._mesh.element_zones[self._mesh.sides[:, 0]]
        zones = np.repeat(behind[side][None], len(values), axis=0)
        found = (_quadratic(place) @ values[:, side])[:, :, 0]
        # exactly at a sharp corner the other side has a say
        length = self._chains.lengths[side]
        at_end = (1.0 - place) * length <= self._near
        at_start = place * length <= self._near
        after, before = self._chains.following[side], self._chains.preceding[side]
        for here, other, k in ((at_end, after, 0), (at_start, before, 2)):
            rival = values[:, other[here], k]
            zone = behind[other[here]]
            stronger = self._size(rival, zone) > self._size(found[:, here], zones[:, here])
            found[:, here] = np.where(stronger[..., None], rival, found[:, here])
            zones[:, here] = np.where(stronger, zone, zones[:, here])
        return np.asarray(found), zones


def nearest_parameters(curve: AnyCurve, points: Floats) -> Floats:
    """Parameters in [0, 1] of the curve's points nearest to points (n, 2)."""
    if isinstance(curve, Segment):
        d = np.subtract(curve.end, curve.start)
        return np.asarray(((points - curve.start) @ d / (d @ d)).clip(0.0, 1.0))
    if isinstance(curve, Arc):
        away = points - curve.centre
        span = abs(curve.sweep)
        turned = np.arctan2(away[:, 1], away[:, 0]) - curve.begin
        turned = (turned * np.sign(curve.sweep)) % (2.0 * np.pi)
        beyond = np.where(turned - span < 2.0 * np.pi - turned, 1.0, 0.0)
        return np.where(turned <= span, turned / span, beyond)
    return np.array([curve.nearest((float(x), float(y))) for x, y in points])


def _quadratic(along: Floats) -> Floats:
    """Shape functions of start, middle and end at places 0 to 1, (n, 1, 3)."""
    return shape_functions.line_values(2.0 * along - 1.0)[:, None, :]


def _nearest_on_side(nodes: Floats, points: Floats, along: Floats) -> tuple[Floats, Floats]:
    """Places 0 to 1 on quadratic sides (n, 3, 2) nearest to points, and the distances [mm].

    Two Gauss-Newton steps from the guess `along` bring a point of the side back to 1e-9 of it.
    """
    for _ in range(2):
        slopes = shape_functions.line_slopes(2.0 * along - 1.0)[:, None, :]
        step = (slopes @ nodes)[:, 0]
        gap = points - (_quadratic(along) @ nodes)[:, 0]
        along = (along + 0.5 * (gap * step).sum(axis=1) / (step**2).sum(axis=1)).clip(0.0, 1.0)
    return along, np.hypot(*((_quadratic(along) @ nodes)[:, 0] - points).T)
