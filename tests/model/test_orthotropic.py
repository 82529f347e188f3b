"""Orthotropic sheets in the part file, what is wrong with some, and their rules of strength."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from screenapp.model.errors import Fault
from screenapp.model.material_axes import in_axes, strength_share
from screenapp.model.part import (
    CircleHole,
    FatigueLimit,
    JointLimit,
    Limit,
    Material,
    Part,
    StrainLimit,
    StressLimit,
    SymmetrySupport,
    TemperatureLoad,
    Wall,
    Zone,
)
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.model.solution import von_mises
from screenapp.model.stress_measures import stress_measure
from screenapp.model.validity import faults_of
from tests.model.plates import plate

GLASS = Material(
    "glass",
    39_000.0,
    0.28,
    1900.0,
    expansion=7e-6,
    youngs_modulus_2=8_600.0,
    shear_modulus=3_800.0,
    expansion_2=21e-6,
    tension_1=1080.0,
    compression_1=620.0,
    tension_2=39.0,
    compression_2=128.0,
    shear_strength=89.0,
)


def of_glass(limits: tuple[Limit, ...] = (StressLimit("q1", "tsai_hill"),), **more: float) -> Part:
    sheet = replace(GLASS, **more)  # type: ignore[arg-type]
    part = plate()
    return replace(
        part,
        wall=Wall(part.wall.thickness, "glass", axis=30.0),
        materials=(sheet,),
        limits=limits,
    )


def blocking(part: Part) -> list[Fault]:
    return [f for f in faults_of(part) if f.blocks]


def test_a_sheet_is_sound_and_its_file_reads_back() -> None:
    part = of_glass()
    assert not blocking(part)
    text = part_to_text(part)
    assert '"axis": 30' in text
    assert part_from_text(text) == part
    zone = Zone(CircleHole("z1", (20.0, 20.0), 8.0), material="glass", axis=-45.0)
    zoned = replace(part, zones=(zone,))
    assert part_from_text(part_to_text(zoned)) == zoned
    assert zoned.wall_of(0).axis == -45.0
    assert replace(zoned, zones=(replace(zone, axis=None),)).wall_of(0).axis == 30.0


def test_files_without_sheets_do_not_speak_of_axes() -> None:
    text = part_to_text(plate())
    for word in ("axis", "youngs_modulus_2", "shear_modulus", "tension_1"):
        assert word not in text


@pytest.mark.parametrize(
    ("change", "field", "word"),
    [
        ({"poissons_ratio": 2.2}, "poissons_ratio", "no solid"),
        ({"poissons_ratio": -2.2}, "poissons_ratio", "no solid"),
        ({"poissons_ratio": math.nan}, "poissons_ratio", "no solid"),
        ({"youngs_modulus_2": 0.0}, "youngs_modulus_2", "E2"),
        ({"shear_modulus": -1.0}, "shear_modulus", "G12"),
        ({"shear_modulus": None}, "shear_modulus", "shear modulus"),
        ({"tension_2": 0.0}, "tension_2", "tensile strength along 2"),
        ({"compression_1": -620.0}, "compression_1", "compressive strength along 1"),
        ({"expansion_2": math.inf}, "expansion_2", "expansion"),
        ({"youngs_modulus_2": None}, "shear_modulus", "no second Young's modulus"),
    ],
)
def test_figures_that_cannot_be_are_refused_where_they_stand(
    change: dict[str, float], field: str, word: str
) -> None:
    found = [f for f in blocking(of_glass(**change)) if f.field == f"materials.glass.{field}"]
    assert found
    assert word in found[0].cause
    assert found[0].mend


def test_a_ratio_above_one_half_is_sound_where_the_moduli_allow_it() -> None:
    assert not blocking(of_glass(poissons_ratio=0.6))


def test_plane_strain_and_a_lost_axis_are_refused() -> None:
    part = of_glass()
    strained = replace(part, wall=replace(part.wall, state="plane strain"))
    assert any(f.field == "wall.state" and "orthotropic" in f.cause for f in blocking(strained))
    lost = replace(part, wall=replace(part.wall, axis=math.nan))
    assert any(f.field == "wall.axis" for f in blocking(lost))


@pytest.mark.parametrize(
    ("limit", "word"),
    [
        (StressLimit("q1"), "one stress for all directions"),
        (StressLimit("q1", "tresca"), "one stress for all directions"),
        (StressLimit("q1", "sigma_1", "strength"), "one stress for all directions"),
        (FatigueLimit("q1", "k1"), "fatigue"),
        (StrainLimit("q1"), "Neuber"),
        (JointLimit("q1", "h1"), "joints"),
    ],
)
def test_limits_of_isotropic_material_are_refused_with_a_sentence(limit: Limit, word: str) -> None:
    found = [f for f in blocking(of_glass((limit,))) if "orthotropic" in f.cause]
    assert len(found) == 1
    assert word in found[0].cause
    assert found[0].ids == ("q1",)


def test_a_strength_that_is_missing_is_named() -> None:
    (fault,) = blocking(of_glass(compression_2=None))  # type: ignore[arg-type]
    assert "compressive strength along 2" in fault.cause
    assert "q1" in fault.cause


def test_rules_in_axes_need_an_orthotropic_sheet() -> None:
    part = replace(plate(), limits=(StressLimit("q1", "largest_stress"),))
    assert any("nothing here is orthotropic" in f.cause for f in blocking(part))


def test_warming_asks_for_both_expansions() -> None:
    part = of_glass(expansion_2=None)  # type: ignore[arg-type]
    (case, *_) = part.cases
    part = replace(part, cases=(replace(case, loads=(TemperatureLoad("t1", 10.0),)),))
    assert any(f.field == "materials.glass.expansion_2" for f in blocking(part))


def test_layers_and_an_askew_line_of_symmetry_are_cautioned() -> None:
    part = replace(of_glass(), supports=(SymmetrySupport("s9", "e1"),))
    said = [f.cause for f in faults_of(part) if not f.blocks]
    assert any("layers" in cause for cause in said)
    assert any("askew" in cause for cause in said)
    along = replace(part, wall=replace(part.wall, axis=90.0))
    assert not any("askew" in f.cause for f in faults_of(along))


def test_stress_turns_into_the_axes_as_mohr_has_it() -> None:
    """σ1 = σx c² + σy s² + 2 τ s c; the trace and the determinant stay (Mohr's circle)."""
    stress = np.array([[80.0, -20.0, 30.0]])
    for axis in (0.0, 30.0, 90.0, 145.0, -720.0):
        one, two, shear = in_axes(stress, axis)[0]
        assert one + two == pytest.approx(60.0)
        assert one * two - shear**2 == pytest.approx(-1600.0 - 900.0)
    np.testing.assert_allclose(in_axes(stress, 90.0)[0], [-20.0, 80.0, -30.0])
    along = 80.0 * 0.75 - 20.0 * 0.25 + 2.0 * 30.0 * 0.25 * math.sqrt(3.0)
    assert in_axes(stress, 30.0)[0, 0] == pytest.approx(along)


@pytest.mark.parametrize(
    ("stress", "hill", "largest"),
    [
        ((1080.0, 0.0, 0.0), 1.0, 1.0),
        ((-620.0, 0.0, 0.0), 1.0, 1.0),
        ((0.0, 39.0, 0.0), 1.0, 1.0),
        ((0.0, -64.0, 0.0), 0.5, 0.5),
        ((0.0, 0.0, -89.0), 1.0, 1.0),
        ((540.0, 0.0, 44.5), math.sqrt(0.5), 0.5),
        ((0.0, 0.0, 0.0), 0.0, 0.0),
    ],
)
def test_both_rules_give_back_the_strengths(
    stress: tuple[float, float, float], hill: float, largest: float
) -> None:
    at = np.array([stress])
    assert strength_share("tsai_hill", at, GLASS, 0.0)[0] == pytest.approx(hill)
    assert strength_share("largest_stress", at, GLASS, 0.0)[0] == pytest.approx(largest)
    assert strength_share("tsai_hill", 3.0 * at, GLASS, 0.0)[0] == pytest.approx(3.0 * hill)


def test_tsai_hill_of_an_isotropic_sheet_is_von_mises() -> None:
    y = 235.0
    even = replace(
        GLASS,
        tension_1=y,
        compression_1=y,
        tension_2=y,
        compression_2=y,
        shear_strength=y / math.sqrt(3.0),
    )
    stress = np.random.default_rng(3).normal(0.0, 100.0, (50, 3))
    share = strength_share("tsai_hill", stress, even, 25.0)
    np.testing.assert_allclose(share, von_mises(stress) / y, rtol=1e-12)


def test_axes_given_the_other_way_round_say_the_same() -> None:
    """Whichever axis is called 1, the stronger one stands under σ1 σ2."""
    other = replace(
        GLASS,
        tension_1=39.0,
        compression_1=128.0,
        tension_2=1080.0,
        compression_2=620.0,
    )
    stress = np.random.default_rng(4).normal(0.0, 50.0, (50, 3))
    for rule in ("tsai_hill", "largest_stress"):
        one, two = (strength_share(rule, stress, m, a) for m, a in ((GLASS, 20.0), (other, 110.0)))
        np.testing.assert_allclose(one, two, rtol=1e-9)


def test_a_measure_in_axes_is_von_mises_in_isotropic_zones_beside() -> None:
    part = of_glass()
    steel = replace(plate().materials[0])
    zone = Zone(CircleHole("z1", (20.0, 20.0), 8.0), material=steel.name)
    part = replace(part, materials=(*part.materials, steel), zones=(zone,))
    stress = np.array([[50.0, 10.0, -5.0], [50.0, 10.0, -5.0]])
    in_wall, in_zone = stress_measure("tsai_hill", stress, part, np.array([-1, 0]))
    assert in_zone == pytest.approx(von_mises(stress)[0])
    assert in_wall == pytest.approx(1080.0 * strength_share("tsai_hill", stress, GLASS, 30.0)[0])
