"""Supports that give way: springs per length along the boundary.

A bed of springs answers a movement u of the boundary with the force per length

    q = -(kₙ n nᵀ + kₜ t tᵀ) (u - d)    [N/mm],

n the outward normal, t the tangent and d how far its ground is off (a bed without a shear layer:
Winkler 1867, from memory).  It adds a matrix to the stiffness and a known traction to the boundary;
nothing is held.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray
from scipy import sparse

from screenapp.mechanics.element_walls import element_thickness
from screenapp.mechanics.places import misplaced, outward, side_tangents
from screenapp.mechanics.quadrature import gauss_line
from screenapp.mechanics.side_functions import carried_sides
from screenapp.model.combinations import loadings
from screenapp.model.edge_parts import pieces_under
from screenapp.model.members import bolt_holes
from screenapp.model.mesh import Mesh
from screenapp.model.misfits import movements
from screenapp.model.part import BoltSupport, ElasticSupport, Part, WeldSupport
from screenapp.model.shape import Shape
from screenapp.model.solution import Solution

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

POINTS = 4
"""Gauss points along a side: exact for the product of two quadratics on a straight side."""


@dataclass(frozen=True)
class Bed:
    """Springs under some pieces of the boundary.

    Attributes:
        owner: index of the support in `Part.supports`.
        on: id of the edge or hole.
        pieces: of the boundary, in the direction of drawing.
        normal, along: stiffness [N/mm²].
    """

    owner: int
    on: str
    pieces: tuple[int, ...]
    normal: float
    along: float


@dataclass(frozen=True, eq=False)
class Springs:
    """All beds of a part on a mesh.

    Attributes:
        matrices: of each support that has a bed, by its index: what it answers to the
            displacements (x, y node by node), (2 n_nodes, 2 n_nodes) [N/mm].
        nodes, directions: where and along what they hold, (k,) and unit (k, 2).
        off: how far the ground of every support is off in each case (n_cases, n_supports, 2) [mm];
            None where none is.
    """

    matrices: dict[int, sparse.csr_array]
    nodes: Ints
    directions: Floats
    off: Floats | None = None

    def of_cases(self, cases: Ints) -> Springs:
        """The springs in some of the cases alone."""
        return self if self.off is None else replace(self, off=self.off[cases])

    def pulls(self, carried: Ints, shape: tuple[int, ...]) -> Floats:
        """What they give at the carried nodes while the part has not moved, of that shape
        (n_cases, 2 n_carried) [N]."""
        given = self.forces(np.zeros((shape[0], self._size // 2, 2)))
        total = sum(given.values(), start=np.zeros(2))
        return np.asarray(total[:, carried].reshape(shape))

    @property
    def _size(self) -> int:
        return int(next(iter(self.matrices.values())).shape[0])

    def stiffness(self, carried: Ints) -> sparse.csr_array:
        """Of all together, on the carried nodes only, (2 n_carried, 2 n_carried) [N/mm]."""
        total = sum(self.matrices.values(), start=0 * next(iter(self.matrices.values())))
        rows = np.stack([2 * carried, 2 * carried + 1], axis=1).ravel()
        return sparse.csr_array(total.tocsr()[rows][:, rows])

    def forces(self, displacements: Floats) -> dict[int, Floats]:
        """What each gives at the nodes, (n_cases, n_nodes, 2) [N], under displacements of that
        shape [mm]."""
        given: dict[int, Floats] = {}
        for owner, matrix in self.matrices.items():
            gap = -displacements if self.off is None else self.off[:, owner, None] - displacements
            given[owner] = (matrix @ gap.reshape(len(gap), -1).T).T.reshape(gap.shape)
        return given


def beds(part: Part, shape: Shape) -> tuple[Bed, ...]:
    """The springs of all supports that give way."""
    found: list[Bed] = []
    for owner, s in enumerate(part.supports):
        if isinstance(s, ElasticSupport):
            found.append(Bed(owner, s.on, pieces_under(part, shape, s), s.normal, s.along))
        elif isinstance(s, WeldSupport):
            for piece in pieces_under(part, shape, s):
                material = part.material_of(shape.zone_behind(piece))
                if material is not None:
                    shear = material.youngs_modulus / (2.0 * (1.0 + material.poissons_ratio))
                    found.append(Bed(owner, s.on, (piece,), material.youngs_modulus, shear))
        elif isinstance(s, BoltSupport) and s.stiffness is not None:
            # a rim that moves by u along x meets ∫ k cos²θ r dθ u = π r k u
            found += [
                Bed(
                    owner,
                    hole.id,
                    shape.pieces_of(hole.id),
                    s.stiffness / (0.5 * math.pi * hole.diameter),
                    0.0,
                )
                for hole in bolt_holes(part, s)
            ]
    return tuple(found)


def springs(part: Part, shape: Shape, mesh: Mesh) -> Springs | None:
    """The matrices of all beds of a part; None where it has none.

    Raises:
        InvalidPartError: a bed stands on nothing that has a length.
    """
    matrices: dict[int, sparse.csr_array] = {}
    nodes: list[Ints] = []
    directions: list[Floats] = []
    tangents = side_tangents(shape, mesh)
    for bed in beds(part, shape):
        sides = mesh.sides_on(bed.pieces)
        if not len(sides):
            raise misplaced(part.supports[bed.owner].id, bed.on, "put it on an edge or a hole")
        own = _matrix(part, mesh, sides, bed)
        matrices[bed.owner] = matrices[bed.owner] + own if bed.owner in matrices else own
        ways = ((bed.normal, outward(tangents[sides])), (bed.along, tangents[sides]))
        for stiffness, way in ways:
            if stiffness > 0.0:
                nodes.append(mesh.side_nodes[sides].ravel())
                directions.append(way.reshape(-1, 2))
    if not matrices:
        return None
    off = movements(part, loadings(part))
    return Springs(matrices, np.concatenate(nodes), np.concatenate(directions), off)


def spring_tractions(part: Part, shape: Shape, mesh: Mesh, solution: Solution) -> Floats:
    """Traction that the beds put on the wall's face, (n_cases, n_sides, 3, 2) [MPa], at start,
    middle and end of every boundary side."""
    out = np.zeros((len(solution.displacements), len(mesh.sides), 3, 2))
    off = movements(part, loadings(part))
    for bed in beds(part, shape):
        sides = mesh.sides_on(bed.pieces)
        normals, tangents, across, forward = bed_forces(shape, mesh, solution, bed, off)
        thickness = element_thickness(part, mesh)[mesh.sides[sides, 0]]
        force = across[..., None] * normals + forward[..., None] * tangents
        out[:, sides] += force / thickness[:, None, None]
    return out


def bed_forces(
    shape: Shape, mesh: Mesh, solution: Solution, bed: Bed, off: Floats | None
) -> tuple[Floats, Floats, Floats, Floats]:
    """What a bed gives at start, middle and end of its sides (`Mesh.sides_on` its pieces).

    `off` is how far the supports are off, as `misfits.movements` has it.

    Returns:
        Outward normals and tangents, (n, 3, 2); force per length along them, (n_cases, n, 3)
        [N/mm], positive where it pulls outwards and where it pushes forwards (material on the
        left).
    """
    sides = mesh.sides_on(bed.pieces)
    tangents = side_tangents(shape, mesh)[sides]
    normals = outward(tangents)
    moved = solution.displacements[:, mesh.side_nodes[sides]]
    if off is not None:
        moved = moved - off[:, bed.owner, None, None]
    across = -bed.normal * (moved * normals).sum(axis=-1)
    forward = -bed.along * (moved * tangents).sum(axis=-1)
    return normals, tangents, across, forward


def _matrix(part: Part, mesh: Mesh, sides: Ints, bed: Bed) -> sparse.csr_array:
    """∫ N_i N_j (kₙ n nᵀ + kₜ t tᵀ) ds over the sides as the part's element interpolates them."""
    s, weights = gauss_line(POINTS)
    nodes, shapes, slopes = carried_sides(mesh, part.mesh.element, sides, s)
    run = np.einsum("pi,sid->spd", slopes, mesh.nodes[nodes])
    stretch = np.linalg.norm(run, axis=2)
    t = run / stretch[..., None]
    n = outward(t)
    law = bed.normal * n[..., :, None] * n[..., None, :]
    law += bed.along * t[..., :, None] * t[..., None, :]
    block = np.einsum("sp,pi,pj,spab->siajb", stretch * weights, shapes, shapes, law)
    places = (2 * nodes[:, :, None] + np.arange(2)).reshape(len(nodes), -1)  # (n_sides, 2m)
    m = places.shape[1]
    rows = np.repeat(places, m, axis=1).ravel()
    columns = np.tile(places, (1, m)).ravel()
    size = 2 * mesh.n_nodes
    return sparse.coo_array((block.ravel(), (rows, columns)), shape=(size, size)).tocsr()
