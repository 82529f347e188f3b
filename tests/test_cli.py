"""The command line: exit statuses, records, errors with their place."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from screenapp.cli import main

SAMPLES = Path(__file__).parents[1] / "samples"


@pytest.mark.parametrize(("name", "status"), [("lifting-lug", 0), ("pump-bracket", 1)])
def test_screen_answers_with_its_status_and_writes_the_record(
    name: str, status: int, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    file = SAMPLES / f"{name}.part.json"
    assert main(["screen", str(file), "--json", "--out", str(tmp_path)]) == status
    record = json.loads(capsys.readouterr().out)
    assert record["verdict"] == ("holds" if status == 0 else "does not hold")
    written = {path.name for path in tmp_path.iterdir()}
    endings = ("html", "result.json", "part.json", "peaks.csv", "readings.csv", "vtu", "png")
    assert written == {f"{name}.{ending}" for ending in endings}


def test_a_file_cut_in_half_is_bad_input_and_said(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    whole = (SAMPLES / "lifting-lug.part.json").read_text(encoding="utf-8")
    broken = tmp_path / "cut.part.json"
    broken.write_text(whole[: len(whole) // 2], encoding="utf-8")
    assert main(["screen", str(broken)]) == 3
    assert len(capsys.readouterr().err.splitlines()) >= 2
    assert main(["check", str(broken)]) == 3
    assert "cut.part.json:" in capsys.readouterr().out


def test_check_names_the_field(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    tree = json.loads((SAMPLES / "hose-clip.part.json").read_text(encoding="utf-8"))
    tree["wall"]["thickness"] = 0
    bad = tmp_path / "thin.part.json"
    bad.write_text(json.dumps(tree), encoding="utf-8")
    assert main(["check", str(bad)]) == 3
    assert "wall.thickness" in capsys.readouterr().out
