"""Limits judged: how much of each is used, with its band, and the verdict over all of them.

*Holds* is said only when every number that the limit rests on is settled and its whole band is
under 1; *does not hold* only when a settled number's whole band is over 1.  Everything else is
*undecided*, with the reason.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace

from screenapp.model.allowables import allowables
from screenapp.model.findings import CaseFindings, Estimate, LimitFindings, Peak, Verdict
from screenapp.model.material_axes import RULES
from screenapp.model.part import (
    DisplacementLimit,
    FatigueLimit,
    JointLimit,
    Limit,
    Part,
    StrainLimit,
    StressLimit,
)
from screenapp.model.shape import Shape
from screenapp.screening.displacement_limits import displacement_limit_name, judge_displacement
from screenapp.screening.fatigue_limits import fatigue_limit_name, judge_fatigue
from screenapp.screening.joint_limits import judge_joint
from screenapp.screening.passes import Pass
from screenapp.screening.strain_limits import (
    curve_at,
    strain_limit_name,
    strain_share,
    strain_words,
)
from screenapp.screening.use import scaled

MEASURE_WORDS = {
    "von_mises": "von Mises",
    "tresca": "Tresca",
    "sigma_1": "largest principal (brittle)",
    "tsai_hill": "Tsai–Hill",
    "largest_stress": "largest stress in the material's axes",
}


def limit_name(limit: Limit) -> str:
    """The limit in a few words."""
    if isinstance(limit, DisplacementLimit):
        return displacement_limit_name(limit)
    if isinstance(limit, JointLimit):
        return f"hole {limit.on} by {limit.rules}"
    if isinstance(limit, FatigueLimit):
        return fatigue_limit_name(limit)
    if isinstance(limit, StrainLimit):
        return strain_limit_name(limit)
    what = MEASURE_WORDS[limit.measure]
    if limit.measure in RULES:
        return f"{what} under the strengths with {limit.factor:g} in hand{_rising_words(limit)}"
    against = "proof stress" if limit.against == "proof_stress" else "strength"
    return f"{what} under {against} with {limit.factor:g} in hand{_rising_words(limit)}"


def _rising_words(limit: StressLimit) -> str:
    return "; structural stress at rising places" if limit.at_rising == "structural" else ""


def judge_limits(
    part: Part,
    cases: Sequence[CaseFindings],
    shape: Shape | None = None,
    passes: Sequence[Pass] = (),
) -> tuple[LimitFindings, ...]:
    """Every limit in every case; limits at a place read the passes of the screening."""
    found: list[LimitFindings] = []
    for limit in part.limits:
        if isinstance(limit, FatigueLimit):
            found.append(judge_fatigue(limit, part, shape, passes))
            continue
        for k, case in enumerate(cases):
            if isinstance(limit, StressLimit):
                found.append(_stress(limit, part, case))
            elif isinstance(limit, StrainLimit):
                found.append(_strain(limit, part, case))
            elif isinstance(limit, JointLimit):
                found += judge_joint(limit, part, case, k, shape, passes)
            else:
                found.append(judge_displacement(limit, part, case, k, shape, passes))
    return tuple(found)


def _stress(limit: StressLimit, part: Part, case: CaseFindings) -> LimitFindings:
    name = limit_name(limit)
    allowed = allowables(limit, part)
    peaks = [p for p in case.peaks if p.quantity == limit.measure]
    if allowed is None or not peaks:
        why = "the material has no such stress" if allowed is None else "the part is not stressed"
        trust: Estimate = Estimate(0.0, 0.0, 0.0, "settled" if allowed is not None else "unsettled")
        verdict: Verdict = "holds" if allowed is not None else "undecided"
        return LimitFindings(limit.id, name, case.case, trust, verdict, (0.0, 0.0), "", why)
    number = {zone.id: k + 1 for k, zone in enumerate(part.zones)}
    used = [_used(p, allowed[number.get(p.zone, 0)], limit) for p in peaks]
    return _judge_uses(limit, name, case, used)


def _strain(limit: StrainLimit, part: Part, case: CaseFindings) -> LimitFindings:
    name = limit_name(limit)
    peaks = [(p, curve_at(part, p)) for p in case.peaks if p.quantity == "von_mises"]
    used = [_Use(p, strain_share(limit, c, p.estimate), False) for p, c in peaks if c is not None]
    if len(used) < len(peaks):
        why, trust = "a material has no hardening curve", Estimate(0.0, 0.0, math.inf, "unsettled")
        at = (0.0, 0.0)
        return LimitFindings(limit.id, name, case.case, trust, "undecided", at, "", why)
    if not used:
        nothing = Estimate(0.0, 0.0, 0.0, "settled")
        return LimitFindings(limit.id, name, case.case, nothing, "holds", (0.0, 0.0), "", "")
    found = _judge_uses(limit, name, case, used)
    governing = next(p for p, _ in peaks if (p.at, p.place) == (found.at, found.place))
    curve = curve_at(part, governing)
    return replace(found, assumed=strain_words(curve, governing.estimate) if curve else "")


def _judge_uses(limit: Limit, name: str, case: CaseFindings, used: Sequence[_Use]) -> LimitFindings:
    """What surely fails goes before doubt, and doubt before what holds."""
    over = [u for u in used if u.share.trust == "settled" and u.share.low > 1.0]
    open_ = [
        u for u in used if u.share.trust == "rising" or (u not in over and u.share.high >= 1.0)
    ]
    largest = max(used, key=_size)
    verdict: Verdict
    if over:
        governing = max(over, key=_size)
        verdict = "does not hold"
        beside = "the structural stress beside " if governing.structural else ""
        reason = (
            f"{beside}{governing.peak.place} uses {governing.share.value:.2f} of its allowable "
            f"under “{case.name}”"
        )
    elif open_ or largest.share.trust != "settled":
        # a rising peak first (it has no value at all), then the largest
        governing = max(open_ or [largest], key=lambda u: (u.share.trust == "rising", _size(u)))
        verdict = "undecided"
        reason = _why_undecided(governing, case.name)
    else:
        governing = largest
        verdict = "holds"
        reason = ""
    return LimitFindings(
        limit.id,
        name,
        case.case,
        governing.share,
        verdict,
        governing.peak.at,
        governing.peak.place,
        reason,
    )


@dataclass(frozen=True)
class _Use:
    """A peak with the share of its allowable that it uses; `structural` says whether that is by
    the structural stress beside it."""

    peak: Peak
    share: Estimate
    structural: bool


def _used(peak: Peak, allowed: float, limit: StressLimit) -> _Use:
    """What counts of a peak: its value, or beside a rising one its structural stress, where the
    user accepts that or where it alone is already too much."""
    beside = peak.structural
    structural = (
        peak.estimate.trust == "rising"
        and beside is not None
        and beside.trust == "settled"
        and (limit.at_rising == "structural" or beside.low > allowed)
    )
    counted = beside if structural and beside is not None else peak.estimate
    return _Use(peak, scaled(counted, 1.0 / allowed), structural)


def _size(used: _Use) -> float:
    return used.share.value


def _why_undecided(used: _Use, case: str) -> str:
    peak = used.peak
    if peak.estimate.trust == "rising":
        return f"{peak.why}: {peak.mend}" if peak.mend else peak.why
    if peak.estimate.trust == "unsettled":
        return (
            f"the stress at {peak.place} under “{case}” is not settled: {peak.why}"
            if peak.why
            else f"the stress at {peak.place} under “{case}” is not settled"
        )
    low, high = used.share.low, used.share.high
    return (
        f"{peak.place} uses between {low:.3f} and {high:.3f} of its allowable under “{case}”: "
        "ask for a closer tolerance, or change the part"
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
