"""Random edits of every kind, driven by hypothesis: no record rule breaks, and all can be undone.

1,500 steps in an ordinary run; SCREENAPP_STEPS=10000 drives ten thousand.
"""

from __future__ import annotations

import math
import os
from collections.abc import Callable
from dataclasses import replace

import pytest
from hypothesis import HealthCheck, settings, strategies as st
from hypothesis.stateful import (
    RuleBasedStateMachine,
    initialize,
    invariant,
    rule,
    run_state_machine_as_test as run,
)

from screenapp.model import edits
from screenapp.model.errors import ScreenappError
from screenapp.model.features import everything
from screenapp.model.history import History
from screenapp.model.hole_loops import circle_loop, ring_loop, slot_loop
from screenapp.model.part import (
    BearingLoad,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    Loop,
    Part,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    RollerSupport,
    ShearLoad,
    StressLimit,
)
from screenapp.model.pattern import BoltCircle, GridPattern, RowPattern
from tests.model.plates import STEEL, plate
from tests.model.record_rules import check_record

STEPS = int(os.environ.get("SCREENAPP_STEPS", "1500"))
EACH = 50
"""Steps of one history."""

sizes = st.integers(1, 40).map(float) | st.sampled_from([0.5, 0.0, -3.0, math.nan, 1e9])
places = st.tuples(st.integers(-20, 120), st.integers(-20, 70)).map(
    lambda p: (p[0] + 0.5, p[1] * 1.0)
)
strange = places | st.just((math.inf, 0.0)) | st.just((1e9, 1.0))
angles = st.sampled_from([0.0, 30.0, 90.0, -45.0, 180.0])
counts = st.integers(0, 7)
MOST = 60
"""A part with more things than this is not made larger: steps stay quick."""


@st.composite
def rings(draw: st.DrawFn) -> Loop:
    """A ring that may be anywhere."""
    at, size = draw(places), draw(st.integers(2, 60)) + 0.25
    kind = draw(st.integers(0, 2))
    if kind == 0:
        return circle_loop(at, size)
    if kind == 1:
        return slot_loop(at, size + draw(st.integers(0, 30)), size, draw(angles))
    far = at[0] + size, at[1] + draw(st.integers(2, 50))
    return ring_loop(edits.rectangle_corners(at, far), None, draw(st.sampled_from([0.0, 1.0])))


patterns = st.one_of(
    st.none(),
    st.builds(RowPattern, counts, sizes, angles),
    st.builds(GridPattern, counts, counts, sizes, sizes, angles),
    st.builds(BoltCircle, counts, sizes, angles),
)


class Editing(RuleBasedStateMachine):
    """One part and its history."""

    total = 0

    @initialize()
    def begin(self) -> None:
        """A plate with a hole, held and pulled."""
        self.history = History(plate())
        self.refused: list[ScreenappError] = []
        self.first = check_record(self.part)

    @property
    def part(self) -> Part:
        """As it now is."""
        return self.history.part

    def do(self, name: str, make: Callable[[], Part | edits.Outcome]) -> None:
        """Make an edit if it is not refused; a refusal has a cause and a mend."""
        try:
            made = make()
        except edits.EditError as refused:
            self.refused.append(refused)
            return
        after = made.part if isinstance(made, edits.Outcome) else made
        if after != self.part:
            self.history.push(name, after)
            type(self).total += 1

    def any_id(self, data: st.DataObject, *kinds: str) -> str:
        """An id of the part, or one that is not there."""
        known = [f.record.id for f in everything(self.part) if not kinds or f.kind in kinds]
        return data.draw(st.sampled_from([*known, "gone"]))

    def grown(self) -> bool:
        """Whether the part is large enough."""
        return sum(1 for _ in everything(self.part)) > MOST

    # shape

    @rule(points=st.lists(strange, min_size=2, max_size=6), round_=sizes)
    def outline(self, points: list[tuple[float, float]], round_: float) -> None:
        if self.part.outline is None:
            self.do("outline", lambda: edits.set_outline(self.part, points, None, round_))

    @rule(at=strange, size=sizes, length=sizes, angle=angles)
    def hole(self, at: tuple[float, float], size: float, length: float, angle: float) -> None:
        if self.grown():
            return
        self.do("round hole", lambda: edits.add_circle_hole(self.part, at, size))
        self.do("slot", lambda: edits.add_slot_hole(self.part, at, length, size, angle))

    @rule(data=st.data(), pattern=patterns)
    def pattern(self, data: st.DataObject, pattern: object) -> None:
        id_ = self.any_id(data, "hole")
        self.do("pattern", lambda: edits.set_pattern(self.part, id_, pattern))  # type: ignore[arg-type]

    @rule(data=st.data(), count=counts, pitch=sizes)
    def change_pattern(self, data: st.DataObject, count: int, pitch: float) -> None:
        id_ = self.any_id(data, "hole")
        self.do("count", lambda: edits.change_pattern(self.part, id_, count=count))
        self.do("pitch", lambda: edits.change_pattern(self.part, id_, pitch=pitch))

    @rule(data=st.data())
    def break_pattern(self, data: st.DataObject) -> None:
        id_ = self.any_id(data, "hole")
        if not self.grown():
            self.do("break up", lambda: edits.break_pattern(self.part, id_))

    @rule(ring=rings())
    def cut(self, ring: Loop) -> None:
        self.do("cut", lambda: edits.cut(self.part, ring))

    @rule(ring=rings())
    def join(self, ring: Loop) -> None:
        self.do("join", lambda: edits.join(self.part, ring))

    @rule(data=st.data(), distance=st.integers(-20, 20).map(float))
    def offset(self, data: st.DataObject, distance: float) -> None:
        edge = self.any_id(data, "edge")
        self.do("offset", lambda: edits.offset_edge(self.part, edge, distance))

    @rule(data=st.data(), by=strange, angle=angles)
    def mirror(self, data: st.DataObject, by: tuple[float, float], angle: float) -> None:
        if self.grown():
            return
        hole, edge = self.any_id(data, "hole"), self.any_id(data, "edge")
        line = edits.MirrorLine(by, angle)
        self.do("mirror", lambda: edits.mirror_holes(self.part, [hole], line))
        self.do("mirror half", lambda: edits.mirror_half(self.part, edge))

    @rule(data=st.data(), size=sizes)
    def round_and_chamfer(self, data: st.DataObject, size: float) -> None:
        corner = self.any_id(data, "corner")
        self.do("round", lambda: edits.set_round(self.part, corner, size))
        other = self.any_id(data, "corner")
        self.do("chamfer", lambda: edits.set_chamfer(self.part, other, size))

    @rule(data=st.data(), at=strange)
    def corners(self, data: st.DataObject, at: tuple[float, float]) -> None:
        edge, corner = self.any_id(data, "edge"), self.any_id(data, "corner")
        if not self.grown():
            self.do("insert", lambda: edits.insert_corner(self.part, edge, at))
        self.do("move", lambda: edits.move_corner(self.part, corner, at))
        self.do("bend", lambda: edits.set_edge_arc(self.part, edge, at))

    @rule(data=st.data(), dx=sizes, dy=sizes)
    def move(self, data: st.DataObject, dx: float, dy: float) -> None:
        ids = [self.any_id(data), self.any_id(data)]
        self.do("move", lambda: edits.move(self.part, ids, dx, dy))

    @rule(data=st.data(), dx=sizes)
    def copy_and_paste(self, data: st.DataObject, dx: float) -> None:
        if self.grown():
            return
        ids = [self.any_id(data, "hole"), self.any_id(data)]

        def make() -> Part:
            holes = edits.pasted_holes(edits.copy_text(self.part, ids))
            return edits.add_holes(self.part, holes, dx, 1.0)

        self.do("paste", make)

    @rule(data=st.data(), several=st.integers(1, 3))
    def remove(self, data: st.DataObject, several: int) -> None:
        ids = {self.any_id(data) for _ in range(several)}
        self.do("remove", lambda: edits.remove(self.part, *ids))

    # holding, loading and the rest

    @rule(data=st.data(), angle=angles, kind=st.integers(0, 2))
    def hold(self, data: st.DataObject, angle: float, kind: int) -> None:
        on = self.any_id(data, "edge", "hole", "corner")
        supports = (
            FixedSupport("", on),
            RollerSupport("", on, angle),
            PrescribedSupport("", on, 0.0, None),
        )
        self.do("hold", lambda: edits.add_support(self.part, supports[kind]))

    @rule(data=st.data(), x=sizes, kind=st.integers(0, 5))
    def load(self, data: st.DataObject, x: float, kind: int) -> None:
        on, case = self.any_id(data, "edge", "hole", "corner"), self.any_id(data, "case")
        loads = (
            ForceLoad("", on, x, 1.0),
            BearingLoad("", on, x, 1.0),
            PressureLoad("", on, x),
            ShearLoad("", on, x),
            PointLoad("", on, x, 1.0),
            GravityLoad("", 0.0, -9.81),
        )
        self.do("load", lambda: edits.add_load(self.part, case, loads[kind]))

    @rule(data=st.data())
    def carry(self, data: st.DataObject) -> None:
        id_, on = self.any_id(data, "support", "load"), self.any_id(data, "edge", "hole", "corner")
        self.do("carry", lambda: edits.put_on(self.part, id_, on))

    @rule(text=st.text(max_size=8), thickness=sizes, at=strange)
    def settings(self, text: str, thickness: float, at: tuple[float, float]) -> None:
        self.do("title", lambda: edits.set_title(self.part, text))
        self.do("notes", lambda: edits.set_notes(self.part, text))
        self.do("thickness", lambda: edits.set_thickness(self.part, thickness))
        self.do("material", lambda: edits.set_material(self.part, replace(STEEL, name="other")))
        if not self.grown():
            self.do("case", lambda: edits.add_case(self.part, ""))
            self.do("probe", lambda: edits.add_probe(self.part, at))
            self.do("limit", lambda: edits.add_limit(self.part, StressLimit("")))

    @rule(back=st.integers(1, 4), again=st.booleans())
    def undo_and_redo(self, back: int, again: bool) -> None:
        steps = 0
        parts = [self.part]
        for _ in range(back):
            if self.history.can_undo:
                self.history.undo()
                steps += 1
                parts.append(self.part)
        for _ in range(steps if again else 0):
            parts.pop()
            self.history.redo()
            assert self.part is parts[-1]

    @invariant()
    def the_record_is_sound(self) -> None:
        """After every step."""
        if hasattr(self, "history"):
            check_record(self.part)
            assert all(error.cause and error.mend for error in self.refused)

    def teardown(self) -> None:
        """Undoing everything returns the first bytes."""
        if not hasattr(self, "history"):
            return
        last = self.part
        steps = 0
        while self.history.can_undo:
            assert self.history.undo_name
            self.history.undo()
            steps += 1
        assert check_record(self.part) == self.first
        for _ in range(steps):
            self.history.redo()
        assert self.part is last


@pytest.mark.timeout(max(300, STEPS // 4))
def test_random_edits_never_break_a_record() -> None:
    Editing.total = 0
    run(
        Editing,
        settings=settings(
            max_examples=max(1, STEPS // EACH),
            stateful_step_count=EACH,
            deadline=None,
            suppress_health_check=list(HealthCheck),
        ),
    )
    # changes made; about as many are refused, undone or none (a third to two fifths of the steps)
    assert Editing.total > STEPS // 6
