"""The result record: valid by its schema, and the findings come back from it."""

from __future__ import annotations

import copy
import json
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings

from screenapp import __version__
from screenapp.model.errors import ScreenappError
from screenapp.model.findings import Estimate, Findings, Peak
from screenapp.model.part import Part
from screenapp.model.result_json import (
    findings_from_record,
    findings_to_record,
    record_to_text,
    write_record_json,
)
from screenapp.model.schema_check import validator
from tests.model.random_findings import fields_of_one_quad, findings

PROPERTY = settings(max_examples=40, deadline=None, suppress_health_check=list(HealthCheck))


def _violations(record: Any) -> list[str]:
    return [e.message for e in validator("result.schema.json").iter_errors(record)]


def _strict(text: str) -> Any:
    """Read JSON that must not hold NaN or Infinity."""

    def refuse(token: str) -> None:
        raise AssertionError(f"{token} is no JSON")

    return json.loads(text, parse_constant=refuse)


@PROPERTY
@given(findings)
def test_the_record_follows_its_schema_and_gives_the_findings_back(found: Findings) -> None:
    record = _strict(record_to_text(findings_to_record(found, Part(title="x"))))
    assert _violations(record) == []
    again = findings_from_record(record)
    assert vars(again) == vars(found)


@pytest.fixture
def found() -> Findings:
    """Findings drawn once: three rising or missing numbers put in on purpose."""
    plain = Findings(
        part_sha256="0" * 64,
        key="1" * 64,
        verdict="undecided",
        headline="Undecided: the stress at corner c4 keeps rising",
        reasons=("the stress at corner c4 keeps rising: give it a radius",),
        mass_kg=0.25,
        area=1e4,
        cases=(),
        readings=(),
        limits=(),
        mesh=_mesh(),
        timing={"total": 0.5},
    )
    return plain


def _mesh() -> Any:
    from screenapp.model.findings import MeshFindings, PassSummary

    return MeshFindings(
        "quad9", 100, 800, (PassSummary(100, 800, 0.01, 210.0, 0.5),), 0.01, 0.4, 3, 1e-13
    )


def test_an_end_without_bound_is_null_and_comes_back_infinite(found: Findings) -> None:
    from screenapp.model.findings import CaseFindings
    from screenapp.model.solution import Balance

    inf = float("inf")
    rising = Peak("von_mises", Estimate(310.0, 310.0, inf, "rising"), (1.0, 2.0), "c4", "corner c4")
    sinking = Peak("sigma_2", Estimate(-90.0, -inf, -90.0, "rising"), (1.0, 2.0), "c4", "corner c4")
    nothing = Estimate(float("nan"), -inf, inf, "unsettled")
    case = CaseFindings(
        "k1", "pull", (rising, sinking), nothing, (0.0, 0.0), (1.0, 0.0, 0.0), (), Balance(0.0, 0.0)
    )
    record = _strict(record_to_text(findings_to_record(replace(found, cases=(case,)), Part())))
    assert _violations(record) == []
    first, second = record["cases"][0]["peaks"]
    assert (first["low"], first["high"]) == (310, None)
    assert (second["low"], second["high"]) == (None, -90)
    moved = record["cases"][0]["displacement_max"]
    assert (moved["value"], moved["low"], moved["high"]) == (None, None, None)
    again = findings_from_record(record).cases[0]
    assert again.peaks == (rising, sinking)
    assert again.displacement_max.value != again.displacement_max.value
    assert (again.displacement_max.low, again.displacement_max.high) == (-inf, inf)


def test_a_record_of_before_says_nothing_of_each_load(found: Findings) -> None:
    record = findings_to_record(found, Part())
    for case in record["cases"]:
        del case["loads"]
    assert _violations(record) == []
    assert all(case.loads == () for case in findings_from_record(record).cases)


def test_the_record_says_who_wrote_it_of_what(found: Findings) -> None:
    record = findings_to_record(found, Part(title="Tie plate"))
    assert (record["format"], record["version"]) == ("screenapp result", 1)
    assert record["program_version"] == __version__
    assert record["title"] == "Tie plate"
    assert record["buckling"] == []


def test_arrays_do_not_go_into_the_record(found: Findings) -> None:
    with_fields = replace(found, fields=(fields_of_one_quad(1.0),))
    assert findings_to_record(with_fields, Part()) == findings_to_record(found, Part())


def test_the_schema_refuses_what_is_not_in_it(found: Findings) -> None:
    record = findings_to_record(found, Part())
    assert _violations(record) == []
    for key in record:
        short = copy.deepcopy(record)
        del short[key]
        assert _violations(short), key
    assert _violations({**record, "more": 1})
    assert _violations({**record, "verdict": "perhaps"})
    assert _violations({**record, "part_sha256": "xyz"})


def test_another_version_is_refused(found: Findings) -> None:
    record = findings_to_record(found, Part())
    for change in ({"version": 2}, {"format": "screenapp part"}):
        with pytest.raises(ScreenappError, match="screen the part again"):
            findings_from_record({**record, **change})


def test_the_record_is_written_to_a_file(found: Findings, tmp_path: Path) -> None:
    record = findings_to_record(found, Part())
    write_record_json(record, tmp_path / "result.json")
    assert json.loads((tmp_path / "result.json").read_text(encoding="utf-8")) == record
