"""Zones in the part file and in the edits: stretches with a thickness or material of their own."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.model import edits
from screenapp.model.edit_dimensions import set_dimension
from screenapp.model.errors import Fault, PartFileError
from screenapp.model.part import (
    CircleHole,
    FixedSupport,
    LoopHole,
    Material,
    Part,
    RollerSupport,
    SlotHole,
    StressLimit,
    Wall,
    Zone,
)
from screenapp.model.part_json import (
    part_from_text,
    part_to_text,
    screening_key,
)
from screenapp.model.validity import faults_of
from tests.model.plates import plate

ZONED = """{
  "format": "screenapp part",
  "version": 2,
  "dimensions": [{"name": "pad", "value": 24}],
  "shape": {
    "outline": {
      "corners": [
        {"id": "c1", "at": [0, 0]},
        {"id": "c2", "at": [100, 0]},
        {"id": "c3", "at": [100, 50]},
        {"id": "c4", "at": [0, 50]}
      ],
      "edges": [{"id": "e1"}, {"id": "e2"}, {"id": "e3"}, {"id": "e4"}]
    },
    "zones": [
      {"id": "z1", "kind": "circle", "centre": [30, 25], "diameter": "pad", "thickness": "pad/4"},
      {
        "id": "z2",
        "kind": "loop",
        "corners": [
          {"id": "c5", "at": ["100 - pad", -5]},
          {"id": "c6", "at": [110, -5]},
          {"id": "c7", "at": [110, 60], "round": 2}
        ],
        "edges": [{"id": "e5"}, {"id": "e6"}, {"id": "e7"}],
        "material": "brass",
        "name": "insert"
      }
    ]
  },
  "wall": {"thickness": 3, "material": "steel"},
  "materials": [
    {"name": "steel", "youngs_modulus": 210000, "poissons_ratio": 0.3, "density": 7850},
    {"name": "brass", "youngs_modulus": 100000, "poissons_ratio": 0.35, "density": 8500}
  ]
}
"""


def zoned(*zones: Zone) -> Part:
    return replace(plate(), zones=zones)


def test_a_file_with_zones_is_read_with_its_expressions() -> None:
    part = part_from_text(ZONED)
    first, second = part.zones
    assert first.form == CircleHole("z1", (30.0, 25.0), 24.0)
    assert (first.thickness, first.material) == (6.0, None)
    assert isinstance(second.form, LoopHole)
    assert second.form.loop.corners[0].at == (76.0, -5.0)
    assert (second.thickness, second.material, second.name) == (None, "brass", "insert")
    assert {f.field for f in part.formulas} == {
        "zones.z1.diameter",
        "zones.z1.thickness",
        "zones.z2.corners.c5.at.0",
    }


def test_what_is_written_is_read_back_the_same() -> None:
    part = part_from_text(ZONED)
    text = part_to_text(part)
    assert part_from_text(text) == part
    assert part_to_text(part_from_text(text)) == text
    assert '"thickness": "pad/4"' in text


def test_a_part_without_zones_is_written_without_the_key() -> None:
    assert '"zones"' not in part_to_text(plate())


def test_a_changed_dimension_reaches_the_zones() -> None:
    part = set_dimension(part_from_text(ZONED), "pad", 40.0)
    assert part.zones[0].thickness == 10.0
    assert isinstance(part.zones[1].form, LoopHole)
    assert part.zones[1].form.loop.corners[0].at == (60.0, -5.0)


def test_thickness_and_material_fall_back_to_the_wall() -> None:
    part = part_from_text(ZONED)
    assert part.wall_of(-1) == Wall(3.0, "steel")
    assert part.wall_of(0) == Wall(6.0, "steel")
    assert part.wall_of(1) == Wall(3.0, "brass")
    material = part.material_of(1)
    assert material is not None
    assert material.name == "brass"


def test_another_thickness_puts_findings_out_of_date() -> None:
    part = part_from_text(ZONED)
    assert screening_key(edits.set_zone(part, "z1", thickness=5.0)) != screening_key(part)


@pytest.mark.parametrize(
    ("change", "field"),
    [
        ('"thickness": "pad/4"|"thickness": "ply/4"', "zones.z1.thickness"),
        ('"material": "brass"|"material": 4', "zones.z2.material"),
        ('"kind": "circle", "centre"|"kind": "round", "centre"', "zones.z1.kind"),
        ('"thickness": "pad/4"|"depth": 4', "zones.z1.depth"),
        ('"id": "z2"|"id": "z1"', "zones.z1.id"),
        ('{"id": "e6"}, |', "zones.z2"),
    ],
)
def test_faults_in_the_file_name_the_field_and_its_line(change: str, field: str) -> None:
    old, new = change.split("|")
    with pytest.raises(PartFileError) as raised:
        part_from_text(ZONED.replace(old, new))
    assert field in [f.field for f in raised.value.faults]
    assert all(f.line for f in raised.value.faults)


@pytest.mark.parametrize("thickness", [0.0, -2.0, math.nan, math.inf, 2e6])
def test_a_thickness_that_is_none_is_a_fault(thickness: float) -> None:
    part = zoned(Zone(CircleHole("z1", (25.0, 25.0), 10.0), thickness))
    (fault,) = [f for f in faults_of(part) if f.field == "zones.z1.thickness" and f.blocks]

    assert fault.ids == ("z1",)


def test_a_material_that_the_part_does_not_carry_is_a_fault() -> None:
    part = zoned(Zone(CircleHole("z1", (25.0, 25.0), 10.0), None, "unobtainium"))
    assert [f.field for f in faults_of(part) if f.blocks] == ["zones.z1.material"]


@pytest.mark.parametrize(
    ("form", "field"),
    [
        (CircleHole("z1", (math.nan, 25.0), 10.0), "zones.z1.centre"),
        (CircleHole("z1", (50.0, 25.0), -1.0), "zones.z1.diameter"),
        (SlotHole("z1", (50.0, 25.0), 20.0, math.inf), "zones.z1.width"),
        (SlotHole("z1", (50.0, 25.0), 20.0, 5.0, math.nan), "zones.z1.angle"),
    ],
)
def test_a_form_that_is_no_form_is_a_fault(form: CircleHole | SlotHole, field: str) -> None:
    faults = [f for f in faults_of(zoned(Zone(form, 5.0))) if f.blocks]
    assert [f.field for f in faults] == [field]
    assert "zone z1" in faults[0].cause


def test_zones_and_plane_strain_do_not_go_together() -> None:
    part = zoned(Zone(CircleHole("z1", (25.0, 25.0), 10.0), 5.0))
    strained = replace(part, wall=replace(part.wall, state="plane strain"))
    assert "wall.state" in [f.field for f in faults_of(strained) if f.blocks]


def test_a_limit_needs_the_stress_of_every_material_used() -> None:
    part = zoned(Zone(CircleHole("z1", (25.0, 25.0), 10.0), None, "resin"))
    resin = Material("resin", 3000.0, 0.35, 1200.0)
    part = replace(part, materials=(*part.materials, resin))
    limit = edits.add_limit(part, StressLimit("g9"))
    assert any("resin" in f.cause for f in faults_of(limit) if f.blocks)


def _sided(sides: str | None, thickness: float = 9.0) -> list[Fault]:
    zone = Zone(CircleHole("z1", (25.0, 25.0), 10.0), thickness, sides=sides)  # type: ignore[arg-type]
    return [f for f in faults_of(zoned(zone)) if f.field.startswith("zones.z1")]


def test_a_zone_on_both_sides_needs_no_caution_and_one_on_one_side_a_number() -> None:
    """Wall t = 3, pad 9: the middle planes are 3 mm apart; 6 e / t = 6 (rectangular section)."""
    assert zoned().wall.thickness == 3.0
    assert _sided("both") == []
    (one,) = _sided("one")
    assert "thicker on one side only" in one.cause
    assert "stands 3 mm off" in one.cause
    assert "adds 6 times the membrane stress" in one.cause
    assert not one.blocks
    (silent,) = _sided(None)
    assert "is taken to be the wall's" in silent.cause
    assert "on which sides" in silent.mend


def test_a_pocket_from_one_side_is_eccentric_too() -> None:
    """Wall t = 3, pocket 2: 0.5 mm apart, 6 × 0.5 / 2 = 1.5 in the thinner of the two."""
    (one,) = _sided("one", 2.0)
    assert "thinner on one side only" in one.cause
    assert "stands 0.5 mm off" in one.cause
    assert "2 mm take that alone, the bending adds 1.5 times" in one.cause


def test_sides_say_nothing_where_the_thickness_is_the_walls() -> None:
    assert _sided("one", 3.0) == []


def test_sides_are_written_read_and_left_out() -> None:
    zone = Zone(CircleHole("z1", (25.0, 25.0), 10.0), 9.0)
    silent = part_to_text(zoned(zone))
    assert "sides" not in silent
    text = part_to_text(edits.set_zone(zoned(zone), "z1", sides="one"))
    assert '"sides": "one"' in text
    again = part_from_text(text)
    assert again.zones[0].sides == "one"
    assert part_to_text(edits.set_zone(again, "z1", sides="")) == silent
    with pytest.raises(PartFileError, match="sides"):
        part_from_text(text.replace('"sides": "one"', '"sides": "left"'))


def test_nothing_can_stand_on_a_zone() -> None:

    part = part_from_text(ZONED)
    for on in ("z1", "e5", "c5"):
        held = replace(part, supports=(FixedSupport("s1", on),))
        assert any(f.ids[:1] == ("s1",) and f.blocks for f in faults_of(held)), on


def test_a_new_zone_is_a_pad_of_twice_the_wall() -> None:
    part = edits.add_zone(plate(), CircleHole("", (50.0, 25.0), 12.0))
    assert part.zones == (Zone(CircleHole("z1", (50.0, 25.0), 12.0), 2.0 * part.wall.thickness),)
    with pytest.raises(edits.EditError):
        edits.add_zone(part, CircleHole("", (50.0, 25.0), 12.0), thickness=0.0)


def test_a_zone_is_changed_moved_and_removed() -> None:
    part = edits.set_zone(part_from_text(ZONED), "z1", thickness=9.0, name="boss")
    assert (part.zones[0].thickness, part.zones[0].name) == (9.0, "boss")
    assert "zones.z1.thickness" not in {f.field for f in part.formulas}
    assert "zones.z1.diameter" in {f.field for f in part.formulas}
    part = edits.set_zone(part, "z2", material="")
    assert part.zones[1].material is None
    part = edits.move(part, ["z1", "z2"], 1.0, 2.0)
    assert part.zones[0].form == CircleHole("z1", (31.0, 27.0), 24.0)
    assert isinstance(part.zones[1].form, LoopHole)
    assert part.zones[1].form.loop.corners[1].at == (111.0, -3.0)
    part = edits.move_corner(part, "c6", (120.0, -3.0))
    part = edits.set_round(part, "c7", 0.0)
    assert isinstance(part.zones[1].form, LoopHole)
    assert part.zones[1].form.loop.corners[1].at == (120.0, -3.0)
    assert edits.reshape_zone(part, "z1", diameter=8.0).zones[0].form.diameter == 8.0  # type: ignore[union-attr]
    with pytest.raises(edits.EditError):
        edits.reshape_zone(part, "z2", diameter=8.0)
    assert edits.remove(part, "z1", "c5", "c6").part.zones == ()


def test_a_hole_becomes_a_zone_and_comes_back() -> None:
    part = edits.add_circle_hole(plate(), (50.0, 25.0), 12.0)
    hole = part.holes[-1]
    filled = edits.hole_to_zone(part, hole.id, 6.0).part
    assert filled.holes == part.holes[:-1]
    assert filled.zones == (Zone(replace(hole, id="z1"), 6.0),)
    back = edits.zone_to_hole(filled, "z1")
    assert back.zones == ()
    assert back.holes[-1] == hole


def test_what_was_on_a_hole_goes_when_it_is_filled() -> None:

    part = edits.add_circle_hole(plate(), (50.0, 25.0), 12.0)
    hole = part.holes[-1].id
    part = replace(part, supports=(RollerSupport("s9", hole),))
    outcome = edits.hole_to_zone(part, hole)
    assert outcome.part.supports == ()
    assert outcome.lost == (f"support s9 on {hole}",)


def test_a_thickness_beyond_what_the_figures_stand_for_is_pointed_out() -> None:
    part = zoned(Zone(CircleHole("z1", (25.0, 25.0), 10.0), 25.0))
    ranged = replace(part.materials[0], thickness_from=0.0, thickness_upto=16.0)
    part = replace(part, materials=(ranged,))
    told = [f for f in faults_of(part) if "zone z1 has 25 mm" in f.cause]
    assert [f.blocks for f in told] == [False]
