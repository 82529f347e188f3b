"""Peaks followed back through the passes, so that each has a history, a band and a trust."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from screenapp.mechanics.singular_spot import SingularSpot, spot_at
from screenapp.model.combinations import loadings
from screenapp.model.findings import Estimate, Peak
from screenapp.model.part import Part, Point, StressLimit
from screenapp.model.shape import Shape
from screenapp.model.stress_measures import stress_measure
from screenapp.screening.passes import Pass, PointValues, doubted_by
from screenapp.screening.peaks import REACH, RawPeak, feature_of, place_in_words
from screenapp.screening.structural import structural_stress
from screenapp.screening.trust import Sample, growth, judge


def measures(part: Part) -> tuple[str, ...]:
    """The stress measures that the limits of a part ask for; von Mises always."""
    asked = [limit.measure for limit in part.limits if isinstance(limit, StressLimit)]
    return tuple(dict.fromkeys(["von_mises", *asked]))


@dataclass(frozen=True, eq=False)
class _Followed:
    """A peak of the last pass with what every pass says at its place.

    Attributes:
        name: the measure.
        case: which case it is of.
        raw: the peak.
        read: the values of every pass at the peaks' places, oldest first.
        row: which of those places is the peak's.
    """

    name: str
    case: int
    raw: RawPeak
    read: Sequence[PointValues]
    row: int


def track(
    part: Part, shape: Shape, passes: Sequence[Pass], spots: Sequence[SingularSpot]
) -> tuple[tuple[Peak, ...], ...]:
    """The peaks of every case on the last pass with their history, largest first.

    Peaks that rise to the same singular place count as one.
    """
    cases = loadings(part)
    followed = _followed(part, passes)
    zones = _zones_met(part, passes[-1], followed)
    found: list[list[Peak]] = [[] for _ in cases]
    taken: set[tuple[str, int, Point]] = set()
    for peak in followed:
        spot = spot_at(spots, peak.raw.at, cases[peak.case].id, REACH * peak.raw.size)
        if spot is not None:
            if (peak.name, peak.case, spot.at) in taken:
                continue
            taken.add((peak.name, peak.case, spot.at))
        found[peak.case].append(_peak(part, shape, passes, peak, spot, zones[peak.row]))
    return tuple(
        tuple(sorted(own, key=lambda p: (p.quantity != "von_mises", -p.estimate.value)))
        for own in found
    )


def _followed(part: Part, passes: Sequence[Pass]) -> list[_Followed]:
    """All peaks of the last pass; every pass is read once, at all their places (once more for each
    measure that has a doubt of its own)."""
    raws = [
        (name, k, raw)
        for k in range(len(loadings(part)))
        for name in measures(part)
        for raw in passes[-1].peaks(name, k)
    ]
    if not raws:
        return []
    points = np.array([raw.at for _, _, raw in raws])
    doubted = {name: doubted_by(name) for name, _, _ in raws}
    read = {by: [p.read(points, by) for p in passes] for by in set(doubted.values())}
    return [
        _Followed(name, k, raw, read[doubted[name]], row) for row, (name, k, raw) in enumerate(raws)
    ]


def _zones_met(part: Part, last: Pass, followed: Sequence[_Followed]) -> Sequence[tuple[int, ...]]:
    """The zones that meet at each peak; nothing where the part has none."""
    if not part.zones or not followed:
        return [()] * len(followed)
    return last.reader.zones_at([peak.raw.at for peak in followed])


def _peak(
    part: Part,
    shape: Shape,
    passes: Sequence[Pass],
    peak: _Followed,
    spot: SingularSpot | None,
    zones: tuple[int, ...],
) -> Peak:
    name, k, raw = peak.name, peak.case, peak.raw
    samples = [_sample(part, earlier, peak, number, spot) for number, earlier in enumerate(passes)]
    level = passes[-1].counted_level(name, k)
    # a peak below the level of the case need not be known more closely than it matters
    scale = max(abs(raw.value), 0.5 * level / raw.demand)
    rate, creep = (spot.rate, spot.creep) if spot else (0.0, 0.0)
    estimate = judge(samples, part.mesh.tolerance, scale, rate, creep)
    at, place = raw.at, place_in_words(shape, raw.piece, raw.at)
    zone = part.zones[raw.zone].id if raw.zone >= 0 else ""
    place += _zone_words(part, raw, zones)
    why = mend = ""
    structural: Estimate | None = None
    if estimate.trust == "rising":
        if spot is not None:
            at, why, mend = spot.at, spot.why, spot.mend
            place = spot.place
            found = structural_stress(part, shape, passes, spot, name, k)
            if found is not None:
                structural = found[0]
                mend += (
                    f", or accept the structural stress beside it (drawn on along {found[1]} from "
                    "0.4 and 1.0 wall thicknesses) in the Limits paragraph"
                )
        else:
            why = f"the stress at {place} keeps rising as the mesh is refined"
            mend = "look for a sharp corner or the end of a load there and ease it"
    elif estimate.trust == "unsettled":
        why = _why_unsettled(estimate, spot)
    feature = spot.ids[0] if spot and estimate.trust == "rising" else feature_of(shape, raw.piece)
    return Peak(
        name,
        estimate,
        at,
        feature,
        place,
        why,
        mend,
        tuple(s.value for s in samples),
        structural,
        tuple(s.size for s in samples),
        growth(samples),
        part.mesh.tolerance * scale,
        zone,
    )


def _zone_words(part: Part, raw: RawPeak, met: tuple[int, ...]) -> str:
    """The zone that a peak is in, and the step that it stands at; "" in the wall itself."""
    if not part.zones:
        return ""
    names = {z: "the wall" if z < 0 else f"zone {part.zones[z].id}" for z in (*met, raw.zone)}
    words = f", in {names[raw.zone]}" if raw.zone >= 0 else ""
    others = [name for z, name in sorted(names.items()) if z != raw.zone]
    return words + (f", at the step to {' and '.join(others)}" if others else "")


def _why_unsettled(estimate: Estimate, spot: SingularSpot | None) -> str:
    if not math.isfinite(estimate.high):
        return "one pass alone says nothing about its accuracy"
    if spot is not None and spot.creep == 0.0:
        return f"{spot.why}, but it does not clearly rise yet"
    share = (estimate.high - estimate.value) / max(abs(estimate.value), 1e-300)
    return f"its band is still ±{100.0 * share:.1f} %"


def _sample(
    part: Part, earlier: Pass, peak: _Followed, number: int, spot: SingularSpot | None
) -> Sample:
    """The value of the same peak on another pass, the one of that number."""
    name, k, raw = peak.name, peak.case, peak.raw
    values, row = peak.read[number], peak.row
    size, doubt = float(values.size[row]), float(values.doubt[k, row])
    if any(p is raw for p in earlier.peaks(name, k)):
        return Sample(raw.value, _finest(raw.size, size, spot), doubt)
    near = [
        p
        for p in earlier.peaks(name, k)
        if math.dist(p.at, raw.at) <= REACH * max(p.size, raw.size)
        and (p.piece < 0) == (raw.piece < 0)
        and p.zone == raw.zone
    ]
    if near:
        best = min(near, key=lambda p: math.dist(p.at, raw.at))
        return Sample(best.value, _finest(best.size, size, spot), doubt)
    value = stress_measure(name, values.stress[k, row], part, values.zones[k, row])
    return Sample(float(value), size, doubt)


def _finest(of_side: float, of_element: float, spot: SingularSpot | None) -> float:
    """The size that a growing stress feels: the smaller of side and element at a singular place."""
    return min(of_side, of_element) if spot is not None else of_element
