"""Edits of readings: probes at points and cuts along lines."""

from __future__ import annotations

import math
from dataclasses import replace

from screenapp.model.edit_rules import (
    EditError,
    must_be_point,
    must_find,
    new_id,
    settle,
    without_stale_formulas,
)
from screenapp.model.part import Cut, Part, Point, Probe


def add_probe(part: Part, at: Point, name: str = "") -> Part:
    """Put a probe at a point; its id is `new_id(part, "p")`, an empty name "P" and a number."""
    id_ = new_id(part, "p")
    probe = Probe(id_, name.strip() or id_.upper(), must_be_point(at, "the probe"))
    return settle(part, replace(part, readings=(*part.readings, probe)))


def move_probe(part: Part, probe: str, to: Point) -> Part:
    """Move a probe."""
    must_find(part, probe, "probe")
    at = must_be_point(to, f"probe {probe}")
    readings = tuple(replace(p, at=at) if p.id == probe else p for p in part.readings)
    return without_stale_formulas(part, replace(part, readings=readings))


def rename_probe(part: Part, probe: str, name: str) -> Part:
    """Give a probe another name."""
    must_find(part, probe, "probe")
    if not name.strip():
        raise EditError("a probe needs a name", "give it one, e.g. “fillet”")
    readings = tuple(replace(p, name=name.strip()) if p.id == probe else p for p in part.readings)
    return replace(part, readings=readings)


def add_cut(part: Part, start: Point, end: Point, name: str = "") -> Part:
    """Cut the part from `start` to `end` [mm]; an empty name becomes "Cut" and a number.

    Raises:
        EditError: the two points coincide or are no points.
    """
    id_ = new_id(part, "x")
    name = name.strip() or f"Cut {id_[1:]}"
    return settle(part, replace(part, cuts=(*part.cuts, _cut(id_, name, start, end))))


def move_cut(part: Part, cut: str, start: Point, end: Point) -> Part:
    """Put a cut elsewhere."""
    must_find(part, cut, "cut")
    cuts = tuple(_cut(c.id, c.name, start, end) if c.id == cut else c for c in part.cuts)
    return without_stale_formulas(part, replace(part, cuts=cuts))


def rename_cut(part: Part, cut: str, name: str) -> Part:
    """Give a cut another name."""
    must_find(part, cut, "cut")
    if not name.strip():
        raise EditError("a cut needs a name", "give it one, e.g. “root of the arm”")
    cuts = tuple(replace(c, name=name.strip()) if c.id == cut else c for c in part.cuts)
    return replace(part, cuts=cuts)


def _cut(id_: str, name: str, start: Point, end: Point) -> Cut:
    """A cut between two points that do not coincide."""
    one, other = must_be_point(start, f"cut {id_}"), must_be_point(end, f"cut {id_}")
    if math.dist(one, other) == 0.0:
        raise EditError("the cut begins and ends at one point", "draw it across the part")
    return Cut(id_, name, one, other)
