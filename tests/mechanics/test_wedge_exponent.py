"""Growth of stress where walls of different thickness or material meet."""

from __future__ import annotations

import math

import pytest

from screenapp.mechanics.corner_exponent import SLIDING, Face, growth_rate
from screenapp.mechanics.singular_spots import singular_spots
from screenapp.mechanics.wedge_exponent import Wedge, fan_growth_rate
from screenapp.model.part import FixedSupport, Zone
from screenapp.model.regions import shape_with_zones
from tests.mechanics.zoned import disc, pad, steel, strip

E, NU = 210_000.0, 0.3


def wedge(degrees: float, thickness: float = 1.0, modulus: float = E, nu: float = NU) -> Wedge:
    return Wedge(math.radians(degrees), modulus, nu, thickness)


@pytest.mark.parametrize("degrees", [190.0, 225.0, 270.0, 300.0, 330.0])
def test_equal_walls_are_one_free_corner(degrees: float) -> None:
    """Williams 1952, by the closed characteristic equation."""
    cut = [wedge(0.3 * degrees), wedge(0.25 * degrees), wedge(0.45 * degrees)]
    wanted = growth_rate(math.radians(degrees), ("free", "free"), NU, "plane stress")
    assert fan_growth_rate(cut, ("free", "free")) == pytest.approx(wanted, abs=1e-7)


@pytest.mark.parametrize(
    ("faces", "degrees"),
    [
        (("fixed", "free"), 90.0),
        (("fixed", "free"), 180.0),
        (("free", "fixed"), 270.0),
        (("fixed", "fixed"), 200.0),
        (("fixed", "fixed"), 270.0),
        (("free", SLIDING), 150.0),
        (("fixed", SLIDING), 120.0),
        (("fixed", SLIDING), 180.0),
        (("free", 0.3), 250.0),
        ((2.0, "fixed"), 200.0),
    ],
)
def test_equal_walls_are_one_held_corner(faces: tuple[Face, Face], degrees: float) -> None:
    halves = [wedge(0.5 * degrees), wedge(0.5 * degrees)]
    wanted = growth_rate(math.radians(degrees), faces, NU, "plane stress")
    assert fan_growth_rate(halves, faces) == pytest.approx(wanted, abs=1e-7)


@pytest.mark.parametrize("degrees", [30.0, 90.0, 180.0])
def test_an_even_wall_has_no_singular_point_inside(degrees: float) -> None:
    assert fan_growth_rate([wedge(degrees), wedge(360.0 - degrees)], None) == 0.0


def test_thickness_and_modulus_count_by_their_product() -> None:
    """With one Poisson's ratio only E t matters in plane stress."""
    by_thickness = fan_growth_rate([wedge(90.0), wedge(90.0, thickness=4.0)], ("free", "free"))
    by_modulus = fan_growth_rate([wedge(90.0), wedge(90.0, modulus=4.0 * E)], ("free", "free"))
    assert by_thickness == pytest.approx(by_modulus, abs=1e-9)
    assert by_thickness > 0.05


@pytest.mark.parametrize("ratio", [1.5, 2.0, 5.0, 20.0])
@pytest.mark.parametrize("nu", [0.1, 0.3, 0.45])
def test_two_quarter_planes_are_singular_as_bogy_says(ratio: float, nu: float) -> None:
    """Bogy 1968: singular where α (α - 2β) > 0 (Dundurs' parameters); with one ν that is α² ν, so
    always but for ν = 0, where the stress stays finite."""
    pair = [wedge(90.0, nu=nu), wedge(90.0, ratio, nu=nu)]
    alpha = (ratio - 1.0) / (ratio + 1.0)
    # near λ = 1 the growth rate begins in proportion to α (α - 2β)
    rate = fan_growth_rate(pair, ("free", "free"))
    assert rate > 0.1 * alpha**2 * nu
    assert fan_growth_rate([wedge(90.0, nu=0.0), wedge(90.0, ratio, nu=0.0)], ("free", "free")) < (
        1e-3
    )


def test_a_crack_at_a_right_angle_to_the_step_grows_as_zak_and_williams_found() -> None:
    """A crack in one wall that ends at the step to another of the same E t: 1/2; a stiffer wall
    beyond it lowers the growth, a softer one raises it (Zak & Williams 1963, J. Appl. Mech. 30,
    from memory)."""

    def rate(ratio: float) -> float:
        fan = [wedge(90.0), wedge(180.0, ratio), wedge(90.0)]
        return fan_growth_rate(fan, ("free", "free"))

    assert rate(1.0) == pytest.approx(0.5, abs=1e-6)
    assert rate(3.0) < 0.45 < 0.55 < rate(0.3)


def _spots(*zones: Zone):  # type: ignore[no-untyped-def]
    part = strip(60.0, 20.0, zones, (FixedSupport("s1", "e4"),), materials=(steel(),))
    shape = shape_with_zones(part)
    return [s for s in singular_spots(part, shape) if any(i.startswith("z") for i in s.ids)]


def test_a_round_zone_inside_is_no_singular_place() -> None:
    assert _spots(disc((30.0, 10.0), 8.0, 6.0)) == []


def test_the_ends_of_a_step_across_the_part_are_places_to_watch() -> None:
    spots = _spots(pad([(30.0, -5.0), (70.0, -5.0), (70.0, 25.0), (30.0, 25.0)], 6.0))
    assert sorted(s.at for s in spots) == [(30.0, 0.0), (30.0, 20.0)]
    assert {s.place for s in spots} == {"the end of zone z1 at e1", "the end of zone z1 at e3"}
    wanted = fan_growth_rate([wedge(90.0, 6.0), wedge(90.0, 2.0)], ("free", "free"))
    assert all(s.rate == pytest.approx(wanted, abs=1e-6) for s in spots)


def test_sharp_corners_of_a_zone_are_places_to_watch_and_rounded_ones_are_not() -> None:
    corners = [(20.0, 5.0), (40.0, 5.0), (40.0, 15.0), (20.0, 15.0)]
    spots = _spots(pad(corners, 6.0))
    assert sorted(s.at for s in spots) == sorted(corners)
    assert all("radius" in s.mend for s in spots)


def test_a_small_step_is_none() -> None:
    assert _spots(pad([(30.0, -5.0), (70.0, -5.0), (70.0, 25.0), (30.0, 25.0)], 2.1)) == []


def test_a_step_at_a_clamped_edge_is_weighed_with_it() -> None:
    spots = _spots(pad([(-5.0, -5.0), (70.0, -5.0), (70.0, 10.0), (-5.0, 10.0)], 6.0))
    assert (0.0, 10.0) in [s.at for s in spots]
