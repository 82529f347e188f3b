"""Who did and who checked a screening: kept in the part, printed, and of no weight otherwise."""

from __future__ import annotations

from dataclasses import replace

import pytest

from screenapp.model.edits import set_job_details
from screenapp.model.errors import PartFileError
from screenapp.model.part import JobDetails
from screenapp.model.part_json import part_from_text, part_sha256, part_to_text, screening_key
from screenapp.report.input_words import job_words
from tests.model.plates import plate

GIVEN = JobDetails("R. Okafor", "M. Lind", "41", "A-7", "C")


def test_they_are_kept_in_the_file() -> None:
    part = replace(plate(), record=GIVEN)
    assert part_from_text(part_to_text(part)) == part
    some = replace(plate(), record=JobDetails(done_by="R. Okafor"))
    text = part_to_text(some)
    assert '"done_by": "R. Okafor"' in text
    assert "checked_by" not in text
    assert part_from_text(text) == some


def test_a_file_without_them_keeps_its_bytes() -> None:
    text = part_to_text(plate())
    assert '"record"' not in text
    assert part_to_text(part_from_text(text)) == text


def test_a_name_leaves_findings_current_but_is_part_of_the_file() -> None:
    named = replace(plate(), record=GIVEN)
    assert screening_key(named) == screening_key(plate())
    assert part_sha256(named) != part_sha256(plate())


def test_what_is_typed_becomes_one_line() -> None:
    part = set_job_details(plate(), done_by="  R.\n Okafor ", revision="C")
    assert part.record == JobDetails(done_by="R. Okafor", revision="C")
    assert set_job_details(part, done_by=" ").record == JobDetails(revision="C")


@pytest.mark.parametrize(
    ("wrong", "field"),
    [('{"done_by": 3}', "record.done_by"), ('{"signed": "me"}', "record.signed"), ("[]", "record")],
)
def test_a_wrong_entry_is_refused_with_its_place(wrong: str, field: str) -> None:
    entry = f'"record": {wrong},\n  "display_units"'
    text = part_to_text(plate()).replace('"display_units"', entry)
    with pytest.raises(PartFileError) as error:
        part_from_text(text)
    assert error.value.faults[0].field == field
    assert error.value.faults[0].line is not None


def test_words_of_the_head() -> None:
    assert job_words(GIVEN) == "Job 41, drawing A-7, revision C"
    assert job_words(JobDetails(drawing="A-7")) == "Drawing A-7"
    assert job_words(JobDetails("R. Okafor")) == ""
