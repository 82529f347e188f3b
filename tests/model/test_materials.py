"""The library of materials: complete, plausible and sourced."""

from __future__ import annotations

from pathlib import Path

import pytest

from screenapp.model.errors import PartFileError
from screenapp.model.materials import library, material_named, read_materials
from screenapp.model.part import Part, Wall
from screenapp.model.part_json import part_from_text, part_to_text


def test_there_are_enough_and_no_two_share_a_name() -> None:
    names = [m.name for m in library()]
    assert len(names) >= 15
    assert len(set(names)) == len(names)


def test_each_says_where_its_figures_come_from() -> None:
    assert all("from memory" in m.source for m in library())
    assert all(m.source.startswith(("EN ", "ASTM ", "typical")) for m in library())


def test_figures_are_in_the_stored_units() -> None:
    """Wide physical bounds: a figure in the wrong unit falls outside them by powers of ten."""
    for m in library():
        assert 500 < m.youngs_modulus < 500e3, m.name
        assert 0.2 < m.poissons_ratio < 0.5, m.name
        assert 800 < m.density < 9000, m.name
        assert m.expansion is not None
        assert 5e-6 < m.expansion < 2e-4, m.name
        assert m.strength is not None
        assert 20 < m.strength < 2000, m.name
        assert m.proof_stress is None or m.proof_stress <= m.strength, m.name


def test_stiffness_over_density_is_that_of_structural_metals() -> None:
    """Steel, aluminium and titanium share E / ρ near 26e6 m²/s² (common practice, no source)."""
    for m in library():
        if m.name.startswith(("S", "DC", "1.4", "EN AW", "Ti")):
            assert 24e6 < m.youngs_modulus * 1e6 / m.density < 28e6, m.name


def test_one_is_found_by_name() -> None:
    found = material_named("EN AW-6082-T6 sheet")
    assert found is not None
    assert (found.proof_stress, found.strength) == (260.0, 310.0)  # EN 485-2, from memory
    assert material_named("unobtainium") is None


def test_a_part_carries_them_in_its_file() -> None:
    part = Part(materials=library(), wall=Wall(3.0, library()[0].name))
    assert part_from_text(part_to_text(part)) == part
    assert part.material == library()[0]


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
