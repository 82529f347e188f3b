"""The library of materials: complete, plausible and sourced."""

from __future__ import annotations

import itertools
import math
from dataclasses import replace
from pathlib import Path

import pytest

from screenapp.model.errors import PartFileError
from screenapp.model.material_faults import material_faults
from screenapp.model.material_records import AXIS_STRENGTHS
from screenapp.model.materials import library, material_named, read_materials
from screenapp.model.part import Part, Wall
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.model.validity import faults_of
from tests.model.plates import plate

EVERY = [m for grade in library() for m in grade.ranges]


def test_there_are_enough_and_no_two_share_a_name() -> None:
    names = [grade.name for grade in library()]
    assert len(names) >= 40
    assert len(set(names)) == len(names)


def test_each_says_where_its_figures_come_from() -> None:
    assert all("from memory" in m.source for m in EVERY)
    assert all(m.source.startswith(("EN ", "ASTM ", "typical")) for m in EVERY)


def test_figures_are_in_the_stored_units() -> None:
    """Wide physical bounds: a figure in the wrong unit falls outside them by powers of ten."""
    for m in EVERY:
        if m.orthotropic:
            continue
        assert 500 < m.youngs_modulus < 500e3, m.name
        assert 0.2 < m.poissons_ratio < 0.5, m.name
        assert 800 < m.density < 9000, m.name
        assert m.expansion is not None
        assert 5e-6 < m.expansion < 2e-4, m.name
        assert m.strength is not None
        assert 20 < m.strength < 2000, m.name
        assert m.proof_stress is None or m.proof_stress <= m.strength, m.name
        assert m.temperature_max is not None
        assert 40 < m.temperature_max < 500, m.name


def test_figures_of_orthotropic_sheets_are_those_of_solids_in_the_stored_units() -> None:
    """The stronger axis is 1; a sheet bears less pull across it than along it, and its shear
    modulus is below half its larger one (common practice, no source)."""
    sheets = [m for m in EVERY if m.orthotropic]
    assert len(sheets) >= 4
    for m in sheets:
        assert m.youngs_modulus_2 is not None
        assert m.shear_modulus is not None
        assert 1e3 < m.youngs_modulus_2 <= m.youngs_modulus < 300e3, m.name
        assert 100 < m.shear_modulus < 0.5 * m.youngs_modulus, m.name
        assert m.poissons_ratio**2 < m.youngs_modulus / m.youngs_modulus_2, m.name
        strengths = [getattr(m, name) for name in AXIS_STRENGTHS]
        assert all(5 < s < 5000 for s in strengths), m.name
        assert m.tension_2 <= m.tension_1, m.name  # type: ignore[operator]
        assert (m.expansion is None) == (m.expansion_2 is None), m.name
        for given in (m.expansion, m.expansion_2):
            assert given is None or -2e-6 < given < 1e-4, m.name
        assert m.proof_stress is None
        assert m.strength is None


def test_stiffness_over_density_is_that_of_structural_metals() -> None:
    """Steel, aluminium and titanium share E / ρ near 26e6 m²/s² (common practice, no source)."""
    for m in EVERY:
        if m.family in ("steel", "aluminium", "titanium"):
            assert 23e6 < m.youngs_modulus * 1e6 / m.density < 29e6, m.name


def test_ranges_of_thickness_follow_each_other_without_gaps() -> None:
    for grade in library():
        assert len({m.name for m in grade.ranges}) == 1
        for thin, thick in itertools.pairwise(grade.ranges):
            assert thin.thickness_upto == thick.thickness_from, grade.name
            assert thick.thickness_upto is not None
            assert thick.thickness_from is not None
            assert thick.thickness_from < thick.thickness_upto, grade.name


@pytest.mark.parametrize(
    ("thickness", "proof", "stands"),
    [(0.5, 235.0, True), (16.0, 235.0, True), (16.1, 225.0, True), (63.0, 215.0, True),
     (80.0, 215.0, False)],
)  # fmt: skip
def test_a_grade_gives_the_figures_of_the_thickness(
    thickness: float, proof: float, stands: bool
) -> None:
    """EN 10025-2, from memory: S235 has 235, 225 and 215 MPa up to 16, 40 and 63 mm."""
    found = material_named("S235JR plate", thickness)
    assert found is not None
    assert (found.proof_stress, found.stands_for(thickness)) == (proof, stands)


def test_too_thin_takes_the_nearest_range() -> None:
    found = material_named("EN AW-7075-T6 sheet", 0.2)
    assert found is not None
    assert (found.strength, found.stands_for(0.2)) == (525.0, False)


def test_one_is_found_by_name() -> None:
    found = material_named("EN AW-6082-T6 sheet", 3.0)
    assert found is not None
    assert (found.proof_stress, found.strength) == (260.0, 310.0)  # EN 485-2, from memory
    assert material_named("unobtainium", 3.0) is None


def test_a_part_carries_them_in_its_file() -> None:
    offered = tuple(grade.at(3.0) for grade in library())
    part = Part(materials=offered, wall=Wall(3.0, offered[0].name))
    assert part_from_text(part_to_text(part)) == part
    assert part.material == offered[0]


@pytest.mark.parametrize(
    ("change", "field"),
    [
        ({"fatigue_coefficient": 900.0}, "fatigue_exponent"),
        ({"fatigue_exponent": -0.1}, "fatigue_coefficient"),
        ({"fatigue_coefficient": 900.0, "fatigue_exponent": 0.1}, "fatigue_exponent"),
        ({"hardening_coefficient": 900.0, "hardening_exponent": 1.0}, "hardening_exponent"),
        ({"hardening_coefficient": -1.0, "hardening_exponent": 0.2}, "hardening_coefficient"),
        ({"thickness_from": 16.0, "thickness_upto": 3.0}, "thickness_from"),
        ({"thickness_upto": math.nan}, "thickness_upto"),
        ({"temperature_max": math.inf}, "temperature_max"),
    ],
)
def test_figures_that_cannot_be_are_named(change: dict[str, float], field: str) -> None:
    blank = replace(library()[0].at(3.0), thickness_from=None, thickness_upto=None)
    material = replace(blank, **change)
    faults = list(material_faults(Part(materials=(material,))))
    assert [f.field for f in faults] == [f"materials.{material.name}.{field}"]
    assert all(f.mend for f in faults)


def test_a_wall_outside_the_range_is_pointed_out() -> None:
    material = library()[0].at(10.0)
    part = replace(plate(), materials=(material,), wall=Wall(20.0, material.name))
    said = [f for f in faults_of(part) if "stand for walls" in f.cause]
    assert len(said) == 1
    assert said[0].cause.endswith("stand for walls up to 16 mm, this one has 20 mm")
    assert not said[0].blocks


@pytest.mark.parametrize(
    ("text", "cause"),
    [
        ("{", "cut short"),
        ("{}", "not a file of materials"),
        ('{"format": "screenapp materials"}', "materials"),
        ('{"format": "screenapp materials", "materials": [{"name": "x"}]}', "youngs_modulus"),
    ],
)
def test_a_garbled_library_is_refused(tmp_path: Path, text: str, cause: str) -> None:
    (tmp_path / "m.json").write_text(text, encoding="utf-8")
    with pytest.raises(PartFileError, match=cause):
        read_materials(tmp_path / "m.json")
