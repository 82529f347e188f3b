"""From element matrices to one sparse system, and from its answer back to every node."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy import sparse

from screenapp.mechanics import shape_functions
from screenapp.mechanics.element_walls import hooke_of
from screenapp.mechanics.kernels import CARRIED_NODES, ElementMatrices, element_matrices
from screenapp.model.mesh import NODES_OF_ELEMENT, Mesh
from screenapp.model.part import ElementName
from screenapp.model.progress import SILENT, Progress

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

CHUNK = 2000
"""Elements worked on at a time: few enough for the caches, many enough to forget the overhead."""


@dataclass(frozen=True, eq=False)
class System:
    """The assembled equations before any support.

    Displacements are ordered x, y node by node over the carried nodes.

    Attributes:
        element: which quad.
        mesh: the mesh.
        carried: the mesh nodes that have unknowns, rising, (n_carried,).
        index: position of each mesh node among `carried`, -1 where it has none, (n_nodes,).
        stiffness: the whole symmetric matrix [N/mm], (2 n_carried, 2 n_carried).
        packed: upper triangle of each element's stiffness, row by row, in element order
            (n_elements, m (2m + 1)).
        recovery, flexibility: as in `ElementMatrices`, for all elements.
    """

    element: ElementName
    mesh: Mesh
    carried: Ints
    index: Ints
    stiffness: sparse.csr_array
    packed: Floats
    recovery: Floats | None
    flexibility: Floats | None

    @property
    def element_nodes(self) -> Ints:
        """Positions among `carried` of each element's carried nodes, (n_elements, m)."""
        return self.index[self.mesh.quads[:, : CARRIED_NODES[self.element]]]


def assemble(
    mesh: Mesh,
    element: ElementName,
    elastic: Floats,
    thickness: float | Floats,
    progress: Progress = SILENT,
) -> System:
    """Assemble the stiffness of a mesh.

    `elastic` [MPa] is (3, 3) or one for each element (n_elements, 3, 3); `thickness` [mm] is one
    number or one for each element.

    Raises:
        SolvingError: the mesh has a folded element.
        Cancelled: the user asked to stop.
    """
    m = CARRIED_NODES[element]
    carried, index = carried_nodes(mesh, element)
    depth = np.broadcast_to(np.asarray(thickness, dtype=float), (mesh.n_elements,))
    upper = np.triu_indices(2 * m)
    values = np.empty((mesh.n_elements, len(upper[0])))
    recovery: list[Floats] = []
    flexibility: list[Floats] = []
    for first in range(0, mesh.n_elements, CHUNK):
        progress.check()
        rows = slice(first, first + CHUNK)
        made = element_matrices(
            element, mesh.nodes[mesh.quads[rows]], depth[rows], hooke_of(elastic, rows)
        )
        values[rows] = made.stiffness[:, upper[0], upper[1]]
        _keep(made, recovery, flexibility)
    progress.check()
    nodes = index[mesh.quads[:, :m]]
    return System(
        element,
        mesh,
        carried,
        index,
        _symmetric(_places(nodes), upper, values, 2 * len(carried)),
        values,
        np.concatenate(recovery) if recovery else None,
        np.concatenate(flexibility) if flexibility else None,
    )


def carried_nodes(mesh: Mesh, element: ElementName) -> tuple[Ints, Ints]:
    """The nodes that have unknowns, and each mesh node's position among them (or -1)."""
    used = np.zeros(mesh.n_nodes, dtype=bool)
    used[mesh.quads[:, : CARRIED_NODES[element]]] = True
    carried = np.flatnonzero(used)
    index = np.full(mesh.n_nodes, -1, dtype=np.int64)
    index[carried] = np.arange(len(carried))
    return carried, index


def condense_loads(system: System, forces: Floats) -> Floats:
    """Nodal forces (n_cases, n_nodes, 2) [N] on the carried displacements, (n_cases, 2 n_carried).

    The share of the 9-node quad's centre node goes to the nodes around it as its stiffness says.
    """
    loads = forces[:, system.carried].reshape(len(forces), 2 * len(system.carried))
    if system.element == "quad9" and system.recovery is not None:
        inner = forces[:, system.mesh.quads[:, 8]]
        if inner.any():
            m = CARRIED_NODES["quad9"]
            shares = -np.einsum("eki,cek->cei", system.recovery, inner)
            nodes = system.element_nodes
            for case, share in enumerate(shares):
                for k in (0, 1):
                    part = share[:, k * m : (k + 1) * m]
                    loads[case] += np.bincount(
                        (2 * nodes + k).ravel(), part.ravel(), minlength=loads.shape[1]
                    )
    return loads


def internal_forces(system: System, terms: Sequence[Floats]) -> Floats:
    """What the elements put up against displacements that are the sum of `terms`, each
    (n_cases, 2 n_carried) [mm]: (n_cases, 2 n_carried) [N].

    This is the stiffness times the displacements, but each element's own shift and turn are taken
    out before they meet its stiffness, and a small term is never added to a large one.  In a
    slender part the rigid motion of an element is a million times its stretch, and its rounding
    would drown the forces; this way they keep their digits.
    """
    m = CARRIED_NODES[system.element]
    nodes, size = system.element_nodes, 2 * len(system.carried)
    columns = [np.ascontiguousarray(t.T) for t in terms]  # (2 n_carried, n_cases)
    out = np.zeros((size, len(terms[0])))
    if not out.size:
        return out.T
    unpack = np.zeros((2 * m, 2 * m), dtype=np.int64)
    upper = np.triu_indices(2 * m)
    unpack[upper] = np.arange(len(upper[0]))
    unpack = np.maximum(unpack, unpack.T)
    for first in range(0, len(nodes), CHUNK):
        rows = slice(first, first + CHUNK)
        places = _places(nodes[rows])
        positions = system.mesh.nodes[system.mesh.quads[rows, :m]]
        across = _turning(positions)
        stretch = _without_motion(columns[0][places], positions, across)
        for term in columns[1:]:
            stretch += _without_motion(term[places], positions, across)
        forces = (system.packed[rows][:, unpack] @ stretch).reshape(-1, out.shape[1])
        # one column for each displacement of an element, with a single 1 where it belongs
        gather = sparse.csc_array(
            (np.ones(len(forces)), places.ravel(), np.arange(len(forces) + 1)),
            shape=(size, len(forces)),
        )
        out += np.asarray(gather @ forces)
    return np.ascontiguousarray(out.T)


def spread(system: System, unknowns: Floats, forces: Floats) -> tuple[Floats, Floats | None]:
    """Displacements on all nodes and the incompatible modes, from the carried ones.

    Args:
        unknowns: (n_cases, 2 n_carried) [mm].
        forces: the nodal forces (n_cases, n_nodes, 2) [N] (the centre nodes' share counts).

    Returns:
        (n_cases, n_nodes, 2) [mm] and, for "quad4-incompatible", (n_cases, n_elements, 4).
        Nodes that the element does not carry hold its interpolation; incompatible modes are left
        out there, so that neighbours agree on the middle of their common side.
    """
    n_cases = len(unknowns)
    mesh, element, m = system.mesh, system.element, CARRIED_NODES[system.element]
    out = np.zeros((n_cases, mesh.n_nodes, 2))
    out[:, system.carried] = unknowns.reshape(n_cases, len(system.carried), 2)
    inner: Floats | None = None
    if system.recovery is not None:
        columns = np.ascontiguousarray(unknowns.T)[_places(system.element_nodes)]
        inner = -np.moveaxis(system.recovery @ columns, 2, 0)
    if element == "quad9":
        assert inner is not None
        assert system.flexibility is not None
        centre = mesh.quads[:, 8]
        out[:, centre] = inner
        own = forces[:, centre]
        if own.any():
            out[:, centre] += np.einsum("ekl,cel->cek", system.flexibility, own)
        return out, None
    shapes = shape_functions.values(
        NODES_OF_ELEMENT[element], shape_functions.LOCAL_NODES[m:]
    )  # (9 - m, m)
    out[:, mesh.quads[:, m:]] = shapes @ out[:, mesh.quads[:, :m]]
    return out, inner


def _turning(positions: Floats) -> Floats:
    """Displacements (n, 2m), x of all nodes first, of elements at (n, m, 2) [mm] that turn by 1
    about their middle."""
    arm = positions - positions.mean(axis=1, keepdims=True)
    return np.concatenate([-arm[..., 1], arm[..., 0]], axis=1)


def _without_motion(displacements: Floats, positions: Floats, across: Floats) -> Floats:
    """Displacements (n, 2m, n_cases) of elements, x of all nodes first, less their mean turn and
    their first node's shift (differences of neighbours are free of rounding); written over.

    Args:
        positions: of the nodes [mm], (n, m, 2).
        across: as `_turning`.
    """
    m = positions.shape[1]
    shares = across / np.einsum("ni,ni->n", across, across)[:, None]
    displacements[:, :m] -= displacements[:, :1].copy()
    displacements[:, m:] -= displacements[:, m : m + 1].copy()
    turn = shares[:, None] @ displacements  # (n, 1, n_cases)
    from_first = across - np.repeat(across[:, [0, m]], m, axis=1)
    displacements -= from_first[:, :, None] * turn
    return displacements


def _keep(made: ElementMatrices, recovery: list[Floats], flexibility: list[Floats]) -> None:
    if made.recovery is not None and made.flexibility is not None:
        recovery.append(made.recovery)
        flexibility.append(made.flexibility)


def _places(nodes: Ints) -> NDArray[np.int32]:
    """Rows of the system for each element's displacements in element order, (n, 2m)."""
    return np.concatenate([2 * nodes, 2 * nodes + 1], axis=1).astype(np.int32)


def _symmetric(
    places: NDArray[np.int32], upper: tuple[Ints, Ints], values: Floats, size: int
) -> sparse.csr_array:
    """Sum the elements' upper triangles into the whole symmetric matrix."""
    a, b = places[:, upper[0]], places[:, upper[1]]
    rows, columns = np.minimum(a, b).ravel(), np.maximum(a, b).ravel()
    # half of the diagonal here and half from the transpose: nothing has to be cut out
    share = np.where(upper[0] == upper[1], 0.5, 1.0)
    half = sparse.coo_array(((values * share).ravel(), (rows, columns)), shape=(size, size)).tocsr()
    return sparse.csr_array(half + half.T.tocsr())
