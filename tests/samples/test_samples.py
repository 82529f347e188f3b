"""Every sample is sound, is written as the program writes, and asks something telling."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from screenapp.model.edit_dimensions import set_dimension
from screenapp.model.part import (
    BearingLoad,
    CircleHole,
    ForceLoad,
    GravityLoad,
    PrescribedSupport,
    SpinLoad,
    TemperatureLoad,
)
from screenapp.model.part_json import part_to_text, read_part
from screenapp.model.shape import Shape
from screenapp.model.validity import check, faults_of

SAMPLES = sorted((Path(__file__).parents[2] / "samples").glob("*.part.json"))


CAUTIONS = {
    "rake-knee": ["corner c4 re-enters", "corner c5 re-enters"],
}
"""What the samples caution against on purpose, by its first words."""


def test_there_are_eight_samples() -> None:
    assert [p.name.removesuffix(".part.json") for p in SAMPLES] == [
        "davit",
        "float-latch",
        "heater-link",
        "hose-clip",
        "lifting-lug",
        "mower-blade",
        "pump-bracket",
        "rake-knee",
    ]


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name)
def test_sample_has_no_fault_and_no_caution_but_those_meant(path: Path) -> None:
    faults = faults_of(read_part(path))
    meant = CAUTIONS.get(path.name.removesuffix(".part.json"), [])
    assert not any(fault.blocks for fault in faults)
    assert len(faults) == len(meant)
    for fault, words in zip(faults, meant, strict=True):
        assert fault.cause.startswith(words)


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name)
def test_saving_a_sample_gives_the_same_bytes(path: Path) -> None:
    assert part_to_text(read_part(path)).encode() == path.read_bytes()


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name)
def test_sample_asks_something(path: Path) -> None:
    part = read_part(path)
    assert part.supports
    assert {type(limit).__name__ for limit in part.limits} == {"StressLimit", "DisplacementLimit"}
    assert 2 <= len(part.readings) + len(part.cuts) <= 4
    assert 1 <= len(part.cases) <= 3
    assert part.notes


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name)
def test_probes_stand_on_the_boundary(path: Path) -> None:
    part = read_part(path)
    shape = check(part)
    for probe in part.readings:
        assert distance_to_boundary(shape, probe.at) < 1e-4


def test_the_samples_show_what_a_part_can_have() -> None:
    """Each way of drawing, holding, loading and asking that the samples are there to show."""
    parts = {path.name.removesuffix(".part.json"): read_part(path) for path in SAMPLES}
    davit, latch = parts["davit"], parts["float-latch"]
    assert len(davit.zones) == 3
    assert len(davit.combinations) == 2
    assert all(d.lower is not None and d.upper is not None for d in davit.dimensions)
    assert len(davit.formulas) > 10
    assert any(isinstance(s, PrescribedSupport) for s in latch.supports)
    loads = {type(load) for p in parts.values() for case in p.cases for load in case.loads}
    assert {BearingLoad, ForceLoad, GravityLoad, SpinLoad, TemperatureLoad} <= loads
    assert any(isinstance(h, CircleHole) and h.pattern for p in parts.values() for h in p.holes)
    outlines = [p.outline for p in parts.values() if p.outline is not None]
    assert any(c.chamfer for o in outlines for c in o.corners)
    assert sum(len(p.cuts) for p in parts.values()) >= 5
    assert len({p.wall.material for p in parts.values()}) >= 4


@pytest.mark.parametrize("end", ["lower", "upper"])
@pytest.mark.parametrize("number", [0, 1, 2])
def test_the_davit_stays_sound_at_the_bounds_of_its_dimensions(number: int, end: str) -> None:
    part = read_part(next(p for p in SAMPLES if p.name.startswith("davit")))
    dimension = part.dimensions[number]
    part = set_dimension(part, dimension.name, getattr(dimension, end))
    assert not any(fault.blocks for fault in faults_of(part))


def distance_to_boundary(shape: Shape, at: tuple[float, float]) -> float:
    """Least distance [mm] of a point from all pieces of the boundary."""
    nearest = [c.curve.point(c.curve.nearest(at)) for c in shape.curves]
    return float(np.hypot(*(np.array(nearest) - at).T).min())
