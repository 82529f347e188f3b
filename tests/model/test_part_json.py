"""Part files: what is written reads back, and every fault is told with its line and field."""

from __future__ import annotations

import json
import os
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings

from screenapp.model.edit_dimensions import set_dimension
from screenapp.model.edit_rules import EditError
from screenapp.model.errors import PartFileError
from screenapp.model.part import (
    Case,
    CircleHole,
    Corner,
    Dimension,
    Edge,
    FixedSupport,
    ForceLoad,
    Formula,
    Loop,
    Material,
    Part,
    Point,
    Probe,
    StressLimit,
    Wall,
)
from screenapp.model.part_json import (
    part_from_text,
    part_sha256,
    part_to_text,
    read_part,
    screening_key,
    write_part,
)
from tests.model.random_parts import parts, parts_with_formulas

PROPERTY = settings(max_examples=60, deadline=None, suppress_health_check=list(HealthCheck))


def _plate() -> Part:
    places: tuple[Point, ...] = ((0.0, 0.0), (80.0, 0.0), (80.0, 40.5), (0.0, 40.5))
    corners = tuple(Corner(f"c{i + 1}", at) for i, at in enumerate(places))
    return Part(
        title="Brücke 3",
        dimensions=(Dimension("width", 80.0, lower=60.0),),
        formulas=(
            Formula("outline.corners.c2.at.0", "width"),
            Formula("outline.corners.c3.at.0", "width"),
            Formula("holes.h1.centre.0", "width/2"),
        ),
        outline=Loop(corners, tuple(Edge(f"e{i + 1}") for i in range(4))),
        holes=(CircleHole("h1", (40.0, 20.0), 8.0),),
        wall=Wall(3.0, "S235JR plate"),
        materials=(Material("S235JR plate", 210000.0, 0.3, 7850.0, 235.0),),
        supports=(FixedSupport("s1", "e4"),),
        cases=(Case("k1", "pull", (ForceLoad("l1", "e2", 1000.0, 0.0),)),),
        limits=(StressLimit("m1"),),
        readings=(Probe("p1", "beside the hole", (40.0, 24.0)),),
    )


TEXT = part_to_text(_plate())


def _faults(text: str) -> list[tuple[int | None, str, str]]:
    with pytest.raises(PartFileError) as caught:
        part_from_text(text, "plate.part.json")
    assert caught.value.faults
    assert str(caught.value).startswith("plate.part.json")
    assert all(fault.mend for fault in caught.value.faults)
    return [(fault.line, fault.field, fault.cause) for fault in caught.value.faults]


def _line(text: str, piece: str) -> int:
    return text[: text.index(piece)].count("\n") + 1


# --- writing and reading back ---------------------------------------------------------------


@PROPERTY
@given(parts)
def test_a_part_reads_back_as_it_was_written(part: Part) -> None:
    text = part_to_text(part)
    again = part_from_text(text)
    assert again == part
    assert part_to_text(again) == text


@PROPERTY
@given(parts_with_formulas)
def test_formulas_read_back_as_they_were_written(part: Part) -> None:
    text = part_to_text(part)
    assert '"abs(breadth)"' in text
    again = part_from_text(text)
    assert again == part
    assert part_to_text(again) == text


@PROPERTY
@given(parts)
def test_what_is_written_is_plain_json(part: Part) -> None:
    def refuse(token: str) -> None:
        raise AssertionError(token)

    tree = json.loads(part_to_text(part), parse_constant=refuse)
    assert tree["format"] == "screenapp part"


def test_save_open_save_gives_the_same_bytes(tmp_path: Path) -> None:
    first, second = tmp_path / "a.part.json", tmp_path / "b.part.json"
    write_part(_plate(), first)
    write_part(read_part(first), second)
    assert first.read_bytes() == second.read_bytes() == TEXT.encode()


def test_the_text_is_laid_out_for_people() -> None:
    assert '        {"id": "c3", "at": ["width", 40.5]},\n' in TEXT
    assert '{"id": "h1", "kind": "circle", "centre": ["width/2", 20], "diameter": 8}' in TEXT
    assert '"title": "Brücke 3"' in TEXT
    assert TEXT.endswith("}\n")
    assert max(map(len, TEXT.splitlines())) <= 100


def test_a_hand_written_file_may_leave_out_what_it_does_not_need() -> None:
    part = part_from_text('\ufeff{"format": "screenapp part", "version": 3, "title": "x"}')
    assert part == Part(title="x")


def test_half_a_character_is_replaced_rather_than_lost_work() -> None:
    text = part_to_text(Part(notes="a\ud800b"))
    assert part_from_text(text).notes == "a\ufffdb"


def test_a_number_that_is_not_finite_is_not_written() -> None:
    plate = replace(_plate(), wall=Wall(float("nan"), ""))
    with pytest.raises(PartFileError) as caught:
        part_to_text(plate)
    assert [f.field for f in caught.value.faults] == ["wall.thickness"]


# --- saving ---------------------------------------------------------------------------------


def test_a_newer_file_is_never_overwritten(tmp_path: Path) -> None:
    path = tmp_path / "plate.part.json"
    newer = TEXT.replace('"version": 3', '"version": 4')
    for content in (newer, newer[:200]):
        path.write_text(content, encoding="utf-8")
        with pytest.raises(PartFileError, match="version 3"):
            write_part(_plate(), path)
        assert path.read_text(encoding="utf-8") == content


def test_older_and_broken_files_are_overwritten(tmp_path: Path) -> None:
    path = tmp_path / "plate.part.json"
    for content in (TEXT.replace('"version": 3', '"version": 1'), "{", ""):
        path.write_text(content, encoding="utf-8")
        write_part(_plate(), path)
        assert path.read_bytes() == TEXT.encode()
    assert os.listdir(tmp_path) == ["plate.part.json"]


def test_a_place_that_cannot_be_written_is_named(tmp_path: Path) -> None:
    with pytest.raises(PartFileError, match="cannot be written"):
        write_part(_plate(), tmp_path / "missing" / "plate.part.json")


def test_a_file_that_is_not_there_is_named(tmp_path: Path) -> None:
    with pytest.raises(PartFileError, match="cannot be opened"):
        read_part(tmp_path / "none.part.json")


# --- hashes ---------------------------------------------------------------------------------


def test_the_hash_is_of_the_stored_bytes(tmp_path: Path) -> None:
    import hashlib

    write_part(_plate(), tmp_path / "a.part.json")
    stored = (tmp_path / "a.part.json").read_bytes()
    assert part_sha256(_plate()) == hashlib.sha256(stored).hexdigest()


def test_the_key_ignores_what_findings_do_not_depend_on() -> None:
    plate = _plate()
    renamed = replace(plate, title="x", notes="y", display_units="in-lbf-ksi", readings=())
    assert screening_key(renamed) == screening_key(plate)
    assert screening_key(replace(plate, formulas=(), dimensions=())) == screening_key(plate)
    assert part_sha256(renamed) != part_sha256(plate)
    plain_sum = replace(plate, formulas=(Formula("wall.thickness", "1 + 2"),))
    assert screening_key(plain_sum) == screening_key(plate)
    assert part_sha256(plain_sum) != part_sha256(replace(plate, formulas=()))


@pytest.mark.parametrize(
    "other",
    [
        replace(_plate(), wall=Wall(3.0001, "S235JR plate")),
        replace(_plate(), holes=()),
        replace(_plate(), supports=()),
        replace(_plate(), cases=()),
        replace(_plate(), limits=()),
        replace(_plate(), mesh=replace(Part().mesh, tolerance=0.01)),
        replace(_plate(), materials=()),
    ],
)
def test_the_key_changes_with_all_else(other: Part) -> None:
    assert screening_key(other) != screening_key(_plate())


def test_a_part_with_a_nan_still_has_a_key() -> None:
    nan = replace(_plate(), wall=Wall(float("nan"), ""), dimensions=(Dimension("a", float("inf")),))
    assert screening_key(nan) != screening_key(_plate())
    assert len(part_sha256(nan)) == 64


# --- formulas -------------------------------------------------------------------------------


def test_formulas_are_worked_out_on_reading() -> None:
    text = TEXT.replace('"thickness": 3', '"thickness": "width/20 - 1.5"')
    part = part_from_text(text)
    assert part.wall.thickness == 2.5
    assert Formula("wall.thickness", "width/20 - 1.5") in part.formulas
    assert part_to_text(part) == text


def test_another_dimension_works_every_formula_out_again() -> None:
    wide = set_dimension(_plate(), "width", 100.0)
    assert wide.outline is not None
    assert [c.at[0] for c in wide.outline.corners] == [0.0, 100.0, 100.0, 0.0]
    assert isinstance(wide.holes[0], CircleHole)
    assert wide.holes[0].centre == (50.0, 20.0)
    assert wide.dimensions == (Dimension("width", 100.0, lower=60.0),)
    assert set_dimension(wide, "width", 80.0) == _plate()


def test_a_dimension_value_that_breaks_a_formula_is_refused() -> None:
    part = part_from_text(TEXT.replace('"diameter": 8', '"diameter": "640/width"'))
    with pytest.raises(EditError, match="divides by zero") as caught:
        set_dimension(part, "width", 0.0)
    assert [f.field for f in caught.value.faults] == ["holes.h1.diameter"]
    with pytest.raises(EditError, match="height"):
        set_dimension(part, "height", 1.0)


def test_a_number_edited_since_wins_over_its_old_formula() -> None:
    plate = _plate()
    moved = replace(plate, holes=(CircleHole("h1", (33.0, 20.0), 8.0),))
    again = part_from_text(part_to_text(moved))
    assert again.holes == moved.holes
    assert [f.field for f in again.formulas] == [
        "outline.corners.c2.at.0",
        "outline.corners.c3.at.0",
    ]
    assert set_dimension(moved, "width", 90.0).holes == moved.holes


def test_a_formula_whose_place_is_gone_is_dropped() -> None:
    bare = replace(_plate(), holes=())
    assert "width/2" not in part_to_text(bare)


def test_a_round_of_zero_by_formula_is_kept() -> None:
    text = TEXT.replace('"at": ["width", 40.5]', '"at": ["width", 40.5], "round": "width - 80"')
    part = part_from_text(text)
    assert part_to_text(part) == text


# --- faults ---------------------------------------------------------------------------------


def test_every_fault_is_told_at_once_with_line_and_field() -> None:
    text = (
        TEXT.replace('"id": "c2", "at"', '"id": "c2", "att"')
        .replace('"diameter": 8', '"diameter": "widht/10"')
        .replace('"on": "e4"', '"on": 4')
        .replace('"name": "beside the hole", ', "")
        .replace('"measure": "von_mises"', '"measure": "von_mise"')
        .replace('"thickness": 3', '"thickness": NaN')
        .replace('"x": 1000', '"x": 1e999')
        .replace('"lower": 60', '"lower": "60"')
    )
    found = _faults(text)
    assert [(line, field) for line, field, _ in found] == sorted(
        [
            (_line(text, '"lower"'), "dimensions.width.lower"),
            (_line(text, '"att"'), "outline.corners.c2"),
            (_line(text, '"att"'), "outline.corners.c2.att"),
            (_line(text, "widht"), "holes.h1.diameter"),
            (_line(text, "NaN"), "wall.thickness"),
            (_line(text, '"on": 4'), "supports.s1.on"),
            (_line(text, "1e999"), "cases.k1.loads.l1.x"),
            (_line(text, "von_mise"), "limits.m1.measure"),
            (_line(text, '"p1"'), "readings.p1"),
        ]
    )


def test_a_double_key_is_a_fault() -> None:
    text = TEXT.replace('"diameter": 8', '"diameter": 8, "diameter": 9')
    assert [(f[1], "stands twice" in f[2]) for f in _faults(text)] == [("holes.h1.diameter", True)]


def test_a_double_id_is_a_fault() -> None:
    text = TEXT.replace('"id": "h1"', '"id": "e1"')
    line, field, cause = _faults(text)[0]
    assert (line, field) == (_line(text, '"circle"'), "holes.e1.id")
    assert f"line {_line(text, chr(34) + 'e1' + chr(34))}" in cause


def test_a_loop_with_an_edge_too_few_is_a_fault() -> None:
    text = TEXT.replace(',\n        {"id": "e4"}', "")
    assert [f[1:] for f in _faults(text)] == [("outline", "the loop has 4 corners but 3 edges")]


@pytest.mark.parametrize("name", ["sin", "2a", "a b", "lambda", ""])
def test_a_dimension_needs_a_usable_name(name: str) -> None:
    text = TEXT.replace('"name": "width"', f'"name": "{name}"')
    assert any(f[0] == _line(text, '"lower"') and "name" in f[1] for f in _faults(text))


def test_a_text_where_no_expression_belongs_is_a_fault() -> None:
    assert [f[1] for f in _faults(TEXT.replace('"across": 3', '"across": "3"'))] == ["mesh.across"]


@pytest.mark.parametrize("share", [0.02, 0.3, 0.5, 0.77, 0.999])
def test_a_file_cut_short_is_told_from_a_typing_mistake(share: float) -> None:
    (line, _, cause) = _faults(TEXT[: int(len(TEXT) * share)].rstrip("\n }]"))[0]
    assert "cut short" in cause
    assert line is not None


@pytest.mark.parametrize(
    ("old", "new", "cause"),
    [
        ('"notes": "",', '"notes": ""', "a comma or } is wanted"),
        ('"diameter": 8', '"diameter": 08', "a comma or } is wanted"),
        ('"diameter": 8', '"diameter": 8,', "a comma before }"),
        ('"diameter": 8', "'diameter': 8", "a key in double quotes"),
        ('"diameter": 8', '"diameter" 8', "a colon is wanted"),
        ('"diameter": 8', '"diameter": .8', "no JSON value"),
        ('"diameter": 8', '"diameter": eight', "no JSON value"),
    ],
)
def test_a_typing_mistake_is_told_with_its_line(old: str, new: str, cause: str) -> None:
    text = TEXT.replace(old, new)
    line, _, said = _faults(text)[0]
    assert cause in said
    assert line in (_line(text, new), _line(text, new) + 1)


@pytest.mark.parametrize(
    ("text", "cause"),
    [
        ("", "empty"),
        ("   \n", "empty"),
        ("[1, 2]", "not an object"),
        ("3", "not an object"),
        ("{}", "not a part"),
        ('{"format": "another"}', "not a part"),
        ('{"format": "screenapp part"}', "version"),
        ('{"format": "screenapp part", "version": "2"}', "version"),
        ('{"format": "screenapp part", "version": true}', "version"),
        ('{"format": "screenapp part", "version": 0}', "version"),
        ('{"format": "screenapp part", "version": 4}', "reads up to 3"),
        ("[" * 5000, "nested too deeply"),
        (TEXT + "{}", "more text after the end"),
    ],
)
def test_what_is_no_part_is_refused(text: str, cause: str) -> None:
    assert cause in _faults(text)[0][2]


def test_a_newer_version_is_refused_before_anything_else_is_said() -> None:
    text = TEXT.replace('"version": 3', '"version": 9').replace('"wall"', '"walls"')
    assert [f[:2] for f in _faults(text)] == [(3, "version")]


def test_a_file_that_is_not_utf8_is_refused_with_its_line(tmp_path: Path) -> None:
    path = tmp_path / "a.part.json"
    path.write_bytes(TEXT.encode("latin-1"))
    with pytest.raises(PartFileError, match="line 4 is not UTF-8"):
        read_part(path)
    path.write_bytes(TEXT.encode("utf-16"))
    with pytest.raises(PartFileError, match="UTF-16"):
        read_part(path)


def _opens(text: str) -> bool:
    """Whether the text is a part; a refusal must come with its faults."""
    try:
        part = part_from_text(text)
    except PartFileError as error:
        return not error.faults
    return part_from_text(part_to_text(part)) == part


def test_a_cut_or_garbled_file_is_refused_or_opens_as_what_it_then_says() -> None:
    for at in range(0, len(TEXT) - 2, 7):
        assert not _opens(TEXT[:at])
        assert not _opens(TEXT[:at] + "\x00" + TEXT[at:])
        _opens(TEXT[:at] + TEXT[at + 5 :])


def _places(node: Any, path: tuple[Any, ...] = ()) -> Iterator[tuple[Any, ...]]:
    items = node.items() if isinstance(node, dict) else enumerate(node)
    for key, value in items:
        yield (*path, key)
        if isinstance(value, dict | list):
            yield from _places(value, (*path, key))


@pytest.mark.parametrize("wrong", [None, True, 7, "text", [], [1], [[]], {}, {"id": "c1"}])
def test_any_value_of_a_wrong_type_anywhere_is_refused_or_has_a_meaning(wrong: Any) -> None:
    for path in _places(json.loads(TEXT)):
        tree = json.loads(TEXT)
        holder = tree
        for step in path[:-1]:
            holder = holder[step]
        holder[path[-1]] = wrong
        opened = _opens(json.dumps(tree))
        if opened:  # a number, a free text, or what may be empty
            assert wrong in (7, "text", [], {}), path
