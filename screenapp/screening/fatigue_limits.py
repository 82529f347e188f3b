"""Fatigue judged: the stress that swings between two cases at every peak of them and of the swing.

At each place the direction is taken in which the stress swings most; its normal stress in both
cases gives amplitude and mean.  On a free edge that is the stress along the edge.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.singular_spot import SingularSpot, spot_at
from screenapp.model.combinations import loadings
from screenapp.model.fatigue import (
    FatigueFigures,
    counted_share,
    fatigue_figures,
    notch_sensitivity,
    reversed_amplitude,
)
from screenapp.model.findings import Estimate, LimitFindings, Verdict
from screenapp.model.part import FatigueLimit, Material, Part, Point
from screenapp.model.shape import Shape
from screenapp.model.solution import principal
from screenapp.screening.passes import Pass
from screenapp.screening.peaks import REACH, RawPeak, place_in_words
from screenapp.screening.trust import Sample, judge
from screenapp.screening.use import verdict_on

Floats = NDArray[np.float64]


MEANS = {"goodman": "Goodman", "smith_watson_topper": "Smith, Watson and Topper"}


@dataclass(frozen=True)
class _Swing:
    """A place with what swings there on the last pass [MPa] and the share of it that is used."""

    peak: RawPeak
    place: str
    spot: SingularSpot | None
    amplitude: float
    mean: float
    used: Estimate
    notch: str


def fatigue_limit_name(limit: FatigueLimit, part: Part | None = None) -> str:
    """The limit in a few words, its cases by their names where the part is given."""
    names = {c.id: f"“{c.name}”" for c in loadings(part)} if part is not None else {}
    one = names.get(limit.case, limit.case)
    other = "no load" if limit.other is None else names.get(limit.other, limit.other)
    return (
        f"fatigue over {limit.cycles:.4g} cycles between {one} and {other} "
        f"with {limit.factor:g} in hand"
    )


def judge_fatigue(
    limit: FatigueLimit, part: Part, shape: Shape | None, passes: Sequence[Pass]
) -> LimitFindings:
    """A fatigue limit over the whole part, told under its first case."""
    name = fatigue_limit_name(limit, part)
    figures = [fatigue_figures(m) for z in range(-1, len(part.zones)) if (m := part.material_of(z))]
    if shape is None or not passes or None in figures:
        why = "the fields of the screening were not kept, or a material has no fatigue figures"
        used = Estimate(0.0, 0.0, math.inf, "unsettled")
        reason = f"the limit “{name}” cannot be judged: {why}"
        return LimitFindings(limit.id, name, limit.case, used, "undecided", (0.0, 0.0), "", reason)
    swings = _swings(limit, part, shape, passes)
    if not swings:
        used = Estimate(0.0, 0.0, 0.0, "settled")
        return LimitFindings(limit.id, name, limit.case, used, "holds", (0.0, 0.0), "", "")
    governing, verdict, reason = _governing(limit, swings)
    at = governing.spot.at if governing.used.trust == "rising" and governing.spot else (
        governing.peak.at
    )  # fmt: skip
    return LimitFindings(
        limit.id,
        name,
        limit.case,
        governing.used,
        verdict,
        at,
        governing.place,
        reason,
        _assumed(limit, part, governing),
    )


def _governing(limit: FatigueLimit, swings: list[_Swing]) -> tuple[_Swing, Verdict, str]:
    """As for stress: what surely fails goes before doubt, and doubt before what holds."""

    def size(s: _Swing) -> float:
        return s.used.value

    over = [s for s in swings if verdict_on(s.used) == "does not hold"]
    largest = max(swings, key=size)
    if over:
        worst = max(over, key=size)
        reason = (
            f"{worst.place} uses {worst.used.value:.2f} of the amplitude that it may swing by over "
            f"{limit.cycles:.4g} cycles (±{worst.amplitude:.4g} MPa about {worst.mean:.4g} MPa)"
        )
        return worst, "does not hold", reason
    open_ = [s for s in swings if s.used.trust == "rising" or s.used.high >= 1.0]
    if not open_ and largest.used.trust == "settled":
        return largest, "holds", ""
    worst = max(open_ or [largest], key=lambda s: (s.used.trust == "rising", size(s)))
    if worst.used.trust == "rising":
        spot = worst.spot
        why = spot.why if spot else f"the stress at {worst.place} keeps rising with a finer mesh"
        return worst, "undecided", f"{why}: {spot.mend}" if spot and spot.mend else why
    if worst.used.trust == "unsettled":
        return worst, "undecided", f"the swing at {worst.place} is not settled"
    reason = (
        f"{worst.place} uses between {worst.used.low:.3f} and {worst.used.high:.3f} of the "
        f"amplitude that it may swing by over {limit.cycles:.4g} cycles"
    )
    return worst, "undecided", reason


def _swings(limit: FatigueLimit, part: Part, shape: Shape, passes: Sequence[Pass]) -> list[_Swing]:
    ids = [case.id for case in loadings(part)]
    a = ids.index(limit.case)
    b = None if limit.other is None else ids.index(limit.other)
    spots = passes[-1].spots
    cases = {limit.case, limit.other or limit.case}
    found: list[tuple[RawPeak, SingularSpot | None, list[Sample], float, float, str]] = []
    taken: set[Point] = set()
    for peak in _places(passes[-1], a, b):
        near = [s for c in cases if (s := spot_at(spots, peak.at, c, REACH * peak.size))]
        spot = min(near, key=lambda s: math.dist(s.at, peak.at), default=None)
        if spot is not None and spot.at in taken:
            continue
        if spot is not None:
            taken.add(spot.at)
        found.append((peak, spot, *_history(limit, part, shape, passes, peak, a, b)))
    # what has no finite value is no measure for the rest
    most = max((samples[-1].value for _, spot, samples, *_ in found if not spot), default=0.0)
    swings: list[_Swing] = []
    for peak, spot, samples, amplitude, mean, notch in found:
        if samples[-1].value <= 0.0:
            continue
        scale = max(samples[-1].value, 0.5 * most)
        rate, creep = (spot.rate, spot.creep) if spot else (0.0, 0.0)
        creep *= samples[-1].value / amplitude if amplitude > 0.0 else 0.0
        used = judge(samples, part.mesh.tolerance, scale, rate, creep)
        rising = used.trust == "rising" and spot is not None
        place = spot.place if rising and spot else place_in_words(shape, peak.piece, peak.at)
        swings.append(_Swing(peak, place, spot, amplitude, mean, used, notch))
    return swings


def _places(last: Pass, a: int, b: int | None) -> list[RawPeak]:
    """Peaks of both cases and of the difference of their stresses, near ones once."""
    peaks = list(last.peaks("von_mises", a))
    if b is not None:
        peaks = [*last.swing_peaks(a, b), *peaks, *last.peaks("von_mises", b)]
    kept: list[RawPeak] = []
    for peak in peaks:
        if all(math.dist(peak.at, k.at) > peak.size for k in kept):
            kept.append(peak)
    return kept


def _history(
    limit: FatigueLimit,
    part: Part,
    shape: Shape,
    passes: Sequence[Pass],
    peak: RawPeak,
    a: int,
    b: int | None,
) -> tuple[list[Sample], float, float, str]:
    """Use on every pass, then amplitude and mean [MPa] on the last, and the notch in words."""
    material = part.material_of(peak.zone)
    figures = fatigue_figures(material) if material is not None else None
    assert material is not None
    assert figures is not None  # judge_fatigue has looked
    point = np.array([peak.at])
    read = [this.read(point) for this in passes]

    def pair(stress: Floats) -> tuple[Floats, Floats]:
        return stress[a, 0], stress[b, 0] if b is not None else np.zeros(3)

    one, other = pair(read[-1].stress)
    way = _direction(one - other)
    share, notch = _notch(limit, shape, passes[-1], peak, material, way, a, b)
    allowed = figures.amplitude(limit.cycles)
    samples: list[Sample] = []
    amplitude = mean = 0.0
    for values in read:
        high, low = (float(s @ way) for s in pair(values.stress))
        amplitude, mean = 0.5 * abs(high - low), 0.5 * (high + low)
        doubt = float(values.doubt[a, 0]) + (float(values.doubt[b, 0]) if b is not None else 0.0)
        used = _use(limit, figures, share * amplitude, mean, allowed)
        more = _use(limit, figures, share * (amplitude + 0.5 * doubt), mean, allowed)
        samples.append(Sample(used, float(values.size[0]), more - used))
    return samples, amplitude, mean, notch


def _use(
    limit: FatigueLimit, figures: FatigueFigures, amplitude: float, mean: float, allowed: float
) -> float:
    harm = reversed_amplitude(amplitude, mean, limit.mean, figures.strength)
    return limit.factor * harm / allowed


def _direction(swing: Floats) -> Floats:
    """Weights (3,) that give the normal stress in the direction in which the stress swings most."""
    first, second, angle = (float(v) for v in principal(swing))
    if abs(second) > abs(first):
        angle += math.pi / 2.0
    c, s = math.cos(angle), math.sin(angle)
    return np.array([c * c, s * s, 2.0 * c * s])


def _notch(
    limit: FatigueLimit,
    shape: Shape,
    last: Pass,
    peak: RawPeak,
    material: Material,
    way: Floats,
    a: int,
    b: int | None,
) -> tuple[float, str]:
    """Share of the amplitude that counts at a peak, and why, in words."""
    if limit.notch == "none":
        return 1.0, "the whole peak counts"
    curve = shape.curves[peak.piece].curve if peak.piece >= 0 else None
    if curve is None or curve.curvature >= 0.0:  # material is on the left: right turns are notches
        return 1.0, "no notch with a radius, so the whole peak counts"
    radius = -1.0 / curve.curvature
    tx, ty = curve.tangent(curve.nearest(peak.at))
    inside = np.array([peak.at, (peak.at[0] - radius * ty, peak.at[1] + radius * tx)])
    stress = last.read(inside).stress
    swing = (stress[a] - (stress[b] if b is not None else 0.0)) @ way
    if not np.isfinite(swing).all() or swing[1] == 0.0:
        return 1.0, "no wall one radius below the notch, so the whole peak counts"
    kt = max(abs(float(swing[0] / swing[1])), 1.0)
    q = notch_sensitivity(limit.notch, radius, material)
    share = counted_share(q, kt)
    words = (
        f"{limit.notch.capitalize()}'s q = {q:.3f} at radius {radius:.4g} mm, Kt = {kt:.3g} "
        f"against the swing one radius below the root, so {share:.3f} of the amplitude counts"
    )
    return share, words


def _assumed(limit: FatigueLimit, part: Part, governing: _Swing) -> str:
    material = part.material_of(governing.peak.zone)
    figures = fatigue_figures(material) if material is not None else None
    if figures is None:
        return ""
    return (
        f"elastic stress swings by ±{governing.amplitude:.4g} MPa about {governing.mean:.4g} MPa "
        f"in the direction of the largest swing; mean stress by {MEANS[limit.mean]}, "
        f"not relaxed by yielding; {governing.notch}; Basquin {figures.coefficient:.4g} MPa (2 N)^"
        f"{figures.exponent:g} allows ±{figures.amplitude(limit.cycles):.4g} MPa, "
        f"{figures.source}; surface as of the specimens, no corrosion, no welds"
    )
