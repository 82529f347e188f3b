"""Numbers, points and estimates as the result record holds them.

JSON has no infinity and no NaN: a number that is not finite is null.
"""

from __future__ import annotations

import math
from typing import Any

from screenapp.model.findings import Estimate
from screenapp.model.part import Point

Tree = dict[str, Any]


def finite(value: float) -> float | None:
    """The number, or None if it is not finite."""
    return float(value) if math.isfinite(value) else None


def number_of(value: float | None, missing: float = math.nan) -> float:
    """The number of a record, `missing` for null."""
    return missing if value is None else float(value)


def point_tree(at: Point) -> list[float]:
    """A point [mm] as x and y."""
    return [float(at[0]), float(at[1])]


def point_of(at: list[float]) -> Point:
    """The point of x and y [mm]."""
    return float(at[0]), float(at[1])


def estimate_tree(estimate: Estimate, value_key: str = "value") -> Tree:
    """A number with its band and trust."""
    return {
        value_key: finite(estimate.value),
        "low": finite(estimate.low),
        "high": finite(estimate.high),
        "trust": estimate.trust,
    }


def estimate_of(tree: Tree, value_key: str = "value") -> Estimate:
    """The estimate of a record; an end of the band that is null has no bound."""
    return Estimate(
        number_of(tree[value_key]),
        number_of(tree["low"], -math.inf),
        number_of(tree["high"], math.inf),
        tree["trust"],
    )
