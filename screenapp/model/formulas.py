"""Expressions in the tree of a part file: worked out on reading, put back on writing."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from screenapp.model.errors import Fault
from screenapp.model.expressions import ExpressionError, evaluate
from screenapp.model.json_reader import Path, dotted, line_of
from screenapp.model.part import Formula
from screenapp.model.part_tree import NUMBER_KEYS, Tree


def work_out(tree: Tree) -> tuple[tuple[Formula, ...], tuple[Fault, ...]]:
    """Replace every expression in `tree` by its value.

    Returns the formulas in the order of the file, and a fault for each that has no value.
    The tree may still hold other faults: what is not understood is left alone.
    """
    dimensions = _dimensions(tree)
    formulas: list[Formula] = []
    faults: list[Fault] = []
    for holder, key, path in list(number_slots(tree)):
        text = holder[key]
        if not isinstance(text, str):
            continue
        field = dotted(tree, path)
        try:
            holder[key] = evaluate(text, dimensions)
        except ExpressionError as error:
            faults.append(Fault(error.cause, error.mend, field, line=line_of(tree, path)))
        else:
            formulas.append(Formula(field, text))
    return tuple(formulas), tuple(faults)


def put_back(tree: Tree, formulas: tuple[Formula, ...]) -> None:
    """Write each formula's text at its field, where it still gives the number that stands there.

    A number that was edited since wins over its old formula; a formula whose field is gone is
    dropped.
    """
    if not formulas:
        return
    texts = {formula.field: formula.text for formula in formulas}
    dimensions = _dimensions(tree)
    for holder, key, path in list(number_slots(tree)):
        text = texts.get(dotted(tree, path))
        if text is not None and _gives(text, dimensions, holder[key]):
            holder[key] = text


def number_slots(tree: Any, path: Path = ()) -> Iterator[tuple[Any, Any, Path]]:
    """Every place of the tree where a number or expression belongs: holder, key, path."""
    items = tree.items() if isinstance(tree, dict) else enumerate(tree)
    for key, value in items:
        here = (*path, key)
        if here == ("dimensions",):
            continue
        if key in NUMBER_KEYS and not isinstance(value, dict):
            if isinstance(value, list):
                for i in range(len(value)):
                    yield value, i, (*here, i)
            else:
                yield tree, key, here
        elif isinstance(value, dict | list):
            yield from number_slots(value, here)


def _gives(text: str, dimensions: Mapping[str, float], value: object) -> bool:
    try:
        return evaluate(text, dimensions) == value
    except ExpressionError:
        return False


def _dimensions(tree: Tree) -> dict[str, float]:
    """The named values, as far as they are readable."""
    listed = tree.get("dimensions", ())
    return {
        entry["name"]: float(entry["value"])
        for entry in (listed if isinstance(listed, list) else ())
        if isinstance(entry, dict)
        and isinstance(entry.get("name"), str)
        and isinstance(entry.get("value"), int | float)
    }
