"""Corner exponents against published values and the characteristic equations, solved here.

The program takes its roots from a 4 x 4 determinant; here they come from the closed equations of
Williams (1952, from memory), by another search.
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Callable

import numpy as np
import pytest
from scipy.optimize import brentq, root

from screenapp.mechanics.corner_exponent import SLIDING, growth_rate
from screenapp.model.part import WallState

STRESS: WallState = "plane stress"
STRAIN: WallState = "plane strain"


def exponent(
    degrees: float, *faces: object, poisson: float = 0.3, state: WallState = STRESS
) -> float:
    return 1.0 - growth_rate(math.radians(degrees), faces, poisson, state)  # type: ignore[arg-type]


def kappa(poisson: float, state: WallState) -> float:
    return (3.0 - poisson) / (1.0 + poisson) if state == STRESS else 3.0 - 4.0 * poisson


def smallest(equation: Callable[[complex], complex]) -> float:
    """Smallest real part in (0, 0.985) of a root: real ones by changes of sign, complex ones by
    scipy's hybrid method from a grid; 1 if there is none."""
    found = [1.0]
    x = np.linspace(0.005, 0.985, 2000)
    values = [equation(complex(v)).real for v in x]
    for a, b, fa, fb in zip(x, x[1:], values, values[1:], strict=False):
        if fa * fb < 0.0:
            found.append(brentq(lambda v: equation(complex(v)).real, a, b))

    def both(v: np.ndarray) -> list[float]:
        value = equation(complex(*v))
        return [value.real, value.imag]

    for real in np.linspace(0.1, 0.95, 9):
        for imaginary in (0.05, 0.2, 0.5):
            answer = root(both, [real, imaginary], tol=1e-12)
            if answer.success and 0.005 < answer.x[0] < 0.985 and np.abs(answer.fun).max() < 1e-9:
                found.append(float(answer.x[0]))
    return min(found)


# --- published values -----------------------------------------------------------------------


@pytest.mark.parametrize(
    ("degrees", "value"),
    # free faces: Williams 1952 and every later table, from memory
    [
        (180.0, 1.0),
        (210.0, 0.7520),
        (225.0, 0.6736),
        (270.0, 0.5445),
        (300.0, 0.5122),
        (360.0, 0.5),
    ],
)
def test_free_faces(degrees: float, value: float) -> None:
    assert exponent(degrees, "free", "free") == pytest.approx(value, abs=1e-4)


def test_free_faces_know_no_poissons_ratio_and_no_convex_corner() -> None:
    assert exponent(270.0, "free", "free", poisson=0.0) == exponent(270.0, "free", "free")
    assert [exponent(w, "free", "free") for w in (10.0, 90.0, 150.0, 179.9)] == [1.0] * 4


def test_a_right_angle_between_a_fixed_and_a_free_face() -> None:
    # the end of a built-in strip, ν = 0.3: 0.7112 in plane strain (published often, from memory)
    assert exponent(90.0, "fixed", "free", state=STRAIN) == pytest.approx(0.7112, abs=1e-4)
    # in plane stress ν/(1 + ν) stands for ν: ν = 0.3 is what 0.2308 is in plane strain
    assert exponent(90.0, "fixed", "free") == pytest.approx(
        exponent(90.0, "fixed", "free", poisson=0.3 / 1.3, state=STRAIN), abs=1e-9
    )


def test_a_flat_junction_of_fixed_and_free_oscillates_with_the_real_part_one_half() -> None:
    # λ = 1/2 ± i ln κ / 2π (Muskhelishvili; from memory)
    for poisson in (0.0, 0.3, 0.45):
        assert exponent(180.0, "fixed", "free", poisson=poisson) == pytest.approx(0.5, abs=1e-9)
    assert exponent(360.0, "fixed", "free") == pytest.approx(0.25, abs=1e-9)


# --- the equations --------------------------------------------------------------------------

ANGLES = [50.0, 65.0, 80.0, 90.0, 110.0, 135.0, 160.0, 175.0, 200.0, 235.0, 270.0, 315.0, 350.0]


@pytest.mark.parametrize("state", [STRESS, STRAIN])
@pytest.mark.parametrize("poisson", [0.0, 0.3, 0.45])
def test_fixed_and_free(poisson: float, state: WallState) -> None:
    k = kappa(poisson, state)
    for degrees in ANGLES:
        w = math.radians(degrees)

        def equation(x: complex, w: float = w) -> complex:
            right = ((k + 1.0) ** 2 - (2.0 * x * math.sin(w)) ** 2) / (4.0 * k)
            return cmath.sin(x * w) ** 2 - right

        got = exponent(degrees, "fixed", "free", poisson=poisson, state=state)
        assert got == pytest.approx(smallest(equation), abs=1e-6), degrees
        turned = exponent(degrees, "free", "fixed", poisson=poisson, state=state)
        assert got == pytest.approx(turned, abs=1e-9)


@pytest.mark.parametrize("poisson", [0.0, 0.3, 0.45])
def test_fixed_and_fixed(poisson: float) -> None:
    k = kappa(poisson, STRESS)
    for degrees in ANGLES:
        w = math.radians(degrees)
        want = 1.0
        if degrees > 180.0:
            want = smallest(
                lambda x, w=w: (k * cmath.sin(x * w)) ** 2 - (x * math.sin(w)) ** 2  # type: ignore[misc]
            )
        assert exponent(degrees, "fixed", "fixed", poisson=poisson) == pytest.approx(want, abs=1e-6)


@pytest.mark.parametrize(
    ("poisson", "state"), [(0.3, STRESS), (0.45, STRESS), (0.1, STRAIN), (0.3, STRAIN)]
)
def test_fixed_and_free_begin_at_the_angle_of_poissons_ratio(
    poisson: float, state: WallState
) -> None:
    # λ = 1 in the equation gives sin² ω = (κ + 1) / 4; a slower growth than 1.5 % is not looked for
    sine = math.sqrt((kappa(poisson, state) + 1.0) / 4.0)
    begin = math.degrees(math.asin(sine))
    assert exponent(begin - 0.5, "fixed", "free", poisson=poisson, state=state) == 1.0
    assert 0.9 < exponent(begin + 2.5, "fixed", "free", poisson=poisson, state=state) < 0.985


# --- sliding faces are lines of symmetry ----------------------------------------------------


@pytest.mark.parametrize("degrees", [100.0, 120.0, 135.0, 150.0, 179.0])
def test_a_sliding_face_makes_half_of_a_free_wedge(degrees: float) -> None:
    assert exponent(degrees, "free", SLIDING) == pytest.approx(
        exponent(2.0 * degrees, "free", "free"), abs=1e-6
    )
    assert exponent(degrees, SLIDING, "free") == pytest.approx(
        exponent(degrees, "free", SLIDING), abs=1e-9
    )
    assert exponent(85.0, "free", SLIDING) == 1.0


def test_a_sliding_face_against_a_fixed_one_keeps_the_symmetric_mode_only() -> None:
    # of κ sin λω = ± λ sin ω for the doubled wedge, the antisymmetric mode (-) cannot slide
    k = kappa(0.3, STRESS)
    for degrees in (110.0, 120.0, 135.0, 150.0, 170.0):
        w = 2.0 * math.radians(degrees)
        want = brentq(lambda x, w=w: k * math.sin(x * w) - x * math.sin(w), 0.3, 0.97)  # type: ignore[misc]
        assert exponent(degrees, "fixed", SLIDING) == pytest.approx(want, abs=1e-6)
        assert exponent(degrees, "fixed", SLIDING) > exponent(2.0 * degrees, "fixed", "fixed")


@pytest.mark.parametrize(
    ("degrees", "value"),
    # sin (λ ± 1) ω = 0 (derived): the least positive of π/ω - 1, 1 - π/ω and 2π/ω - 1
    [(45.0, 1.0), (90.0, 1.0), (120.0, 0.5), (150.0, 0.2), (210.0, 1 / 7), (270.0, 1 / 3),
     (300.0, 0.2), (340.0, 1 / 17)],
)  # fmt: skip
def test_two_sliding_faces(degrees: float, value: float) -> None:
    assert exponent(degrees, SLIDING, SLIDING) == pytest.approx(value, abs=1e-6)


# --- faces held along any one direction -----------------------------------------------------


@pytest.mark.parametrize("direction", [0.0, 20.0, 45.0, 70.0, 90.0, 130.0])
def test_one_direction_held_on_a_straight_line_is_no_corner_at_all(direction: float) -> None:
    # the second face is run towards the corner: its own direction is turned by 180°
    first, last = math.radians(direction), math.radians(direction - 180.0)
    assert exponent(180.0, first, last) == 1.0


@pytest.mark.parametrize("direction", [0.0, 30.0, 60.0, 90.0, 145.0])
def test_the_end_of_a_line_held_along_one_direction(direction: float) -> None:
    # a punch that slides, sticks along it, or anything between: real part 1/2 (derived)
    assert exponent(180.0, math.radians(direction), "free") == pytest.approx(0.5, abs=1e-6)


def test_the_mirror_image_grows_as_fast() -> None:
    for degrees in (70.0, 130.0, 200.0, 290.0):
        for direction in (15.0, 50.0, 110.0):
            # mirrored at the bisector a direction turns the other way, from the other face
            one = exponent(degrees, math.radians(direction), "free")
            other = exponent(degrees, "free", math.radians(-direction))
            assert one == pytest.approx(other, abs=1e-6)
