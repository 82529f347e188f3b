"""Peaks followed back through the passes, so that each has a history, a band and a trust."""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np

from screenapp.mechanics.singular_spot import SingularSpot, spot_at
from screenapp.model.combinations import loadings
from screenapp.model.findings import Estimate, Peak
from screenapp.model.part import Case, Part, StressLimit
from screenapp.model.shape import Shape
from screenapp.screening.passes import Pass
from screenapp.screening.peaks import REACH, RawPeak, feature_of, measure, place_in_words
from screenapp.screening.structural import structural_stress
from screenapp.screening.trust import Sample, growth, judge


def measures(part: Part) -> tuple[str, ...]:
    """The stress measures that the limits of a part ask for; von Mises always."""
    asked = [limit.measure for limit in part.limits if isinstance(limit, StressLimit)]
    return tuple(dict.fromkeys(["von_mises", *asked]))


def track(
    part: Part,
    shape: Shape,
    passes: Sequence[Pass],
    spots: Sequence[SingularSpot],
    k: int,
) -> tuple[Peak, ...]:
    """The peaks of case `k` on the last pass with their history, largest first.

    Peaks that rise to the same singular place count as one.
    """
    case = loadings(part)[k]
    found: list[Peak] = []
    for name in measures(part):
        level = passes[-1].counted_level(name, k)
        taken: set[tuple[float, float]] = set()
        for raw in passes[-1].peaks(name, k):
            spot = spot_at(spots, raw.at, case.id, REACH * raw.size)
            if spot is not None:
                if spot.at in taken:
                    continue
                taken.add(spot.at)
            found.append(_peak(part, shape, passes, name, k, case, raw, spot, level))
    found.sort(key=lambda p: (p.quantity != "von_mises", -p.estimate.value))
    return tuple(found)


def _peak(
    part: Part,
    shape: Shape,
    passes: Sequence[Pass],
    name: str,
    k: int,
    case: Case,
    raw: RawPeak,
    spot: SingularSpot | None,
    level: float,
) -> Peak:
    samples = [_sample(part, earlier, name, k, raw, spot) for earlier in passes]
    # a peak below the level of the case need not be known more closely than it matters
    scale = max(abs(raw.value), 0.5 * level / raw.demand)
    rate, creep = (spot.rate, spot.creep) if spot else (0.0, 0.0)
    estimate = judge(samples, part.mesh.tolerance, scale, rate, creep)
    at, place = raw.at, place_in_words(shape, raw.piece, raw.at)
    zone = part.zones[raw.zone].id if raw.zone >= 0 else ""
    place += _zone_words(part, raw, passes[-1])
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


def _zone_words(part: Part, raw: RawPeak, last: Pass) -> str:
    """The zone that a peak is in, and the step that it stands at; "" in the wall itself."""
    if not part.zones:
        return ""
    (met,) = last.reader.zones_at([raw.at])
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
    part: Part, earlier: Pass, name: str, k: int, raw: RawPeak, spot: SingularSpot | None
) -> Sample:
    """The value of the same peak on another pass."""
    point = np.array([raw.at])
    values = earlier.read(point)
    size, doubt = float(values.size[0]), float(values.doubt[k, 0])
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
    value = measure(name, values.stress[k, 0], part, values.zones[k, 0])
    return Sample(float(value), size, doubt)


def _finest(of_side: float, of_element: float, spot: SingularSpot | None) -> float:
    """The size that a growing stress feels: the smaller of side and element at a singular place."""
    return min(of_side, of_element) if spot is not None else of_element
