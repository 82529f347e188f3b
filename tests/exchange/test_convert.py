"""The command: both ways, the report on standard error, exit status 3 on bad input."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

import pytest

from screenapp.cli import main
from screenapp.model.part_json import read_part
from screenapp.model.shape import shape_of
from tests.exchange.drawings import SILENT_UNIT, rectangle, shapes_apart, write

SAMPLE = Path(__file__).parents[2] / "samples" / "pump-bracket.part.json"
Captured = pytest.CaptureFixture[str]


def test_there_and_back(tmp_path: Path, capsys: Captured) -> None:
    drawing, part = tmp_path / "a.dxf", tmp_path / "a.part.json"
    assert main(["convert", str(SAMPLE), str(drawing)]) == 0
    assert main(["convert", str(drawing), str(part)]) == 0
    out, err = capsys.readouterr()
    assert out == ""
    assert "The part has" in err
    assert err.splitlines()[-1] == f"wrote {part}"
    assert shapes_apart(read_part(SAMPLE), read_part(part)) <= 1e-9


def test_options_choose_layer_unit_tolerance_and_outline(tmp_path: Path, capsys: Captured) -> None:
    def draw(space: Any) -> None:
        space.add_line((0, 0), (4, 0), dxfattribs={"layer": "CUT"})
        space.add_line((4.001, 0.001), (4, 2), dxfattribs={"layer": "CUT"})
        space.add_line((4, 2), (0, 2), dxfattribs={"layer": "CUT"})
        space.add_line((0, 2), (0, 0), dxfattribs={"layer": "CUT"})
        space.add_circle((2, 1), 0.5, dxfattribs={"layer": "CUT"})
        rectangle(space, 10, 0, 11, 1, layer="CUT")
        rectangle(space, -10, -10, 30, 30, layer="FRAME")

    source = write(tmp_path / "s.dxf", draw, unit=SILENT_UNIT)
    target = tmp_path / "t.part.json"
    words = ["convert", str(source), str(target)]
    assert main(words) == 3
    assert "does not say in which unit" in capsys.readouterr().err
    assert main([*words, "--unit", "parsnip"]) == 3
    assert "parsnip" in capsys.readouterr().err
    assert main([*words, "--unit", "in", "--layer", "CUT"]) == 3  # gap of 0.036 mm
    assert "open at" in capsys.readouterr().err
    words += ["--unit", "in", "--layer", "CUT", "--tolerance", "0.05 mm"]
    assert main(words) == 3
    assert "2 outlines" in capsys.readouterr().err
    assert not target.exists(), "nothing is written when it is bad"
    assert main([*words, "--outline", "1"]) == 0
    err = capsys.readouterr().err
    assert "1 gap of 0.036 mm was closed" in err
    assert "Layer left out: “FRAME” (4 lines)." in err
    area = shape_of(read_part(target)).area / 25.4**2
    assert area == pytest.approx(8 - math.pi / 4, rel=1e-3)


def test_a_layer_of_zones(tmp_path: Path, capsys: Captured) -> None:
    def draw(space: Any) -> None:
        rectangle(space, 0, 0, 40, 20)
        space.add_circle((10, 10), 3, dxfattribs={"layer": "POCKETS"})
        space.add_circle((30, 10), 3)

    source, target = write(tmp_path / "z.dxf", draw), tmp_path / "z.part.json"
    assert main(["convert", str(source), str(target), "--zone", "POCKETS"]) == 0
    part = read_part(target)
    assert len(part.holes) == len(part.zones) == 1
    assert "give it its own thickness" in capsys.readouterr().err
    assert main(["convert", str(source), str(target), "--zone", "PADS"]) == 3
    assert "no lines on a layer “PADS”" in capsys.readouterr().err


@pytest.mark.parametrize("tolerance", ["0", "-1 mm", "3 kg", "much"])
def test_a_wrong_tolerance_is_bad_input(tolerance: str, tmp_path: Path, capsys: Captured) -> None:
    source = write(tmp_path / "s.dxf", lambda space: rectangle(space, 0, 0, 4, 2))
    words = ["convert", str(source), str(tmp_path / "t.part.json"), f"--tolerance={tolerance}"]
    assert main(words) == 3
    assert len(capsys.readouterr().err.splitlines()) >= 2


def test_a_shape_that_crosses_itself_is_not_written(tmp_path: Path, capsys: Captured) -> None:
    def draw(space: Any) -> None:
        space.add_lwpolyline([(0, 0), (40, 30), (40, 0), (0, 20)], close=True)

    target = tmp_path / "t.part.json"
    assert main(["convert", str(write(tmp_path / "s.dxf", draw)), str(target)]) == 3
    assert "cross" in capsys.readouterr().err
    assert not target.exists()


def test_endings_and_bad_files(tmp_path: Path, capsys: Captured) -> None:
    broken = tmp_path / "b.dxf"
    broken.write_text("nonsense\n")
    part = tmp_path / "p.part.json"
    for words, said in (
        ([str(broken), str(part)], "no DXF file"),
        ([str(tmp_path / "gone.dxf"), str(part)], "cannot be opened"),
        ([str(SAMPLE), str(tmp_path / "x.pdf")], "cannot be converted"),
        ([str(SAMPLE), str(part)], "cannot be converted"),
        ([str(SAMPLE), str(tmp_path / "x.dxf"), "--layer", "A"], "for reading a drawing"),
        ([str(SAMPLE), str(tmp_path / "x.dxf"), "--unit", "mile"], "cannot be written in mile"),
    ):
        assert main(["convert", *words]) == 3, words
        assert said in capsys.readouterr().err
    assert sorted(p.name for p in tmp_path.iterdir()) == ["b.dxf"]
