"""Checks a tree against a JSON Schema of ours and says each violation in plain words."""

from __future__ import annotations

import difflib
import functools
import json
from collections.abc import Iterator
from typing import Any

from jsonschema import Draft202012Validator
from jsonschema.exceptions import ValidationError

from screenapp.model.assets import resource
from screenapp.model.errors import Fault
from screenapp.model.json_reader import Path, dotted, line_of

_WORDS = {
    "object": "a group of keys {...}",
    "array": "a list [...]",
    "string": "a text",
    "number": "a number",
    "integer": "a whole number",
    "null": "null",
    "boolean": "true or false",
}


@functools.cache
def validator(schema: str) -> Draft202012Validator:
    """The validator of `resources/schema/<schema>`, made once."""
    text = resource(f"schema/{schema}").read_text(encoding="utf-8")
    return Draft202012Validator(json.loads(text))


def schema_faults(tree: Any, schema: str) -> tuple[Fault, ...]:
    """One fault for each violation, in the order of the lines."""
    found = [
        fault for error in validator(schema).iter_errors(tree) for fault in _faults(tree, error)
    ]
    unique = {(fault.field, fault.cause): fault for fault in found}
    return tuple(sorted(unique.values(), key=lambda f: (f.line or 0, f.field)))


def _faults(tree: Any, error: ValidationError) -> Iterator[Fault]:
    path: Path = tuple(error.absolute_path)
    if error.validator == "additionalProperties":
        known = list(error.schema["properties"])
        for key in error.instance:
            if key not in known:
                yield _fault(tree, (*path, key), *_unknown_key(key, known))
        return
    if error.validator == "required":
        missing = next(k for k in error.validator_value if f"'{k}' is a required" in error.message)
        place = dotted(tree, path) or "the file"
        yield _fault(tree, path, f'{place} has no "{missing}"', f'add "{missing}"')
        return
    yield _fault(tree, path, *_words(error))


def _fault(tree: Any, path: Path, cause: str, mend: str) -> Fault:
    return Fault(cause, mend, dotted(tree, path), line=line_of(tree, path))


def _unknown_key(key: str, known: list[str]) -> tuple[str, str]:
    near = difflib.get_close_matches(key, known, 1)
    mend = f'did you mean "{near[0]}"?' if near else "remove it; known are " + ", ".join(known)
    return f'the key "{key}" is not known here', mend


def _words(error: ValidationError) -> tuple[str, str]:
    """Cause and mend of a violation that concerns one value."""
    value, bound = error.instance, error.validator_value
    shown = _shown(value)
    if error.validator == "type":
        return f"{_type(value)} stands here", f"give {_wanted(bound)}"
    if error.validator == "enum":
        near = difflib.get_close_matches(value, bound, 1) if isinstance(value, str) else []
        hint = f'did you mean "{near[0]}"?' if near else "give one of " + ", ".join(bound)
        return f"{shown} is not one of the choices", hint
    if error.validator == "const":
        return f"{shown} stands here", f"write {_shown(bound)}"
    if error.validator == "minimum":
        return f"{shown} stands here", f"give at least {_shown(bound)}"
    if error.validator == "minItems":
        return f"the list has {len(value)} entries", f"give at least {bound}"
    if error.validator == "items" and bound is False:
        return f"the list has {len(value)} entries", "give exactly two numbers, x and y"
    if error.validator == "pattern":
        return f"{shown} cannot be an id", "use letters, digits, - or _, no spaces or full stops"
    return error.message, "see resources/schema/README.md"


def _wanted(types: str | list[str]) -> str:
    if types == ["number", "string"]:
        return "a number or an expression in quotes"
    return " or ".join(_WORDS[t] for t in ([types] if isinstance(types, str) else types))


def _type(value: Any) -> str:
    if isinstance(value, str):
        return f"the text {_shown(value)}"
    if isinstance(value, dict):
        return _WORDS["object"]
    if isinstance(value, list):
        return _WORDS["array"]
    return _shown(value)


def _shown(value: Any) -> str:
    text = json.dumps(value, ensure_ascii=False)
    return text if len(text) <= 40 else text[:37] + "..."
