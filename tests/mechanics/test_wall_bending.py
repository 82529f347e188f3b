"""Over-stiffness of layers of plain bilinear quads in bending, against our own assembled quads.

The single rectangle: Cook, Malkus & Plesha, from memory; n layers: derived in the module."""

from __future__ import annotations

import doctest

import numpy as np
import pytest
from numpy.typing import NDArray

from screenapp.mechanics import wall_bending
from screenapp.mechanics.assembly import assemble
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.wall_bending import bending_overstiffness
from screenapp.model.part import Material, WallState
from tests.mechanics.structured import Structured, rectangle

E = 1000.0
LONG, HIGH = 12.0, 2.0
CURVATURE = 1e-3

Floats = NDArray[np.float64]


def stiffness_ratio(strip: Structured, poisson: float, state: WallState) -> float:
    """Energy of a strip bent by its end faces, which stay plane and turn, over the true energy.

    The faces are held along x only (one node along y): nothing hinders the contraction across.
    """
    elastic = constitutive_matrix(Material("m", E, poisson, 1.0), state)
    system = assemble(strip.mesh, "quad4", elastic, 1.0)
    places = strip.mesh.nodes[system.carried]
    x, y = places[:, 0] - LONG / 2, places[:, 1] - HIGH / 2
    ends = np.flatnonzero(np.isclose(np.abs(x), LONG / 2))
    held = np.r_[2 * ends, 2 * int(np.argmin(x + y)) + 1]
    given = np.r_[-CURVATURE * x[ends] * y[ends], 0.0]
    stiffness = system.stiffness.toarray()
    u = np.zeros(len(stiffness))
    u[held] = given
    free = np.setdiff1d(np.arange(len(u)), held)
    u[free] = np.linalg.solve(stiffness[np.ix_(free, free)], -stiffness[np.ix_(free, held)] @ given)
    modulus = E / (1.0 - poisson**2) if state == "plane strain" else E
    true = 0.5 * modulus * HIGH**3 / 12.0 * CURVATURE**2 * LONG
    return float(0.5 * u @ stiffness @ u / true)


@pytest.mark.parametrize("state", ["plane stress", "plane strain"])
@pytest.mark.parametrize("poisson", [0.0, 0.3, 0.45])
@pytest.mark.parametrize(("along", "layers"), [(6, 1), (3, 1), (6, 2), (12, 3), (9, 4), (24, 5)])
def test_layers_of_rectangles_are_as_stiff_as_the_closed_form_says(
    along: int, layers: int, poisson: float, state: WallState
) -> None:
    strip = rectangle(LONG, HIGH, along, layers)
    aspect = (LONG / along) / (HIGH / layers)
    found = stiffness_ratio(strip, poisson, state)
    assert found == pytest.approx(bending_overstiffness(poisson, aspect, layers, state), rel=1e-9)


def test_one_layer_is_the_published_ratio() -> None:
    for poisson in (0.0, 0.25, 0.3):
        for slim in (0.5, 1.0, 4.0):
            cook = (1.0 / (1.0 - poisson) + slim**2 / 2.0) / (1.0 + poisson)
            assert bending_overstiffness(poisson, slim) == pytest.approx(cook, rel=1e-14)


def test_layers_alone_do_not_take_the_spurious_shear_away() -> None:
    """Without Poisson's ratio only the length along the wall counts."""
    length, wall = 3.0, 2.0
    ratios = [bending_overstiffness(0.0, length / (wall / n), n) for n in (1, 2, 8)]
    assert ratios == pytest.approx([1.0 + (length / wall) ** 2 / 2.0] * 3, rel=1e-14)


@pytest.mark.parametrize(("aspect", "layers"), [(1.0, 0), (0.0, 2), (float("nan"), 1)])
def test_what_is_no_wall_is_refused(aspect: float, layers: int) -> None:
    with pytest.raises(ValueError, match="no wall"):
        bending_overstiffness(0.3, aspect, layers)


def test_examples() -> None:
    assert doctest.testmod(wall_bending).failed == 0
