"""Files of older versions open as what they said, and are written in the present version."""

from __future__ import annotations

from pathlib import Path

import pytest

from screenapp.model.errors import PartFileError
from screenapp.model.migrations import STEPS
from screenapp.model.part import Formula, Probe
from screenapp.model.part_json import part_from_text, part_to_text, read_part, write_part
from screenapp.model.part_tree import VERSION

FIRST = Path(__file__).parent / "data" / "plate-version-1.part.json"


def test_every_older_version_has_its_step() -> None:
    assert sorted(STEPS) == list(range(1, VERSION))


def test_a_file_of_version_1_opens_with_its_probes_as_readings() -> None:
    part = read_part(FIRST)
    assert part.readings == (Probe("p1", "tip", (40.0, 12.5)), Probe("p2", "root", (2.0, 1.0)))
    assert Formula("readings.p1.at.0", "width/2") in part.formulas
    assert part.outline is not None
    assert part.outline.corners[1].round == 5.0


def test_opening_leaves_the_file_alone_and_saving_brings_it_up_to_date(tmp_path: Path) -> None:
    path = tmp_path / "plate.part.json"
    path.write_bytes(FIRST.read_bytes())
    part = read_part(path)
    assert path.read_bytes() == FIRST.read_bytes()
    write_part(part, path)
    text = path.read_text(encoding="utf-8")
    assert f'"version": {VERSION}' in text
    assert '"kind": "probe"' in text
    assert '"probes"' not in text
    assert read_part(path) == part
    assert part_to_text(read_part(path)) == text


def test_a_fault_in_an_older_file_names_the_line_of_that_file() -> None:
    text = FIRST.read_text(encoding="utf-8").replace('"name": "root", ', "")
    with pytest.raises(PartFileError) as caught:
        part_from_text(text)
    line = text[: text.index('"p2"')].count("\n") + 1
    assert [(f.line, f.field) for f in caught.value.faults] == [(line, "readings.p2")]


def test_a_fault_in_the_list_itself_names_its_line_too() -> None:
    text = '{"format": "screenapp part",\n"version": 1,\n"probes": 3}'
    with pytest.raises(PartFileError) as caught:
        part_from_text(text)
    assert [(f.line, f.field) for f in caught.value.faults] == [(3, "readings")]


def test_probes_in_a_file_of_the_present_version_are_a_fault() -> None:
    text = FIRST.read_text(encoding="utf-8").replace('"version": 1', '"version": 2')
    with pytest.raises(PartFileError) as caught:
        part_from_text(text)
    assert [f.field for f in caught.value.faults] == ["probes"]


@pytest.mark.parametrize("probes", ["3", "null", "[1]", "{}", '[{"kind": 4}]'])
def test_garbled_probes_are_faults_and_not_a_crash(probes: str) -> None:
    text = f'{{"format": "screenapp part", "version": 1, "probes": {probes}}}'
    with pytest.raises(PartFileError) as caught:
        part_from_text(text)
    assert all(fault.line == 1 for fault in caught.value.faults)


def test_a_file_with_both_names_is_a_fault() -> None:
    text = '{"format": "screenapp part", "version": 1, "probes": [], "readings": []}'
    with pytest.raises(PartFileError, match="probes"):
        part_from_text(text)
