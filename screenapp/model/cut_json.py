"""Cuts in the result record."""

from __future__ import annotations

from typing import Any

from screenapp.model.findings import CUT_QUANTITIES, CutFindings, CutSpan, SectionForces
from screenapp.model.result_values import (
    estimate_of,
    estimate_tree,
    finite,
    number_of,
    point_of,
    point_tree,
)

Tree = dict[str, Any]


def cut_tree(cut: CutFindings) -> Tree:
    """A cut as the record holds it."""
    applied = cut.applied
    return {
        "cut": cut.cut,
        "name": cut.name,
        "case": cut.case,
        "start": point_tree(cut.start),
        "end": point_tree(cut.end),
        "normal": estimate_tree(cut.normal),
        "shear": estimate_tree(cut.shear),
        "moment": estimate_tree(cut.moment),
        "applied": None
        if applied is None
        else {
            "normal": finite(applied.normal),
            "shear": finite(applied.shear),
            "moment": finite(applied.moment),
        },
        "largest": {**estimate_tree(cut.largest), "distance": finite(cut.largest_at)},
        "why": cut.why,
        "spans": [_span_tree(span) for span in cut.spans],
    }


def cut_of(tree: Tree) -> CutFindings:
    """The cut of a record that the schema has passed."""
    applied = tree["applied"]
    return CutFindings(
        tree["cut"],
        tree["name"],
        tree["case"],
        point_of(tree["start"]),
        point_of(tree["end"]),
        tuple(_span_of(span) for span in tree["spans"]),
        estimate_of(tree["normal"]),
        estimate_of(tree["shear"]),
        estimate_of(tree["moment"]),
        None
        if applied is None
        else SectionForces(*(number_of(applied[k]) for k in ("normal", "shear", "moment"))),
        estimate_of(tree["largest"]),
        number_of(tree["largest"]["distance"]),
        tree["why"],
    )


def _span_tree(span: CutSpan) -> Tree:
    return {
        "distances": [finite(d) for d in span.distances],
        "values": {q: [finite(v) for v in span.values[q]] for q in CUT_QUANTITIES},
        "half_bands": {q: [finite(v) for v in span.half_bands[q]] for q in CUT_QUANTITIES},
        "membrane": estimate_tree(span.membrane),
        "bending": estimate_tree(span.bending),
        "beam": None if span.beam is None else [finite(v) for v in span.beam],
    }


def _span_of(tree: Tree) -> CutSpan:
    beam = tree["beam"]
    return CutSpan(
        _numbers(tree["distances"]),
        {q: _numbers(tree["values"][q]) for q in CUT_QUANTITIES},
        {q: _numbers(tree["half_bands"][q], float("inf")) for q in CUT_QUANTITIES},
        estimate_of(tree["membrane"]),
        estimate_of(tree["bending"]),
        None if beam is None else (number_of(beam[0]), number_of(beam[1])),
    )


def _numbers(values: list[float | None], missing: float = float("nan")) -> tuple[float, ...]:
    return tuple(number_of(v, missing) for v in values)
