"""The JSON reader agrees with the standard one, and knows the line of everything."""

from __future__ import annotations

import json
from typing import Any

from hypothesis import given, strategies as st

from screenapp.model.json_reader import JsonObject, dotted, line_of, read_json
from screenapp.model.json_writer import json_text

keys = st.text(st.characters(exclude_categories=["Cs"]), max_size=6)
leaves = (
    st.none()
    | st.booleans()
    | st.integers(-(10**14), 10**14)
    | st.floats(allow_nan=False, allow_infinity=False)
    | st.text(st.characters(exclude_categories=["Cs"]), max_size=12)
)
values = st.recursive(
    leaves, lambda inner: st.lists(inner, max_size=4) | st.dictionaries(keys, inner, max_size=4)
)


@given(values, st.sampled_from([None, 0, 3]))
def test_it_reads_what_the_standard_library_reads(value: Any, indent: int | None) -> None:
    text = json.dumps(value, indent=indent)
    read = read_json(text)
    assert read.faults == ()
    assert read.root == json.loads(text)


@given(st.dictionaries(keys, values, max_size=4))
def test_what_the_writer_lays_out_is_json_of_the_same_value(value: dict[str, Any]) -> None:
    assert json.loads(json_text(value)) == value


@given(st.dictionaries(keys, values, min_size=1, max_size=3))
def test_every_value_knows_its_line(value: dict[str, Any]) -> None:
    """Write every scalar on a line of its own as its path, then ask for the line of that path."""
    text = json.dumps(value, indent=1)
    root = read_json(text).root
    lines = text.split("\n")

    def look(node: Any, path: tuple[str | int, ...]) -> None:
        items = node.items() if isinstance(node, dict) else enumerate(node)
        for key, item in items:
            here = (*path, key)
            line = line_of(root, here)
            assert line is not None
            start = f"{json.dumps(key)}: " if isinstance(key, str) else ""
            assert lines[line - 1].strip().startswith(start)
            if isinstance(item, dict | list):
                look(item, here)
            else:
                assert lines[line - 1].strip() == start + json.dumps(item) + (
                    "," if lines[line - 1].endswith(",") else ""
                )

    look(value, ())


def test_a_path_beyond_the_tree_has_the_line_of_what_holds_it() -> None:
    root = read_json('{\n"a": [\n1,\n2]\n}').root
    assert line_of(root, ("a", 1)) == 4
    assert line_of(root, ("a", 7, "b")) == 2
    assert line_of(root, ("z",)) == 1


def test_lines_move_with_what_they_belong_to() -> None:
    root = read_json('{\n"a": {\n"x": 1}\n}').root
    moved = JsonObject({"b": root["a"]})
    assert line_of(moved, ("b", "x")) == 3


def test_fields_are_named_by_ids() -> None:
    tree = {
        "shape": {"outline": {"corners": [{"id": "c3", "at": [0, 1]}]}},
        "materials": [{"name": "S235JR plate"}],
        "cases": [{"loads": [{"id": "l2"}]}],
    }
    assert dotted(tree, ("shape", "outline", "corners", 0, "at", 1)) == "outline.corners.c3.at.1"
    assert dotted(tree, ("materials", 0, "density")) == "materials.S235JR plate.density"
    assert dotted(tree, ("cases", 0, "loads", 0, "y")) == "cases.0.loads.l2.y"
    assert dotted(tree, ("shape",)) == "shape"
    assert dotted(tree, ()) == ""


def test_odd_numbers_and_half_characters_are_faults_with_their_places() -> None:
    read = read_json('{"a": [NaN,\n-Infinity, 1e400], "b": "\\ud800", "a": 1}')
    assert [(f.field, f.line) for f in read.faults] == [
        ("a.0", 1),
        ("a.1", 2),
        ("a.2", 2),
        ("b", 2),
        ("a", 2),
    ]
