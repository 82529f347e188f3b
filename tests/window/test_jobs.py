"""Screening in its thread: ends, failures, cancelling, replacing, closing."""

from __future__ import annotations

import threading
from collections.abc import Iterator

import pytest
from pytestqt.qtbot import QtBot

from screenapp.model.errors import MeshingError, ScreenappError
from screenapp.model.part import Part
from screenapp.window.jobs import Screener
from tests.window.fabricate import plate
from tests.window.window_kit import FakeMesher, FakeScreen

Made = tuple[Screener, FakeScreen, FakeMesher]


@pytest.fixture
def made(qapp: object) -> Iterator[Made]:
    """A screener, what it runs, and its mesher."""
    screen, mesher = FakeScreen(), FakeMesher()
    screener = Screener(screen, lambda: mesher)
    yield screener, screen, mesher
    screen.release.set()
    screener.shut_down()


def test_findings_come_with_their_part_after_steps_and_passes(qtbot: QtBot, made: Made) -> None:
    screener, _, _ = made
    told: list[str] = []
    screener.progress.connect(lambda step: told.append(step.stage))
    screener.pass_done.connect(lambda _fields, summary: told.append(f"pass {summary.elements}"))
    part = plate()
    with qtbot.waitSignal(screener.finished) as got:
        screener.start(part)
        assert screener.busy
    assert got.args[1] is part
    assert told[0] == "meshing"
    assert told[1].startswith("pass ")
    assert not screener.busy


def test_the_mesher_is_started_once_and_kept(qtbot: QtBot, made: Made) -> None:
    screener, _, mesher = made
    screener.warm_up()
    for _ in range(2):
        with qtbot.waitSignal(screener.finished):
            screener.start(plate())
    assert mesher.started == 1
    screener.shut_down()
    assert mesher.closed == 1


def test_cancelling_is_told_and_nothing_else(qtbot: QtBot, made: Made) -> None:
    screener, screen, _ = made
    screen.wait = True
    ends: list[str] = []
    screener.finished.connect(lambda *_: ends.append("finished"))
    screener.failed.connect(lambda *_: ends.append("failed"))
    screener.start(plate())
    assert screen.entered.wait(5.0)
    with qtbot.waitSignals([screener.cancelled, screener.idle]):
        screener.cancel()
    assert ends == []


def test_work_that_does_not_listen_is_left_behind(qtbot: QtBot, made: Made) -> None:
    screener, screen, _ = made
    screen.wait = screen.deaf = True
    late: list[object] = []
    screener.finished.connect(lambda *args: late.append(args))
    screener.start(plate())
    assert screen.entered.wait(5.0)
    with qtbot.waitSignal(screener.cancelled):
        screener.cancel()
    assert not screen.release.is_set(), "it was still at work when its end was told"
    screen.release.set()
    with qtbot.waitSignal(screener.finished):  # only the new job speaks
        screener.start(Part(title="next", cases=plate().cases))
    assert [args[1].title for args in late] == ["next"]


def test_starting_again_replaces_what_runs(qtbot: QtBot, made: Made) -> None:
    screener, screen, _ = made
    screen.wait = True
    ended: list[str] = []
    screener.finished.connect(lambda _found, part: ended.append(part.title))
    screener.cancelled.connect(lambda: ended.append("cancelled"))
    screener.start(plate())
    assert screen.entered.wait(5.0)
    screen.release.clear()
    screen.wait = False
    with qtbot.waitSignal(screener.finished):
        screener.start(Part(title="second", cases=plate().cases))
    assert ended == ["second"]


def test_an_error_meant_for_the_user_comes_as_it_is(qtbot: QtBot, made: Made) -> None:
    screener, screen, _ = made
    screen.error = MeshingError("the meshing process ended", "screen again")
    with qtbot.waitSignal(screener.failed) as got:
        screener.start(plate())
    assert got.args[0] is screen.error


def test_a_crash_becomes_an_error_that_says_so(qtbot: QtBot, made: Made) -> None:
    screener, screen, _ = made
    screen.error = ZeroDivisionError("division by zero")
    with qtbot.waitSignal(screener.failed) as got:
        screener.start(plate())
    error = got.args[0]
    assert isinstance(error, ScreenappError)
    assert "ZeroDivisionError" in error.cause
    assert "unharmed" in error.mend
    screen.error = None
    with qtbot.waitSignal(screener.finished):  # and the thread goes on
        screener.start(plate())


def test_a_mesher_that_does_not_start_is_an_error_of_the_screening(qtbot: QtBot) -> None:
    def broken() -> FakeMesher:
        raise MeshingError("the meshing process did not start", "install gmsh")

    screener = Screener(FakeScreen(), broken)
    screener.warm_up()
    with qtbot.waitSignal(screener.failed) as got:
        screener.start(plate())
    assert got.args[0].mend == "install gmsh"
    screener.shut_down()


def test_closing_stops_what_runs_and_waits_for_the_thread(made: Made) -> None:
    screener, screen, mesher = made
    screen.wait = True
    screener.start(plate())
    assert screen.entered.wait(5.0)
    screener.shut_down()
    assert mesher.closed == 1
    assert not any(t.name == "screening" for t in threading.enumerate())
    screener.shut_down()  # a second time does nothing
    assert mesher.closed == 1
