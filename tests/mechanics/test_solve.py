"""The whole plane problem: bars with known answers, prescribed motion, several cases, refusals."""

from __future__ import annotations

from dataclasses import replace
from typing import get_args

import numpy as np
import pytest

from screenapp.mechanics.solve import estimate_memory, estimate_unknowns, solve
from screenapp.model.errors import Cancelled, SolvingError
from screenapp.model.mesh import Mesh
from screenapp.model.part import (
    Case,
    ElementName,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    LineLoad,
    MeshWishes,
    Part,
    PrescribedSupport,
    RollerSupport,
    Wall,
)
from screenapp.model.progress import Progress
from tests.mechanics.structured import STEEL, Structured, rectangle, shaken

ELEMENTS: tuple[ElementName, ...] = get_args(ElementName)
E, NU, THICK = STEEL.youngs_modulus, STEEL.poissons_ratio, 2.0


def _pulled(element: ElementName, state: str = "plane stress") -> tuple[Structured, Part]:
    """A 10 x 4 bar pulled by 1200 N, free to contract, on a distorted mesh."""
    case = rectangle(10.0, 4.0, 5, 3, Wall(THICK, "", state))  # type: ignore[arg-type]
    case = replace(case, mesh=shaken(case.mesh, case.shape, 0.2))
    part = replace(
        case.part,
        supports=(RollerSupport("s4", "e4"), RollerSupport("s1", "e1")),
        cases=(Case("k", "pull", (ForceLoad("f", "e2", 1200.0, 0.0),)),),
        mesh=MeshWishes(element),
    )
    return case, part


@pytest.mark.parametrize("element", ELEMENTS)
@pytest.mark.parametrize("state", ["plane stress", "plane strain"])
def test_a_pulled_bar_stretches_by_hookes_law(element: ElementName, state: str) -> None:
    case, part = _pulled(element, state)
    solution = solve(part, case.shape, case.mesh)
    stress = 1200.0 / (4.0 * THICK)
    along, across = (
        (stress / E, -NU * stress / E)
        if state == "plane stress"
        else (stress * (1 - NU**2) / E, -NU * (1 + NU) * stress / E)
    )
    x, y = case.mesh.nodes.T
    wanted = np.stack([along * x, across * y], axis=1)
    assert np.abs(solution.displacements[0] - wanted).max() < 1e-10 * np.abs(wanted).max()
    assert solution.element == element
    assert solution.residual < 1e-10
    assert (solution.internal_modes is not None) == (element == "quad4-incompatible")


def test_a_hanging_bar_stretches_by_its_weight() -> None:
    """Own weight: u = γ L²/(2 E) at the free end when nothing hinders contraction (ν = 0)."""
    case = rectangle(100.0, 10.0, 8, 1, Wall(THICK, ""), replace(STEEL, poissons_ratio=0.0))
    part = replace(
        case.part,
        supports=(FixedSupport("s", "e4"),),
        cases=(Case("k", "", (GravityLoad("g", 9.81, 0.0),)),),
    )
    solution = solve(part, case.shape, case.mesh)
    x = case.mesh.nodes[:, 0]
    weight = 7850.0 * 9.81e-9
    wanted = weight * (100.0 * x - 0.5 * x**2) / E
    # centre nodes too: they carry their own share of the weight
    assert np.abs(solution.displacements[0, :, 0] - wanted).max() < 1e-12 * wanted.max()


def test_cases_are_solved_together_and_add_up() -> None:
    case, part = _pulled("quad9")
    one, two = ForceLoad("f", "e2", 1200.0, 0.0), LineLoad("q", "e3", 3.0, -8.0)
    part = replace(
        part, cases=(Case("a", "", (one,)), Case("b", "", (two,)), Case("c", "", (one, two)))
    )
    solution = solve(part, case.shape, case.mesh)
    a, b, both = solution.displacements
    assert a + b == pytest.approx(both, abs=1e-13)
    assert len(solution.reactions) == len(solution.balance) == 3


@pytest.mark.parametrize("element", ELEMENTS)
def test_a_prescribed_end_gives_the_force_that_would_move_it(element: ElementName) -> None:
    case, part = _pulled(element)
    moved = 1200.0 / (4.0 * THICK) / E * 10.0
    part = replace(
        part,
        supports=(*part.supports, PrescribedSupport("end", "e2", x=moved)),
        cases=(Case("k", "", ()),),
    )
    solution = solve(part, case.shape, case.mesh)
    end = solution.reactions[0][2]
    assert end.support == "end"
    assert end.x == pytest.approx(1200.0, rel=1e-9)
    assert end.y == 0.0
    assert solution.balance[0].force < 1e-8


def test_a_slender_strip_keeps_its_digits() -> None:
    """200 : 1; the plain residual of the same equations is above 1e-7."""
    case = rectangle(200.0, 1.0, 400, 4)
    part = replace(
        case.part,
        supports=(FixedSupport("s", "e4"),),
        cases=(Case("k", "", (ForceLoad("f", "e2", 0.0, 1.0),)),),
    )
    solution = solve(part, case.shape, case.mesh)
    tip = solution.displacements[0, case.mesh.corner_nodes["c2"], 1]
    bar = 200.0**3 / (3.0 * E / 12.0)
    assert tip == pytest.approx(bar, rel=1e-3)
    assert solution.residual < 1e-10
    assert solution.balance[0].force < 1e-9
    assert solution.balance[0].moment < 1e-9


def test_a_part_without_cases_has_no_displacements() -> None:
    case, part = _pulled("quad9")
    solution = solve(replace(part, cases=()), case.shape, case.mesh)
    assert solution.displacements.shape == (0, case.mesh.n_nodes, 2)
    assert solution.reactions == ()


def test_everything_held_leaves_nothing_to_solve() -> None:
    case = rectangle(1.0, 1.0, 1, 1)
    part = replace(
        case.part,
        supports=tuple(FixedSupport(f"s{i}", f"e{i}") for i in (1, 2, 3, 4)),
        cases=(Case("k", "", (GravityLoad("g", 0.0, -9810.0),)),),
    )
    solution = solve(part, case.shape, case.mesh)
    assert solution.unknowns == 0
    assert sum(r.y for r in solution.reactions[0]) == pytest.approx(7850e-9 * 9810.0)


def test_refusals_name_what_is_wrong() -> None:
    case, part = _pulled("quad9")
    with pytest.raises(SolvingError, match="choose a material"):
        solve(replace(part, materials=()), case.shape, case.mesh)
    with pytest.raises(SolvingError, match="moving along y"):
        solve(replace(part, supports=part.supports[:1]), case.shape, case.mesh)
    bad = Case("k", "", (ForceLoad("f", "e2", float("nan"), 0.0),))
    with pytest.raises(SolvingError, match="not finite"):
        solve(replace(part, cases=(bad,)), case.shape, case.mesh)


def test_regions_that_touch_in_one_point_are_a_mechanism() -> None:
    """Two squares that share one corner: held on the left, the right one turns freely."""
    case = rectangle(2.0, 2.0, 2, 2)
    keep = [0, 3]  # lower left and upper right square
    mesh = _only(case.mesh, keep)
    part = replace(
        case.part,
        supports=(FixedSupport("s", "e4"),),
        cases=(Case("k", "", (ForceLoad("f", "e2", 0.0, 1.0),)),),
    )
    with pytest.raises(SolvingError, match=r"mechanism|relative residual"):
        solve(part, case.shape, mesh)


def test_cancel_is_heard() -> None:
    case, part = _pulled("quad9")
    with pytest.raises(Exception, match=r"^$") as caught:
        solve(part, case.shape, case.mesh, Progress(cancelled=lambda: True))
    assert caught.type is Cancelled


@pytest.mark.parametrize("element", ELEMENTS)
def test_estimates_are_close_and_on_the_safe_side(element: ElementName) -> None:
    case = rectangle(40.0, 40.0, 40, 40)
    part = replace(
        case.part, supports=(RollerSupport("s", "c1", 90.0), FixedSupport("r", "c2")),
        cases=(), mesh=MeshWishes(element),
    )  # fmt: skip
    found = solve(part, case.shape, case.mesh).unknowns
    assert estimate_unknowns(1600, element) == pytest.approx(found, rel=0.06)
    assert estimate_memory(found) > 100 * found
    assert estimate_memory(2 * found) > 2 * estimate_memory(found)


def _only(mesh: Mesh, elements: list[int]) -> Mesh:
    """The mesh of some of its elements, with the boundary sides that are left."""
    new = {old: i for i, old in enumerate(elements)}
    kept = np.isin(mesh.sides[:, 0], elements)
    sides = mesh.sides[kept].copy()
    sides[:, 0] = [new[e] for e in sides[:, 0]]
    return replace(
        mesh,
        quads=mesh.quads[elements],
        sides=sides,
        side_piece=mesh.side_piece[kept],
        side_t=mesh.side_t[kept],
    )
