"""The meshes of a part's regions sewn together along their common interfaces.

Both banks of an interface have their nodes at the same places; each pair becomes one node, so
that neighbours share whole sides, curved ones too.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray
from scipy.sparse import coo_array
from scipy.sparse.csgraph import connected_components
from scipy.spatial import cKDTree

from screenapp.model.mesh import Mesh
from screenapp.model.shape import Shape

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

SAME = 1e-8
"""Nodes on regions' boundaries nearer than this share of the part's size are one."""


def sew(shape: Shape, meshes: Sequence[Mesh]) -> Mesh:
    """One mesh from those of `shape.parts`, in their order; the mesh itself where nothing divides
    the part."""
    if not shape.regions:
        return meshes[0]
    counts = [mesh.n_nodes for mesh in meshes]
    first_node = np.concatenate([[0], np.cumsum(counts)])
    first_element = np.concatenate([[0], np.cumsum([mesh.n_elements for mesh in meshes])])
    nodes = np.concatenate([mesh.nodes for mesh in meshes])
    rim = [np.unique(m.side_nodes) + n for m, n in zip(meshes, first_node[:-1], strict=True)]
    number, kept = _numbered(nodes, np.concatenate(rim), SAME * shape.size)
    quads = np.concatenate(
        [number[m.quads + n] for m, n in zip(meshes, first_node[:-1], strict=True)]
    )
    sides, piece, t = [], [], []
    for region, mesh, element in zip(shape.regions, meshes, first_element[:-1], strict=True):
        own = np.array(region.pieces)[mesh.side_piece]
        outer = own < len(shape.curves)  # the others are interfaces
        sides.append(mesh.sides[outer] + np.array([element, 0]))
        piece.append(own[outer])
        t.append(mesh.side_t[outer])
    side_piece, side_t = np.concatenate(piece), np.concatenate(t)
    order = np.lexsort((side_t[:, 0], side_piece))
    whole = Mesh(
        nodes[kept],
        quads,
        np.concatenate(sides)[order],
        side_piece[order],
        side_t[order],
        {},
        min(mesh.worst_jacobian for mesh in meshes),
        zones=np.concatenate(
            [
                np.full(mesh.n_elements, region.zone)
                for region, mesh in zip(shape.regions, meshes, strict=True)
            ]
        ),
    )
    whole.corner_nodes.update(_corner_nodes(shape, whole))
    return whole


def _numbered(nodes: Floats, rim: Ints, near: float) -> tuple[Ints, Ints]:
    """The new number of each node, nodes of `rim` that coincide sharing one, and the nodes kept."""
    links = rim[cKDTree(nodes[rim]).query_pairs(near, output_type="ndarray")].reshape(-1, 2)
    n = len(nodes)
    graph = coo_array((np.ones(len(links)), (links[:, 0], links[:, 1])), shape=(n, n))
    _, cluster = connected_components(graph, directed=False)
    _, kept, number = np.unique(cluster, return_index=True, return_inverse=True)
    return number.astype(np.int64), kept.astype(np.int64)


def _corner_nodes(shape: Shape, mesh: Mesh) -> dict[str, int]:
    """The node at each sharp corner of the boundary: the start of a piece, the nearest such."""
    starts = mesh.side_nodes[mesh.side_t[:, 0] == 0.0, 0]
    corners = {}
    for name, at in shape.sharp_corners:
        far = np.hypot(*(mesh.nodes[starts] - np.asarray(at)).T)
        corners[name] = int(starts[np.argmin(far)])
    return corners
