"""Supports as exact constraints: which direction of which node is held, and at what value.

A held direction leaves the equations altogether (no penalty, no multiplier): the displacement is
`u = u_held + T q` with an orthonormal T, so the reduced matrix TᵀKT stays symmetric and positive
definite however the rollers lean.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass, field, replace

import numpy as np
from numpy.typing import NDArray
from scipy import sparse

from screenapp.mechanics.elastic_supports import Springs
from screenapp.mechanics.places import misplaced, outward, side_tangents, sides_of
from screenapp.model.combinations import loadings
from screenapp.model.edge_parts import pieces_under
from screenapp.model.errors import Fault, InvalidPartError, SolvingError
from screenapp.model.members import bolt_holes
from screenapp.model.mesh import Mesh
from screenapp.model.misfits import movements
from screenapp.model.part import (
    BoltSupport,
    ElasticSupport,
    FixedSupport,
    Part,
    PinSupport,
    PrescribedSupport,
    RollerSupport,
    Support,
    SymmetrySupport,
    WeldSupport,
)
from screenapp.model.shape import Shape
from screenapp.model.support_records import gives_way

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

PARALLEL = 1e-5
"""Two held directions at a node that differ by less than this angle [rad] count as one: the
curves' normals carry rounding of about 1e-12, a real corner far more than this."""


@dataclass(frozen=True, eq=False)
class HeldDirections:
    """Every single hold that a support asks for; a node may appear several times.

    Attributes:
        nodes: mesh nodes, (k,).
        directions: unit vectors, (k, 2).
        values: displacement along the direction [mm], (k,).
        owners: index of the support in `supports`, (k,).
        supports: ids of the supports.
        added: what misfits add to the values in each case [mm], (n_cases, k); None where no case
            has any.
        bolts: holes and the nodes on their rims of each support that is a group of bolts, by its
            index.
    """

    nodes: Ints
    directions: Floats
    values: Floats
    owners: Ints
    supports: tuple[str, ...]
    added: Floats | None = None
    bolts: Mapping[int, tuple[tuple[str, Ints], ...]] = field(default_factory=dict)

    @property
    def by_case(self) -> Floats:
        """The displacements along the directions [mm], (n_cases, k), or (1, k) where all cases
        have the same."""
        return self.values[None] + (0.0 if self.added is None else self.added)

    def only(self, kept: NDArray[np.bool_]) -> HeldDirections:
        """Those of the holds that are kept, (k,)."""
        return HeldDirections(
            self.nodes[kept],
            self.directions[kept],
            self.values[kept],
            self.owners[kept],
            self.supports,
            None if self.added is None else self.added[:, kept],
            self.bolts,
        )

    def of_case(self, case: int) -> HeldDirections:
        """The holds of one case alone."""
        return self if self.added is None else replace(self, added=self.added[case : case + 1])


@dataclass(frozen=True, eq=False)
class Reduction:
    """The displacements that obey the supports: u = `held` + `basis` q.

    Attributes:
        held: [mm], orthogonal to the basis; (n_cases, 2 n_carried), or (1, 2 n_carried) where it is
            the same in all cases.
        basis: orthonormal columns, (2 n_carried, n_free).
    """

    held: Floats
    basis: sparse.csc_array


def held_directions(part: Part, shape: Shape, mesh: Mesh) -> HeldDirections:
    """The holds of all supports of the part, on all nodes of the nine-node mesh.

    Raises:
        InvalidPartError: a support stands on nothing, or a roller on a corner has no angle.
    """
    tangents = side_tangents(shape, mesh)
    parts: list[tuple[Ints, Floats, Floats, Ints]] = []
    for owner, support in enumerate(part.supports):
        if gives_way(support):
            continue  # it holds nothing: see `elastic_supports`
        nodes, normals = _places_of(part, support, shape, mesh, tangents)
        for direction, value in _holds_of(support, normals):
            parts.append(
                (
                    nodes,
                    np.broadcast_to(direction, (len(nodes), 2)),
                    np.full(len(nodes), value),
                    np.full(len(nodes), owner, dtype=np.int64),
                )
            )
    names = tuple(s.id for s in part.supports)
    bolts = _bolts(part, shape, mesh)
    if not parts:
        return HeldDirections(
            np.zeros(0, dtype=np.int64),
            np.zeros((0, 2)),
            np.zeros(0),
            np.zeros(0, dtype=np.int64),
            names,
            bolts=bolts,
        )
    nodes, directions, values, owners = (
        np.concatenate(column) for column in zip(*parts, strict=True)
    )
    held = _without_repeats(HeldDirections(nodes, directions, values, owners, names, bolts=bolts))
    off = movements(part, loadings(part))
    if off is None:
        return held
    return replace(held, added=(off[:, held.owners] * held.directions).sum(axis=-1))


def _bolts(part: Part, shape: Shape, mesh: Mesh) -> dict[int, tuple[tuple[str, Ints], ...]]:
    """Holes and rim nodes of every group of bolts, by the index of the support."""
    return {
        owner: tuple(
            (
                hole.id,
                np.unique(mesh.side_nodes[mesh.sides_on(shape.pieces_of(hole.id))]),
            )
            for hole in bolt_holes(part, support)
        )
        for owner, support in enumerate(part.supports)
        if isinstance(support, BoltSupport)
    }


def prescribe_nodes(nodes: Ints, displacements: Floats, name: str = "nodes") -> HeldDirections:
    """Hold nodes (k,) at displacements (k, 2) [mm] in both directions, as one support."""
    k = len(nodes)
    return HeldDirections(
        np.repeat(nodes, 2),
        np.tile(np.eye(2), (k, 1)),
        np.asarray(displacements, dtype=float).ravel(),
        np.zeros(2 * k, dtype=np.int64),
        (name,),
    )


def reduce(
    held: HeldDirections, mesh: Mesh, index: Ints, springs: Springs | None = None
) -> Reduction:
    """Work out which displacements are left free.

    `index` gives each mesh node's position among the carried ones, -1 for the others, whose holds
    are dropped.  Holds at one node combine: two different directions fix it, equal ones count
    once.  `springs` hold nothing, but they stop a part from moving freely.

    Raises:
        InvalidPartError: supports ask for different displacements of one node.
        SolvingError: a rigid motion is left free; the message says which.
    """
    at = index[held.nodes]
    keep = at >= 0
    at, directions, values = at[keep], held.directions[keep], held.by_case[:, keep]
    stopped, ways = held.nodes[keep], directions
    if springs is not None:
        stopped = np.concatenate([stopped, springs.nodes])
        ways = np.concatenate([ways, springs.directions])
    free_motion(stopped, ways, mesh)
    nodes, inverse = np.unique(at, return_inverse=True)
    gram = np.zeros((len(nodes), 2, 2))
    pull = np.zeros((len(values), len(nodes), 2))
    np.add.at(gram, inverse, directions[:, :, None] * directions[:, None, :])
    for own, asked in zip(pull, values, strict=True):
        np.add.at(own, inverse, directions * asked[:, None])
    stiff, axes = np.linalg.eigh(gram)  # rising; axes in columns
    fixed = stiff[:, 0] > PARALLEL**2 * stiff[:, 1]
    along = np.einsum("nda,cnd->cna", axes, pull)
    moved = axes[:, :, 1] * (along[..., 1] / stiff[:, 1])[..., None]
    moved[:, fixed] += axes[fixed, :, 0] * (along[:, fixed, 0] / stiff[fixed, 0])[..., None]
    moved[:, fixed] = _exact(moved[:, fixed], pull[:, fixed])
    gap = np.einsum("kd,ckd->ck", directions, moved[:, inverse]) - values
    _check_agreement(held, keep, np.abs(gap).max(axis=0, initial=0.0))
    n = int(index.max()) + 1
    u_held = np.zeros((len(values), n, 2))
    u_held[:, nodes] = moved
    return Reduction(u_held.reshape(len(values), -1), _basis(n, nodes, fixed, axes[:, :, 0]))


def held_sides(part: Part, shape: Shape, mesh: Mesh) -> NDArray[np.bool_]:
    """Where supports leave the traction unknown: (n_sides, 2), along the normal, the tangent.

    A side whose column is False carries exactly the traction that the loads give there.
    """
    tangents = side_tangents(shape, mesh)
    normals = outward(tangents)
    out = np.zeros((len(mesh.sides), 2), dtype=bool)
    for support in part.supports:
        if gives_way(support):
            continue  # its traction follows from the displacements
        sides = mesh.sides_on(pieces_under(part, shape, support))
        for direction, _ in _holds_of(support, normals[sides]):
            for column, frame in enumerate((normals, tangents)):
                share = np.einsum("spd,spd->sp", np.broadcast_to(direction, normals[sides].shape),
                                  frame[sides])  # fmt: skip
                out[sides, column] |= (np.abs(share) > PARALLEL).any(axis=1)
    return out


def free_motion(nodes: Ints, directions: Floats, mesh: Mesh) -> None:
    """Refuse holds that leave the part free to move as a rigid body.

    Raises:
        SolvingError: naming a motion that nothing stops.
    """
    centre = 0.5 * (mesh.nodes.min(axis=0) + mesh.nodes.max(axis=0))
    size = max(float(np.ptp(mesh.nodes, axis=0).max()), 1e-300)
    arm = (mesh.nodes[nodes] - centre) / size
    turning = directions[:, 1] * arm[:, 0] - directions[:, 0] * arm[:, 1]
    rows = np.concatenate([np.column_stack([directions, turning]), np.zeros((3, 3))])
    _, strength, motions = np.linalg.svd(rows, full_matrices=False)
    # n equal holds have a strength of sqrt(n); rounding leaves about 1e-15 of that
    free = strength <= 1e-9 * max(float(strength[0]), 1e-300)
    if not free.any():
        return
    if free.sum() == 3:
        raise SolvingError("nothing holds the part", "add a support")
    motion = motions[free][0]
    raise SolvingError(
        f"nothing stops the part from {_motion_words(motion, centre, size, int(free.sum()))}",
        "add a support that holds this motion, or fix one of the present ones",
    )


def _motion_words(motion: Floats, centre: Floats, size: float, left: int) -> str:
    """The rigid motion (x, y, turn times size) in words."""
    x, y, turn = motion
    if left == 2:
        return "moving in more than one way" if abs(turn) > 1e-6 else "moving along x and y"
    if abs(turn) <= 1e-6:
        if abs(y) <= 1e-6:
            return "moving along x"
        if abs(x) <= 1e-6:
            return "moving along y"
        return f"moving along {math.degrees(math.atan2(y, x)) % 180.0:.4g}°"
    # a turn with a shift is a turn about another point
    pivot = centre + size * np.array([-y, x]) / turn
    return f"turning about ({pivot[0]:.4g}, {pivot[1]:.4g}) mm"


def _places_of(
    part: Part, support: Support, shape: Shape, mesh: Mesh, tangents: Floats
) -> tuple[Ints, Floats]:
    """Nodes (k,) of a support, repeated where sides meet, and outward normals there (k, 2)."""
    if support.on in mesh.corner_nodes:
        if isinstance(support, RollerSupport) and support.angle is None:
            raise misplaced(support.id, support.on, "give the roller on a corner an angle")
        return np.array([mesh.corner_nodes[support.on]]), np.zeros((1, 2))
    sides = sides_of(part, shape, mesh, support)
    return mesh.side_nodes[sides].ravel(), outward(tangents[sides]).reshape(-1, 2)


def _holds_of(support: Support, normals: Floats) -> list[tuple[Floats, float]]:
    """Directions, (2,) or as `normals`, and values [mm] that a support holds."""
    x, y = np.array([1.0, 0.0]), np.array([0.0, 1.0])
    if isinstance(support, FixedSupport):
        return [(x, 0.0), (y, 0.0)]
    if isinstance(support, PrescribedSupport):
        wanted = ((x, support.x), (y, support.y))
        return [(axis, value) for axis, value in wanted if value is not None]
    if isinstance(support, ElasticSupport | WeldSupport) or gives_way(support):
        return []
    if isinstance(support, PinSupport | SymmetrySupport | BoltSupport):
        return [(normals, 0.0)]
    if support.angle is None:
        return [(normals, 0.0)]
    angle = math.radians(support.angle)
    return [(_clean(np.array([math.cos(angle), math.sin(angle)])), 0.0)]


def _clean(direction: Floats) -> Floats:
    """Take the rounding of cos 90° and its like out of a unit vector."""
    return np.where(np.abs(direction) < 1e-15, 0.0, direction)


def _without_repeats(held: HeldDirections) -> HeldDirections:
    """Drop the copies that neighbouring sides of one support make of their common node."""
    key = np.column_stack([held.owners, held.nodes, np.round(held.directions, 9), held.values])
    _, first = np.unique(key, axis=0, return_index=True)
    first.sort()
    return HeldDirections(
        held.nodes[first],
        held.directions[first],
        held.values[first],
        held.owners[first],
        held.supports,
        held.added,
        held.bolts,
    )


def _exact(moved: Floats, pull: Floats) -> Floats:
    """A node fixed at zero must stand at exactly zero, whatever rounding did."""
    return np.where((pull == 0.0).all(axis=-1)[..., None], 0.0, moved)


def _check_agreement(held: HeldDirections, keep: NDArray[np.bool_], gap: Floats) -> None:
    """Raise if a node cannot do what all its supports ask."""
    scale = float(np.abs(held.by_case).max(initial=0.0))
    if scale == 0.0 or not (gap > 1e-9 * scale).any():
        return
    rows = np.flatnonzero(keep)
    node = held.nodes[rows[int(np.argmax(gap))]]
    names = tuple(held.supports[i] for i in np.unique(held.owners[rows[held.nodes[rows] == node]]))
    raise InvalidPartError.of(
        (
            Fault(
                f"{' and '.join(names)} move the same place by different amounts",
                "make their displacements equal or put them on places that do not touch",
                f"supports.{names[0]}",
                names,
            ),
        )
    )


def _basis(n: int, nodes: Ints, fixed: NDArray[np.bool_], free_axis: Floats) -> sparse.csc_array:
    """Columns for the free directions, node by node so that the matrix keeps its band."""
    state = np.full(n, 2)  # free directions of each node
    state[nodes] = np.where(fixed, 0, 1)
    first = np.concatenate([[0], np.cumsum(state)])
    whole = np.flatnonzero(state == 2)
    sliding = nodes[~fixed]
    axis = _clean(free_axis[~fixed])
    rows = np.concatenate([2 * whole, 2 * whole + 1, 2 * sliding, 2 * sliding + 1])
    columns = np.concatenate([first[whole], first[whole] + 1, first[sliding], first[sliding]])
    values = np.concatenate([np.ones(2 * len(whole)), axis[:, 0], axis[:, 1]])
    solid = values != 0.0
    return sparse.csc_array(
        (values[solid], (rows[solid], columns[solid])), shape=(2 * n, int(first[-1]))
    )
