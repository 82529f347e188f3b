"""The whole screening on the samples and on a part with a sharp corner."""

from __future__ import annotations

import dataclasses
from collections.abc import Iterator
from pathlib import Path

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.errors import Cancelled, InvalidPartError
from screenapp.model.part import Corner
from screenapp.model.part_json import read_part
from screenapp.model.progress import Progress, Step
from screenapp.model.validity import check
from screenapp.screening.probes import read_probes
from screenapp.screening.screen import screen

SAMPLES = Path(__file__).parents[2] / "samples"


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


@pytest.mark.parametrize(
    ("name", "verdict"),
    [("pump-bracket", "does not hold"), ("lifting-lug", "holds"), ("hose-clip", "holds")],
)
def test_samples_have_their_verdict_and_balance(name: str, verdict: str, mesher: Mesher) -> None:
    findings = screen(read_part(SAMPLES / f"{name}.part.json"), mesher)
    assert findings.verdict == verdict
    for case in findings.cases:
        assert max(case.balance.force, case.balance.moment) < 1e-8
    assert all(reading.trust == "settled" for reading in findings.readings)


def test_a_sharp_corner_is_rising_and_leaves_the_verdict_open(mesher: Mesher) -> None:
    part = read_part(SAMPLES / "pump-bracket.part.json")
    assert part.outline is not None
    corners = tuple(Corner(c.id, c.at) if c.id == "c4" else c for c in part.outline.corners)
    limits = tuple(dataclasses.replace(g, factor=1.0) for g in part.limits if hasattr(g, "factor"))
    sharp = dataclasses.replace(
        part, outline=dataclasses.replace(part.outline, corners=corners), limits=limits
    )
    findings = screen(sharp, mesher)
    top = findings.cases[0].peaks[0]
    assert top.feature == "c4"
    assert top.estimate.trust == "rising"
    assert top.structural is not None
    assert findings.verdict != "holds"


def test_a_probe_read_later_is_the_same_as_one_there_from_the_start(mesher: Mesher) -> None:
    part = read_part(SAMPLES / "lifting-lug.part.json")
    findings = screen(part, mesher)
    again = read_probes(part, check(part), dataclasses.replace(findings, readings=()))
    assert again.readings == findings.readings


def test_cancelling_stops_and_an_invalid_part_is_refused(mesher: Mesher) -> None:
    part = read_part(SAMPLES / "hose-clip.part.json")
    steps: list[Step] = []
    with pytest.raises(Cancelled):
        screen(part, mesher, Progress(steps.append, lambda: bool(steps)))
    with pytest.raises(InvalidPartError, match="hold"):
        screen(dataclasses.replace(part, supports=()), mesher)
