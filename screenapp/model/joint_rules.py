"""Handbook rules for holes that carry a pin or bolt, from `resources/joint_rules.json`.

A set of rules is data: formulas of resistance and of least distances, each with its source and what
it assumes.  The formulas are expressions of `model.expressions`.
"""

from __future__ import annotations

import functools
import json
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from screenapp.model.assets import resource
from screenapp.model.errors import PartFileError
from screenapp.model.expressions import ExpressionError, evaluate

FORMAT = "screenapp joint rules"
ABSENT = 1e9
"""Where an edge or a hole stands [mm] that is not there: formulas take the least."""

VARIABLES = ("d0", "d", "e1", "e2", "p1", "p2", "clear", "net", "t", "fu", "fy", "fub")


@dataclass(frozen=True)
class JointCheck:
    """A resistance [N] by formula.

    Attributes:
        name: e.g. "bearing".
        resistance: the formula.
        source: where in the standard.
        assumes: what it takes for granted.
    """

    name: str
    resistance: str
    source: str
    assumes: str

    @property
    def stresses(self) -> tuple[str, ...]:
        """Which stresses of the material it needs, by their fields."""
        return tuple(
            field
            for name, field in (("fu", "strength"), ("fy", "proof_stress"))
            if name in self.resistance.replace("fub", "")
        )


@dataclass(frozen=True)
class LeastDistance:
    """A distance that must not be undercut: `measured` is one of e1, e2, p1, p2."""

    name: str
    measured: str
    least: str
    source: str


@dataclass(frozen=True)
class JointRules:
    """A named set of rules; `families` are the material families that it is written for."""

    name: str
    title: str
    source: str
    families: tuple[str, ...]
    partial_factors: Mapping[str, float]
    checks: tuple[JointCheck, ...]
    distances: tuple[LeastDistance, ...]

    def value(self, formula: str, values: Mapping[str, float]) -> float:
        """The value of one of its formulas for a joint."""
        return evaluate(formula, {**values, **self.partial_factors})


@functools.cache
def joint_rules() -> Mapping[str, JointRules]:
    """All sets of rules that ship with the program, by name."""
    return read_joint_rules(resource("joint_rules.json"))


def read_joint_rules(path: Path) -> dict[str, JointRules]:
    """Sets of rules from a file.

    Raises:
        PartFileError: it is no such file, or a formula in it cannot be worked out.
    """
    try:
        tree = json.loads(path.read_text(encoding="utf-8"))
        if tree["format"] != FORMAT:
            raise PartFileError(f"{path.name} is no file of joint rules", f"begin it with {FORMAT}")
        rules = [_rules(item) for item in tree["rules"]]
    except (KeyError, TypeError, ValueError) as error:
        raise PartFileError(
            f"{path.name} cannot be read as joint rules: {error!r}",
            "compare it with the file that ships with the program",
        ) from error
    for one in rules:
        _try(one, path)
    return {one.name: one for one in rules}


def _rules(tree: Any) -> JointRules:
    return JointRules(
        tree["name"],
        tree["title"],
        tree["source"],
        tuple(tree["families"]),
        {name: float(value) for name, value in tree["partial_factors"].items()},
        tuple(JointCheck(**check) for check in tree["checks"]),
        tuple(LeastDistance(**distance) for distance in tree["distances"]),
    )


def _try(rules: JointRules, path: Path) -> None:
    """Work every formula out once, so that a slip shows when the file is read."""
    values = dict.fromkeys(VARIABLES, 1.0)
    formulas = [c.resistance for c in rules.checks] + [d.least for d in rules.distances]
    for formula in formulas:
        try:
            rules.value(formula, values)
        except ExpressionError as error:
            raise PartFileError(
                f"{path.name}: in “{rules.name}”, {error.cause}", error.mend
            ) from error
