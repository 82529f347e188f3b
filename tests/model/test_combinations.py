"""Combinations: what is solved for them, their faults, and their edits."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.model.combinations import loadings, scaled
from screenapp.model.edit_combinations import add_combination, rename_combination, set_factor
from screenapp.model.edits import EditError, remove
from screenapp.model.part import (
    BearingLoad,
    Case,
    Combination,
    ForceLoad,
    GravityLoad,
    Load,
    MomentLoad,
    Part,
    PressureLoad,
    ShearLoad,
    SpinLoad,
    TemperatureLoad,
    Term,
)
from screenapp.model.part_json import part_from_text, part_to_text
from screenapp.model.validity import faults_of
from tests.model.plates import plate


def two_cases() -> Part:
    pull = Case("k1", "pull", (ForceLoad("l1", "e2", 100.0, 0.0),))
    weight = Case("k2", "weight", (GravityLoad("l2", 0.0, -9.81), PressureLoad("l3", "e3", 0.5)))
    return replace(plate(), cases=(pull, weight))


def combined(*terms: Term) -> Part:
    return replace(two_cases(), combinations=(Combination("m1", "both", terms),))


@pytest.mark.parametrize(
    ("load", "want"),
    [
        (PressureLoad("l", "e1", 2.0), PressureLoad("l", "e1", -3.0)),
        (ShearLoad("l", "e1", 2.0), ShearLoad("l", "e1", -3.0)),
        (BearingLoad("l", "h1", 2.0, -4.0), BearingLoad("l", "h1", -3.0, 6.0)),
        (GravityLoad("l", 0.0, -9.0), GravityLoad("l", 0.0, 13.5)),
        (MomentLoad("l", "h1", 8.0), MomentLoad("l", "h1", -12.0)),
        (SpinLoad("l", 1.0, 2.0, 300.0, 2.0), SpinLoad("l", 1.0, 2.0, 300.0, -3.0)),
        (
            TemperatureLoad("l", 40.0, 2.0, -4.0, 25.0, "z1"),
            TemperatureLoad("l", -60.0, -3.0, 6.0, 25.0, "z1"),
        ),
    ],
)
def test_every_component_of_a_load_is_scaled(load: Load, want: Load) -> None:
    assert scaled(load, -1.5) == want


def test_a_combination_is_a_case_behind_the_others() -> None:
    part = combined(Term("k1", 1.5), Term("k2", 1.35))
    assert [c.id for c in loadings(part)] == ["k1", "k2", "m1"]
    assert loadings(part)[2] == Case(
        "m1",
        "both",
        (
            ForceLoad("l1", "e2", 150.0, 0.0),
            GravityLoad("l2", 0.0, 1.35 * -9.81),
            PressureLoad("l3", "e3", 0.675),
        ),
    )


def test_it_survives_the_file() -> None:
    part = combined(Term("k1", 1.5), Term("k2", -0.9))
    text = part_to_text(part)
    assert part_from_text(text) == part
    assert part_to_text(part_from_text(text)) == text
    assert '"combinations"' not in part_to_text(two_cases())


@pytest.mark.parametrize(
    ("terms", "cause"),
    [
        ((), "has no case in it"),
        ((Term("k9", 1.0),), "names a case k9 that is not there"),
        ((Term("k1", 1.0), Term("k1", 2.0)), "has the case “pull” twice"),
        ((Term("k1", math.nan),), "is not a finite number"),
    ],
)
def test_faults_are_named(terms: tuple[Term, ...], cause: str) -> None:
    found = [f for f in faults_of(combined(*terms)) if f.field == "combinations.m1.terms"]
    assert len(found) == 1
    assert cause in found[0].cause
    assert found[0].mend
    assert found[0].blocks


def test_two_of_one_name_are_pointed_out() -> None:
    part = combined(Term("k1", 1.0))
    same = replace(part, combinations=(replace(part.combinations[0], name="pull"),))
    assert any("“pull” is the name of another case" in f.cause for f in faults_of(same))


def test_adding_takes_all_cases_and_a_free_name() -> None:
    part = add_combination(add_combination(two_cases()))
    assert [(c.id, c.name) for c in part.combinations] == [
        ("m1", "Combination 1"),
        ("m2", "Combination 2"),
    ]
    assert part.combinations[0].terms == (Term("k1", 1.0), Term("k2", 1.0))


def test_factors_are_set_and_zero_takes_a_case_out() -> None:
    part = add_combination(two_cases())
    part = set_factor(part, "m1", "k2", 1.35)
    assert part.combinations[0].terms == (Term("k1", 1.0), Term("k2", 1.35))
    part = set_factor(part, "m1", "k1", 0.0)
    assert part.combinations[0].terms == (Term("k2", 1.35),)
    part = set_factor(part, "m1", "k1", 1.5)  # back in the order of the cases
    assert part.combinations[0].terms == (Term("k1", 1.5), Term("k2", 1.35))
    with pytest.raises(EditError, match="finite"):
        set_factor(part, "m1", "k1", math.inf)
    alone = set_factor(part, "m1", "k2", 0.0)
    with pytest.raises(EditError, match="nothing would be left"):
        set_factor(alone, "m1", "k1", 0.0)


def test_names_stay_apart() -> None:
    part = add_combination(two_cases(), name="both")
    with pytest.raises(EditError, match="already"):
        rename_combination(part, "m1", "pull")
    assert rename_combination(part, "m1", "both").combinations[0].name == "both"
    with pytest.raises(EditError, match="needs a name"):
        rename_combination(part, "m1", " ")
    with pytest.raises(EditError, match="no case to combine"):
        add_combination(replace(part, cases=(), combinations=()))


def test_a_case_that_goes_leaves_its_combinations() -> None:
    part = combined(Term("k1", 1.5), Term("k2", 1.35))
    part = add_combination(part, (Term("k1", 2.0),), "pull only")
    outcome = remove(part, "k1")
    assert [c.name for c in outcome.part.combinations] == ["both"]
    assert outcome.part.combinations[0].terms == (Term("k2", 1.35),)
    assert any("pull only" in words for words in outcome.lost)
    gone = remove(part, "m1").part
    assert [c.id for c in gone.combinations] == ["m2"]
    assert len(gone.cases) == 2
