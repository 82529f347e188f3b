"""What is to be found in each sample: verdict, governing limit, place and share of it.

The shares were read off the program when the samples were drawn; what they rest on is held against
formulas in `test_by_hand.py`.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.findings import Findings, LimitFindings
from screenapp.model.part import Part, StressLimit
from screenapp.screening.screen import screen
from tests.samples.conftest import Screened


@dataclass(frozen=True)
class Expected:
    """Verdict of a sample; limit, case and place that govern it; share used, to 2 %."""

    verdict: str
    limit: str
    case: str
    place: str
    used: float


EXPECTED = {
    "davit": Expected("holds", "g1", "q1", "fillet c3", 0.743),
    "float-latch": Expected("holds", "g1", "k2", "fillet c6", 0.710),
    "heater-link": Expected("holds", "g1", "k2", "fillet c1", 0.675),
    "hose-clip": Expected("holds", "g2", "k1", "mm", 0.795),
    "lifting-lug": Expected("holds", "g1", "k2", "hole h1", 0.795),
    "mower-blade": Expected("holds", "g1", "k1", "fillet c6", 0.480),
    "pump-bracket": Expected("does not hold", "g1", "k2", "fillet c4", 1.047),
}


def governing(findings: Findings) -> LimitFindings:
    """The limit that uses most."""
    return max(findings.limits, key=lambda limit: limit.utilisation.value)


@pytest.mark.parametrize("name", EXPECTED)
def test_verdict_and_what_governs_it(name: str, screened_sample: Screened) -> None:
    _, findings = screened_sample(name)
    want, found = EXPECTED[name], governing(findings)
    assert findings.verdict == want.verdict
    assert (found.limit, found.case) == (want.limit, want.case)
    assert want.place in found.place
    assert found.utilisation.value == pytest.approx(want.used, rel=0.02)
    assert found.utilisation.trust == "settled"


@pytest.mark.parametrize("name", [*EXPECTED, "rake-knee"])
def test_everything_read_is_settled_and_balanced(name: str, screened_sample: Screened) -> None:
    _, findings = screened_sample(name)
    assert all(reading.trust == "settled" for reading in findings.readings)
    assert all(cut.largest.trust == "settled" for cut in findings.cuts)
    assert all(case.displacement_max.trust == "settled" for case in findings.cases)
    assert all(max(c.balance.force, c.balance.moment) < 1e-8 for c in findings.cases)
    assert findings.mesh.note == ""
    assert len(findings.mesh.passes) <= 5


def test_the_knee_is_undecided_and_says_why(screened_sample: Screened) -> None:
    _, findings = screened_sample("rake-knee")
    assert findings.verdict == "undecided"
    (reason,) = findings.reasons
    assert "corner c4 is sharp (225° inside)" in reason
    assert "give corner c4 a radius" in reason
    assert "accept the structural stress" in reason
    open_ = [limit for limit in findings.limits if limit.verdict == "undecided"]
    assert {limit.limit for limit in open_} == {"g1"}
    peaks = [p for p in findings.cases[0].peaks if p.quantity == "von_mises"]
    assert [(p.feature, p.estimate.trust) for p in peaks[:2]] == [
        ("c4", "rising"),
        ("c5", "rising"),
    ]


def accepting(part: Part) -> Part:
    """The part with the structural stress accepted at rising places."""
    limits = tuple(
        replace(g, at_rising="structural") if isinstance(g, StressLimit) else g for g in part.limits
    )
    return replace(part, limits=limits)


def rounded(part: Part) -> Part:
    """The part with both toes ground to a radius of 25 mm."""
    assert part.outline is not None
    corners = tuple(
        replace(c, round=25.0) if c.id in ("c4", "c5") else c for c in part.outline.corners
    )
    return replace(part, outline=replace(part.outline, corners=corners))


def test_both_mends_of_the_knee_decide_it(screened_sample: Screened, sample_mesher: Mesher) -> None:
    part, _ = screened_sample("rake-knee")
    accepted = screen(accepting(part), sample_mesher)
    assert accepted.verdict == "holds"
    assert governing(accepted).place == "corner c4"
    assert governing(accepted).utilisation.value == pytest.approx(0.857, rel=0.02)
    ground = screen(rounded(part), sample_mesher)
    assert ground.verdict == "holds"
    assert governing(ground).place == "fillet c4"


def test_the_combinations_of_the_davit_use_more_than_its_cases(screened_sample: Screened) -> None:
    _, findings = screened_sample("davit")
    used = {g.case: g.utilisation.value for g in findings.limits if g.limit == "g1"}
    assert list(used) == ["k1", "k2", "k3", "q1", "q2"]
    assert used["q1"] > used["q2"] > used["k2"] > used["k3"] > used["k1"]
    gust = next(g for g in findings.limits if (g.limit, g.case) == ("g1", "k3"))
    assert "in zone z2" in gust.place  # a disc may govern, though it is twice as thick
