"""Random gestures with the real tools, driven by hypothesis: no record rule breaks, all is undone.

1,500 gestures in an ordinary run; SCREENAPP_STEPS=10000 drives ten thousand.
"""

from __future__ import annotations

import os

import pytest
from hypothesis import HealthCheck, settings, strategies as st
from hypothesis.stateful import (
    RuleBasedStateMachine,
    initialize,
    invariant,
    rule,
    run_state_machine_as_test as run,
)
from PySide6.QtCore import Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.model import edits
from screenapp.model.features import everything
from screenapp.model.part import FixedSupport, ForceLoad
from tests.model.plates import plate
from tests.model.record_rules import check_record
from tests.window.board_kit import NONE, Hand

STEPS = int(os.environ.get("SCREENAPP_STEPS", "1500"))
EACH = 50
"""Gestures of one history."""

CONTROL, SHIFT = Qt.KeyboardModifier.ControlModifier, Qt.KeyboardModifier.ShiftModifier
MOST = 60
"""A part with more things than this is not made larger: gestures stay quick."""

near = st.sampled_from(
    [(0.0, 0.0), (100.0, 0.0), (100.0, 50.0), (0.0, 50.0), (50.0, 0.0), (50.0, 25.0), (45.0, 25.0)]
)
anywhere = st.tuples(st.integers(-10, 110), st.integers(-8, 58)).map(
    lambda p: (float(p[0]), float(p[1]))
)
places = near | anywhere
TOOLS = "SLAETRQCNGBOFKUIHWP"
KEYS = (
    (Qt.Key.Key_Escape, NONE),
    (Qt.Key.Key_Return, NONE),
    (Qt.Key.Key_Tab, NONE),
    (Qt.Key.Key_Delete, NONE),
    (Qt.Key.Key_F2, NONE),
    (Qt.Key.Key_Left, NONE),
    (Qt.Key.Key_Up, CONTROL),
    (Qt.Key.Key_Right, SHIFT),
    (Qt.Key.Key_PageDown, NONE),
    (Qt.Key.Key_C, CONTROL),
    (Qt.Key.Key_X, CONTROL),
    (Qt.Key.Key_V, CONTROL),
    (Qt.Key.Key_X, NONE),
    (Qt.Key.Key_J, NONE),
    (Qt.Key.Key_A, CONTROL),
)


class Drawing(RuleBasedStateMachine):
    """One board and the part drawn on it."""

    bot: QtBot
    changes = 0
    gestures = 0

    @initialize()
    def begin(self) -> None:
        """A plate with a hole, held and pulled, on a board."""
        part = edits.add_support(plate(), FixedSupport("", "h1"))
        self.hand = Hand(edits.add_load(part, "k1", ForceLoad("", "e3", 0.0, 5.0)))
        self.first = check_record(self.hand.part)
        self.hand.document.part_changed.connect(self._count)

    def _count(self) -> None:
        type(self).changes += 1

    @property
    def grown(self) -> bool:
        """Whether the part is large enough."""
        return sum(1 for _ in everything(self.hand.part)) > MOST

    @rule(key=st.sampled_from(TOOLS))
    def take(self, key: str) -> None:
        self.hand.canvas.setFocus()
        self.hand.type(key)

    @rule(tool=st.sampled_from("LAETRQCNGBO"), at=st.lists(places, min_size=2, max_size=5))
    def draw(self, tool: str, at: list[tuple[float, float]]) -> None:
        if self.grown:
            return
        self.hand.key(Qt.Key.Key_Escape)
        self.hand.canvas.setFocus()
        self.hand.type(tool)
        for place in at:
            self.hand.click(*place)
        self.hand.enter()

    @rule(at=places, keys=st.sampled_from([NONE, NONE, SHIFT]))
    def click(self, at: tuple[float, float], keys: Qt.KeyboardModifier) -> None:
        self.hand.click(*at, keys)

    @rule(at=places)
    def double(self, at: tuple[float, float]) -> None:
        if not self.grown:
            self.hand.double(*at)

    @rule(start=places, end=places)
    def drag(self, start: tuple[float, float], end: tuple[float, float]) -> None:
        self.hand.drag(start, end)

    @rule(key=st.sampled_from(KEYS))
    def press(self, key: tuple[Qt.Key, Qt.KeyboardModifier]) -> None:
        if not (key[0] == Qt.Key.Key_V and self.grown):
            self.hand.key(*key)

    @rule(text=st.sampled_from(["5", "2.5", "-3", "0.25 in", "4+", "12", "1e9", "0"]))
    def number(self, text: str) -> None:
        self.hand.type(text)
        self.hand.enter()

    @rule(at=places, line=st.integers(0, 9))
    def context(self, at: tuple[float, float], line: int) -> None:
        canvas = self.hand.canvas
        self.hand.go(*at)
        QTest.mouseClick(canvas.viewport(), Qt.MouseButton.RightButton, pos=self.hand.px(*at))
        menu = canvas.context.menu
        if menu is None:
            return
        lines = [a for a in menu.actions() if a.isEnabled() and not a.isSeparator()]
        if lines and not self.grown:
            lines[line % len(lines)].trigger()
        menu.close()
        QApplication.processEvents()

    @rule(back=st.integers(1, 3), again=st.integers(0, 2))
    def undo_and_redo(self, back: int, again: int) -> None:
        for _ in range(back):
            self.hand.document.undo()
        for _ in range(again):
            self.hand.document.redo()

    @rule()
    def save(self) -> None:
        """Saving clears no step."""
        from pathlib import Path

        could = self.hand.document.history.can_undo
        self.hand.document.mark_saved(Path("x.part.json"))
        assert self.hand.document.history.can_undo == could
        assert not self.hand.document.unsaved

    @invariant()
    def the_record_is_sound(self) -> None:
        """After every gesture; what is previewed can be drawn."""
        if hasattr(self, "hand"):
            type(self).gestures += 1
            check_record(self.hand.part)
            assert len(self.hand.canvas.drawn.loops) >= 0

    def teardown(self) -> None:
        """Undoing everything returns the first bytes; every step has a name."""
        if not hasattr(self, "hand"):
            return
        document = self.hand.document
        while document.history.can_undo:
            assert document.history.undo_name
            document.undo()
        assert check_record(document.part) == self.first
        self.hand.board.close()
        self.hand.board.deleteLater()
        QApplication.processEvents()


@pytest.mark.timeout(max(300, STEPS // 4))
def test_random_gestures_never_break_a_record(qtbot: QtBot) -> None:
    Drawing.changes = Drawing.gestures = 0
    with qtbot.captureExceptions() as exceptions:
        run(
            Drawing,
            settings=settings(
                max_examples=max(1, STEPS // EACH),
                stateful_step_count=EACH,
                deadline=None,
                suppress_health_check=list(HealthCheck),
            ),
        )
    assert exceptions == []
    assert Drawing.gestures >= STEPS // 2
    assert Drawing.changes > STEPS // 15  # the rest pans, asks, is refused or undone
