"""A long loop that changes in a few corners gives the same pieces as one worked out afresh."""

from __future__ import annotations

import math
from dataclasses import replace

from hypothesis import given, settings, strategies as st

from screenapp.model import edits
from screenapp.model.errors import InvalidPartError
from screenapp.model.part import Corner, Edge, Loop, Part
from screenapp.model.shape import shape_of

N = 90


def cog(round_: float) -> Part:
    at = [
        (
            (50.0 + 4.0 * (i % 3)) * math.cos(2 * math.pi * i / N),
            50.0 * math.sin(2 * math.pi * i / N),
        )
        for i in range(N)
    ]
    corners = tuple(Corner(f"c{i}", p, round_ * (i % 4)) for i, p in enumerate(at))
    return Part(outline=Loop(corners, tuple(Edge(f"e{i}") for i in range(N))))


def afresh(part: Part) -> Part:
    """The same part of records that nothing has seen."""
    assert part.outline is not None
    corners = tuple(replace(c) for c in part.outline.corners)
    return replace(part, outline=Loop(corners, tuple(replace(e) for e in part.outline.edges)))


steps = st.lists(
    st.tuples(st.integers(0, N - 1), st.floats(-2.0, 2.0), st.integers(0, 3)), max_size=12
)


@settings(max_examples=60, deadline=None)
@given(steps)
def test_patched_is_the_same_as_afresh(changes: list[tuple[int, float, int]]) -> None:
    part = cog(0.2)
    for i, by, kind in changes:
        assert part.outline is not None
        x, y = part.outline.corners[i].at
        if kind == 0:
            part = edits.move_corner(part, f"c{i}", (x + by, y - by))
        elif kind == 1:
            part = edits.set_round(part, f"c{i}", abs(round(by, 3)))
        elif kind == 2:
            part = edits.set_chamfer(part, f"c{i}", abs(round(by, 3)))
        else:
            part = edits.move(part, [f"e{i}"], by, by / 2.0)
        assert outcome(part) == outcome(afresh(part))


def outcome(part: Part) -> object:
    """The boundary, or why there is none."""
    try:
        shape = shape_of(part)
    except InvalidPartError as refused:
        return refused.faults
    return shape.curves, shape.sharp_corners
