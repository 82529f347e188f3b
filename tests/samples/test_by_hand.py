"""The samples against formulas: what an engineer would check on the back of the drawing.

Sources, from memory: beams and curved bars, S. Timoshenko, Strength of Materials (flexure formula;
Winkler-Bach); bars under their own spin, equilibrium of the outer piece; frames, the elastic centre
(H. Cross 1930, the column analogy).  The formulas leave out what bends beside them (tapers, roots
that give way, thick corners); each tolerance says what for.
"""

from __future__ import annotations

import math

import pytest

from screenapp.model.findings import CutFindings, Findings
from tests.samples.conftest import Screened


def reading(findings: Findings, probe: str, case: str, quantity: str) -> float:
    """A value of one probe in one case."""
    (found,) = (r for r in findings.readings if (r.probe, r.case) == (probe, case))
    return found.values[quantity].value


def cut(findings: Findings, case: str) -> CutFindings:
    """The only cut in one case."""
    (found,) = (c for c in findings.cuts if c.case == case)
    return found


def ends(found: CutFindings) -> tuple[float, float]:
    """Normal stress at both ends of a cut through one stretch of material [MPa]."""
    (span,) = found.spans
    return span.values["normal"][0], span.values["normal"][-1]


def flexure(moment: float, thickness: float, depth: float) -> float:
    """Largest bending stress M / W of a rectangle [MPa]."""
    return moment / (thickness * depth**2 / 6.0)


def test_bracket_arm(screened_sample: Screened) -> None:
    """The arm as a cantilever; it tapers by 4°, which leaves 2 %, and its weight is left out."""
    _, findings = screened_sample("pump-bracket")
    depth = 44.0 - 8.0 * (100.0 - 50.0) / 120.0
    by_hand = -flexure(1177.0 * (152.0 - 100.0), 6.0, depth)
    assert reading(findings, "p3", "k1", "sigma_x") == pytest.approx(by_hand, rel=0.04)


def test_lug_carries_its_pin_force(screened_sample: Screened) -> None:
    """Both foot bolts share the upright pull evenly; statics."""
    _, findings = screened_sample("lifting-lug")
    case = next(c for c in findings.cases if c.case == "k1")
    assert [r.y for r in case.reactions] == pytest.approx([-12000.0, -12000.0], rel=1e-6)


def test_hose_clip_ring(screened_sample: Screened) -> None:
    """The ring as a curved bar (Winkler-Bach), spread by the forces on its tips.

    The forces act in the middles of the edges e4 and e6, so 11 mm above the section at y = 0.
    """
    _, findings = screened_sample("hose-clip")
    inner, outer, thickness = 12.5, 15.0, 6.0
    area = thickness * (outer - inner)
    neutral = (outer - inner) / math.log(outer / inner)
    eccentric = (inner + outer) / 2.0 - neutral
    moment = 8.0 * 11.0
    by_hand = moment * (neutral - inner) / (area * eccentric * inner)
    assert reading(findings, "p2", "k1", "sigma_y") == pytest.approx(by_hand, rel=0.02)


def test_knee_arm(screened_sample: Screened) -> None:
    """The arm as a cantilever, one depth and more away from toe and pin: 2 % is left at the cut."""
    _, findings = screened_sample("rake-knee")
    by_hand = flexure(2600.0 * (236.0 - 180.0), 8.0, 44.0)
    below, above = ends(cut(findings, "k1"))
    assert above == pytest.approx(by_hand, rel=0.02)
    assert below == pytest.approx(-by_hand, rel=0.02)


def test_latch_arm(screened_sample: Screened) -> None:
    """The force that lifts a cantilever's end, F = 3 E I y / L³, and its stress half way.

    The arm's fillets stiffen it, its root and shear soften it: 5 %.
    """
    _, findings = screened_sample("float-latch")
    length, depth, width, lift = 25.5, 2.4, 6.0, 1.6
    force = 3.0 * 2700.0 * (width * depth**3 / 12.0) * lift / length**3
    found = cut(findings, "k1")
    assert abs(found.shear.value) == pytest.approx(force, rel=0.05)
    by_hand = flexure(force * (length - 12.0), width, depth)
    assert max(ends(found)) == pytest.approx(by_hand, rel=0.05)
    # the strain of a snap arm, 1.5 h y / L² at the root, without its concentration
    root = 2700.0 * 1.5 * depth * lift / length**2
    peak = max(p.estimate.value for p in findings.cases[0].peaks if p.quantity == "von_mises")
    assert root < peak < 1.4 * root


def test_davit_post(screened_sample: Screened) -> None:
    """The post half way up, 110 x 6: force and moment of log and gust about its middle; 3 %."""
    _, findings = screened_sample("davit")
    arm, lever = 420.0 - 34.0 - 55.0, 600.0 - 32.0 - 300.0
    bent, pressed = flexure(2453.0 * arm, 6.0, 110.0), 2453.0 / (6.0 * 110.0)
    outer, inner = ends(cut(findings, "k2"))
    assert outer == pytest.approx(bent - pressed, rel=0.03)
    assert inner == pytest.approx(-bent - pressed, rel=0.03)
    gust = flexure(800.0 * lever, 6.0, 110.0)
    assert max(ends(cut(findings, "k3"))) == pytest.approx(gust, rel=0.03)


def test_davit_combinations(screened_sample: Screened) -> None:
    """A combination reads as the sum of its cases times their factors."""
    _, findings = screened_sample("davit")
    k1, k2, k3 = (reading(findings, "p1", k, "sigma_y") for k in ("k1", "k2", "k3"))
    calm, windy = (reading(findings, "p1", q, "sigma_y") for q in ("q1", "q2"))
    assert calm == pytest.approx(1.1 * k1 + 1.4 * k2, rel=1e-6)
    assert windy == pytest.approx(1.1 * k1 + 1.2 * k2 + 1.3 * k3, rel=1e-6)


def test_mower_blade(screened_sample: Screened) -> None:
    """The outer blade pulls with ρ ω² t ∫ b r dr; its tip has a chamfer of 15 and a fillet of 8."""
    _, findings = screened_sample("mower-blade")
    rho, omega = 7850e-12, 2.0 * math.pi * 2400.0 / 60.0  # t/mm³, 1/s
    first = 50.0 * (420.0**2 - 240.0**2) / 2.0
    first -= 0.5 * 15.0**2 * (420.0 - 5.0)
    first -= (1.0 - math.pi / 4.0) * 8.0**2 * (420.0 - 1.8)
    by_hand = rho * omega**2 * 6.0 * first
    found = cut(findings, "k2")
    assert found.normal.value == pytest.approx(by_hand, rel=5e-3)
    assert sum(ends(found)) / 2.0 == pytest.approx(by_hand / 300.0, rel=0.02)


def test_heater_link(screened_sample: Screened) -> None:
    """The link as a frame between fixed feet, its warmth c + g y, by the elastic centre.

    A field linear in y would bend the free link: it parts the feet by α (c + g ȳ) L and turns them
    by α g L.  The bar is a quarter of the rise deep and its corners are stiff: 15 %.
    """
    _, findings = screened_sample("heater-link")
    modulus, alpha, span, rise = 120000.0, 1.7e-5, 100.0, 24.0
    foot, bow, inertia = 11.0, 60.0, 3.0 * 6.0**3 / 12.0
    run = 2.0 * foot + 2.0 * rise + bow
    centre = (rise**2 + bow * rise) / run
    second = 2.0 * rise**3 / 3.0 + bow * rise**2 - run * centre**2
    for case, c, g in (("k1", 12.0, 2.0), ("k2", 20.0, 2.1)):
        thrust = alpha * (c + g * centre) * span * modulus * inertia / second
        turn = alpha * g * span * modulus * inertia / run
        moment = thrust * (rise - centre) - turn
        found = cut(findings, case)
        assert -found.normal.value == pytest.approx(thrust, rel=0.15)
        assert abs(found.moment.value) == pytest.approx(moment, rel=0.15)
