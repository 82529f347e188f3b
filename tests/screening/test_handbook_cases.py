"""Handbook cases: matched where the formula applies and nowhere else, and computed as near to it
as it claims to be."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.findings import HandCheck
from screenapp.model.hand_formulas import (
    curved_bar,
    hole_in_bending,
    hole_off_centre,
    opposite_notches,
    pin_in_lug,
    shoulder_in_bending,
)
from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    FixedSupport,
    LineLoad,
    Part,
    PressureLoad,
    RollerSupport,
)
from screenapp.model.shape import shape_of
from screenapp.screening.handbook_cases import handbook_cases
from tests.model.plates import loop, plate
from tests.screening.bars import T, checks, elbow, held, hook, lug, notched, stepped, strip


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


def kinds(part: Part) -> set[str]:
    return {f"{c.kind}: {c.loading}" for c in handbook_cases(part, shape_of(part))}


def by_case(part: Part, mesher: Mesher) -> dict[str, HandCheck]:
    found = checks(part, mesher)
    assert len({c.case for c in found}) == len(found)
    return {c.case: c for c in found}


# --- computed beside the formula --------------------------------------------------------------


@pytest.mark.parametrize(("diameter", "most"), [(20.0, 0.01), (45.0, 0.04)])
def test_a_hole_in_the_middle_is_checked_pulled_and_bent(
    diameter: float, most: float, mesher: Mesher
) -> None:
    found = by_case(strip(100.0, diameter, 50.0), mesher)
    assert found["k1"].kind == "round hole in the middle of a strip in tension"
    assert abs(found["k1"].difference) < 0.01
    if diameter > 30.0:  # bent, the edges of the strip have more, and a small hole is no peak
        check = found["k2"]
        moment = 10.0 * 100.0**2 / 6.0
        assert check.kind == "round hole in the middle of a strip bent in its plane"
        assert check.formula == pytest.approx(hole_in_bending(moment, diameter, 100.0, T), rel=1e-6)
        assert -most < check.difference < 0.005
        assert "M = 1.667e+04 N·mm" in check.nominal


@pytest.mark.parametrize(
    ("near", "share"), [(10.0, 0.4), (20.0, 0.2), (30.0, 0.4), (40.0, 0.4), (70.0, 0.3)]
)
def test_a_hole_off_the_middle_is_checked(near: float, share: float, mesher: Mesher) -> None:
    c = min(near, 100.0 - near)
    found = by_case(strip(100.0, 2.0 * share * c, near), mesher)
    assert set(found) == {"k1"}  # there is no formula for it in bending
    check = found["k1"]
    assert check.formula == pytest.approx(hole_off_centre(1000.0, share * c, c, 100.0, T), rel=1e-6)
    assert -0.005 < check.difference < 0.04
    assert f"c from the hole's centre to the nearer edge, here {c / 100.0:.3g} W" in check.valid


@pytest.mark.parametrize(
    ("wide", "radius", "pull", "bend"),
    [
        (25.0, 2.0, 0.05, 0.05),
        (30.0, 3.0, 0.05, 0.05),
        (40.0, 4.0, 0.05, 0.05),
        (60.0, 6.0, 0.05, 0.05),
        (25.0, 0.5, 0.11, 0.11),  # sharper than r/d = 0.1
    ],
)
def test_a_shoulder_is_checked_pulled_and_bent(
    wide: float, radius: float, pull: float, bend: float, mesher: Mesher
) -> None:
    found = by_case(stepped(wide, 20.0, radius), mesher)
    assert found["k1"].kind == "shoulder fillets of a stepped flat bar in tension"
    assert found["k2"].kind == "shoulder fillets of a stepped flat bar bent in its plane"
    assert found["k2"].place == "fillets c3 and c6"
    moment = 10.0 * 20.0**2 / 6.0
    by_hand = shoulder_in_bending(moment, wide, 20.0, radius, T)
    assert found["k2"].formula == pytest.approx(by_hand, rel=1e-6)
    assert abs(found["k1"].difference) < pull
    assert abs(found["k2"].difference) < bend


@pytest.mark.parametrize("share", [0.1, 0.3, 0.5, 0.7])
def test_opposite_notches_are_checked(share: float, mesher: Mesher) -> None:
    (check,) = checks(notched(100.0, 50.0 * share), mesher)
    assert check.kind == "two opposite half-round notches in a strip in tension"
    assert check.formula == pytest.approx(opposite_notches(1000.0, 50.0 * share, 100.0, T))
    assert abs(check.difference) < 0.012  # 1 % of the fit, and the band of the computed stress


@pytest.mark.parametrize("pushed", [True, False])
@pytest.mark.parametrize(("share", "beyond"), [(0.3, 100.0), (0.4, 150.0), (0.5, 100.0)])
def test_a_lug_is_checked(share: float, beyond: float, pushed: bool, mesher: Mesher) -> None:
    (check,) = checks(lug(100.0, 100.0 * share, beyond, pushed), mesher)
    assert check.kind == "lug with a pin"
    assert check.formula == pytest.approx(pin_in_lug(1000.0, 100.0 * share, 100.0, T), rel=1e-4)
    assert -0.13 < check.difference < -0.03
    assert "N = 1000 N" in check.nominal


@pytest.mark.parametrize(
    ("part", "force", "moment", "most"),
    [
        (hook(10.0, 12.0, 60.0), 20.0, 20.0 * (60.0 + 11.0), 0.01),
        (hook(10.0, 20.0, 60.0), 100.0, 100.0 * (60.0 + 15.0), 0.015),
        (hook(10.0, 20.0, 10.0), 100.0, 100.0 * (10.0 + 15.0), 0.02),
        (hook(10.0, 24.0, 10.0), 140.0, 140.0 * (10.0 + 17.0), 0.03),
    ],
)
def test_a_curved_bar_is_checked(
    part: Part, force: float, moment: float, most: float, mesher: Mesher
) -> None:
    (check,) = checks(part, mesher)
    assert check.kind == "inside of a curved bar"
    inner = 10.0
    outer = inner + force / 10.0
    by_hand = curved_bar(force, moment, inner, outer, T)[0]
    # the peak is sought on elements, so it may be a little off the middle
    assert check.formula == pytest.approx(by_hand, rel=2e-3)
    assert abs(check.difference) < most


def test_an_elbow_is_checked(mesher: Mesher) -> None:
    (check,) = checks(elbow(10.0, 15.0, 80.0), mesher)
    assert (check.kind, check.feature) == ("inside of a curved bar", "e2")
    assert abs(check.difference) < 0.01


# --- left alone -------------------------------------------------------------------------------


def test_what_is_matched() -> None:
    middle = "round hole in the middle of a strip"
    assert {f"{middle}: tension", f"{middle}: bending"} <= kinds(strip(100.0, 20.0, 50.0))
    assert kinds(strip(100.0, 8.0, 20.0)) == {"round hole off the middle of a strip: tension"}
    assert kinds(notched(100.0, 20.0)) == {"two opposite half-round notches in a strip: tension"}
    assert kinds(lug(100.0, 30.0, 100.0, True)) == {"lug with a pin: pin"}
    assert kinds(hook(10.0, 20.0, 60.0)) == {"inside of a curved bar: both"}
    step = "shoulder fillets of a stepped flat bar"
    assert kinds(stepped(40.0, 20.0, 4.0)) == {f"{step}: tension", f"{step}: bending"}


def off(part: Part, *holes: CircleHole) -> Part:
    return replace(part, holes=(*part.holes, *holes))


@pytest.mark.parametrize(
    "part",
    [
        strip(100.0, 20.0, 20.0),  # r/c above 0.4
        strip(100.0, 60.0, 50.0),  # d/W above 0.5
        strip(100.0, 20.0, 50.0, length=190.0),  # too near to both ends
        off(strip(100.0, 20.0, 50.0), CircleHole("h2", (110.0, 20.0), 4.0)),  # another beside it
        replace(
            strip(100.0, 20.0, 50.0),
            outline=loop([(0.0, 0.0), (400.0, 0.0), (400.0, 100.0), (0.0, 102.0)]),  # tapered
        ),
        replace(  # a nick in the edge
            strip(100.0, 20.0, 50.0),
            outline=loop([(0, 0), (240, 0), (242, 3), (244, 0), (400, 0), (400, 100), (0, 100)]),
        ),
        notched(100.0, 20.0, off=2.0),  # not opposite
        notched(100.0, 20.0, deep=15.0),  # no half round
        notched(100.0, 36.0),  # deeper than the fit
        lug(100.0, 20.0, 100.0, True),  # d/W below 0.25: the peak is under the pin
        lug(100.0, 30.0, 90.0, True),  # too near to the end
        hook(10.0, 30.0, 60.0),  # outer over inner radius above 2.5
    ],
)
def test_other_shapes_are_left_alone(part: Part) -> None:
    assert not kinds(part)


def test_other_steps_are_left_alone() -> None:
    sound = stepped(40.0, 20.0, 4.0)
    assert sound.outline is not None
    corners = sound.outline.corners

    def with_corner(i: int, **changes: object) -> Part:
        changed = [replace(c, **changes) if k == i else c for k, c in enumerate(corners)]  # type: ignore[arg-type]
        return replace(sound, outline=replace(sound.outline, corners=tuple(changed)))  # type: ignore[type-var]

    assert not kinds(with_corner(5, round=3.0))  # two radii
    lower = [replace(c, at=(c.at[0], c.at[1] + 1.0)) if 2 <= i <= 5 else c
             for i, c in enumerate(corners)]  # fmt: skip
    assert not kinds(replace(sound, outline=replace(sound.outline, corners=tuple(lower))))
    short = [replace(c, at=(60.0, c.at[1])) if i in (1, 2, 5, 6) else c
             for i, c in enumerate(corners)]  # fmt: skip
    assert not kinds(replace(sound, outline=replace(sound.outline, corners=tuple(short))))
    assert not kinds(replace(sound, supports=(RollerSupport("s1", "e8"), FixedSupport("s2", "e1"))))


@pytest.mark.parametrize(
    "part",
    [
        # a hole off the middle that is bent, or sheared
        held(strip(100.0, 8.0, 20.0), "e4", "e2",
             Case("k1", "b", (LineLoad("l1", "e2", 9.0, 1.0),))),
        # a lug that is pulled aslant, pushed, or pressed along its edge
        held(lug(100.0, 30.0, 100.0, False), "e4", "e2",
             Case("k1", "p", (BearingLoad("l1", "h1", 900.0, 100.0),))),
        held(lug(100.0, 30.0, 100.0, False), "e4", "e2",
             Case("k1", "p", (BearingLoad("l1", "h1", -900.0, 0.0),))),
        held(lug(100.0, 30.0, 100.0, False), "e4", "e2",
             Case("k1", "p", (BearingLoad("l1", "h1", 900.0, 0.0), PressureLoad("l2", "e1", 1.0)))),
        # a curved bar that is pressed on its outside, and one with its peak near the arc's end
        hook(10.0, 15.0, 60.0, PressureLoad("l1", "e2", 1.0)),
        hook(10.0, 15.0, 60.0, LineLoad("l1", "e4", 10.0, 0.0)),
    ],
)  # fmt: skip
def test_other_loads_are_left_alone(part: Part, mesher: Mesher) -> None:
    assert checks(part, mesher) == ()


def test_a_curved_bar_with_a_hole_is_left_alone(mesher: Mesher) -> None:
    part = off(hook(10.0, 20.0, 60.0), CircleHole("h1", (14.0, 3.0), 3.0))
    assert checks(part, mesher) == ()


def test_a_ring_gives_no_free_body(mesher: Mesher) -> None:
    """One section does not divide a ring, so its forces are not known from statics."""
    ring = plate(
        loop([(-20.0, 0.0), (20.0, 0.0)], through={0: (0.0, -20.0), 1: (0.0, 20.0)}),
        CircleHole("h1", (0.0, 0.0), 20.0),
    )
    part = replace(
        ring,
        supports=(FixedSupport("s1", "e1", 0.0, 2.0),),
        cases=(Case("k1", "p", (LineLoad("l1", "e2", 0.0, 1.0, start=30.0, end=32.0),)),),
    )
    assert checks(part, mesher) == ()
