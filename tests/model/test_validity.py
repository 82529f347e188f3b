"""Faults of parts: each names its place and mend; no part makes the examination itself fail."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from hypothesis import HealthCheck, given, settings

from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    DisplacementLimit,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    LoopHole,
    MeshWishes,
    MomentLoad,
    Part,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    Probe,
    RollerSupport,
    SlotHole,
    SpinLoad,
    StressLimit,
    TemperatureLoad,
    Wall,
)
from screenapp.model.shape import shape_of
from screenapp.model.validity import check, faults_of
from tests.model.broken_parts import broken_parts
from tests.model.plates import STEEL, loop, plate, rectangle


def only(part: Part) -> Fault:
    """The part's single fault."""
    faults = faults_of(part)
    assert len(faults) == 1, [str(f) for f in faults]
    assert faults[0].mend
    return faults[0]


def with_loads(*loads: object) -> Part:
    return replace(plate(), cases=(Case("k1", "pull", loads),))  # type: ignore[arg-type]


def test_a_sound_part_has_no_fault_and_gets_its_shape() -> None:
    assert faults_of(plate()) == ()
    assert check(plate()) == shape_of(plate())


def test_check_raises_with_every_blocking_fault() -> None:
    with pytest.raises(InvalidPartError) as error:
        check(Part())
    causes = [f.cause for f in error.value.faults]
    assert causes[0] == "the part has no outline"
    assert len(causes) == 4
    assert all(f.blocks for f in error.value.faults)


def test_blocking_faults_come_first() -> None:
    faults = faults_of(replace(plate(), limits=(), wall=Wall(-1.0, "steel")))
    assert [f.blocks for f in faults] == [True, False]


@settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(broken_parts())
def test_no_part_makes_the_examination_fail(part: Part) -> None:
    faults = faults_of(part)
    for fault in faults:
        assert fault.cause
        assert fault.mend
        assert fault.at is None or all(math.isfinite(x) for x in fault.at)
    if not any(f.blocks for f in faults):
        assert check(part).area > 0.0


@pytest.mark.parametrize("bad", [0.0, -1.0, math.nan, math.inf, 1e9])
@pytest.mark.parametrize(
    ("field", "change"),
    [
        ("wall.thickness", lambda p, x: replace(p, wall=Wall(x, "steel"))),
        ("holes.h1.diameter", lambda p, x: replace(p, holes=(CircleHole("h1", (9.0, 9.0), x),))),
        (
            "holes.h1.length",
            lambda p, x: replace(p, holes=(SlotHole("h1", (9.0, 9.0), x, 2.0),)),
        ),
        ("holes.h1.width", lambda p, x: replace(p, holes=(SlotHole("h1", (9.0, 9.0), 2.0, x),))),
        (
            "materials.steel.youngs_modulus",
            lambda p, x: replace(p, materials=(replace(STEEL, youngs_modulus=x * 1e6),)),
        ),
        (
            "materials.steel.density",
            lambda p, x: replace(p, materials=(replace(STEEL, density=x * 1e6),)),
        ),
        ("mesh.tolerance", lambda p, x: replace(p, mesh=MeshWishes(tolerance=x))),
    ],
)
def test_sizes_must_be_positive_and_sensible(field, change, bad: float) -> None:  # type: ignore[no-untyped-def]
    faults = faults_of(change(plate(), bad))
    assert field in {f.field for f in faults if f.blocks}


@pytest.mark.parametrize(
    ("field", "part"),
    [
        ("limits.g1.factor", replace(plate(), limits=(StressLimit("g1", factor=0.0),))),
        ("limits.g1.factor", replace(plate(), limits=(StressLimit("g1", factor=math.nan),))),
        ("limits.g1.most", replace(plate(), limits=(DisplacementLimit("g1", -1.0),))),
        ("mesh.across", replace(plate(), mesh=MeshWishes(across=0))),
        ("mesh.size", replace(plate(), mesh=MeshWishes(size=0.0))),
        ("mesh.size", replace(plate(), mesh=MeshWishes(size=0.05))),
        ("mesh.element", replace(plate(), mesh=MeshWishes(element="quad7"))),  # type: ignore[arg-type]
        ("wall.material", replace(plate(), wall=Wall(3.0, "tin"))),
        ("wall.material", replace(plate(), wall=Wall(3.0, ""))),
        (
            "materials.steel.poissons_ratio",
            replace(plate(), materials=(replace(STEEL, poissons_ratio=0.5),)),
        ),
        (
            "limits.g1.against",
            replace(plate(), materials=(replace(STEEL, proof_stress=None),)),
        ),
        ("readings.p1.at", replace(plate(), readings=(Probe("p1", "x", (math.nan, 1.0)),))),
        ("readings.h1", replace(plate(), readings=(Probe("h1", "x", (1.0, 1.0)),))),
        ("cases", replace(plate(), cases=())),
        ("cases.k1.loads", replace(plate(), cases=(Case("k1", "pull"),))),
        ("cases.k1.loads", with_loads(ForceLoad("l1", "e2", 0.0, 0.0))),
        ("cases.k1.loads.l1.on", with_loads(MomentLoad("l1", "e2", 1.0))),
        ("cases.k1.loads.l1.on", with_loads(MomentLoad("l1", "c2", 1.0))),
        ("cases.k1.loads.l1.moment", with_loads(MomentLoad("l1", "h1", math.inf))),
        ("cases.k1.loads.l1.speed", with_loads(SpinLoad("l1", 0.0, 0.0, math.nan))),
        ("cases.k1.loads.l1.x", with_loads(SpinLoad("l1", math.nan, 0.0, 100.0))),
        ("cases.k1.loads.l1.zone", with_loads(TemperatureLoad("l1", 9.0, zone="z9"))),
        ("cases.k1.loads.l1.change", with_loads(TemperatureLoad("l1", math.nan))),
        ("cases.k1.loads.l1.start", with_loads(TemperatureLoad("l1", 9.0, start=math.nan))),
        ("materials.steel.expansion", with_loads(TemperatureLoad("l1", 9.0))),
        (
            "wall.state",
            replace(
                with_loads(TemperatureLoad("l1", 9.0)), wall=Wall(3.0, "steel", "plane strain")
            ),
        ),
        ("cases.k1.loads.l1.x", with_loads(ForceLoad("l1", "e2", math.nan, 1.0))),
        ("cases.k1.loads.l1.on", with_loads(ForceLoad("l1", "e9", 1.0, 1.0))),
        ("cases.k1.loads.l1.on", with_loads(BearingLoad("l1", "e2", 1.0, 1.0))),
        ("cases.k1.loads.l1.on", with_loads(PointLoad("l1", "h1", 1.0, 1.0))),
        ("cases.k1.loads.l1.on", with_loads(PressureLoad("l1", "c2", 1.0))),
        ("supports.s1.on", replace(plate(), supports=(FixedSupport("s1", "k1"),))),
        ("supports.s1.angle", replace(plate(), supports=(RollerSupport("s1", "c1"),))),
        ("supports.s1", replace(plate(), supports=(PrescribedSupport("s1", "e4"),))),
        ("outline.edges", plate(replace(rectangle(9.0, 9.0), edges=()))),
        ("outline.corners", plate(loop([(0.0, 0.0), (9.0, 0.0)]))),
        ("outline.edges.e1.through", plate(loop([(0, 0), (90, 0), (90, 90)], {0: (99.0, 0.0)}))),
        ("outline.corners.c1.round", plate(loop([(0, 0), (90, 0), (90, 90)], rounds={0: 60.0}))),
        ("outline.corners.c3.at", plate(loop([(0, 0), (90, 0), (90, 1e7)]))),
    ],
)
def test_each_fault_names_its_field(field: str, part: Part) -> None:
    found = faults_of(part)[0]
    assert (found.field, found.blocks) == (field, True)
    assert found.mend


def test_rounded_corner_is_no_place_and_the_mend_names_its_edges() -> None:
    part = replace(plate(rectangle(100.0, 50.0, 5.0)), supports=(FixedSupport("s1", "c4"),))
    fault = only(part)
    assert "corner c4" in fault.cause
    assert "rounded" in fault.cause
    assert "edge e3 or e4" in fault.mend
    assert fault.ids == ("s1", "c4")
    assert fault.at == (0.0, 50.0)


def test_edge_eaten_up_by_its_rounds_is_no_place() -> None:
    part = plate(rectangle(100.0, 50.0, 25.0))
    faults = faults_of(part)
    assert [f.ids for f in faults] == [("s1", "e4"), ("l1", "e2")]


def test_prescribed_displacement_is_load_enough() -> None:
    part = replace(
        plate(),
        supports=(FixedSupport("s1", "e4"), PrescribedSupport("s2", "e2", 0.1)),
        cases=(Case("k1", "stretched"),),
    )
    assert faults_of(part) == ()


def test_contradicting_supports_are_found_where_they_meet() -> None:
    part = replace(
        plate(), supports=(FixedSupport("s1", "e4"), PrescribedSupport("s2", "e1", 0.1, 0.0))
    )
    fault = only(part)
    assert fault.ids == ("s2", "s1")
    assert fault.at == (0.0, 0.0)
    slides = replace(part, supports=(RollerSupport("s1", "e4", 90.0), part.supports[1]))
    assert faults_of(slides) == ()  # one holds y, the other moves x


@pytest.mark.parametrize(
    ("words", "part"),
    [
        ("point load l1", with_loads(PointLoad("l1", "c2", 1.0, 0.0))),
        ("probe p1 lies outside", replace(plate(), readings=(Probe("p1", "", (50.0, 25.0)),))),
        ("probe p1 lies outside", replace(plate(), readings=(Probe("p1", "", (150.0, 25.0)),))),
        ("no limit", replace(plate(), limits=())),
        ("only 0.5 mm of material", plate(None, CircleHole("h1", (50.0, 5.5), 10.0))),
        ("only 2.5 mm of material", plate(None, CircleHole("h1", (50.0, 7.5), 10.0))),
        (
            "c4 re-enters the material at 270°",
            plate(loop([(0, 0), (90, 0), (90, 40), (60, 40), (60, 90), (0, 90)])),
        ),
        ("times free fall", with_loads(GravityLoad("l1", 0.0, -9810.0))),
        ("Young's modulus", replace(plate(), materials=(replace(STEEL, youngs_modulus=0.21),))),
        ("above its strength", replace(plate(), materials=(replace(STEEL, strength=200.0),))),
        ("not thin", replace(plate(), wall=Wall(60.0, "steel"))),
        (
            "edge e1 is only 0.05 mm long",
            plate(loop([(0, 0), (0.05, 0), (100, 10), (100, 50), (0, 50)])),
        ),
    ],
)
def test_cautions_do_not_block(words: str, part: Part) -> None:
    faults = faults_of(part)
    assert any(words in f.cause for f in faults), [f.cause for f in faults]
    assert not any(f.blocks for f in faults), [f.cause for f in faults]
    assert check(part).area > 0.0


def test_point_support_is_pointed_out() -> None:
    part = replace(plate(), supports=(FixedSupport("s1", "c1"), RollerSupport("s2", "c2", 90.0)))
    assert [f.ids for f in faults_of(part)] == [("s1", "c1"), ("s2", "c2")]


def test_loop_hole_edges_can_be_held_and_loaded() -> None:
    rounds = dict.fromkeys(range(4), 2.0)
    hole = LoopHole("h1", loop([(40, 20), (60, 20), (60, 30), (40, 30)], None, rounds, "b"))
    part = replace(
        plate(None, hole),
        supports=(FixedSupport("s1", "be2"), RollerSupport("s2", "h1")),
        cases=(Case("k1", "x", (PressureLoad("l1", "be4", 2.0),)),),
    )
    assert faults_of(part) == ()


def test_thousands_of_faults_are_not_all_listed() -> None:
    n = 500
    points = [(i * 1.0, 10.0 * (i % 2)) for i in range(n)] + [(n * 1.0, 30.0), (0.0, 30.0)]
    assert len(faults_of(plate(loop(points)))) < 60


def test_a_temperature_above_what_the_material_stands_is_pointed_out() -> None:
    warm = replace(STEEL, expansion=12e-6, temperature_max=100.0)
    part = replace(with_loads(TemperatureLoad("l1", 70.0, 0.2)), materials=(warm,))
    fault = only(part)  # 20 + 70 + 0.2 · 100 at the right end
    assert not fault.blocks
    assert "to 110 °C" in fault.cause
    assert "100 °C" in fault.cause
    assert faults_of(replace(part, cases=(Case("k", "", (TemperatureLoad("l", 70.0),)),))) == ()
    cold = only(replace(part, cases=(Case("k", "", (TemperatureLoad("l", -300.0),)),)))
    assert cold.blocks
    assert "below absolute zero" in cold.cause
