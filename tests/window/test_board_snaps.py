"""Snaps by construction, found with a real cursor: tangent, perpendicular, level, crossing."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QColor, QImage, QPainter
from PySide6.QtTest import QTest
from pytestqt.qtbot import QtBot

from screenapp.model.curves import Arc, Segment
from screenapp.model.part import CircleHole, LoopHole, Part, Zone
from screenapp.window.board.snap_lines import crossings, tangent_points
from screenapp.window.board.snap_record import Snap, SnapKind
from screenapp.window.board.snap_signs import draw_snap
from tests.window.board_kit import Hand, plate, ring

CENTRE, RADIUS = (50.0, 30.0), 10.0


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    made = Hand(plate())
    qtbot.addWidget(made.board)
    return made


def snapped(hand: Hand) -> Snap:
    assert hand.canvas.place is not None
    return hand.canvas.place.snap


def placed(hand: Hand) -> list[tuple[float, float]]:
    return list(hand.canvas.tool.draft.points)  # type: ignore[union-attr]


def test_a_line_is_drawn_tangent_to_a_hole(hand: Hand) -> None:
    hand.type("L")
    hand.click(20.0, 30.0)
    # from 30 mm left of the centre, the line that touches rises by asin(10/30)
    reach = math.sqrt(30.0**2 - RADIUS**2)
    rise = math.asin(RADIUS / 30.0)
    touch = (20.0 + reach * math.cos(rise), 30.0 + reach * math.sin(rise))
    hand.go(touch[0] + 0.3, touch[1] - 0.2)
    assert snapped(hand).kind == "tangent"
    assert "snap: tangent to h1" in hand.board.corner_text
    hand.click(touch[0] + 0.3, touch[1] - 0.2)
    assert placed(hand)[1] == pytest.approx(touch, abs=1e-9)


def test_a_line_is_drawn_square_to_an_edge_and_to_a_rim(hand: Hand) -> None:
    hand.type("L")
    hand.click(30.0, 20.0)
    hand.go(30.4, 0.3)
    assert snapped(hand).kind == "perpendicular"
    assert snapped(hand).at == pytest.approx((30.0, 0.0), abs=1e-9)
    assert "perpendicular to e1" in hand.board.corner_text
    away = math.dist((30.0, 20.0), CENTRE)
    rim = (50.0 - 20.0 / away * RADIUS, 30.0 - 10.0 / away * RADIUS)
    hand.go(rim[0] + 0.3, rim[1])
    assert snapped(hand).kind == "perpendicular"
    assert snapped(hand).at == pytest.approx(rim, abs=1e-9)


def test_a_place_is_level_with_a_corner_and_stands_over_a_centre(qtbot: QtBot) -> None:
    hand = Hand(Part(outline=plate().outline, holes=(CircleHole("h1", (33.37, 21.83), 6.0),)))
    qtbot.addWidget(hand.board)
    hand.type("C")
    hand.go(70.0, 21.7)
    assert snapped(hand).kind == "horizontal"
    assert snapped(hand).at[1] == 21.83
    assert snapped(hand).to == ((33.37, 21.83),)
    assert "snap: horizontal from h1" in hand.board.corner_text
    hand.go(33.3, 48.0)
    assert snapped(hand).kind == "vertical"
    assert snapped(hand).at[0] == 33.37


def test_between_two_points_the_place_is_where_both_lines_cross(qtbot: QtBot) -> None:
    holes = (CircleHole("h1", (33.37, 41.83), 4.0), CircleHole("h2", (71.13, 12.29), 4.0))
    hand = Hand(Part(outline=plate().outline, holes=holes))
    qtbot.addWidget(hand.board)
    hand.type("C")
    hand.go(33.5, 12.1)
    assert snapped(hand).kind == "intersection"
    assert snapped(hand).at == (33.37, 12.29)
    assert len(snapped(hand).to) == 2


def test_on_an_edge_the_place_is_under_a_centre(qtbot: QtBot) -> None:
    hand = Hand(Part(outline=plate().outline, holes=(CircleHole("h1", (33.37, 21.83), 6.0),)))
    qtbot.addWidget(hand.board)
    hand.type("P")
    hand.go(33.2, 0.3)
    assert snapped(hand).kind == "intersection"
    assert snapped(hand).at == (33.37, 0.0)


def test_a_key_holds_every_snap_off(hand: Hand) -> None:
    hand.type("L")
    hand.go(30.4, 0.3)
    assert snapped(hand).kind != "none"
    QTest.keyPress(hand.canvas, Qt.Key.Key_Control)
    assert snapped(hand).kind == "none"
    assert "snap: off" in hand.board.corner_text
    QTest.keyRelease(hand.canvas, Qt.Key.Key_Control)
    assert snapped(hand).kind != "none"


def test_a_dragged_corner_is_level_with_others(hand: Hand) -> None:
    hand.press(100.0, 60.0)
    hand.go(95.0, 50.0)
    hand.go(80.0, 30.2)  # beside the middle of the hole
    hand.release(80.0, 30.2)
    assert hand.part.outline is not None
    assert hand.part.outline.corners[2].at[1] == 30.0


def test_where_pieces_cross() -> None:
    line = Segment((0.0, 0.0), (10.0, 10.0))
    assert crossings(line, Segment((0.0, 10.0), (10.0, 0.0))) == [(5.0, 5.0)]
    assert crossings(line, Segment((0.0, 10.0), (4.0, 6.0))) == []
    assert crossings(line, Segment((1.0, 0.0), (11.0, 10.0))) == []
    circle = Arc((5.0, 0.0), 5.0, 0.0, 2.0 * math.pi)
    found = np.array(sorted(crossings(line, circle)))
    assert found == pytest.approx(np.array([(0.0, 0.0), (5.0, 5.0)]))
    other = Arc((5.0, 6.0), 5.0, math.pi, math.pi)  # its lower half
    found = np.array(sorted(crossings(circle, other)))
    assert found == pytest.approx(np.array([(1.0, 3.0), (9.0, 3.0)]))


def test_tangents_stand_square_to_the_radius() -> None:
    arc = Arc((3.0, 4.0), 2.0, 0.0, 6.28)
    for x, y in tangent_points(arc, (10.0, -1.0)):
        assert math.dist((x, y), arc.centre) == pytest.approx(2.0)
        assert (x - 3.0) * (x - 10.0) + (y - 4.0) * (y + 1.0) == pytest.approx(0.0, abs=1e-9)
    assert tangent_points(arc, (3.5, 4.0)) == []


def test_every_kind_has_a_sign_of_its_own(hand: Hand) -> None:
    kinds: tuple[SnapKind, ...] = (
        "grid", "corner", "centre", "middle", "edge", "start",
        "intersection", "tangent", "perpendicular", "horizontal", "vertical",
    )  # fmt: skip
    signs = set()
    for kind in kinds:
        image = QImage(1000, 700, QImage.Format.Format_ARGB32)
        image.fill(QColor("white"))
        painter = QPainter(image)
        draw_snap(painter, hand.canvas.frame_now, Snap(kind, (50.0, 30.0)))
        painter.end()
        signs.add(bytes(image.constBits()))
    assert len(signs) == len(kinds)


# --- lines of zones -----------------------------------------------------------------------------


@pytest.fixture
def padded(qtbot: QtBot) -> Hand:
    """The plate with a round pad of 24 mm about (80, 30), and a square one about (20, 30)."""
    square = ring((13.0, 23.0), (27.0, 23.0), (27.0, 37.0), (13.0, 37.0), first=11)
    zones = (
        Zone(CircleHole("z1", (80.0, 30.0), 24.0), 6.0),
        Zone(LoopHole("z2", square), 6.0),
    )
    made = Hand(replace(plate(), zones=zones))
    qtbot.addWidget(made.board)
    return made


@pytest.mark.parametrize(
    ("near", "kind", "at"),
    [
        ((13.2, 22.9), "corner", (13.0, 23.0)),
        ((20.2, 36.8), "middle", (20.0, 37.0)),
        ((27.1, 33.3), "edge", (27.0, 33.3)),
        ((79.8, 30.3), "centre", (80.0, 30.0)),
    ],
)
def test_the_lines_of_zones_draw_the_cursor(
    padded: Hand, near: tuple[float, float], kind: str, at: tuple[float, float]
) -> None:
    padded.type("C")
    padded.go(*near)
    assert snapped(padded).kind == kind
    assert snapped(padded).at == pytest.approx(at, abs=0.15 if kind == "edge" else 1e-9)


def test_a_line_is_drawn_tangent_and_square_to_a_zone(padded: Hand) -> None:
    padded.type("L")
    padded.click(60.0, 8.0)
    reach, far = 12.0, math.dist((60.0, 8.0), (80.0, 30.0))
    to, half = math.atan2(-22.0, -20.0), math.acos(reach / far)
    for way in (to - half, to + half):
        touch = (80.0 + reach * math.cos(way), 30.0 + reach * math.sin(way))
        padded.go(*touch)
        assert snapped(padded).kind == "tangent"
        assert snapped(padded).id == "z1"
        assert snapped(padded).at == pytest.approx(touch, abs=1e-9)
    padded.key(Qt.Key.Key_Escape)
    padded.click(60.0, 30.0)
    padded.go(27.0, 30.1)
    assert snapped(padded).at == pytest.approx((27.0, 30.0), abs=1e-9)


def test_a_zone_that_is_dragged_does_not_draw_itself(padded: Hand) -> None:
    padded.press(80.0, 35.0)
    padded.go(80.0, 37.0)
    padded.go(80.0, 39.0)
    assert snapped(padded).id != "z1"
    padded.release(80.0, 39.0)
    form = padded.part.zones[0].form
    assert isinstance(form, CircleHole)
    assert form.centre == pytest.approx((80.0, 34.0), abs=1.0)


def test_where_a_zone_meets_the_edge_is_a_crossing(qtbot: QtBot) -> None:
    made = Hand(replace(plate(), zones=(Zone(CircleHole("z1", (80.0, 0.0), 24.0), 6.0),)))
    qtbot.addWidget(made.board)
    made.type("C")
    made.go(92.2, 0.2)
    assert snapped(made).kind == "intersection"
    assert snapped(made).at == pytest.approx((92.0, 0.0), abs=1e-9)
