"""Probes read on every pass, so that a probe put later has its band without solving again."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.singular_spot import SingularSpot, spot_at
from screenapp.model.combinations import loadings
from screenapp.model.findings import READING_QUANTITIES, Estimate, Findings, Reading
from screenapp.model.part import Part, Probe
from screenapp.model.shape import Shape
from screenapp.model.solution import principal
from screenapp.model.stress_measures import stress_measure
from screenapp.screening.passes import Pass, PointValues, passes_of
from screenapp.screening.peaks import (
    ON_BOUNDARY,
    feature_of,
    on_boundary,
    piece_at,
    place_in_words,
)
from screenapp.screening.spots import sizes_at_points
from screenapp.screening.trust import Sample, growth, judge, judge_creeping, worst

Floats = NDArray[np.float64]

LEAST_SCALE = 0.05
"""A reading is judged against at least this share of the case's level of stress, or of its largest
displacement: how closely a place is known where next to nothing happens does not matter."""


def read_probes(part: Part, shape: Shape, findings: Findings) -> Findings:
    """The findings with the readings of the part's probes as they now are; nothing is solved."""
    if not findings.fields:
        return findings
    passes = passes_of(part, shape, findings.fields)
    return replace(findings, readings=readings(part, shape, passes))


def readings(part: Part, shape: Shape, passes: Sequence[Pass]) -> tuple[Reading, ...]:
    """Every probe in every case, from all passes so far; probes outside the part are left out."""
    if not part.readings:
        return ()
    points = np.array([on_boundary(shape, probe.at) for probe in part.readings])
    read = [p.read(points) for p in passes]
    spots = passes[-1].spots
    zones = passes[-1].reader.zones_at(points)
    found: list[Reading] = []
    for k, case in enumerate(loadings(part)):
        level = passes[-1].level("von_mises", k)
        moved = float(np.hypot(*passes[-1].fields.solution.displacements[k].T).max())
        creeping = sizes_at_points(case.id, passes)
        for i, probe in enumerate(part.readings):
            if np.isfinite(read[-1].stress[k, i]).all():
                spot = spot_at(spots, probe.at, case.id, ON_BOUNDARY * shape.size)
                found.append(
                    _reading(
                        part,
                        shape,
                        read,
                        k,
                        i,
                        probe,
                        case.id,
                        spot,
                        creeping,
                        level,
                        moved,
                        zones[i],
                    )
                )
    return tuple(found)


def _reading(
    part: Part,
    shape: Shape,
    read: Sequence[PointValues],
    k: int,
    i: int,
    probe: Probe,
    case: str,
    spot: SingularSpot | None,
    creeping: Sequence[float] | None,
    level: float,
    largest_moved: float,
    zones: tuple[int, ...],
) -> Reading:
    rate, creep = (spot.rate, spot.creep) if spot else (0.0, 0.0)
    piece = piece_at(shape, probe.at)
    columns = [_quantities(part, values, k, i) for values in read]
    von_mises = [column["von_mises"] for column in columns]
    # a tensor is as close as its largest parts: a component near zero has no accuracy of its own
    stress_scale = max(von_mises[-1], LEAST_SCALE * level)
    moved = float(np.hypot(columns[-1]["u_x"], columns[-1]["u_y"]))
    moved_scale = max(moved, LEAST_SCALE * largest_moved)
    values: dict[str, Estimate] = {}
    rates: dict[str, float] = {}
    for name in READING_QUANTITIES:
        numbers = [column[name] for column in columns]
        if name.startswith("u_"):
            values[name] = judge_movement(numbers, read, creeping, part.mesh.tolerance, moved_scale)
            continue
        samples = [
            Sample(abs(n) if spot else n, float(v.size[i]), float(v.doubt[k, i]))
            for n, v in zip(numbers, read, strict=True)
        ]
        estimate = judge(samples, part.mesh.tolerance, stress_scale, rate, creep)
        rates[name] = growth(samples)
        values[name] = _signed(estimate, numbers[-1]) if spot else estimate
    trust = worst([estimate.trust for estimate in values.values()])
    why = ""
    if trust == "rising":
        stress = [values[name].trust for name in READING_QUANTITIES if not name.startswith("u_")]
        if worst(stress) != "rising":
            why = "a force or a support at a point moves the part without bound as it is refined"
        else:
            why = spot.why if spot else "the stress here keeps rising as the mesh is refined"
    elif trust == "unsettled":
        why = "screen the part again to settle this reading"
    return Reading(
        probe.id,
        probe.name,
        case,
        probe.at,
        values,
        trust,
        feature_of(shape, piece),
        place_in_words(shape, piece, probe.at) + zone_words(part, zones),
        why,
        tuple(von_mises),
        tuple(float(v.size[i]) for v in read),
        rates["von_mises"],
        part.mesh.tolerance * stress_scale,
    )


def judge_movement(
    numbers: Sequence[float],
    read: Sequence[PointValues],
    creeping: Sequence[float] | None,
    tolerance: float,
    scale: float,
) -> Estimate:
    """A displacement [mm] with its band, from its value on every pass."""
    if creeping is None:
        samples = [Sample(n, float(v.size.mean())) for n, v in zip(numbers, read, strict=True)]
        return judge(samples, tolerance, scale)
    samples = [Sample(n, size) for n, size in zip(numbers, creeping, strict=True)]
    return judge_creeping(samples, tolerance, scale)


def zone_words(part: Part, zones: tuple[int, ...]) -> str:
    """The zones that meet at a place, in words to follow its name; "" in the wall itself."""
    if zones in ((), (-1,)):
        return ""
    names = ["the wall" if zone < 0 else f"zone {part.zones[zone].id}" for zone in zones]
    if len(names) == 1:
        return f", in {names[0]}"
    return f", between {' and '.join(names)} (the larger stress of the two sides is given)"


def _quantities(part: Part, read: PointValues, k: int, i: int) -> dict[str, float]:
    stress = read.stress[k, i]
    first, second, _ = principal(stress)
    numbers = (
        *stress,
        first,
        second,
        stress_measure("von_mises", stress, part, read.zones[k, i]),
        *read.displacement[k, i],
    )
    return dict(zip(READING_QUANTITIES, (float(n) for n in numbers), strict=True))


def _signed(estimate: Estimate, value: float) -> Estimate:
    """Give an estimate that was judged by its size the sign of the value back."""
    if value >= 0.0:
        return estimate
    return Estimate(-estimate.value, -estimate.high, -estimate.low, estimate.trust)
