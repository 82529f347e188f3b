"""Limits judged: how much of each is used, with its band, and the verdict over all of them.

*Holds* is said only when every number that the limit rests on is settled and its whole band is
under 1; *does not hold* only when a settled number's whole band is over 1.  Everything else is
*undecided*, with the reason.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

from screenapp.model.allowables import allowable
from screenapp.model.findings import CaseFindings, Estimate, LimitFindings, Peak, Verdict
from screenapp.model.part import DisplacementLimit, Part, StressLimit
from screenapp.model.place_words import point_words


def limit_name(limit: StressLimit | DisplacementLimit) -> str:
    """The limit in a few words."""
    if isinstance(limit, DisplacementLimit):
        return f"displacement under {limit.most:g} mm"
    what = "von Mises" if limit.measure == "von_mises" else "largest principal"
    against = "proof stress" if limit.against == "proof_stress" else "strength"
    rising = "; structural stress at rising places" if limit.at_rising == "structural" else ""
    return f"{what} under {against} with {limit.factor:g} in hand{rising}"


def judge_limits(part: Part, cases: Sequence[CaseFindings]) -> tuple[LimitFindings, ...]:
    """Every limit in every case."""
    found: list[LimitFindings] = []
    for limit in part.limits:
        for case in cases:
            if isinstance(limit, StressLimit):
                found.append(_stress(limit, part, case))
            else:
                found.append(_displacement(limit, case))
    return tuple(found)


def _stress(limit: StressLimit, part: Part, case: CaseFindings) -> LimitFindings:
    name = limit_name(limit)
    material = part.material
    allowed = allowable(limit, material) if material else None
    peaks = [p for p in case.peaks if p.quantity == limit.measure]
    if allowed is None or not peaks:
        why = "the material has no such stress" if allowed is None else "the part is not stressed"
        trust: Estimate = Estimate(0.0, 0.0, 0.0, "settled" if allowed is not None else "unsettled")
        verdict: Verdict = "holds" if allowed is not None else "undecided"
        return LimitFindings(limit.id, name, case.case, trust, verdict, (0.0, 0.0), "", why)
    over = [p for p in peaks if _settled_over(_counted(p, allowed, limit), allowed)]
    open_ = [
        p
        for p in peaks
        if _counted(p, allowed, limit).trust == "rising"
        or (p not in over and _counted(p, allowed, limit).high >= allowed)
    ]
    top = _counted(peaks[0], allowed, limit)
    if over:
        governing_peak = max(over, key=lambda p: _counted(p, allowed, limit).value)
        used = _counted(governing_peak, allowed, limit)
        verdict = "does not hold"
        beside = "the structural stress beside " if used is governing_peak.structural else ""
        reason = (
            f"{beside}{governing_peak.place} uses {used.value / allowed:.2f} of its allowable "
            f"under “{case.name}”"
        )
    elif open_ or top.trust != "settled":
        governing_peak = _most_doubtful(open_ or peaks[:1])
        verdict = "undecided"
        reason = _why_undecided(governing_peak, allowed, case.name)
    else:
        governing_peak = max(peaks, key=lambda p: _counted(p, allowed, limit).value)
        verdict = "holds"
        reason = ""
    return LimitFindings(
        limit.id,
        name,
        case.case,
        _scaled(_counted(governing_peak, allowed, limit), 1.0 / allowed),
        verdict,
        governing_peak.at,
        governing_peak.place,
        reason,
    )


def _counted(peak: Peak, allowed: float, limit: StressLimit) -> Estimate:
    """What counts of a peak: its value, or beside a rising one its structural stress, where the
    user accepts that or where it alone is already too much."""
    beside = peak.structural
    if peak.estimate.trust != "rising" or beside is None or beside.trust != "settled":
        return peak.estimate
    if limit.at_rising == "structural" or beside.low > allowed:
        return beside
    return peak.estimate


def _settled_over(estimate: Estimate, allowed: float) -> bool:
    return estimate.trust == "settled" and estimate.low > allowed


def _most_doubtful(peaks: Sequence[Peak]) -> Peak:
    """A rising peak first (it has no value at all), then the largest."""
    return max(peaks, key=lambda p: (p.estimate.trust == "rising", p.estimate.value))


def _why_undecided(peak: Peak, allowed: float, case: str) -> str:
    if peak.estimate.trust == "rising":
        return f"{peak.why}: {peak.mend}" if peak.mend else peak.why
    if peak.estimate.trust == "unsettled":
        return (
            f"the stress at {peak.place} under “{case}” is not settled: {peak.why}"
            if peak.why
            else f"the stress at {peak.place} under “{case}” is not settled"
        )
    low, high = peak.estimate.low / allowed, peak.estimate.high / allowed
    return (
        f"{peak.place} uses between {low:.3f} and {high:.3f} of its allowable under “{case}”: "
        "ask for a closer tolerance, or change the part"
    )


def _displacement(limit: DisplacementLimit, case: CaseFindings) -> LimitFindings:
    moved = case.displacement_max
    used = _scaled(moved, 1.0 / limit.most)
    place = point_words(case.displacement_at)
    if moved.trust == "settled" and moved.high < limit.most:
        verdict: Verdict = "holds"
        reason = ""
    elif moved.trust == "settled" and moved.low > limit.most:
        verdict = "does not hold"
        reason = f"the part moves by {moved.value:.4g} mm at {place} under “{case.name}”"
    else:
        verdict = "undecided"
        reason = f"the largest displacement under “{case.name}” is not settled enough to tell"
    return LimitFindings(
        limit.id, limit_name(limit), case.case, used, verdict, case.displacement_at, place, reason
    )


def _scaled(estimate: Estimate, factor: float) -> Estimate:
    return Estimate(
        estimate.value * factor, estimate.low * factor, estimate.high * factor, estimate.trust
    )


def overall(limits: Sequence[LimitFindings]) -> tuple[Verdict, str, tuple[str, ...]]:
    """Verdict, headline and reasons over all limits and cases."""
    if not limits:
        return (
            "undecided",
            "Undecided: no limit is set",
            ("no limit is set: add one in the Limits paragraph",),
        )
    failed = [f for f in limits if f.verdict == "does not hold"]
    unsure = [f for f in limits if f.verdict == "undecided"]
    if failed:
        first = max(failed, key=lambda f: f.utilisation.value)
        reasons = tuple(dict.fromkeys(f.reason for f in [first, *failed, *unsure]))
        return "does not hold", "Does not hold", reasons
    if unsure:
        reasons = tuple(dict.fromkeys(f.reason for f in unsure))
        return "undecided", f"Undecided: {reasons[0]}", reasons
    used = max(f.utilisation.high for f in limits)
    if used <= 1e-3:
        return "holds", "Holds, far from every limit", ()
    hand = math.floor(100.0 / used + 1e-9) / 100.0  # never more than there is
    return "holds", f"Holds, {hand:.2f} in hand", ()
