"""Supports and loads on part of an edge, and loads that vary along one."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.constraints import held_directions
from screenapp.mechanics.equilibrium import resultant
from screenapp.mechanics.loads import nodal_forces, side_tractions
from screenapp.mechanics.singular_spots import singular_spots
from screenapp.model.edge_parts import pieces_under, with_span_ends
from screenapp.model.part import (
    Case,
    CircleHole,
    ElementName,
    FixedSupport,
    ForceLoad,
    LineLoad,
    Load,
    Loop,
    Part,
    PressureLoad,
    RollerSupport,
    ShearLoad,
    SymmetrySupport,
)
from screenapp.model.regions import shape_with_zones
from screenapp.model.shape import shape_of
from screenapp.model.validity import faults_of
from tests.mechanics.zoned import ELEMENTS, in_rectangles, meshed, pad, solved, strip

UPRIGHT = (RollerSupport("s1", "e4", 0.0), RollerSupport("s2", "c1", 90.0))


def loaded(load: Load, backward: bool = False, rounds: float = 0.0) -> Part:
    """60 × 12 mm, 2 mm thick; drawn clockwise its edges run the other way: e1 from the right."""
    part = strip(60.0, 12.0, (), (FixedSupport("s1", "e4"),), (Case("k", "only", (load,)),))
    assert part.outline is not None
    corners = tuple(replace(c, round=rounds) for c in part.outline.corners)
    outline = Loop(corners, part.outline.edges)
    if backward:
        c1, c2, c3, c4 = corners
        e1, e2, e3, e4 = outline.edges
        outline = Loop((c2, c1, c4, c3), (e1, e4, e3, e2))
    return replace(part, outline=outline)


def total(part: Part, element: ElementName = "quad9") -> np.ndarray:
    """Force [N] and moment about the origin [N·mm] of the only case."""
    part = replace(part, mesh=replace(part.mesh, element=element))
    shape, mesh = meshed(part)
    return resultant(mesh.nodes, nodal_forces(part, shape, mesh, part.cases[0]))


@pytest.mark.parametrize("element", ELEMENTS)
@pytest.mark.parametrize("backward", [False, True])
def test_a_pressure_on_part_of_an_edge(element: ElementName, backward: bool) -> None:
    """From 10 to 25 mm from its first corner: p t L up on the lower edge, in the middle of that."""
    part = loaded(PressureLoad("l", "e1", 3.0, start=10.0, end=25.0), backward)
    middle = 60.0 - 17.5 if backward else 17.5
    force = 3.0 * 2.0 * 15.0
    assert total(part, element) == pytest.approx([0.0, force, force * middle])


@pytest.mark.parametrize("element", ELEMENTS)
@pytest.mark.parametrize("backward", [False, True])
def test_a_pressure_that_varies(element: ElementName, backward: bool) -> None:
    """A trapezium from 1 to 4 MPa: mean 2.5, its middle at (1 + 2·4)/(3 (1 + 4)) of its length."""
    part = loaded(PressureLoad("l", "e1", 1.0, 4.0, start=20.0, end=50.0), backward)
    middle = 20.0 + 30.0 * 9.0 / 15.0
    middle = 60.0 - middle if backward else middle
    force = 2.5 * 2.0 * 30.0
    assert total(part, element) == pytest.approx([0.0, force, force * middle])


def test_open_ends_and_rounds() -> None:
    """A length counts from where the round ends; without an end it goes on to the next round."""
    part = loaded(PressureLoad("l", "e1", 1.0, start=30.0), rounds=2.0)
    assert total(part)[1:] == pytest.approx([2.0 * 26.0, 2.0 * 26.0 * 45.0])
    part = loaded(ForceLoad("l", "e2", 100.0, 0.0, end=4.0))
    assert total(part) == pytest.approx([100.0, 0.0, -200.0])


def test_varying_components_and_the_traction_that_recovery_is_told() -> None:
    part = loaded(LineLoad("l", "e3", 2.0, -4.0, end_y=0.0, start=0.0, end=30.0))
    shape, mesh = meshed(part)
    traction = side_tractions(part, shape, mesh, part.cases[0])
    on = mesh.sides_on(pieces_under(part, shape, part.cases[0].loads[0]))
    at = mesh.nodes[mesh.side_nodes[on]]
    share = (60.0 - at[..., 0]) / 30.0  # e3 was drawn from right to left
    np.testing.assert_allclose(traction[on, :, 0], 1.0, rtol=1e-12)
    np.testing.assert_allclose(traction[on, :, 1], -2.0 * (1.0 - share), atol=1e-12)
    off = np.setdiff1d(np.arange(len(mesh.sides)), on)
    assert not traction[off].any()


@pytest.mark.parametrize("element", ["quad8", "quad9"])
def test_a_varying_end_load_bends_a_strip_exactly(element: ElementName) -> None:
    """σx = M y / I all through, reached by a load from -60 to 60 N/mm on 2 mm."""
    part = replace(loaded(LineLoad("l", "e2", -60.0, 0.0, end_x=60.0)), supports=UPRIGHT)
    mesh = in_rectangles(part, 60.0, 12.0) if element == "quad8" else None
    found = solved(part, element, mesh=mesh)
    y = found.mesh.nodes[:, 1]
    np.testing.assert_allclose(found.stress.nodal[0, :, 0], 30.0 * (y / 6.0 - 1.0), atol=1e-7)
    assert np.abs(found.stress.nodal[0, :, 1:]).max() < 1e-6  # rounding, of 30 MPa
    assert found.stress.energy_error.max() < 1e-8


def test_two_parts_make_the_whole() -> None:
    parts = (PressureLoad("a", "e3", 2.0, end=24.0), PressureLoad("b", "e3", 2.0, start=24.0))
    part = replace(loaded(parts[0]), cases=(Case("k", "parts", parts),))
    whole = replace(part, cases=(Case("k", "whole", (PressureLoad("l", "e3", 2.0),)),))
    shape, mesh = meshed(part)
    one, other = (nodal_forces(p, shape, mesh, p.cases[0]) for p in (part, whole))
    np.testing.assert_allclose(one, other, atol=1e-12)


def test_a_support_holds_its_part_only_and_its_end_is_a_singular_place() -> None:
    part = replace(
        loaded(ForceLoad("l", "e2", 0.0, -50.0)),
        supports=(FixedSupport("s1", "e1", start=5.0, end=20.0),),
    )
    shape, mesh = meshed(part)
    held = mesh.nodes[held_directions(part, shape, mesh).nodes]
    assert (held[:, 0].min(), held[:, 0].max()) == pytest.approx((5.0, 20.0))
    assert np.abs(held[:, 1]).max() < 1e-12
    spots = [s for s in singular_spots(part, shape) if "support" in s.why]
    assert sorted(s.at[0] for s in spots) == pytest.approx([5.0, 20.0])
    assert all(s.rate == pytest.approx(0.5, abs=0.01) for s in spots)
    assert spots[0].place == "the end of a support within e1"
    found = solved(part)
    (given,) = found.solution.reactions[0]
    assert (given.x, given.y, given.moment) == pytest.approx((0.0, 50.0, 3000.0), abs=1e-6)


def test_the_end_of_a_shear_is_a_singular_place_of_its_case() -> None:
    shear = Case("k1", "shear", (ShearLoad("l1", "e1", 4.0, end=30.0),))
    push = Case("k2", "push", (PressureLoad("l2", "e1", 4.0, end=20.0),))
    part = replace(loaded(ShearLoad("x", "e1", 1.0)), cases=(shear, push))
    spots = [s for s in singular_spots(part, shape_with_zones(part)) if "load" in s.why]
    assert [(s.at, s.case) for s in spots] == [((30.0, 0.0), "k1")]


def test_zones_and_spans_cut_one_edge() -> None:
    """A pad of twice the wall from x = 15 on; the pressure from 10 to 25 presses on both."""
    zone = pad([(15.0, -5.0), (40.0, -5.0), (40.0, 20.0), (15.0, 20.0)], 4.0)
    part = replace(loaded(PressureLoad("l", "e1", 3.0, start=10.0, end=25.0)), zones=(zone,))
    force = 3.0 * (2.0 * 5.0 + 4.0 * 10.0)
    moment = 3.0 * (2.0 * 5.0 * 12.5 + 4.0 * 10.0 * 20.0)
    assert total(part) == pytest.approx([0.0, force, moment])


def test_the_shape_stays_what_it_was() -> None:
    part = loaded(PressureLoad("l", "e1", 3.0, start=10.0, end=25.0))
    plain = shape_of(part)
    shape = with_span_ends(part, plain)
    assert len(shape.curves) == len(plain.curves) + 2
    assert shape.area == pytest.approx(plain.area, rel=1e-12)
    assert [c.feature for c in shape.curves] == ["e1", "e1", "e1", "e2", "e3", "e4"]
    assert with_span_ends(replace(part, cases=()), plain) is plain


@pytest.mark.parametrize(
    ("load", "field", "words"),
    [
        (PressureLoad("l", "e1", 1.0, start=30.0, end=20.0), "end", "before it starts"),
        (PressureLoad("l", "e1", 1.0, start=30.0, end=70.0), "end", "60 mm long"),
        (PressureLoad("l", "e1", 1.0, start=60.0), "start", "60 mm long"),
        (PressureLoad("l", "e1", 1.0, start=-1.0), "start", "zero or more"),
        (PressureLoad("l", "e1", 1.0, end=math.nan), "end", "zero or more"),
        (PressureLoad("l", "e1", 1.0, math.inf), "end_pressure", "finite"),
    ],
)
def test_bad_spans_are_named(load: Load, field: str, words: str) -> None:
    fault = faults_of(loaded(load))[0]
    assert (fault.field, fault.blocks) == (f"cases.k.loads.l.{field}", True)
    assert words in f"{fault.cause}; {fault.mend}"


def test_a_hole_and_a_corner_have_no_parts() -> None:
    supports = (FixedSupport("s1", "e4"), FixedSupport("s2", "c2", end=3.0))
    part = replace(loaded(PressureLoad("l", "e1", 1.0)), supports=supports)
    fault = faults_of(part)[0]
    assert fault.field == "supports.s2.end"
    assert "only an edge has parts" in fault.cause


def test_a_line_of_symmetry_is_a_roller_along_its_normal() -> None:
    part = loaded(ForceLoad("l", "e2", 300.0, 0.0))
    rolling = replace(part, supports=UPRIGHT)
    mirror = replace(part, supports=(SymmetrySupport("s1", "e4"), UPRIGHT[1]))
    one, two = solved(rolling), solved(mirror)
    np.testing.assert_allclose(one.stress.nodal, two.stress.nodal, atol=1e-9)
    assert singular_spots(mirror, one.shape) == singular_spots(rolling, one.shape)


def test_a_line_of_symmetry_is_straight() -> None:
    for on in ("h1", "c2"):
        part = replace(loaded(ForceLoad("l", "e2", 3.0, 0.0)), supports=(SymmetrySupport("s", on),),
                       holes=(CircleHole("h1", (30.0, 6.0), 4.0),))  # fmt: skip
        fault = next(f for f in faults_of(part) if f.field.startswith("supports.s"))
        assert fault.field == "supports.s.on"
        assert "straight edge" in fault.mend
