"""A gesture paints only what changed: every frame looks as if all of it were painted afresh."""

from __future__ import annotations

import math
from dataclasses import fields

import numpy as np
import pytest
from numpy.typing import NDArray
from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QImage, QPainter, QPainterPath
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.model import edits
from screenapp.model.curve_table import CurveTable, alike_at_ends
from screenapp.model.part import CircleHole, Corner, Edge, Loop, Material, Part, Point, Wall
from screenapp.model.shape import shape_of
from screenapp.window.board.drawn_part import drawn_part
from screenapp.window.board.frame import polygon
from screenapp.window.board.ring import Ring, outline_ring
from screenapp.window.board.still_picture import changed_box, stretches_in, thinned
from tests.window.board_kit import Hand

N = 80
ROUNDING = 3
"""Colours of a picture laid over the board are rounded once more (of 255)."""


def cog() -> Part:
    """A cog of 80 corners, every second one rounded, with twelve holes."""
    at = [2.0 * math.pi * i / N for i in range(N)]
    corners = tuple(
        Corner(f"c{i}", (r * math.cos(a), r * math.sin(a)), 0.0 if i % 2 else 1.0)
        for i, a in enumerate(at)
        for r in [100.0 if i % 4 < 2 else 110.0]
    )
    holes = tuple(
        CircleHole(f"h{i}", (60.0 * math.cos(a), 60.0 * math.sin(a)), 14.0)
        for i, a in enumerate(at[:: N // 12][:12])
    )
    return Part(
        outline=Loop(corners, tuple(Edge(f"e{i}") for i in range(N))),
        holes=holes,
        wall=Wall(3.0, "Steel"),
        materials=(Material("Steel", 210e3, 0.3, 7850.0, 235.0),),
    )


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(cog())
    qtbot.addWidget(made.board)
    made.canvas.fit()
    QApplication.processEvents()
    return made


def pixels(image: QImage) -> NDArray[np.int16]:
    """Red, green, blue (height, width, 3)."""
    plain = image.convertToFormat(QImage.Format.Format_RGB32)
    flat = np.frombuffer(plain.constBits(), dtype=np.uint8)
    return flat.reshape(plain.height(), plain.width(), 4)[..., :3].astype(np.int16)


def seen(hand: Hand) -> NDArray[np.int16]:
    return pixels(hand.canvas.grab().toImage())


def afresh(hand: Hand) -> NDArray[np.int16]:
    """The same with all of the part painted anew."""
    canvas = hand.canvas
    kept = canvas.fill.before, canvas.outline.before
    canvas.fill.before = canvas.outline.before = None
    image = seen(hand)
    canvas.fill.before, canvas.outline.before = kept
    return image


def grip_of(part: Part, what: str) -> Point:
    if what == "hole":
        hole = part.holes[2]
        assert isinstance(hole, CircleHole)
        return hole.centre
    assert part.outline is not None
    return part.outline.corners[41].at


@pytest.mark.parametrize("what", ["hole", "corner"])
@pytest.mark.parametrize("close", [False, True], ids=["whole", "close"])
def test_a_frame_of_a_drag_is_what_a_fresh_paint_gives(hand: Hand, what: str, close: bool) -> None:
    x, y = grip_of(hand.part, what)
    if close:
        hand.canvas.zoom(5.0, hand.canvas.frame_now.px((x, y)))
        QApplication.processEvents()
    scale = hand.canvas.frame_now.scale
    hand.press(x, y)
    still = seen(hand)
    for dx, dy in ((9.0, 4.0), (16.0, -7.0), (-21.0, 12.0)):
        hand.go(x + dx / scale, y + dy / scale)
        assert hand.canvas.previewing
        frame = seen(hand)
        assert np.abs(frame - still).max() > 40  # something did move
        assert np.abs(frame - afresh(hand)).max() <= ROUNDING
    QTest.keyClick(hand.target, Qt.Key.Key_Escape)
    assert not hand.canvas.previewing
    hand.release(x, y)
    hand.document.hover(None)
    hand.document.select()
    assert np.array_equal(seen(hand), afresh(hand))


def test_nothing_changed_has_no_box() -> None:
    part = cog()
    assert changed_box(drawn_part(part), drawn_part(part), 0.1) is None


def test_the_box_holds_what_moved_and_no_more() -> None:
    part = cog()
    box = changed_box(drawn_part(part), drawn_part(edits.move_hole(part, "h0", (30.0, 5.0))), 0.01)
    assert box == pytest.approx((23.0, -7.0, 67.0, 12.0), abs=0.02)
    moved = edits.move_corner(part, "c41", (-80.0, 0.0))
    box = changed_box(drawn_part(part), drawn_part(moved), 0.01)
    assert box is not None
    assert box[0] > -112.0
    assert box[2] < -75.0
    farthest = 110.0 * math.sin(2.0 * math.pi * 3 / N)  # the far end of the edge beyond c42
    assert max(-box[1], box[3]) < farthest + 0.1


def filled(points: NDArray[np.float64]) -> NDArray[np.int16]:
    image = QImage(120, 90, QImage.Format.Format_RGB32)
    image.fill(0)
    painter = QPainter(image)
    path = QPainterPath()
    path.setFillRule(Qt.FillRule.OddEvenFill)
    path.addPolygon(polygon(points))
    path.closeSubpath()
    painter.fillPath(path, Qt.GlobalColor.white)
    painter.end()
    return pixels(image)


def test_a_thinned_ring_fills_the_view_alike() -> None:
    view = QRectF(0.0, 0.0, 120.0, 90.0)
    turn = np.linspace(0.0, 2.0 * np.pi, 4000)
    for seed in range(6):
        make = np.random.default_rng(seed)
        wave = 300.0 + 90.0 * np.sin(make.integers(3, 40) * turn)
        middle = make.uniform(-330.0, 330.0, 2)
        ring = np.stack([wave * np.cos(turn), wave * np.sin(turn)], axis=-1) + middle
        less = thinned(ring, view)
        assert len(less) < 0.7 * len(ring)
        assert np.array_equal(filled(less), filled(ring))


def test_stretches_join_where_the_ring_closes() -> None:
    ring = np.array([(0.0, 0.0), (40.0, 0.0), (90.0, 300.0), (-90.0, 300.0), (-40.0, 0.0), (0, 0)])
    (line,) = stretches_in(ring, QRectF(-20.0, -10.0, 40.0, 20.0))
    places = [line.at(i) for i in range(line.size())]
    assert [(p.x(), p.y()) for p in places] == [(-40.0, 0.0), (0.0, 0.0), (0.0, 0.0), (40.0, 0.0)]
    assert stretches_in(ring, QRectF(500.0, 0.0, 10.0, 10.0)) == []


def test_a_patched_table_is_a_new_one() -> None:
    part = cog()
    before = shape_of(part).curves
    old = CurveTable.of(before)
    assert len(old.boxes) == len(before)  # worked out, so that they are patched too
    for moved in ("c0", "c40", "c79"):
        after = shape_of(edits.move_corner(part, moved, (-70.0, 60.0))).curves
        new = CurveTable.of(after)
        patched = CurveTable.patched(old, after, alike_at_ends(before, after))
        for field in fields(CurveTable):
            assert np.array_equal(getattr(patched, field.name), getattr(new, field.name))
        assert np.array_equal(patched.__dict__["boxes"], new.boxes)


@pytest.mark.parametrize("moved", ["c0", "c1", "c40", "c79"])
def test_a_ring_like_another_is_flattened_as_by_itself(moved: str) -> None:
    part = cog()
    before = Ring(shape_of(part).curves)
    after = shape_of(edits.move_corner(part, moved, (-70.0, 60.0))).curves
    before.polyline(0.01)
    like, alone = Ring(after, before), Ring(after)
    assert np.array_equal(like.flat(0.01).points, alone.flat(0.01).points)
    assert np.array_equal(like.flat(0.01).starts, alone.flat(0.01).starts)
    assert np.array_equal(like.polyline(0.5), alone.polyline(0.5))  # which the other has not
    assert like.box == alone.box


@pytest.mark.parametrize("moved", ["c0", "c40", "c78"])
def test_a_ring_like_another_knows_its_features(moved: str) -> None:
    part = cog()
    before = Ring(shape_of(part).curves)
    after = shape_of(edits.set_round(part, moved, 0.0)).curves
    assert before.pieces_of(moved)  # asked for, so that the next ring starts from it
    like = Ring(after, before)
    assert not like.pieces_of(moved)
    for feature in {piece.feature for piece in (*before.pieces, *after)}:
        assert like.pieces_of(feature) == tuple(p for p in after if p.feature == feature)


def test_curves_alike_at_both_ends() -> None:
    one = shape_of(cog()).curves
    assert alike_at_ends(one, one) == (len(one), 0)
    assert alike_at_ends(one, one[:5] + one[8:]) == (5, len(one) - 8)
    assert alike_at_ends(one, ()) == (0, 0)
    assert alike_at_ends(one[:3], one[-3:]) == (0, 0)


def test_only_the_rounds_that_do_not_fit_are_left_off() -> None:
    part = edits.set_round(cog(), "c40", 500.0)
    assert part.outline is not None
    kinds = {p.feature: p.kind for p in outline_ring(part.outline).pieces}
    assert "c40" not in kinds
    assert [kinds[f"c{i}"] for i in (36, 38, 42, 44)] == ["fillet"] * 4
