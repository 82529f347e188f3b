"""Measuring on the board: real clicks, values against closed forms, nothing put into the part."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings, strategies as st
from PySide6.QtCore import Qt
from PySide6.QtGui import QGuiApplication
from pytestqt.qtbot import QtBot
from shapely.geometry import LineString, Point

from screenapp.model import edits
from screenapp.model.boundary_curve import BoundaryCurve
from screenapp.model.curves import Arc, Segment
from screenapp.model.measuring import angle_between, least_distance
from screenapp.model.part import Part
from screenapp.window.board.tools.measure import MeasureTool
from tests.window.board_kit import Hand, plate

CONTROL = Qt.KeyboardModifier.ControlModifier


@pytest.fixture
def hand(qtbot: QtBot) -> Hand:
    """The plate with holes of 20 mm in its middle and of 8 mm at (80, 45)."""
    made = Hand(edits.add_circle_hole(plate(), (80.0, 45.0), 8.0))
    qtbot.addWidget(made.board)
    made.type("M")
    return made


def tool(hand: Hand) -> MeasureTool:
    found = hand.canvas.tool
    assert isinstance(found, MeasureTool)
    return found


def numbers(hand: Hand) -> dict[str, float]:
    found = tool(hand).settled
    assert found is not None
    return {n.name: n.value for n in found.numbers}


def test_distance_and_direction_from_corner_to_centre(hand: Hand) -> None:
    before = hand.part
    hand.click(0.0, 0.0)
    hand.click(50.0, 30.0)
    assert numbers(hand) == pytest.approx(
        {
            "distance": math.hypot(50.0, 30.0),
            "along x": 50.0,
            "along y": 30.0,
            "from +x": math.degrees(math.atan2(30.0, 50.0)),
        }
    )
    assert hand.part == before
    assert not hand.document.history.can_undo


def test_a_hole_tells_its_sizes_and_area(hand: Hand) -> None:
    hand.click(54.0, 24.0)  # inside it, beside its centre
    assert numbers(hand) == pytest.approx(
        {
            "diameter": 20.0,
            "radius": 10.0,
            "round the rim": 20.0 * math.pi,
            "area": 100.0 * math.pi,
        }
    )


def test_the_ligament_between_two_holes_and_to_an_edge(hand: Hand) -> None:
    hand.click(54.0, 24.0)
    hand.click(82.5, 45.0)
    away = math.hypot(30.0, 15.0)
    assert numbers(hand) == pytest.approx({"ligament": away - 14.0, "centre to centre": away})
    hand.click(83.9, 45.9)  # a third click begins anew
    hand.click(90.0, 60.0)
    assert numbers(hand) == pytest.approx({"ligament": 60.0 - 49.0})


def test_the_angle_of_two_edges(hand: Hand) -> None:
    hand.click(20.0, 0.0)
    hand.click(0.0, 20.0)
    assert numbers(hand)["angle"] == pytest.approx(90.0)
    hand.click(20.0, 0.0)
    hand.click(20.0, 60.0)
    assert numbers(hand) == pytest.approx({"ligament": 60.0, "angle": 0.0})


def test_the_area_of_the_face(hand: Hand) -> None:
    hand.click(13.0, 43.0)
    assert numbers(hand)["area"] == pytest.approx(6000.0 - 116.0 * math.pi)


def test_a_fillet_tells_its_radius_and_turn(qtbot: QtBot) -> None:
    hand = Hand(edits.set_round(plate(), "c3", 12.0))
    qtbot.addWidget(hand.board)
    hand.type("M")
    off = 12.0 * (1.0 - math.sqrt(0.5))
    hand.click(100.0 - off, 60.0 - off)
    assert numbers(hand) == pytest.approx({"radius": 12.0, "turns": 90.0, "length": 6.0 * math.pi})


def test_the_result_is_copied_with_units(hand: Hand) -> None:
    hand.click(0.0, 0.0)
    hand.click(100.0, 0.0)
    hand.key(Qt.Key.Key_C, CONTROL)
    assert QGuiApplication.clipboard().text() == (
        "corner c1 to corner c2\ndistance 100 mm\nalong x 100 mm\nalong y 0 mm\nfrom +x 0°"
    )
    hand.document.apply("units", edits.set_units(hand.part, "in-lbf-ksi"))
    hand.key(Qt.Key.Key_C, CONTROL)
    assert "distance 3.937 in" in QGuiApplication.clipboard().text()


def test_escape_steps_back_one_thing(hand: Hand) -> None:
    hand.click(0.0, 0.0)
    hand.click(100.0, 0.0)
    hand.key(Qt.Key.Key_Escape)
    found = tool(hand).settled
    assert found is not None
    assert found.title == "corner c1"
    hand.key(Qt.Key.Key_Escape)
    assert tool(hand).settled is None
    hand.key(Qt.Key.Key_Escape)
    assert hand.canvas.tool is hand.board.tools[0]


def test_what_is_selected_is_measured_without_a_mouse(hand: Hand) -> None:
    hand.key(Qt.Key.Key_Escape)
    hand.document.select("h1", "h2")
    hand.type("M")
    assert numbers(hand)["ligament"] == pytest.approx(math.hypot(30.0, 15.0) - 14.0)
    assert "ligament" in hand.said[-1]


def test_the_part_may_change_under_it(hand: Hand) -> None:
    hand.click(54.0, 24.0)
    hand.document.apply("resize", edits.resize_hole(hand.part, "h1", diameter=30.0))
    assert numbers(hand)["diameter"] == 30.0
    hand.document.apply("remove", edits.remove(hand.part, "h1").part)
    assert tool(hand).settled is None


def test_an_empty_board_measures_places(qtbot: QtBot) -> None:
    hand = Hand(Part())
    qtbot.addWidget(hand.board)
    hand.type("M")
    hand.click(0.0, 0.0)
    hand.click(30.0, 40.0)
    assert numbers(hand)["distance"] == pytest.approx(50.0)


angles = st.floats(-math.pi, math.pi)
places = st.floats(-50.0, 50.0)


points = st.tuples(places, places)


@settings(max_examples=60, deadline=None)
@given(points, st.floats(1.0, 30.0), angles, st.floats(0.2, 6.0), points, points)
def test_least_distance_against_shapely(
    centre: tuple[float, float],
    r: float,
    begin: float,
    sweep: float,
    start: tuple[float, float],
    end: tuple[float, float],
) -> None:
    if math.dist(start, end) < 1e-3:
        return
    arc, line = Arc(centre, r, begin, sweep), Segment(start, end)
    gap, a, b = least_distance(
        [BoundaryCurve("a", "edge", arc, 0)], [BoundaryCurve("b", "edge", line, 0)]
    )
    n = 4001  # so fine that the polyline's sagitta stays under r/8·(6/4000)²
    fine = LineString(arc.point([i / (n - 1) for i in range(n)]))
    other = LineString([line.start, line.end])
    assert gap == pytest.approx(fine.distance(other), abs=2e-5 * r)
    assert math.dist(a, b) == pytest.approx(gap)
    assert other.distance(Point(b)) == pytest.approx(0.0, abs=1e-9)


def test_angle_at_a_common_corner_may_be_obtuse() -> None:
    one = Segment((0.0, 0.0), (10.0, 0.0))
    assert angle_between(one, Segment((0.0, 0.0), (-5.0, 5.0))) == pytest.approx(135.0)
    assert angle_between(one, Segment((1.0, 2.0), (-4.0, 7.0))) == pytest.approx(45.0)
