"""Hand checks in the result record, and back."""

from __future__ import annotations

from typing import Any

from screenapp.model.findings import HandCheck
from screenapp.model.result_values import (
    estimate_of,
    estimate_tree,
    finite,
    number_of,
    point_of,
    point_tree,
)

Tree = dict[str, Any]


def hand_check_tree(check: HandCheck) -> Tree:
    """A hand check as the record holds it."""
    return {
        "kind": check.kind,
        "case": check.case,
        "feature": check.feature,
        "place": check.place,
        "at": point_tree(check.at),
        **estimate_tree(check.computed),
        "formula": finite(check.formula),
        "difference": finite(check.difference),
        "source": check.source,
        "valid": check.valid,
        "nominal": check.nominal,
    }


def hand_check_of(tree: Tree) -> HandCheck:
    """The hand check of a tree that the schema has passed."""
    return HandCheck(
        kind=tree["kind"],
        case=tree["case"],
        feature=tree["feature"],
        place=tree["place"],
        at=point_of(tree["at"]),
        computed=estimate_of(tree),
        formula=number_of(tree["formula"]),
        source=tree["source"],
        valid=tree["valid"],
        nominal=tree["nominal"],
    )
