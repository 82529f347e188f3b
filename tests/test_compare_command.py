"""`screenapp compare`: parts and records, and what it refuses."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from screenapp.cli import BAD_INPUT, DOES_NOT_HOLD, HOLDS, main

BRACKET = Path(__file__).parents[1] / "samples" / "pump-bracket.part.json"


@pytest.fixture(scope="module")
def thicker(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The bracket with a wall of 8 mm."""
    tree = json.loads(BRACKET.read_text(encoding="utf-8"))
    tree["wall"]["thickness"] = 8
    path = tmp_path_factory.mktemp("thicker") / "thicker.part.json"
    path.write_text(json.dumps(tree), encoding="utf-8")
    return path


def test_two_parts(thicker: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["compare", str(BRACKET), str(thicker)]) == HOLDS
    told = capsys.readouterr().out
    assert "verdict: does not hold → holds" in told
    changed = next(line.split() for line in told.splitlines() if "wall.thickness" in line)
    assert changed == ["wall.thickness", "6", "8"]
    use = next(line for line in told.splitlines() if "does not hold → holds" in line[20:])
    assert "−0.26" in use
    assert "local codes and a licensed engineer decide" in told
    assert main(["compare", str(thicker), str(BRACKET)]) == DOES_NOT_HOLD


def test_a_record_is_taken_as_it_is(
    thicker: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    assert main(["screen", str(thicker), "--out", str(tmp_path)]) == HOLDS
    capsys.readouterr()
    record = tmp_path / "thicker.result.json"
    assert main(["compare", str(record), str(record)]) == HOLDS
    told = capsys.readouterr().out
    assert "nothing in the part file differs" in told
    assert "+0, within the bands" in told


def test_a_record_without_its_own_part_is_refused(
    thicker: Path, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    main(["screen", str(thicker), "--out", str(tmp_path)])
    (tmp_path / "thicker.part.json").write_bytes(BRACKET.read_bytes())
    capsys.readouterr()
    record = tmp_path / "thicker.result.json"
    assert main(["compare", str(BRACKET), str(record)]) == BAD_INPUT
    assert "is not the part that thicker.result.json was made of" in capsys.readouterr().err


@pytest.mark.parametrize(
    ("content", "said"),
    [("{", "is no result record"), ("[]", "is no result record"), ("{}", "is no result record")],
)
def test_what_is_no_record_is_refused(
    content: str, said: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    path = tmp_path / "x.result.json"
    path.write_text(content, encoding="utf-8")
    assert main(["compare", str(path), str(path)]) == BAD_INPUT
    assert said in capsys.readouterr().err
    assert main(["compare", str(tmp_path / "none.result.json"), str(path)]) == BAD_INPUT
    assert "cannot be read" in capsys.readouterr().err
