"""Expressions in the tree of a part file: worked out on reading, put back on writing.

The value of a dimension may be an expression in others; these are worked out first, each after
those that it depends on.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from screenapp.model.errors import Fault
from screenapp.model.expressions import ExpressionError, evaluate, names_in
from screenapp.model.json_reader import Path, dotted, line_of
from screenapp.model.part import Formula, Part
from screenapp.model.part_tree import NUMBER_KEYS, Tree, tree_of_part, without_blanks


def work_out(tree: Tree) -> tuple[tuple[Formula, ...], tuple[Fault, ...]]:
    """Replace every expression in `tree` by its value.

    Returns the formulas in the order of the file, and a fault for each that has no value.
    The tree may still hold other faults: what is not understood is left alone.
    """
    formulas, faults = _work_out_dimensions(tree)
    dimensions = _dimensions(tree)
    valueless = {fault.field.split(".")[1] for fault in faults}
    for holder, key, path in list(number_slots(tree)):
        text = holder[key]
        if not isinstance(text, str):
            continue
        field = dotted(tree, path)
        try:
            holder[key] = evaluate(text, dimensions)
        except ExpressionError as error:
            if _rests_on(text, valueless):
                continue  # said already, at the dimension
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
    for i, entry in enumerate(tree.get("dimensions", ())):
        text = texts.get(dotted(tree, ("dimensions", i, "value")))
        if text is not None and _gives(text, dimensions, entry["value"]):
            entry["value"] = text
    for holder, key, path in list(number_slots(tree)):
        text = texts.get(dotted(tree, path))
        if text is not None and _gives(text, dimensions, holder[key]):
            holder[key] = text


def written_tree(part: Part) -> Tree:
    """The part's tree as its file holds it: formulas in their places, blanks left out."""
    tree = tree_of_part(part)
    put_back(tree, part.formulas)
    written: Tree = without_blanks(tree)
    return written


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


def _work_out_dimensions(tree: Tree) -> tuple[list[Formula], list[Fault]]:
    """Work out the dimensions whose value is an expression, in place.

    One without a value keeps its text, so that what uses it says which dimension is missing.
    """
    listed = tree.get("dimensions", ())
    waiting: dict[str, tuple[int, dict[str, Any]]] = {
        entry["name"]: (i, entry)
        for i, entry in enumerate(listed if isinstance(listed, list) else ())
        if isinstance(entry, dict)
        and isinstance(entry.get("name"), str)
        and isinstance(entry.get("value"), str)
    }
    formulas: dict[int, Formula] = {}
    faults: list[Fault] = []

    def fault(name: str, cause: str, mend: str) -> None:
        path: Path = ("dimensions", waiting[name][0], "value")
        faults.append(Fault(cause, mend, dotted(tree, path), line=line_of(tree, path)))

    needs: dict[str, frozenset[str]] = {}
    for name, (_, entry) in waiting.items():
        try:
            needs[name] = names_in(entry["value"])
        except ExpressionError as error:
            fault(name, error.cause, error.mend)
    failed = set(waiting) - set(needs)
    known = _dimensions(tree)
    while ready := [n for n in needs if not needs[n] & needs.keys()]:
        for name in ready:
            i, entry = waiting[name]
            text = entry["value"]
            del needs[name]
            try:
                known[name] = entry["value"] = evaluate(text, known)
            except ExpressionError as error:
                if not _rests_on(text, failed):
                    fault(name, error.cause, error.mend)
                failed.add(name)
            else:
                formulas[i] = Formula(dotted(tree, ("dimensions", i, "value")), text)
    for name in needs:
        if (ring := _ring_from(name, needs)) is not None:
            way = " → ".join((*ring, ring[0]))
            fault(
                name,
                f"dimension “{name}” depends on itself: {way}",
                f"give {'it' if len(ring) == 1 else 'one of them'} a number",
            )
    return [formulas[i] for i in sorted(formulas)], faults


def _ring_from(name: str, needs: Mapping[str, frozenset[str]]) -> list[str] | None:
    """The names by which a dimension leads back to itself, itself first; None if it does not."""
    ways = [[name]]
    seen = set()
    while ways:
        way = ways.pop(0)
        for following in sorted(needs[way[-1]] & needs.keys()):
            if following == name:
                return way
            if following not in seen:
                seen.add(following)
                ways.append([*way, following])
    return None


def _rests_on(text: str, names: set[str]) -> bool:
    try:
        return bool(names_in(text) & names)
    except ExpressionError:
        return False


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
