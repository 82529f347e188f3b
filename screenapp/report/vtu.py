"""The fields of the last pass as a VTU file (nine-node quads, VTK cell type 28)."""

from __future__ import annotations

import tempfile
from pathlib import Path

import meshio
import numpy as np

from screenapp.model.atomic_write import write_atomically
from screenapp.model.combinations import loadings
from screenapp.model.findings import Fields
from screenapp.model.out_of_plane import out_of_plane_ratio
from screenapp.model.part import Part
from screenapp.model.solution import von_mises


def write_vtu(part: Part, fields: Fields, path: Path) -> None:
    """Write displacements [mm], stresses [MPa] and energy error of every case.

    Arrays are named after the case's id: `displacement k1`, `stress k1` (σx, σy, τxy),
    `von Mises k1`.  In plane strain the von Mises stress counts σz.  Nodes between zones are
    written once for each zone, since the stress jumps there; the zone of each element, where there
    are any, is `zone` (0 for the wall itself).
    """
    mesh = fields.mesh
    poisson = out_of_plane_ratio(part, mesh.field_zones)
    nodes = mesh.field_nodes
    points = np.column_stack([mesh.nodes[nodes], np.zeros(len(nodes))])
    at_nodes: dict[str, object] = {}
    in_cells: dict[str, list[object]] = {}
    for k, case in enumerate(loadings(part)):
        moved = fields.solution.displacements[k, nodes]
        at_nodes[f"displacement {case.id}"] = np.column_stack([moved, np.zeros(len(moved))])
        at_nodes[f"stress {case.id}"] = fields.stress.nodal[k]
        at_nodes[f"von Mises {case.id}"] = von_mises(fields.stress.nodal[k], poisson)
        in_cells[f"energy error {case.id}"] = [fields.stress.energy_error[k]]
    if mesh.zones is not None:
        in_cells["zone"] = [mesh.zones + 1]
    whole = meshio.Mesh(
        points, [("quad9", mesh.field_quads)], point_data=at_nodes, cell_data=in_cells
    )
    with tempfile.TemporaryDirectory() as folder:  # the writer wants a path
        draft = Path(folder) / "fields.vtu"
        whole.write(draft, file_format="vtu")
        write_atomically(path, draft.read_bytes())
