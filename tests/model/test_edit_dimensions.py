"""Named dimensions: what depends on them follows, and what would break is refused."""

from __future__ import annotations

from dataclasses import replace

import pytest
from hypothesis import HealthCheck, given, settings

from screenapp.model import edit_dimensions as dims
from screenapp.model.edit_rules import EditError, value_at
from screenapp.model.errors import PartFileError
from screenapp.model.field_names import field_words
from screenapp.model.formulas import number_slots, written_tree
from screenapp.model.json_reader import dotted
from screenapp.model.part import CircleHole, Dimension, Formula, Part
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.model.validity import faults_of
from tests.model.random_parts import parts
from tests.window.board_kit import plate


@pytest.fixture
def part() -> Part:
    """A plate of 100 × 60 whose right side stands at `width`, its hole at `half`."""
    made = dims.add_dimension(plate(), "width", 100.0)
    made = dims.add_dimension(made, "half", "width/2")
    made = dims.with_formulas(
        made,
        {
            "outline.corners.c2.at.0": "width",
            "outline.corners.c3.at.0": "width",
            "holes.h1.centre.0": "half",
            "holes.h1.diameter": "width/5",
        },
    )
    assert len(made.formulas) == 5
    return made


def hole(part: Part) -> CircleHole:
    (only,) = part.holes
    assert isinstance(only, CircleHole)
    return only


def test_what_depends_on_a_dimension_follows_it_through_others(part: Part) -> None:
    wide = dims.set_dimension(part, "width", 140.0)
    assert hole(wide) == CircleHole("h1", (70.0, 30.0), 28.0)
    assert wide.outline is not None
    assert [c.at[0] for c in wide.outline.corners] == [0.0, 140.0, 140.0, 0.0]
    assert wide.dimensions[1] == Dimension("half", 70.0)
    assert dims.set_dimension(wide, "width", 100.0) == part


def test_a_number_takes_the_place_of_an_expression(part: Part) -> None:
    fixed = dims.set_dimension(part, "half", 30.0)
    assert dims.formula_at(fixed, "dimensions.half.value") is None
    assert hole(dims.set_dimension(fixed, "width", 120.0)).centre[0] == 30.0


@pytest.mark.parametrize(
    ("name", "text", "says"),
    [
        ("width", "half*2", "depends on itself"),
        ("width", "width + 1", "depends on itself: width → width"),
        ("half", "widht/2", 'did you mean "width"'),
        ("width", "0*half", "itself"),
        ("half", "1/(width - 100)", "divides by zero"),
        ("half", "width +", "not a complete expression"),
    ],
)
def test_an_expression_that_has_no_value_is_refused(
    part: Part, name: str, text: str, says: str
) -> None:
    with pytest.raises(EditError) as caught:
        dims.set_dimension(part, name, text)
    assert says in f"{caught.value.cause}: {caught.value.mend}"


def test_a_value_that_breaks_an_expression_elsewhere_names_it(part: Part) -> None:
    part = dims.with_formulas(part, {"holes.h1.diameter": "2000/width"})
    with pytest.raises(EditError, match=r"diameter of hole h1 would have no value.*divides by"):
        dims.set_dimension(part, "width", 0.0)


def test_renaming_renames_in_every_expression(part: Part) -> None:
    renamed = dims.rename_dimension(part, "width", "breite")
    assert {f.text for f in renamed.formulas} == {"breite", "breite/2", "breite/5", "half"}
    assert hole(dims.set_dimension(renamed, "breite", 120.0)).diameter == 24.0
    again = dims.rename_dimension(renamed, "half", "mid")
    assert dims.formula_at(again, "dimensions.mid.value") == "breite/2"
    assert dims.formula_at(again, "holes.h1.centre.0") == "mid"


@pytest.mark.parametrize("name", ["half", "2w", "sin", "", "a b"])
def test_a_name_that_cannot_be_is_refused(part: Part, name: str) -> None:
    with pytest.raises(EditError):
        dims.rename_dimension(part, "width", name)
    with pytest.raises(EditError):
        dims.add_dimension(part, name, 1.0)


def test_a_name_that_makes_an_expression_too_long_is_refused(part: Part) -> None:
    part = dims.with_formulas(part, {"holes.h1.centre.0": "+".join(["half"] * 30) + "-29*half"})
    with pytest.raises(EditError, match="x of the centre of hole h1: the expression is"):
        dims.rename_dimension(part, "half", "half_the_width")


def test_removing_puts_the_value_in_the_place_of_the_name(part: Part) -> None:
    bare = dims.remove_dimension(part, "width")
    assert [d.name for d in bare.dimensions] == ["half"]
    assert bare.outline == part.outline
    assert bare.holes == part.holes
    assert bare.formulas == (Formula("holes.h1.centre.0", "half"),)
    mixed = dims.with_formulas(part, {"holes.h1.centre.0": "width - half"})
    assert dims.formula_at(dims.remove_dimension(mixed, "width"), "holes.h1.centre.0") == (
        "100 - half"
    )


def test_a_negative_value_stays_together_when_its_name_goes() -> None:
    part = dims.add_dimension(dims.add_dimension(plate(), "low", -5.0), "w", 10.0)
    part = dims.add_dimension(part, "sum", "w - low**2")
    assert dims.formula_at(dims.remove_dimension(part, "low"), "dimensions.sum.value") == (
        "w - (-5)**2"
    )


def test_bounds_are_said_and_do_not_block(part: Part) -> None:
    bound = dims.set_bounds(part, "width", 40.0, 90.0)
    (fault,) = [f for f in faults_of(bound) if f.field.startswith("dimensions")]
    assert fault.cause == "dimension “width” is 100, above its bound of 90"
    assert not fault.blocks
    with pytest.raises(EditError, match="above the upper"):
        dims.set_bounds(part, "width", 90.0, 40.0)


def test_expressions_that_an_edit_overwrote(part: Part) -> None:
    moved = replace(part, holes=(CircleHole("h1", (49.0, 30.0), 20.0),))
    moved = dims.with_formulas(moved, {"holes.h1.centre.0": None})
    assert dims.formulas_lost(part, moved) == (Formula("holes.h1.centre.0", "half"),)
    gone = replace(part, holes=(), formulas=part.formulas[:3])
    assert dims.formulas_lost(part, gone) == ()


def test_the_file_keeps_expressions_of_dimensions(part: Part) -> None:
    angle = dims.add_dimension(part, "lean", 30.0, "angle")
    text = part_to_text(angle)
    assert '{"name": "half", "value": "width/2"}' in text
    assert '{"name": "lean", "value": 30, "measures": "angle"}' in text
    assert part_from_text(text) == angle


def test_a_file_whose_dimensions_go_in_a_circle_says_where() -> None:
    text = """{"format": "screenapp part", "version": 3,
    "dimensions": [
      {"name": "a", "value": "b + 1"},
      {"name": "b", "value": "a - 1"},
      {"name": "c", "value": "2*a"},
      {"name": "d", "value": "nix"}
    ],
    "wall": {"thickness": "a", "material": ""}}"""
    with pytest.raises(PartFileError) as caught:
        part_from_text(text)
    assert [(f.line, f.cause) for f in caught.value.faults] == [
        (3, "dimension “a” depends on itself: a → b → a"),
        (4, "dimension “b” depends on itself: b → a → b"),
        (6, '"nix" in "nix" is not a dimension of the part'),
    ]


@pytest.mark.parametrize(
    ("field", "words"),
    [
        ("outline.corners.c4.at.1", "y of corner c4"),
        ("holes.h2.corners.c9.round", "round of corner c9"),
        ("outline.edges.e3.through.0", "x of the arc point of edge e3"),
        ("cases.k1.loads.l2.y", "y of load l2"),
        ("materials.EN 1.4301.proof_stress", "proof stress of material EN 1.4301"),
        ("wall.thickness", "thickness of the wall"),
        ("dimensions.w.value", "dimension w"),
    ],
)
def test_fields_in_words(field: str, words: str) -> None:
    assert field_words(field) == words


@settings(max_examples=40, deadline=None, suppress_health_check=list(HealthCheck))
@given(parts)
def test_every_number_of_the_file_is_found_by_its_field(part: Part) -> None:
    tree = written_tree(part)
    for holder, key, path in number_slots(tree):
        if not isinstance(holder[key], str):
            assert value_at(part, dotted(tree, path)) == holder[key], dotted(tree, path)
