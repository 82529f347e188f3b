"""Every sample can be screened, is written as the program writes, and has telling probes."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from screenapp.model.part_json import part_to_text, read_part
from screenapp.model.shape import Shape
from screenapp.model.validity import check, faults_of

SAMPLES = sorted((Path(__file__).parents[2] / "samples").glob("*.part.json"))


def test_there_are_three_samples() -> None:
    assert [p.name for p in SAMPLES] == [
        "hose-clip.part.json",
        "lifting-lug.part.json",
        "pump-bracket.part.json",
    ]


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name)
def test_sample_has_no_fault(path: Path) -> None:
    assert faults_of(read_part(path)) == ()


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name)
def test_saving_a_sample_gives_the_same_bytes(path: Path) -> None:
    assert part_to_text(read_part(path)).encode() == path.read_bytes()


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name)
def test_sample_asks_something(path: Path) -> None:
    part = read_part(path)
    assert part.supports
    assert len(part.cases) >= 1
    assert {type(limit).__name__ for limit in part.limits} == {"StressLimit", "DisplacementLimit"}
    assert 2 <= len(part.readings) <= 3
    assert part.notes


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name)
def test_probes_stand_on_the_boundary(path: Path) -> None:
    part = read_part(path)
    shape = check(part)
    for probe in part.readings:
        assert distance_to_boundary(shape, probe.at) < 1e-4


def distance_to_boundary(shape: Shape, at: tuple[float, float]) -> float:
    """Least distance [mm] of a point from all pieces of the boundary."""
    nearest = [c.curve.point(c.curve.nearest(at)) for c in shape.curves]
    return float(np.hypot(*(np.array(nearest) - at).T).min())
