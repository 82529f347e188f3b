"""Files that are no drawing, or one in pieces: a cause and a mend, never a crash."""

from __future__ import annotations

import multiprocessing
import random
import time
from pathlib import Path
from typing import Any

import ezdxf
import pytest

from screenapp.exchange import dxf_file, dxf_reading
from screenapp.exchange.bringing_in import bring_in
from screenapp.exchange.choosing import Wishes
from screenapp.exchange.drawing import Drawing, DrawingError
from screenapp.exchange.dxf_reading import read_drawing
from screenapp.exchange.reading_apart import read_apart
from screenapp.model.errors import Cancelled
from screenapp.model.progress import Progress, Step
from screenapp.model.shape import shape_of
from tests.exchange.drawings import bring, part_from, rectangle, texts, write


@pytest.fixture
def sound(tmp_path: Path) -> Path:
    """A drawing of a plate with a hole on a layer."""

    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 80, 40)
        space.add_circle((40, 20), 6, dxfattribs={"layer": "HOLES"})

    return write(tmp_path / "plate.dxf", draw)


def attempt(path: Path) -> tuple[Drawing | None, DrawingError | None]:
    """The drawing, or why there is none."""
    try:
        return read_drawing(path), None
    except DrawingError as error:
        return None, error


@pytest.mark.parametrize(
    ("content", "cause"),
    [
        (b"", "is empty"),
        (b"\x89PNG\r\n\x1a\n\x00\x00\x00\rIHDR", "binary file"),
        (b"AC1027\0\0\0\0\0", "DWG file"),
        (b"AC1032 something", "DWG file"),
        (b"Dear all,\nplease find the drawing attached.\n", "no DXF file"),
        (b'{"format": "part"}', "no DXF file"),
        (b"\xff\xfe0\0\n\0", "binary file"),
        (b"AutoCAD Binary DXF\r\n\x1a\x00\x00\x00SECTION", "binary DXF file"),
        (b"0\nSECTION\n2\nENTITIES\n0\nLINE\n8\n0\n", "breaks off|holds no line"),
        (b"  0\nEOF\n", "holds no line"),
        (b"0\nSECTION\n2\nHEADER\n0\nENDSEC\n0\nEOF\n", "holds no line"),
        (b"0\n0\n0\n0\n0\n0\n", "."),
        (b"1\n2\n3\n", "."),
    ],
)
def test_what_is_no_drawing_is_refused(content: bytes, cause: str, tmp_path: Path) -> None:
    path = tmp_path / "broken.dxf"
    path.write_bytes(content)
    with pytest.raises(DrawingError, match=cause) as caught:
        read_drawing(path)
    assert "broken.dxf" in caught.value.cause
    assert caught.value.mend


def test_missing_files_and_folders(tmp_path: Path) -> None:
    for path in (tmp_path / "gone.dxf", tmp_path):
        with pytest.raises(DrawingError, match="cannot be opened"):
            read_drawing(path)


def test_a_file_cut_off_gives_what_is_left_or_says_so(sound: Path, tmp_path: Path) -> None:
    """Cut anywhere: what can still be read is, with a word of warning, the rest is refused."""
    whole = sound.read_bytes()
    warned = refused = 0
    for share in range(1, 100, 3):
        cut = tmp_path / "cut.dxf"
        cut.write_bytes(whole[: len(whole) * share // 100])
        drawing, error = attempt(cut)
        if drawing is not None:
            assert any("breaks off" in text for text in drawing.repaired)
            warned += 1
        else:
            assert error is not None
            assert "cut.dxf" in error.cause
            assert error.mend
            refused += 1
    assert warned
    assert refused


def test_slightly_broken_files_are_mended_and_said(sound: Path, tmp_path: Path) -> None:
    text = sound.read_text()
    for wrong in (
        text.replace("  0\nEOF\n", ""),
        text.replace("  0\nENDSEC\n  0\nSECTION\n  2\nOBJECTS", "  0\nSECTION\n  2\nOBJECTS"),
    ):
        assert wrong != text
        path = tmp_path / "mended.dxf"
        path.write_text(wrong)
        part = part_from(path)
        assert shape_of(part).area == pytest.approx(3200 - 36 * 3.141592653589793)
        assert any("mended" in text for text in texts(bring(path), "note"))


def test_nonsense_figures_are_passed_over(tmp_path: Path) -> None:
    """No radius, no length, not a number, a spline without points: counted, and the rest stays."""

    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 80, 40)
        space.add_circle((10, 10), 0)
        space.add_line((5, 5), (5, 5))
        space.add_circle((float("nan"), 10), 3)
        space.add_spline()
        space.add_lwpolyline([])

    brought = bring(write(tmp_path / "n.dxf", draw))
    assert brought.part is not None
    assert shape_of(brought.part).area == pytest.approx(3200)
    assert brought.part.holes == ()


def test_bytes_changed_at_random_never_crash(sound: Path, tmp_path: Path) -> None:
    whole = sound.read_bytes()
    chance = random.Random(5)
    path = tmp_path / "noise.dxf"
    outcomes = {"read": 0, "refused": 0}
    for _ in range(60):
        changed = bytearray(whole)
        for _ in range(chance.choice([1, 3, 30])):
            k = chance.randrange(len(changed))
            changed[k] = chance.choice(b"0123456789-.\n ABCeE\xff")
        path.write_bytes(bytes(changed))
        try:
            bring_in(read_drawing(path), Wishes(unit="mm"))
            outcomes["read"] += 1
        except DrawingError:
            outcomes["refused"] += 1
    assert outcomes["read"] > 5


@pytest.mark.parametrize("kind", ["faces", "mesh"])
def test_bodies_are_told_from_flat_patterns(kind: str, tmp_path: Path) -> None:
    def draw(space: Any) -> None:
        if kind == "faces":
            space.add_3dface([(0, 0, 0), (1, 0, 0), (1, 1, 1), (0, 1, 1)])
        else:
            with space.add_mesh().edit_data() as data:
                data.vertices = [(0, 0, 0), (1, 0, 0), (1, 1, 1)]
                data.faces = [[0, 1, 2]]

    with pytest.raises(DrawingError, match="3D bodies or faces"):
        read_drawing(write(tmp_path / "body.dxf", draw))


def test_lines_on_a_paper_sheet_only(tmp_path: Path) -> None:
    document = ezdxf.new("R2010")
    document.layout("Layout1").add_line((0, 0), (1, 1))
    document.layout("Layout1").add_line((1, 0), (1, 1))
    document.saveas(tmp_path / "paper.dxf")
    with pytest.raises(DrawingError, match="paper sheets only"):
        read_drawing(tmp_path / "paper.dxf")


# --- huge files ---------------------------------------------------------------------------------


def test_a_file_beyond_the_largest_is_refused_at_once(
    sound: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(dxf_file, "LARGEST", 1000)
    with pytest.raises(DrawingError, match="MB are read"):
        read_drawing(sound)


def test_blocks_that_unfold_without_bounds_are_refused(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """Six levels of ten: a million lines out of a file of a few."""
    monkeypatch.setattr(dxf_reading, "MOST", 20_000)

    def draw(space: Any) -> None:
        blocks = space.doc.blocks
        blocks.new("B0").add_line((0, 0), (1, 0))
        for k in range(1, 7):
            block = blocks.new(f"B{k}")
            for i in range(10):
                block.add_blockref(f"B{k - 1}", (i, k))
        space.add_blockref("B6", (0, 0))

    with pytest.raises(DrawingError, match="more than 20,000 lines"):
        read_drawing(write(tmp_path / "bomb.dxf", draw))


@pytest.fixture(scope="module")
def huge(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Forty thousand lines in rows."""

    def draw(space: Any) -> None:
        for k in range(40_000):
            x, y = k % 200, k // 200
            space.add_line((x, y), (x + 1, y))

    return write(tmp_path_factory.mktemp("huge") / "huge.dxf", draw)


def test_reading_reports_its_progress(huge: Path) -> None:
    steps: list[Step] = []
    drawing = read_drawing(huge, Progress(report=steps.append))
    assert len(drawing.curves) == 40_000
    done = [step.done for step in steps]
    assert done == sorted(done)
    assert len(done) > 20
    assert 0.0 < done[0] < 0.2
    assert done[-1] > 0.9
    steps.clear()
    brought = bring_in(drawing, Wishes(), Progress(report=steps.append))
    assert brought.part is None
    assert "no closed outline" in str(brought.error)
    assert len(steps) > 20


@pytest.mark.parametrize("after", [1, 10, 30])
def test_reading_stops_when_asked(huge: Path, after: int) -> None:
    steps: list[Step] = []
    began = time.monotonic()
    with pytest.raises(Cancelled):
        read_drawing(huge, Progress(steps.append, lambda: len(steps) >= after))
    took = time.monotonic() - began
    began = time.monotonic()
    read_drawing(huge)
    whole = time.monotonic() - began
    assert len(steps) <= after + 1
    assert took < whole


def test_making_a_part_stops_when_asked(huge: Path) -> None:
    drawing = read_drawing(huge)
    asked = 0

    def cancelled() -> bool:
        nonlocal asked
        asked += 1
        return asked > 50

    with pytest.raises(Cancelled):
        bring_in(drawing, Wishes(), Progress(cancelled=cancelled))


# --- in a process of its own --------------------------------------------------------------------


def test_read_apart_is_the_same_drawing(huge: Path, sound: Path) -> None:
    steps: list[Step] = []
    assert read_apart(huge, Progress(report=steps.append)) == read_drawing(huge)
    assert steps
    assert [step.done for step in steps] == sorted(step.done for step in steps)
    assert read_apart(sound, large=0) == read_drawing(sound)


def test_read_apart_says_the_same_errors(tmp_path: Path) -> None:
    path = tmp_path / "letter.dxf"
    path.write_text("Dear all,\n" * 30)
    with pytest.raises(DrawingError, match="no DXF file") as caught:
        read_apart(path, large=0)
    assert caught.value.mend
    with pytest.raises(DrawingError, match="cannot be opened"):
        read_apart(tmp_path / "gone.dxf", large=0)


def test_read_apart_is_ended_when_asked(huge: Path) -> None:
    with pytest.raises(Cancelled):
        read_apart(huge, Progress(cancelled=lambda: bool(running())))
    assert running() == []


def test_a_process_that_dies_is_an_error(huge: Path) -> None:
    """As when the system ends it for want of memory."""

    def end(_step: Step) -> None:
        for process in running():
            process.kill()

    with pytest.raises(DrawingError, match="ended unexpectedly"):
        read_apart(huge, Progress(report=end))


def running() -> list[Any]:
    """The processes that read drawings now."""
    return [p for p in multiprocessing.active_children() if p.name == "drawing"]
