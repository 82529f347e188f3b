"""Combinations: cases that act together, each with its factor.

A combination is solved as a case of its own, with its cases' loads times their factors, so that all
that is said of a case (peaks, readings, limits) is said of it too.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace
from typing import Any

from screenapp.model.errors import Fault
from screenapp.model.load_faults import components
from screenapp.model.part import Case, Combination, Load, Part, SpinLoad


def loadings(part: Part) -> tuple[Case, ...]:
    """The cases, then the combinations as cases: what is solved and judged, in that order.

    Loads of a combination keep their ids: what stands on a place stands there in each of them.
    """
    cases = {case.id: case for case in part.cases}
    return (*part.cases, *(_as_case(combination, cases) for combination in part.combinations))


def scaled(load: Load, factor: float) -> Load:
    """A load that does `factor` times as much."""
    if isinstance(load, SpinLoad):
        return replace(load, factor=factor * load.factor)  # forces go with the square of the speed
    changes: dict[str, Any] = {name: factor * value for name, value in components(load).items()}
    return replace(load, **changes)


def _as_case(combination: Combination, cases: dict[str, Case]) -> Case:
    loads = tuple(
        scaled(load, term.factor)
        for term in combination.terms
        if term.case in cases
        for load in cases[term.case].loads
    )
    return Case(combination.id, combination.name, loads)


def combination_faults(part: Part) -> Iterator[Fault]:
    """Combinations of nothing, of unknown cases, or with factors that are no numbers."""
    cases = {case.id: case for case in part.cases}
    names = {case.name for case in part.cases}
    for combination in part.combinations:
        where = f"combinations.{combination.id}"
        if combination.name in names:
            yield Fault(
                f"“{combination.name}” is the name of another case or combination too",
                "rename one of them, so that findings can be told apart",
                f"{where}.name",
                (combination.id,),
                blocks=False,
            )
        names.add(combination.name)
        if not combination.terms:
            yield Fault(
                f"combination “{combination.name}” has no case in it",
                "add a case with its factor, or remove the combination",
                f"{where}.terms",
                (combination.id,),
            )
        seen: set[str] = set()
        for term in combination.terms:
            if term.case not in cases:
                yield Fault(
                    f"combination “{combination.name}” names a case {term.case} that is not there",
                    f"choose one of: {', '.join(cases) or 'none yet'}",
                    f"{where}.terms",
                    (combination.id,),
                )
            elif term.case in seen:
                yield Fault(
                    f"combination “{combination.name}” has the case "
                    f"“{cases[term.case].name}” twice",
                    "add up its factors",
                    f"{where}.terms",
                    (combination.id,),
                )
            seen.add(term.case)
            if not math.isfinite(term.factor):
                yield Fault(
                    f"a factor of combination “{combination.name}” is not a finite number",
                    "give a number such as 1.35",
                    f"{where}.terms",
                    (combination.id,),
                )
