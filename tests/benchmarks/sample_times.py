"""Time from part file to settled verdict for each sample, the mesher's worker warm."""

from __future__ import annotations

import time
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

from screenapp.meshing.service import Mesher
from screenapp.model.part_json import read_part
from screenapp.screening.screen import screen
from tests.benchmarks.clocks import worker_seconds

SAMPLES = sorted((Path(__file__).parents[2] / "samples").glob("*.part.json"))


@dataclass(frozen=True)
class SampleTime:
    """One sample: seconds of processor time, and the stages' shares of the time that passed."""

    name: str
    verdict: str
    passes: int
    unknowns: int
    own: float
    worker: float
    passed: float
    shares: dict[str, float]


def sample_times(mesher: Mesher, repeats: int) -> Iterator[SampleTime]:
    """Each sample some times; the run with the least processor time counts."""
    for place in SAMPLES:
        runs = [_once(place, mesher) for _ in range(repeats + 1)][1:]
        yield min(runs, key=lambda run: run.own + run.worker)


def _once(place: Path, mesher: Mesher) -> SampleTime:
    mesher.start()
    before = worker_seconds(mesher)
    begin, passed = time.process_time(), time.perf_counter()
    findings = screen(read_part(place), mesher)
    own, passed = time.process_time() - begin, time.perf_counter() - passed
    spent = {stage: s for stage, s in findings.timing.items() if stage != "total"}
    whole = sum(spent.values())
    return SampleTime(
        place.name.removesuffix(".part.json"),
        findings.verdict,
        len(findings.mesh.passes),
        findings.mesh.unknowns,
        own,
        worker_seconds(mesher) - before,
        passed,
        {stage: s / whole for stage, s in spent.items()},
    )
