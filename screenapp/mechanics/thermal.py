"""What a change of temperature does: the strain it would give a free piece of the wall.

An element that is warmed by ΔT would grow by α ΔT along x and y alike, an orthotropic one by α1 ΔT
and α2 ΔT along its axes, which also shears it askew to them.  In plane strain it cannot
grow across the wall and, pressed there, grows (1 + ν) times as much in its plane (Timoshenko &
Goodier, Theory of Elasticity, ch. 13, from memory).  The load vector is ∫ Bᵀ D ε₀ t dA, and every
stress comes from the strain less ε₀.

ε₀ is kept for each case and element as three strains (εx, εy, γxy): their value at the origin and
their slope along x and y, so that a solution carries it to wherever stresses are worked out.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics import shape_functions
from screenapp.mechanics.elasticity import axis_of, zone_material
from screenapp.mechanics.element_walls import element_hooke, element_thickness
from screenapp.mechanics.quadrature import gauss_square
from screenapp.model.combinations import loadings
from screenapp.model.errors import SolvingError
from screenapp.model.material_axes import turn
from screenapp.model.mesh import NODES_OF_ELEMENT, Mesh
from screenapp.model.part import Case, Part, TemperatureLoad

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


def is_heated(case: Case) -> bool:
    """Whether the case changes the temperature."""
    return any(isinstance(load, TemperatureLoad) for load in case.loads)


def free_strains(part: Part, mesh: Mesh) -> Floats | None:
    """ε₀ of every case and element, (n_cases, n_elements, 3, 3): a + b x + c y with a, b, c along
    axis 2 and εx, εy, γxy along axis 3.

    The plain quads, whose own strain is even but for what shears them, take the value at their
    middle all over.  None where no case changes the temperature.

    Raises:
        SolvingError: a material that is warmed has no coefficient of expansion.
    """
    cases = loadings(part)
    if not any(is_heated(case) for case in cases):
        return None
    zones = np.arange(-1, len(part.zones))
    found = np.zeros((len(cases), mesh.n_elements, 3, 3))
    for k, case in enumerate(cases):
        by_zone = np.array([_zone_strain(part, case, int(zone)) for zone in zones])
        found[k] = by_zone[mesh.element_zones + 1]
    if part.mesh.element.startswith("quad4"):
        middle = mesh.nodes[mesh.quads[:, :4]].mean(axis=1)
        found[..., 0, :] += (found[..., 1:, :] * middle[..., None]).sum(axis=-2)
        found[..., 1:, :] = 0.0
    return found


def strains_from(free: Floats, at: Floats) -> Floats:
    """ε₀ as εx, εy, γxy at places.

    Args:
        free: (..., n, 3, 3) of some elements, as `free_strains`.
        at: places in each of them [mm], (n, p, 2).

    Returns:
        (..., n, p, 3).
    """
    x, y = at[..., :1], at[..., 1:]
    return np.asarray(free[..., None, 0, :] + free[..., None, 1, :] * x + free[..., None, 2, :] * y)


def thermal_forces(part: Part, mesh: Mesh, free: Floats) -> Floats:
    """Nodal forces that stand for the free strains, in balance by themselves.

    Args:
        free: as `free_strains`.

    Returns:
        (n_cases, n_nodes, 2) [N].
    """
    n = NODES_OF_ELEMENT[part.mesh.element]
    xi, weights = gauss_square(3)
    corners = mesh.nodes[mesh.quads[:, :n]]
    slopes = shape_functions.derivatives(n, xi)
    along = np.einsum("pna,enb->epab", slopes, corners)
    det = np.linalg.det(along)
    gradient = np.einsum("epab,pnb->epna", np.linalg.inv(along), slopes)
    hooke = np.broadcast_to(element_hooke(part, mesh), (mesh.n_elements, 3, 3))
    volume = det * weights * element_thickness(part, mesh)[:, None]
    at = shape_functions.values(n, xi) @ corners
    stress = strains_from(free, at) @ hooke
    nodes = mesh.quads[:, :n].ravel()
    out = np.zeros((len(free), mesh.n_nodes, 2))
    for case, own in enumerate(stress):
        tensor = (own * volume[..., None])[..., [[0, 2], [2, 1]]]
        shares = np.einsum("epab,epnb->ena", tensor, gradient).reshape(-1, 2)
        for k in (0, 1):
            out[case, :, k] = np.bincount(nodes, shares[:, k], minlength=mesh.n_nodes)
    return out


def side_free_strains(mesh: Mesh, free: Floats, places: Floats, along: Floats) -> Floats:
    """ε₀ in the direction of the boundary sides at places along them, (n_cases, n_sides, p).

    Args:
        free: as `free_strains`.
        places: [mm], (n_sides, p, 2).
        along: vectors along the sides there, of any length, (n_sides, p, 2).
    """
    strains = strains_from(free[:, mesh.sides[:, 0]], places)
    x, y = along[..., 0], along[..., 1]
    return np.asarray(
        (strains * np.stack([x * x, y * y, x * y], axis=-1)).sum(axis=-1) / (x * x + y * y)
    )


def _zone_strain(part: Part, case: Case, zone: int) -> Floats:
    """ε₀ in a zone (-1: in the wall itself), (3, 3) as `free_strains`."""
    change = np.zeros(3)
    for load in case.loads:
        if isinstance(load, TemperatureLoad) and (
            load.zone is None or (zone >= 0 and part.zones[zone].id == load.zone)
        ):
            change += (load.change, load.x, load.y)
    if not change.any():
        return np.zeros((3, 3))
    material = zone_material(part, zone)
    if material.expansion is None or (material.orthotropic and material.expansion_2 is None):
        raise SolvingError(
            f"“{material.name}” has no coefficient of expansion, so a change of temperature "
            "cannot be worked out",
            "give its expansion (an orthotropic one needs two), or choose another material",
        )
    across = 1.0 + material.poissons_ratio if part.wall.state == "plane strain" else 1.0
    along_1 = along_2 = material.expansion * across
    if material.expansion_2 is not None and material.orthotropic:
        along_2 = material.expansion_2
    # back from the material's axes: γxy counts twice the tensor's shear
    c, s = turn(axis_of(part, zone))
    strain = np.array(
        [
            along_1 * c * c + along_2 * s * s,
            along_1 * s * s + along_2 * c * c,
            2.0 * c * s * (along_1 - along_2),
        ]
    )
    return np.asarray(change[:, None] * strain)
