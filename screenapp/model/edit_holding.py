"""Edits of supports, cases and loads."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from screenapp.model.edge_parts import half_length, without_span
from screenapp.model.edit_rules import EditError, must_find, new_id, settle
from screenapp.model.errors import Fault
from screenapp.model.features import places_of
from screenapp.model.load_faults import one_load_faults
from screenapp.model.part import (
    Case,
    Load,
    Part,
    PlacedLoad,
    PointLoad,
    Support,
)
from screenapp.model.support_faults import one_support_faults


def add_support(part: Part, support: Support) -> Part:
    """Add a support; an empty id becomes `new_id(part, "s")`.

    Raises:
        EditError: the place is not there or cannot be held so.
    """
    new = replace(support, id=support.id or new_id(part, "s"))
    return _with_supports(part, (*part.supports, new))


def replace_support(part: Part, support: Support) -> Part:
    """Put a support in the place of the one with the same id; its kind may be another."""
    must_find(part, support.id, "support")
    return _with_supports(part, tuple(support if s.id == support.id else s for s in part.supports))


def _with_supports(part: Part, supports: tuple[Support, ...]) -> Part:
    def check(p: Part) -> Iterable[Fault]:
        places = places_of(p)
        for support in p.supports:
            yield from one_support_faults(p, support, places, None)

    return settle(part, replace(part, supports=supports), check)


def put_on(part: Part, id_: str, on: str) -> Part:
    """Put a support or load on another place.

    Raises:
        EditError: it cannot stand there, or is the part's own weight.
    """
    record = must_find(part, id_, "support", "load").record
    if isinstance(record, Support):
        return replace_support(part, without_span(replace(record, on=on)))
    if not isinstance(record, PlacedLoad):
        raise EditError(f"load {id_} acts throughout the part", "put another load on the place")
    moved = without_span(replace(record, on=on))
    if isinstance(moved, PointLoad):
        moved = replace(moved, along=half_length(part, on))
    return replace_load(part, moved)


def add_case(part: Part, name: str = "") -> Part:
    """Add an empty load case; its id is `new_id(part, "k")`, an empty name becomes "Case n"."""
    n = len(part.cases) + 1
    taken = {c.name for c in part.cases}
    while f"Case {n}" in taken:
        n += 1
    case = Case(new_id(part, "k"), _free_name(part, name.strip() or f"Case {n}", ""))
    return settle(part, replace(part, cases=(*part.cases, case)))


def rename_case(part: Part, case: str, name: str) -> Part:
    """Give a case another name, which no other case may have."""
    must_find(part, case, "case")
    name = _free_name(part, name.strip(), case)
    return replace(
        part, cases=tuple(replace(c, name=name) if c.id == case else c for c in part.cases)
    )


def _free_name(part: Part, name: str, own: str) -> str:
    if not name:
        raise EditError("a case needs a name", "give it one, e.g. “Cable pull”")
    if any(c.name == name and c.id != own for c in part.cases):
        raise EditError(f"there is a case “{name}” already", "choose another name")
    return name


def add_load(part: Part, case: str, load: Load) -> Part:
    """Add a load to a case; an empty id becomes `new_id(part, "l")`.

    Raises:
        EditError: the load cannot act on that place, or a component is not a finite number.
    """
    must_find(part, case, "case")
    new = replace(load, id=load.id or new_id(part, "l"))
    cases = tuple(replace(c, loads=(*c.loads, new)) if c.id == case else c for c in part.cases)
    return _with_cases(part, cases)


def replace_load(part: Part, load: Load) -> Part:
    """Put a load in the place of the one with the same id; its kind and place may be others."""
    must_find(part, load.id, "load")
    cases = tuple(
        replace(c, loads=tuple(load if x.id == load.id else x for x in c.loads)) for c in part.cases
    )
    return _with_cases(part, cases)


def _with_cases(part: Part, cases: tuple[Case, ...]) -> Part:
    def check(p: Part) -> Iterable[Fault]:
        places = places_of(p)
        for case in p.cases:
            yield from one_load_faults(p, case, places, None)

    return settle(part, replace(part, cases=cases), check)
