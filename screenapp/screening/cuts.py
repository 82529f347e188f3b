"""Cuts across the part: stress along them with its band, section forces, and what balances them."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.free_body import centroid, section_forces, span_thickness
from screenapp.mechanics.point_reading import ON_CURVE
from screenapp.mechanics.singular_spot import SingularSpot, spot_at
from screenapp.mechanics.straight_cut import StraightCut, straight_cut
from screenapp.model.combinations import loadings
from screenapp.model.findings import (
    CUT_QUANTITIES,
    CutFindings,
    CutSpan,
    Estimate,
    Findings,
    SectionForces,
)
from screenapp.model.part import Cut, Part
from screenapp.model.shape import Shape
from screenapp.model.stress_measures import stress_measure
from screenapp.screening.passes import Pass, passes_of
from screenapp.screening.peaks import ON_BOUNDARY, on_boundary
from screenapp.screening.trust import Sample, half_band, judge

Floats = NDArray[np.float64]
_Judge = Callable[[Sequence[float], float], Estimate]

_LEAST_SCALE = 0.05
"""A stress on the cut is judged against at least this share of the case's level."""


NEAR_INTERFACE = 3.0 * ON_CURVE
"""Share of the part's size within which a place is read on its own side of an interface: farther
from it than where a reading takes the larger stress of the two sides."""


@dataclass(frozen=True, eq=False)
class _Line:
    """What one pass says along a cut in one case.

    Attributes:
        values: of CUT_QUANTITIES, (4, n_spans, n) [MPa].
        doubt: (n_spans, n) [MPa].
        size: size of the elements there [mm], (n_spans, n).
    """

    values: Floats
    doubt: Floats
    size: Floats


def read_cuts(part: Part, shape: Shape, findings: Findings) -> Findings:
    """The findings with the part's cuts as they now are; nothing is solved."""
    if not findings.fields:
        return findings
    return replace(findings, cuts=cuts(part, shape, passes_of(part, shape, findings.fields)))


def cuts(part: Part, shape: Shape, passes: Sequence[Pass]) -> tuple[CutFindings, ...]:
    """Every cut in every case; cuts that miss the part have no spans and are left out."""
    if not part.cuts:
        return ()
    spots = passes[-1].spots
    found: list[CutFindings] = []
    for cut in part.cuts:
        line = straight_cut(shape, cut.start, cut.end)
        if not len(line.spans):
            continue
        read = [_lines(part, shape, p, line) for p in passes]
        for k in range(len(loadings(part))):
            found.append(_cut(part, shape, passes, line, cut, k, [r[k] for r in read], spots))
    return tuple(found)


def _lines(part: Part, shape: Shape, this: Pass, line: StraightCut) -> list[_Line]:
    """A pass along the cut, for each case."""
    places = line.points
    near = NEAR_INTERFACE * shape.size
    gaps = line.spans[1:, 0] - line.spans[:-1, 1]
    touching = np.concatenate([[False], gaps <= near, [False]])  # the span before each, and after
    for i, span in enumerate(places):
        for j, inward, met in ((0, near, touching[i]), (-1, -near, touching[i + 1])):
            if met:  # an interface: this span speaks for its own side
                span[j] += inward * line.along
            else:
                span[j] = on_boundary(shape, (float(span[j, 0]), float(span[j, 1])))
    points = places.reshape(-1, 2)
    read = this.read(points)
    grid = line.distances.shape
    n, d = line.normal, line.along
    out = []
    for k in range(len(loadings(part))):
        s = read.stress[k]
        across = np.stack([s[:, 0] * n[0] + s[:, 2] * n[1], s[:, 2] * n[0] + s[:, 1] * n[1]], -1)
        lengthwise = np.stack(
            [s[:, 0] * d[0] + s[:, 2] * d[1], s[:, 2] * d[0] + s[:, 1] * d[1]], -1
        )
        size = stress_measure("von_mises", s, part, read.zones[k])
        values = np.stack([across @ n, lengthwise @ d, across @ d, size])
        out.append(
            _Line(values.reshape(4, *grid), read.doubt[k].reshape(grid), read.size.reshape(grid))
        )
    return out


def _cut(
    part: Part,
    shape: Shape,
    passes: Sequence[Pass],
    line: StraightCut,
    cut: Cut,
    k: int,
    read: Sequence[_Line],
    spots: Sequence[SingularSpot],
) -> CutFindings:
    case = loadings(part)[k]
    last = passes[-1].fields
    level = passes[-1].level("von_mises", k)
    applied = section_forces(part, shape, last.mesh, last.solution, k, line)
    t = span_thickness(part, line)[:, None]
    middle = centroid(part, line)
    arm = line.distances - middle
    size = [float(r.size.mean()) for r in read]

    def judged(numbers: Sequence[float], scale: float) -> Estimate:
        samples = [Sample(v, h) for v, h in zip(numbers, size, strict=True)]
        return judge(samples, part.mesh.tolerance, scale)

    normal = [float((t * line.weights * r.values[0]).sum()) for r in read]
    shear = [float((t * line.weights * r.values[2]).sum()) for r in read]
    moment = [float((t * line.weights * arm * r.values[0]).sum()) for r in read]
    force = max(float(np.hypot(normal[-1], shear[-1])), abs(moment[-1]) / line.length)
    least = _LEAST_SCALE * level * float((t * line.weights).sum())
    force = max(force, least)
    largest, where, why = _largest(part, shape, line, read, spots, case.id, level)
    spans = tuple(
        _span(part, line, read, i, judged, level, _beam(part, line, applied, i))
        for i in range(len(line.spans))
    )
    return CutFindings(
        cut.id,
        cut.name,
        case.id,
        cut.start,
        cut.end,
        spans,
        judged(normal, force),
        judged(shear, force),
        judged(moment, force * line.length),
        applied,
        largest,
        where,
        why,
    )


def _largest(
    part: Part,
    shape: Shape,
    line: StraightCut,
    read: Sequence[_Line],
    spots: Sequence[SingularSpot],
    case: str,
    level: float,
) -> tuple[Estimate, float, str]:
    """Largest von Mises stress on the cut, its distance from the start, why it is not settled."""
    last = read[-1]
    i, j = np.unravel_index(int(np.nanargmax(last.values[3])), last.values[3].shape)
    at = line.points[i, j]
    spot = spot_at(spots, (float(at[0]), float(at[1])), case, ON_BOUNDARY * shape.size)
    samples = [
        Sample(
            float(np.nanmax(r.values[3])),
            float(r.size[i, j]),
            float(r.doubt[i, j]),
        )
        for r in read
    ]
    scale = max(samples[-1].value, _LEAST_SCALE * level)
    rate, creep = (spot.rate, spot.creep) if spot else (0.0, 0.0)
    estimate = judge(samples, part.mesh.tolerance, scale, rate, creep)
    why = ""
    if estimate.trust == "rising":
        why = spot.why if spot else "the stress here keeps rising as the mesh is refined"
    elif estimate.trust == "unsettled":
        why = "the mesh was not refined for this cut; put a probe there and screen again"
    return estimate, float(line.distances[i, j]), why


def _span(
    part: Part,
    line: StraightCut,
    read: Sequence[_Line],
    i: int,
    judged: _Judge,
    level: float,
    beam: tuple[float, float] | None,
) -> CutSpan:
    """One stretch of material: curves with bands, membrane and bending part."""
    w, s = line.weights[i], line.distances[i]
    long = float(np.ptp(line.spans[i]))
    off = s - line.spans[i].mean()
    membrane = [float((w * r.values[0, i]).sum() / long) for r in read]
    bending = [float((w * off * r.values[0, i]).sum() * 6.0 / long**2) for r in read]
    scale = max(abs(membrane[-1]), abs(bending[-1]), _LEAST_SCALE * level)
    least = _LEAST_SCALE * level
    n = len(s)
    bands: dict[str, tuple[float, ...]] = {}
    for q, name in enumerate(CUT_QUANTITIES):
        bands[name] = tuple(
            half_band(
                [
                    Sample(
                        float(r.values[q, i, j]),
                        float(r.size[i, j]),
                        float(r.doubt[i, j]),
                    )
                    for r in read
                ],
                max(float(read[-1].values[3, i, j]), least),
            )
            for j in range(n)
        )
    values = {
        name: tuple(float(v) for v in read[-1].values[q, i])
        for q, name in enumerate(CUT_QUANTITIES)
    }
    return CutSpan(
        tuple(float(d) for d in s),
        values,
        bands,
        judged(membrane, scale),
        judged(bending, scale),
        beam,
    )


def _beam(
    part: Part, line: StraightCut, applied: SectionForces | None, i: int
) -> tuple[float, float] | None:
    """Stress of beam theory at the begin and end of a span: N/A + M s/I of the whole section.

    None without a free body, or where the section is of several materials.
    """
    if applied is None or len({part.wall_of(int(zone)).material for zone in line.zones}) > 1:
        return None
    t, middle = span_thickness(part, line), centroid(part, line)
    lengths = np.ptp(line.spans, axis=1)
    offsets = line.spans.mean(axis=1) - middle
    inertia = float((t * (lengths**3 / 12.0 + lengths * offsets**2)).sum())
    area = float((t * lengths).sum())
    first, last = (
        applied.normal / area + applied.moment * (end - middle) / inertia for end in line.spans[i]
    )
    return float(first), float(last)
