"""The user's own materials: kept, replaced, removed, and a broken file that harms nothing."""

from __future__ import annotations

import json
from dataclasses import replace
from pathlib import Path

import pytest

from screenapp.model.errors import ScreenappError
from screenapp.model.own_materials import (
    keep_material,
    own_materials,
    own_materials_file,
    remove_material,
)
from screenapp.model.part import Material

MINE = Material("Our sheet", 70_000.0, 0.33, 2700.0, proof_stress=120.0, source="own figures")
GLASS = Material(
    "Our laminate", 39_000.0, 0.28, 1900.0, youngs_modulus_2=8_600.0, shear_modulus=3_800.0
)


@pytest.fixture(autouse=True)
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.setenv("SCREENAPP_CONFIG", str(tmp_path / "new" / "config"))
    return tmp_path / "new" / "config"


def test_without_a_file_there_are_none_and_nothing_is_wrong() -> None:
    assert own_materials().materials == ()
    assert own_materials().problem == ""
    remove_material("Our sheet")
    assert not own_materials_file().exists()


def test_they_are_kept_replaced_in_place_and_removed(folder: Path) -> None:
    keep_material(MINE)
    keep_material(GLASS)
    assert own_materials_file() == folder / "materials.json"
    assert own_materials().materials == (MINE, GLASS)
    stronger = replace(MINE, proof_stress=140.0)
    keep_material(stronger)
    assert own_materials().materials == (stronger, GLASS)
    remove_material("Our sheet")
    assert own_materials().materials == (GLASS,)
    assert own_materials().named("Our laminate") == GLASS
    assert own_materials().named("Our sheet") is None


def test_the_file_is_plain_json_of_its_kind() -> None:
    keep_material(MINE)
    tree = json.loads(own_materials_file().read_text(encoding="utf-8"))
    assert tree["format"] == "screenapp materials"
    assert tree["materials"][0]["proof_stress"] == 120


def test_figures_that_cannot_be_are_not_kept() -> None:
    with pytest.raises(ScreenappError, match="Young"):
        keep_material(replace(MINE, youngs_modulus=-1.0))
    assert not own_materials_file().exists()


@pytest.mark.parametrize(
    ("content", "word"),
    [
        (b"{ not json", "line 1"),
        (b"[]", "not a file of materials"),
        (b'{"format": "screenapp materials", "version": 9, "materials": []}', "version 9"),
        (b'{"format": "screenapp materials", "version": 2}', "no list"),
        (
            b'{"format": "screenapp materials", "version": 2, "materials": [{"name": "x"}]}',
            "youngs_modulus",
        ),
        (b"\xff\xfe\x00", "UTF-8"),
    ],
)
def test_a_broken_file_says_so_and_is_left_as_it_is(content: bytes, word: str) -> None:
    path = own_materials_file()
    path.parent.mkdir(parents=True)
    path.write_bytes(content)
    found = own_materials()
    assert found.materials == ()
    assert word in found.problem
    assert str(path.parent) in found.problem
    for change in (lambda: keep_material(MINE), lambda: remove_material("x")):
        with pytest.raises(ScreenappError):
            change()
    assert path.read_bytes() == content


def test_a_folder_in_its_place_is_told() -> None:
    own_materials_file().mkdir(parents=True)
    assert "cannot be opened" in own_materials().problem
    with pytest.raises(ScreenappError):
        keep_material(MINE)


def test_a_mended_file_is_read_again() -> None:
    keep_material(MINE)
    good = own_materials_file().read_bytes()
    own_materials_file().write_bytes(b"{")
    assert own_materials().problem
    own_materials_file().write_bytes(good)
    assert own_materials().materials == (MINE,)
