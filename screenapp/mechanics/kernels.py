"""Stiffness matrices of many quads at once.

Element matrices order their displacements as x of all nodes, then y of all nodes.  With
H = [∂N/∂x, ∂N/∂y] scaled by the root of the weight, one product HᵀH holds every integral of
∂Nᵢ/∂a ∂Nⱼ/∂b; the isotropic stiffness is a sum of its blocks.  That takes a third of the work of
the usual BᵀDB.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics import shape_functions
from screenapp.mechanics.quadrature import gauss_square
from screenapp.model.errors import SolvingError
from screenapp.model.mesh import NODES_OF_ELEMENT
from screenapp.model.part import ElementName

Floats = NDArray[np.float64]

RULE_OF_ELEMENT: dict[ElementName, int] = {
    "quad4": 2,
    "quad4-incompatible": 2,
    "quad8": 3,
    "quad9": 3,
}
"""Gauss points along each direction."""

CARRIED_NODES: dict[ElementName, int] = {
    "quad4": 4,
    "quad4-incompatible": 4,
    "quad8": 8,
    "quad9": 8,
}
"""Nodes of each element that take part in the equations (the 9-node quad's centre does not)."""


@dataclass(frozen=True, eq=False)
class ElementMatrices:
    """Stiffness of some elements, with what brings their condensed unknowns back.

    The condensed unknowns are the centre node's (x, y) of "quad9" and the mode amplitudes
    (x, y of 1 - ξ², x, y of 1 - η²) of "quad4-incompatible"; k of them for each element.

    Attributes:
        stiffness: condensed on the carried nodes [N/mm], (n, 2m, 2m).
        recovery: (n, k, 2m), None where nothing is condensed: the condensed unknowns are
            `flexibility @ their load - recovery @ the carried displacements`.
        flexibility: inverse of the condensed unknowns' own stiffness [mm/N], (n, k, k).
    """

    stiffness: Floats
    recovery: Floats | None = None
    flexibility: Floats | None = None


def element_matrices(
    element: ElementName, coordinates: Floats, thickness: Floats, elastic: Floats
) -> ElementMatrices:
    """Stiffness of elements with nodes at `coordinates` (n, 9 or fewer, 2) [mm].

    `thickness` (n,) [mm] is each element's own; `elastic` [MPa], (3, 3) or one for each element
    (n, 3, 3), is symmetric.

    Raises:
        SolvingError: an element is folded (its Jacobian is not positive at a Gauss point).
    """
    n_nodes = NODES_OF_ELEMENT[element]
    points, weights = gauss_square(RULE_OF_ELEMENT[element])
    local = shape_functions.derivatives(n_nodes, points)
    coordinates = coordinates[:, :n_nodes]
    slopes, det = _slopes(local, coordinates)
    if element == "quad4-incompatible":
        slopes = np.concatenate([slopes, _mode_slopes(coordinates, points, det)], axis=3)
    root = np.sqrt(weights * det * thickness[:, None])
    full = _stiffness(slopes * root[:, None, :, None], elastic)
    if element == "quad9":
        return _condense(full, n_nodes, 1)
    if element == "quad4-incompatible":
        return _condense(full, n_nodes + 2, 2)
    return ElementMatrices(full)


def _slopes(local: Floats, coordinates: Floats) -> tuple[Floats, Floats]:
    """∂N/∂x, ∂N/∂y (n, 2, p, m) and det J (n, p) from ∂N/∂ξ, ∂N/∂η (p, m, 2)."""
    by_xi, by_eta = local[..., 0], local[..., 1]
    x, y = coordinates[..., 0], coordinates[..., 1]
    x_xi, x_eta, y_xi, y_eta = x @ by_xi.T, x @ by_eta.T, y @ by_xi.T, y @ by_eta.T
    det = x_xi * y_eta - x_eta * y_xi
    if not (det > 0.0).all():
        bad = int(np.argmin(np.nan_to_num(det, nan=-np.inf).min(axis=1)))
        where = coordinates[bad].mean(axis=0)
        raise SolvingError(
            f"the mesh has a folded element near ({where[0]:.4g}, {where[1]:.4g}) mm",
            "ask for a finer mesh or another element size",
        )
    slopes = np.empty((len(x), 2, *by_xi.shape))
    inverse = (1.0 / det)[..., None]
    slopes[:, 0] = (y_eta[..., None] * inverse) * by_xi - (y_xi[..., None] * inverse) * by_eta
    slopes[:, 1] = (x_xi[..., None] * inverse) * by_eta - (x_eta[..., None] * inverse) * by_xi
    return slopes, det


def _mode_slopes(coordinates: Floats, points: Floats, det: Floats) -> Floats:
    """Slopes of 1 - ξ² and 1 - η², mapped with the Jacobian at the centre and scaled by
    det J₀ / det J, so that their integral vanishes and every patch of constant stress passes.

    Source: Taylor, Beresford & Wilson 1976, Int. J. Num. Meth. Engng 10 (from memory).
    """
    centre = shape_functions.derivatives(4, np.zeros((1, 2)))[0]
    x, y = coordinates[..., 0], coordinates[..., 1]
    x_xi, x_eta, y_xi, y_eta = (v @ centre[:, k] for v in (x, y) for k in (0, 1))
    scale = 1.0 / det  # det J₀ of the scaling cancels against the inverse of J₀
    by_xi, by_eta = -2.0 * points[:, 0] * scale, -2.0 * points[:, 1] * scale
    slopes = np.empty((len(x), 2, len(points), 2))
    slopes[:, 0, :, 0] = y_eta[:, None] * by_xi
    slopes[:, 0, :, 1] = -y_xi[:, None] * by_eta
    slopes[:, 1, :, 0] = -x_eta[:, None] * by_xi
    slopes[:, 1, :, 1] = x_xi[:, None] * by_eta
    return slopes


def _stiffness(scaled: Floats, elastic: Floats) -> Floats:
    """Stiffness (n, 2m, 2m) from the slopes (n, 2, p, m) scaled by the root of the weights."""
    by_x, by_y = scaled[:, 0], scaled[:, 1]
    m = by_x.shape[2]
    xx = by_x.transpose(0, 2, 1) @ by_x
    yy = by_y.transpose(0, 2, 1) @ by_y
    xy = by_x.transpose(0, 2, 1) @ by_y
    stretch_x, stretch_y, poisson, shear = (
        elastic[..., 0, 0, None, None],
        elastic[..., 1, 1, None, None],
        elastic[..., 0, 1, None, None],
        elastic[..., 2, 2, None, None],
    )
    full = np.empty((len(by_x), 2 * m, 2 * m))
    full[:, :m, :m] = stretch_x * xx + shear * yy
    full[:, m:, m:] = stretch_y * yy + shear * xx
    cross = poisson * xy + shear * xy.transpose(0, 2, 1)
    skew_x, skew_y = elastic[..., 0, 2, None, None], elastic[..., 1, 2, None, None]
    if skew_x.any() or skew_y.any():  # an orthotropic sheet that is pulled askew to its axes
        both = xy + xy.transpose(0, 2, 1)
        full[:, :m, :m] += skew_x * both
        full[:, m:, m:] += skew_y * both
        cross += skew_x * xx + skew_y * yy
    full[:, :m, m:] = cross
    full[:, m:, :m] = cross.transpose(0, 2, 1)
    return full


def _condense(full: Floats, n_all: int, n_inner: int) -> ElementMatrices:
    """Take the last `n_inner` of `n_all` nodes (or modes) out of the matrices."""
    outer = n_all - n_inner
    keep = np.r_[0:outer, n_all : n_all + outer]
    drop = np.r_[outer:n_all, n_all + outer : 2 * n_all].reshape(2, n_inner).T.ravel()
    flexibility = np.asarray(np.linalg.inv(full[:, drop[:, None], drop]), dtype=np.float64)
    coupling = full[:, drop[:, None], keep]
    recovery = flexibility @ coupling
    reduced = full[:, keep[:, None], keep] - coupling.transpose(0, 2, 1) @ recovery
    # the product is symmetric but for rounding; the assembly reads one triangle only
    return ElementMatrices(reduced, recovery, flexibility)
