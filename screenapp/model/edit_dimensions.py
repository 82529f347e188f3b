"""Edits of named dimensions, and of the expressions in them that numbers of the part are given by.

Every edit here works all expressions out again.  One that would leave an expression without a value
is refused, so a part always holds the last values that made sense.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

from screenapp.model.edit_rules import EditError, settle, value_at
from screenapp.model.expressions import (
    ExpressionError,
    check_name,
    evaluate,
    names_in,
    plain_number,
    with_name_replaced,
)
from screenapp.model.field_names import field_words
from screenapp.model.formulas import work_out, written_tree
from screenapp.model.part import Dimension, Formula, Measures, Part
from screenapp.model.part_tree import part_of_tree


def add_dimension(part: Part, name: str, value: float | str, measures: Measures = "length") -> Part:
    """Add a dimension; `value` is a number [mm or deg] or an expression in the others.

    Raises:
        EditError: the name is taken or cannot be one, or the expression has no value.
    """
    _must_be_free(part, name)
    known = values_of(part)
    try:
        number = evaluate(value, known) if isinstance(value, str) else float(value)
    except ExpressionError as error:
        raise EditError(error.cause, error.mend) from error
    added = Dimension(name, number, measures=measures)
    after = settle(part, replace(part, dimensions=(*part.dimensions, added)))
    return with_formulas(after, {value_field(name): value}) if isinstance(value, str) else after


def set_dimension(part: Part, name: str, value: float | str) -> Part:
    """Give a dimension another value or expression; everything that uses it follows.

    Raises:
        EditError: no such dimension, or an expression has no value or depends on itself with it.
    """
    dimension = dimension_called(part, name)
    tree = written_tree(part)
    for entry in tree["dimensions"]:
        if entry["name"] == dimension.name:
            entry["value"] = value
    formulas, faults = work_out(tree)
    if faults:
        first = next((f for f in faults if f.field == value_field(name)), faults[0])
        where = field_words(first.field)
        at_it = first.field == value_field(name)
        cause = first.cause if at_it else f"{where} would have no value: {first.cause}"
        raise EditError(cause, first.mend, faults)
    after = part_of_tree(tree, formulas)
    return replace(settle(part, after), formulas=formulas)  # none of them gives way to a number


def rename_dimension(part: Part, name: str, to: str) -> Part:
    """Give a dimension another name, also in every expression that uses it.

    Raises:
        EditError: the name is taken or cannot be one, or an expression would become too long.
    """
    dimension = dimension_called(part, name)
    if to == name:
        return part
    _must_be_free(part, to)
    renamed = tuple(replace(d, name=to) if d is dimension else d for d in part.dimensions)
    old, new = value_field(name), value_field(to)
    formulas = tuple(
        Formula(
            new if f.field == old else f.field,
            with_name_replaced(f.text, name, to) if name in _names(f.text) else f.text,
        )
        for f in part.formulas
    )
    return _checked(replace(part, dimensions=renamed, formulas=formulas))


def set_bounds(part: Part, name: str, lower: float | None, upper: float | None) -> Part:
    """Give a dimension other bounds; None is no bound.

    Raises:
        EditError: the lower bound lies above the upper one.
    """
    dimension = dimension_called(part, name)
    if lower is not None and upper is not None and lower > upper:
        raise EditError(
            f"the lower bound of “{name}” would lie above the upper one",
            "give a lower bound that is at most the upper one",
        )
    return _with(part, dimension, replace(dimension, lower=lower, upper=upper))


def set_measures(part: Part, name: str, measures: Measures) -> Part:
    """Say what a dimension measures; its stored number stays as it is."""
    dimension = dimension_called(part, name)
    return _with(part, dimension, replace(dimension, measures=measures))


def remove_dimension(part: Part, name: str) -> Part:
    """Remove a dimension; its value takes its place in every expression, so nothing moves."""
    dimension = dimension_called(part, name)
    value = plain_number(dimension.value)
    by = f"({value})" if dimension.value < 0 else value
    rest = tuple(d for d in part.dimensions if d is not dimension)
    formulas = []
    for formula in part.formulas:
        text = formula.text
        if formula.field == value_field(name):
            continue
        if name in _names(text):
            text = with_name_replaced(text, name, by)
            if not _names(text):
                continue  # a plain number from now on
        formulas.append(Formula(formula.field, text))
    return _checked(replace(part, dimensions=rest, formulas=tuple(formulas)))


def with_formulas(part: Part, texts: Mapping[str, str | None]) -> Part:
    """The part with other expressions at some fields, whose numbers they must give already.

    None takes the expression away; the number stays.  A field that is not there is passed over.
    """
    known = values_of(part)
    kept = [f for f in part.formulas if f.field not in texts]
    for field, text in texts.items():
        if text is not None and _gives(text, known, value_at(part, field)):
            kept.append(Formula(field, text))
    return part if tuple(kept) == part.formulas else replace(part, formulas=tuple(kept))


def formula_at(part: Part, field: str) -> str | None:
    """The expression that gives the number at a field, None if it is a plain number."""
    return next((f.text for f in part.formulas if f.field == field), None)


def uses_of(part: Part, name: str) -> tuple[Formula, ...]:
    """The expressions that a dimension is used in."""
    return tuple(f for f in part.formulas if name in _names(f.text))


def formulas_lost(before: Part, after: Part) -> tuple[Formula, ...]:
    """The expressions that an edit overwrote by numbers, whose fields are still there."""
    if before.formulas == after.formulas:
        return ()
    left = {f.field for f in after.formulas}
    return tuple(
        f for f in before.formulas if f.field not in left and value_at(after, f.field) is not None
    )


def values_of(part: Part) -> dict[str, float]:
    """The values of all dimensions by name [mm, deg]."""
    return {d.name: d.value for d in part.dimensions}


def value_field(name: str) -> str:
    """The dotted path of a dimension's value."""
    return f"dimensions.{name}.value"


def dimension_called(part: Part, name: str) -> Dimension:
    """The dimension of a name.

    Raises:
        EditError: there is none.
    """
    for dimension in part.dimensions:
        if dimension.name == name:
            return dimension
    raise EditError(f"there is no dimension “{name}”", "choose one that is there")


# --- steps ----------------------------------------------------------------------------------


def _must_be_free(part: Part, name: str) -> None:
    try:
        check_name(name)
    except ExpressionError as error:
        raise EditError(error.cause, error.mend) from error
    if any(d.name == name for d in part.dimensions):
        raise EditError(f"another dimension is called “{name}”", "choose another name")


def _with(part: Part, old: Dimension, new: Dimension) -> Part:
    return replace(part, dimensions=tuple(new if d is old else d for d in part.dimensions))


def _checked(part: Part) -> Part:
    """The part, if all its expressions can be worked out."""
    faults = work_out(written_tree(part))[1]
    known = values_of(part)
    for formula in part.formulas:
        try:
            evaluate(formula.text, known)
        except ExpressionError as error:
            raise EditError(
                f"{field_words(formula.field)}: {error.cause}", error.mend, faults
            ) from error
    return part


def _names(text: str) -> frozenset[str]:
    try:
        return names_in(text)
    except ExpressionError:
        return frozenset()


def _gives(text: str, known: Mapping[str, float], value: float | None) -> bool:
    try:
        return evaluate(text, known) == value
    except ExpressionError:
        return False
