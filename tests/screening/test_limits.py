"""Every branch of the judgement, on findings made by hand: allowable 100 MPa, limit 1 mm."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.model.allowables import allowable
from screenapp.model.findings import CaseFindings, Estimate, Findings, LimitFindings, Peak
from screenapp.model.part import DisplacementLimit, Material, Part, StressLimit, Wall
from screenapp.model.solution import Balance
from screenapp.screening.limits import judge_limits, limit_name, overall

STEEL = Material("steel", 210_000.0, 0.3, 7850.0, 150.0, 300.0)
STRESS = StressLimit("g1")  # 150 / 1.5
MOVES = DisplacementLimit("g2", 1.0)


def settled(value: float, half: float = 1.0) -> Estimate:
    return Estimate(value, value - half, value + half, "settled")


def unsettled(value: float, half: float = 10.0) -> Estimate:
    return Estimate(value, value - half, value + half, "unsettled")


def rising(value: float) -> Estimate:
    return Estimate(value, value, math.inf, "rising")


def peak(estimate: Estimate, name: str = "a", **more: object) -> Peak:
    at = (float(ord(name[0])), 0.0)
    return Peak("von_mises", estimate, at, name, f"edge {name}", **more)  # type: ignore[arg-type]


def case(*peaks: Peak, moved: Estimate | None = None, name: str = "k1") -> CaseFindings:
    return CaseFindings(
        name, f"case {name}", peaks, moved or settled(0.1, 0.001), (3.0, 4.0), (0.0, 0.0, 0.0), (),
        Balance(0.0, 0.0),
    )  # fmt: skip


def judge(*peaks: Peak, limit: StressLimit = STRESS, material: Material = STEEL) -> LimitFindings:
    part = Part(wall=Wall(3.0, "steel"), materials=(material,), limits=(limit,))
    (found,) = judge_limits(part, [case(*peaks)])
    return found


# --- stress ---------------------------------------------------------------------------------


def test_the_allowable_is_the_materials_stress_over_the_factor() -> None:
    assert allowable(STRESS, STEEL) == 100.0
    assert allowable(replace(STRESS, against="strength", factor=2.0), STEEL) == 150.0
    assert allowable(STRESS, replace(STEEL, proof_stress=None)) is None


def test_a_settled_band_under_the_allowable_holds() -> None:
    found = judge(peak(settled(80.0, 2.0)), peak(settled(60.0), "b"))
    assert (found.verdict, found.place, found.at, found.reason) == (
        "holds",
        "edge a",
        (97.0, 0.0),
        "",
    )
    use = found.utilisation
    assert (use.value, use.low, use.high, use.trust) == pytest.approx((0.8, 0.78, 0.82, "settled"))


def test_a_settled_band_over_the_allowable_does_not_hold() -> None:
    found = judge(peak(settled(120.0)))
    assert found.verdict == "does not hold"
    assert "edge a uses 1.20 of its allowable under “case k1”" in found.reason


@pytest.mark.parametrize(("value", "half"), [(99.5, 1.0), (100.5, 1.0), (99.0, 1.0), (101.0, 1.0)])
def test_a_band_that_touches_or_straddles_the_allowable_is_undecided(
    value: float, half: float
) -> None:
    found = judge(peak(settled(value, half)))
    assert found.verdict == "undecided"
    assert "closer tolerance" in found.reason
    assert f"{(value - half) / 100:.3f}" in found.reason


def test_one_peak_that_surely_fails_outweighs_doubt_elsewhere() -> None:
    for doubtful in (rising(400.0), unsettled(300.0), settled(100.0)):
        found = judge(peak(doubtful, "a"), peak(settled(120.0), "b"))
        assert (found.verdict, found.place) == ("does not hold", "edge b")


def test_the_largest_peak_must_be_settled_even_if_its_band_is_low() -> None:
    found = judge(peak(unsettled(50.0), why="one pass alone"))
    assert found.verdict == "undecided"
    assert "edge a" in found.reason
    assert "one pass alone" in found.reason
    assert "not settled" in judge(peak(unsettled(50.0))).reason


def test_a_smaller_unsettled_peak_counts_if_it_might_exceed() -> None:
    assert judge(peak(settled(80.0)), peak(unsettled(70.0), "b")).verdict == "holds"
    found = judge(peak(settled(80.0)), peak(unsettled(75.0, 30.0), "b"))
    assert (found.verdict, found.place) == ("undecided", "edge b")


def test_a_rising_peak_leaves_it_open_however_small() -> None:
    found = judge(
        peak(settled(80.0)), peak(rising(20.0), "b", why="corner b is sharp", mend="round it")
    )
    assert (found.verdict, found.place) == ("undecided", "edge b")
    assert found.reason == "corner b is sharp: round it"
    assert math.isinf(found.utilisation.high)


def test_a_rising_peak_is_named_before_a_larger_unsettled_one() -> None:
    found = judge(peak(unsettled(500.0)), peak(rising(20.0), "b", why="corner b is sharp"))
    assert (found.place, found.reason) == ("edge b", "corner b is sharp")


def test_structural_stress_counts_where_it_is_accepted() -> None:
    accepted = replace(STRESS, at_rising="structural")
    beside = peak(rising(400.0), structural=settled(80.0))
    assert judge(beside).verdict == "undecided"
    found = judge(beside, limit=accepted)
    assert found.verdict == "holds"
    assert found.utilisation.value == pytest.approx(0.8)
    assert (
        judge(peak(rising(400.0), structural=settled(99.8)), limit=accepted).verdict == "undecided"
    )
    for useless in (None, unsettled(50.0), rising(50.0)):
        assert judge(peak(rising(400.0), structural=useless), limit=accepted).verdict == "undecided"


def test_structural_stress_that_is_too_much_already_fails_without_being_accepted() -> None:
    found = judge(peak(rising(400.0), structural=settled(130.0)))
    assert found.verdict == "does not hold"
    assert "the structural stress beside edge a uses 1.30" in found.reason
    assert judge(peak(rising(400.0), structural=unsettled(130.0))).verdict == "undecided"


def test_structural_stress_is_of_no_account_at_a_settled_peak() -> None:
    found = judge(peak(settled(80.0), structural=settled(150.0)))
    assert (found.verdict, found.utilisation.value) == ("holds", 0.8)


def test_the_peak_that_governs_is_the_one_that_counts_most() -> None:
    accepted = replace(STRESS, at_rising="structural")
    found = judge(
        peak(rising(400.0), structural=settled(60.0)), peak(settled(70.0), "b"), limit=accepted
    )
    assert (found.verdict, found.place) == ("holds", "edge b")


def test_another_measure_is_left_alone() -> None:
    found = judge(peak(settled(500.0)), limit=replace(STRESS, measure="sigma_1"))
    assert found.verdict == "holds"
    assert found.utilisation.value == 0.0


def test_a_material_without_that_stress_is_undecided() -> None:
    found = judge(peak(settled(5.0)), material=replace(STEEL, proof_stress=None))
    assert found.verdict == "undecided"
    assert "no such stress" in found.reason


# --- displacement ---------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("moved", "verdict"),
    [
        (settled(0.5, 0.01), "holds"),
        (settled(1.5, 0.01), "does not hold"),
        (settled(0.995, 0.01), "undecided"),
        (settled(1.005, 0.01), "undecided"),
        (settled(1.0, 0.0), "undecided"),
        (unsettled(0.1, 0.01), "undecided"),
        (unsettled(5.0, 0.01), "undecided"),
    ],
)
def test_displacement(moved: Estimate, verdict: str) -> None:
    (found,) = judge_limits(Part(limits=(MOVES,)), [case(moved=moved)])
    assert found.verdict == verdict
    assert found.utilisation.value == moved.value
    assert found.place == "(3, 4) mm"
    assert bool(found.reason) == (verdict != "holds")


def test_a_place_on_an_axis_is_written_as_one() -> None:
    beside = replace(case(), displacement_at=(8.266e-16, -1e-17))
    (found,) = judge_limits(Part(limits=(MOVES,)), [beside])
    assert found.place == "(0, 0) mm"


# --- over all -------------------------------------------------------------------------------


def of(verdict: str, use: float, reason: str = "because", name: str = "g1") -> LimitFindings:
    return LimitFindings(
        name, "x", "k1", settled(use, 0.01), verdict, (0.0, 0.0), "p", reason  # type: ignore[arg-type]
    )  # fmt: skip


def test_every_limit_is_judged_in_every_case() -> None:
    part = Part(wall=Wall(3.0, "steel"), materials=(STEEL,), limits=(STRESS, MOVES))
    found = judge_limits(part, [case(name="k1"), case(name="k2")])
    assert [(f.limit, f.case) for f in found] == [
        ("g1", "k1"), ("g1", "k2"), ("g2", "k1"), ("g2", "k2"),
    ]  # fmt: skip


def test_no_limit_is_undecided() -> None:
    verdict, headline, reasons = overall([])
    assert verdict == "undecided"
    assert "no limit" in headline
    assert reasons


def test_all_hold_with_what_is_in_hand_at_the_far_end_of_the_band() -> None:
    assert overall([of("holds", 0.5, ""), of("holds", 0.79, "")])[:2] == (
        "holds",
        "Holds, 1.25 in hand",
    )
    assert overall([of("holds", 0.5, "")])[2] == ()
    unstressed = replace(of("holds", 0.0, ""), utilisation=Estimate(0.0, 0.0, 0.0, "settled"))
    assert overall([unstressed])[1] == "Holds, far from every limit"


@pytest.mark.parametrize("use", [0.7885, 0.7875, 0.9888, 0.6354, 0.6351, 0.6335, 0.6330, 0.4, 0.01])
def test_what_is_in_hand_is_never_rounded_up(use: float) -> None:
    _, headline, _ = overall([of("holds", use, "")])
    written = float(headline.split()[1])
    assert written <= 1.0 / (use + 0.01) < written + 0.0101


def test_failing_goes_before_doubt_and_the_worst_reason_first() -> None:
    found = [
        of("undecided", 3.0, "open"),
        of("does not hold", 1.1, "b"),
        of("does not hold", 1.4, "a"),
    ]
    assert overall(found) == ("does not hold", "Does not hold", ("a", "b", "open"))


def test_doubt_names_its_reason_once() -> None:
    verdict, headline, reasons = overall(
        [of("holds", 0.2, ""), of("undecided", 0.4, "open"), of("undecided", 0.9, "open")]
    )
    assert (verdict, headline, reasons) == ("undecided", "Undecided: open", ("open",))


def test_the_governing_limit_is_the_worst_verdict_then_the_most_used() -> None:
    rows = [of("holds", 0.99), of("undecided", 0.4), of("undecided", 0.6), of("holds", 0.1)]
    findings = Findings("", "", "undecided", "", (), 0.0, 0.0, (), (), tuple(rows), None, {})  # type: ignore[arg-type]
    assert findings.governing is rows[2]
    assert replace(findings, limits=()).governing is None
    assert replace(findings, limits=(*rows, of("does not hold", 0.2))).governing == of(
        "does not hold", 0.2
    )


def test_names_of_limits() -> None:
    assert limit_name(STRESS) == "von Mises under proof stress with 1.5 in hand"
    assert "largest principal (brittle) under strength" in limit_name(
        StressLimit("g1", "sigma_1", "strength", 2.0, "structural")
    )
    assert "structural stress" in limit_name(replace(STRESS, at_rising="structural"))
    assert limit_name(MOVES) == "displacement under 1 mm"
