"""The schemas and the page about them: complete, valid, and true of what the program does."""

from __future__ import annotations

import dataclasses
import json
import re
from collections.abc import Iterator
from typing import Any

import pytest
from jsonschema import Draft202012Validator

from screenapp.model.assets import resource
from screenapp.model.part import BearingLoad, SlotHole
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.model.part_tree import FORMS, HOLES, KIND_OF, NUMBER_KEYS, VERSION
from screenapp.model.schema_check import validator

SCHEMAS = ["part.schema.json", "result.schema.json"]
PAGE = resource("schema/README.md").read_text(encoding="utf-8")


def _schema(name: str) -> dict[str, Any]:
    tree: dict[str, Any] = json.loads(resource(f"schema/{name}").read_text(encoding="utf-8"))
    return tree


def _objects(node: Any, path: str = "") -> Iterator[tuple[str, dict[str, Any]]]:
    if isinstance(node, dict):
        yield path, node
        for key, value in node.items():
            yield from _objects(value, f"{path}/{key}")
    elif isinstance(node, list):
        for i, value in enumerate(node):
            yield from _objects(value, f"{path}/{i}")


def _fields(schema: dict[str, Any]) -> Iterator[tuple[str, dict[str, Any]]]:
    """Every field that the schema names, apart from the conditions of its choices."""
    for path, node in _objects(schema):
        if "if" not in path.split("/") and isinstance(node.get("properties"), dict):
            for name, field in node["properties"].items():
                yield f"{path}/{name}", field


@pytest.mark.parametrize("name", SCHEMAS)
def test_the_schema_is_a_valid_schema(name: str) -> None:
    Draft202012Validator.check_schema(_schema(name))


@pytest.mark.parametrize("name", SCHEMAS)
def test_every_field_is_described(name: str) -> None:
    fields = list(_fields(_schema(name)))
    assert len(fields) > 60
    assert [path for path, field in fields if len(field.get("description", "")) < 5] == []


@pytest.mark.parametrize("name", SCHEMAS)
def test_every_number_has_its_unit(name: str) -> None:
    def is_number(field: dict[str, Any]) -> bool:
        kinds = field.get("type", [])
        listed = [kinds] if isinstance(kinds, str) else kinds
        refers = field.get("$ref", "").rsplit("/", 1)[-1] in ("point", "band", "history")
        return refers or bool({"number", "integer"} & set(listed))

    numbers = [(path, field) for path, field in _fields(_schema(name)) if is_number(field)]
    assert len(numbers) > 25
    assert [path for path, field in numbers if "unit" not in field] == []


@pytest.mark.parametrize("name", SCHEMAS)
def test_unknown_keys_are_refused_everywhere(name: str) -> None:
    open_objects = [
        path
        for path, node in _objects(_schema(name))
        if node.get("type") == "object"
        and "additionalProperties" not in node
        and "allOf" not in node  # a choice of kinds, each of which is closed
    ]
    assert open_objects == []


@pytest.mark.parametrize("name", SCHEMAS)
def test_every_definition_is_used_and_every_reference_leads_somewhere(name: str) -> None:
    schema = _schema(name)
    used = {n["$ref"].removeprefix("#/$defs/") for _, n in _objects(schema) if "$ref" in n}
    assert used == set(schema["$defs"])


def test_the_part_schema_names_the_fields_of_the_records() -> None:
    defs = _schema("part.schema.json")["$defs"]
    by_kind = {
        (d["properties"]["kind"]["const"], name.rsplit("_", 1)[-1]): d["properties"]
        for name, d in defs.items()
        if "const" in d.get("properties", {}).get("kind", {})
    }
    zones = [kind for kind, record in by_kind if record == "zone"]
    assert sorted(zones) == sorted(HOLES)
    assert len(by_kind) == len(KIND_OF) + len(zones)
    for cls, kind in KIND_OF.items():
        if cls not in FORMS:
            continue
        wanted = {"kind", *(f.name for f in dataclasses.fields(cls))}
        assert [set(p) for (k, _), p in by_kind.items() if k == kind and set(p) == wanted], cls


def test_expressions_are_allowed_where_the_reader_looks_for_them() -> None:
    allowed = {
        path.rsplit("/", 1)[-1]
        for path, field in _fields(_schema("part.schema.json"))
        if field.get("type") == ["number", "string"] or field.get("$ref", "").endswith("/point")
    }
    assert allowed == NUMBER_KEYS | {"value"}  # "value" is that of a dimension


def test_the_version_on_the_page_is_the_one_that_is_written() -> None:
    assert _schema("part.schema.json")["properties"]["version"]["const"] == VERSION
    assert re.search(rf"^\| {VERSION} \|", PAGE, re.MULTILINE)


def test_the_example_on_the_page_opens_and_is_laid_out_as_the_program_writes() -> None:
    (example,) = re.findall(r"```json\n(.*?)```", PAGE, re.DOTALL)
    part = part_from_text(example, "README.md")
    assert part_to_text(part) == example
    assert part.title == "Tie plate"
    assert isinstance(part.holes[1], SlotHole)
    assert part.holes[0].centre == (65.0, 20.0)  # type: ignore[union-attr]
    assert part.cases[0].loads == (BearingLoad("l1", "h1", 2000.0, 0.0),)


def test_the_example_is_valid_by_the_schema_as_it_stands() -> None:
    (example,) = re.findall(r"```json\n(.*?)```", PAGE, re.DOTALL)
    assert list(validator("part.schema.json").iter_errors(json.loads(example))) == []
