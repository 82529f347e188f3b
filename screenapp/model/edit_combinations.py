"""Edits of combinations."""

from __future__ import annotations

from dataclasses import replace

from screenapp.model.combinations import combination_faults
from screenapp.model.edit_rules import EditError, must_find, new_id, settle
from screenapp.model.part import Combination, Part, Term


def add_combination(part: Part, terms: tuple[Term, ...] = (), name: str = "") -> Part:
    """Combine cases; with no terms given all cases with a factor of one.

    Its id is `new_id(part, "m")`, an empty name becomes "Combination n".

    Raises:
        EditError: there is no case, or a term is not sound.
    """
    if not part.cases:
        raise EditError("there is no case to combine", "add a load case first")
    n = len(part.combinations) + 1
    taken = _names(part)
    while f"Combination {n}" in taken:
        n += 1
    made = Combination(
        new_id(part, "m"),
        _free_name(part, name.strip() or f"Combination {n}", ""),
        terms or tuple(Term(case.id, 1.0) for case in part.cases),
    )
    return _settled(part, (*part.combinations, made))


def set_factor(part: Part, combination: str, case: str, factor: float) -> Part:
    """Give a case its factor in a combination; zero takes it out.

    Raises:
        EditError: the factor is no number, or nothing would be left.
    """
    must_find(part, combination, "combination")
    must_find(part, case, "case")
    old = next(c for c in part.combinations if c.id == combination)
    factors = {term.case: term.factor for term in old.terms} | {case: float(factor)}
    order = [c.id for c in part.cases if factors.get(c.id, 0.0) != 0.0]
    terms = tuple(Term(id_, factors[id_]) for id_ in order)
    if not terms:
        raise EditError(f"nothing would be left of “{old.name}”", "remove the combination instead")
    return _settled(
        part,
        tuple(replace(c, terms=terms) if c.id == combination else c for c in part.combinations),
    )


def rename_combination(part: Part, combination: str, name: str) -> Part:
    """Give a combination another name, which no other case or combination may have."""
    must_find(part, combination, "combination")
    name = _free_name(part, name.strip(), combination)
    return replace(
        part,
        combinations=tuple(
            replace(c, name=name) if c.id == combination else c for c in part.combinations
        ),
    )


def without_case(part: Part, case: str) -> tuple[Part, tuple[str, ...]]:
    """The combinations without a case that goes; what is lost with it, in words."""
    kept: list[Combination] = []
    lost: list[str] = []
    for combination in part.combinations:
        terms = tuple(term for term in combination.terms if term.case != case)
        if terms or not combination.terms:
            kept.append(replace(combination, terms=terms))
        else:
            lost.append(f"combination {combination.id} “{combination.name}”")
    return replace(part, combinations=tuple(kept)), tuple(lost)


def _names(part: Part) -> set[str]:
    return {c.name for c in part.cases} | {c.name for c in part.combinations}


def _free_name(part: Part, name: str, own: str) -> str:
    if not name:
        raise EditError("a combination needs a name", "give it one, e.g. “Full load and wind”")
    own_name = {c.name for c in part.combinations if c.id == own}
    if name in _names(part) - own_name:
        raise EditError(f"there is a case or combination “{name}” already", "choose another name")
    return name


def _settled(part: Part, combinations: tuple[Combination, ...]) -> Part:
    return settle(part, replace(part, combinations=combinations), combination_faults)
