"""Cuts across parts whose section forces and stresses are known."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace

import numpy as np
import pytest
from shapely import Polygon

from screenapp.mechanics.straight_cut import clenshaw_curtis, straight_cut
from screenapp.meshing.service import Mesher
from screenapp.model.findings import CutFindings
from screenapp.model.part import (
    Case,
    CircleHole,
    Cut,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    LoopHole,
    Part,
    PressureLoad,
    RollerSupport,
    SpinLoad,
    Zone,
)
from screenapp.model.shape import shape_of
from screenapp.screening.cuts import read_cuts
from screenapp.screening.screen import screen
from tests.model.plates import STEEL, loop, plate, rectangle

T = 3.0
LENGTH, HEIGHT = 100.0, 20.0


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


def beam(*loads: object, cuts: tuple[Cut, ...], holes: tuple[CircleHole, ...] = ()) -> Part:
    """A beam of 100 x 20 x 3 mm, fixed at its left end."""
    part = plate(rectangle(LENGTH, HEIGHT))
    return replace(
        part,
        holes=holes,
        supports=(FixedSupport("s1", "e4"),),
        cases=(Case("k1", "all", tuple(loads)),),  # type: ignore[arg-type]
        cuts=cuts,
    )


def upright(x: float, id_: str = "x1") -> Cut:
    """A cut from below to above: the body on its left is the fixed end."""
    return Cut(id_, "root", (x, -5.0), (x, HEIGHT + 5.0))


def only(part: Part, mesher: Mesher) -> CutFindings:
    found = screen(part, mesher).cuts
    assert len(found) == 1
    return found[0]


# --- geometry ---------------------------------------------------------------------------------


@pytest.mark.parametrize("degree", range(9))
def test_the_rule_is_exact_for_polynomials(degree: int) -> None:
    x, w = clenshaw_curtis(9)
    assert np.all(np.diff(x) > 0.0)
    exact = 2.0 / (degree + 1) if degree % 2 == 0 else 0.0
    assert w @ x**degree == pytest.approx(exact, abs=1e-13)


def test_a_cut_through_a_hole_has_two_spans() -> None:
    shape = shape_of(plate(rectangle(100.0, 50.0), CircleHole("h1", (50.0, 25.0), 10.0)))
    cut = straight_cut(shape, (50.0, -10.0), (50.0, 60.0))
    assert cut.spans == pytest.approx(np.array([[10.0, 30.0], [40.0, 60.0]]))
    off = straight_cut(shape, (53.0, -10.0), (53.0, 60.0))
    half = math.sqrt(25.0 - 9.0)
    assert off.spans == pytest.approx(np.array([[10.0, 35.0 - half], [35.0 + half, 60.0]]))
    assert off.length == pytest.approx(50.0 - 2.0 * half)


def test_a_cut_may_end_inside_or_miss() -> None:
    shape = shape_of(plate(rectangle(100.0, 50.0), CircleHole("h1", (50.0, 25.0), 10.0)))
    assert straight_cut(shape, (10.0, 10.0), (20.0, 10.0)).spans == pytest.approx(
        np.array([[0.0, 10.0]])
    )
    assert len(straight_cut(shape, (-10.0, 60.0), (120.0, 60.0)).spans) == 0


def test_a_cut_along_an_edge_reads_the_edge(mesher: Mesher) -> None:
    """σ = M y / I falls to zero along the upper edge of a cantilever, away from its root."""
    part = beam(
        ForceLoad("l1", "e2", 0.0, -500.0), cuts=(Cut("x1", "top", (30.0, 20.0), (80.0, 20.0)),)
    )
    found = only(part, mesher)
    assert found.applied is None
    span = found.spans[0]
    x = 30.0 + np.array(span.distances)
    theory = 6.0 * 500.0 * (LENGTH - x) / (T * HEIGHT**2)
    assert np.array(span.values["along"]) == pytest.approx(theory, rel=0.01, abs=0.3)
    assert np.array(span.values["normal"]) == pytest.approx(0.0, abs=1e-9)


def test_a_cut_through_corners_and_along_an_arc_end() -> None:
    """A half disc on a square: the cut runs through both ends of the arc."""
    outline = loop([(0.0, 0.0), (40.0, 0.0), (40.0, 40.0), (0.0, 40.0)], {1: (60.0, 20.0)})
    shape = shape_of(plate(outline, CircleHole("h1", (10.0, 20.0), 4.0)))
    assert straight_cut(shape, (40.0, -1.0), (40.0, 50.0)).spans == pytest.approx(
        np.array([[1.0, 41.0]])
    )
    assert straight_cut(shape, (-1.0, 30.0), (70.0, 30.0)).spans == pytest.approx(
        np.array([[1.0, 41.0 + math.sqrt(400.0 - 100.0)]])
    )


# --- section forces ---------------------------------------------------------------------------


def test_a_cantilever_has_the_forces_of_statics(mesher: Mesher) -> None:
    """500 N down and 2000 N outward at the free end; seen from the fixed end, at 40 mm."""
    part = beam(ForceLoad("l1", "e2", 2000.0, -500.0), cuts=(upright(40.0),))
    found = only(part, mesher)
    # The normal points along +x.  The outer part pulls the body to +x and down; a cut from below
    # to above counts shear upwards.  500 N down at 60 mm stretch the upper end: positive.
    want = (2000.0, -500.0, 500.0 * 60.0)
    assert found.applied is not None
    got = (found.applied.normal, found.applied.shear, found.applied.moment)
    assert got == pytest.approx(want, rel=1e-6)
    for estimate, value in zip((found.normal, found.shear, found.moment), want, strict=True):
        assert estimate.low <= value <= estimate.high
        assert estimate.value == pytest.approx(value, rel=2e-3)
        assert estimate.trust == "settled"
    span = found.spans[0]
    bending = 6.0 * want[2] / (T * HEIGHT**2)
    assert span.membrane.value == pytest.approx(2000.0 / (T * HEIGHT), rel=2e-3)
    assert span.bending.value == pytest.approx(bending, rel=2e-3)
    assert span.beam == pytest.approx(
        (2000.0 / (T * HEIGHT) - bending, 2000.0 / (T * HEIGHT) + bending)
    )
    # far from the ends the stress is that of beam theory, the shear a parabola
    inside = slice(1, -1)
    off = np.array(span.distances[inside]) - 5.0 - HEIGHT / 2.0
    shear = -1.5 * 500.0 / (T * HEIGHT) * (1.0 - (2.0 * off / HEIGHT) ** 2)
    assert np.array(span.values["shear"][inside]) == pytest.approx(shear, abs=0.35)
    assert span.values["shear"][0] == pytest.approx(0.0, abs=1e-9)  # a free edge


def test_turning_the_cut_round_takes_the_other_body(mesher: Mesher) -> None:
    """The other body, seen from the other side: N and V stay, and M changes with the ends."""
    cut = upright(40.0)
    back = Cut("x2", "back", cut.end, cut.start)
    part = beam(ForceLoad("l1", "e2", 2000.0, -500.0), cuts=(cut, back))
    one, other = screen(part, mesher).cuts
    assert one.applied is not None
    assert other.applied is not None
    assert other.applied.normal == pytest.approx(one.applied.normal, rel=1e-6)
    assert other.applied.shear == pytest.approx(one.applied.shear, rel=1e-6)
    assert other.applied.moment == pytest.approx(-one.applied.moment, rel=1e-6)
    assert other.normal.value == pytest.approx(one.normal.value, rel=1e-9)
    assert other.moment.value == pytest.approx(-one.moment.value, rel=1e-9)


def test_pressure_and_weight_on_the_body_count_as_far_as_they_reach(mesher: Mesher) -> None:
    """A cut that divides a pressed edge: p L t and ρ g A t of the outer 60 mm hang on it."""
    part = beam(
        PressureLoad("l1", "e3", 0.5), GravityLoad("l2", 0.0, -9810.0), cuts=(upright(40.0),)
    )
    found = only(part, mesher)
    assert found.applied is not None
    far = LENGTH - 40.0
    down = 0.5 * far * T + STEEL.density * 1e-9 * 9810.0 * far * HEIGHT * T
    assert found.applied.shear == pytest.approx(-down, rel=1e-9)
    assert found.applied.moment == pytest.approx(down * far / 2.0, rel=1e-9)
    assert found.shear.value == pytest.approx(-down, rel=5e-3)


@pytest.mark.parametrize(("x", "diameter", "rel"), [(30.0, 0.0, 1e-9), (55.0, 8.0, 1e-5)])
def test_weight_and_spin_beyond_a_slanting_cut_are_those_of_the_polygon(
    x: float, diameter: float, rel: float, mesher: Mesher
) -> None:
    """What hangs on a slanting cut is a trapezium, or one with a hole taken out of it.

    Derived: with a spin about (0, 0) the force is ρ ω² t ∫ r dA and has no moment about the
    origin; the weight's is that of its centroid.  A hole's rim is of parabolas in the mesh: an arc
    of θ = 2π/16 leaves θ⁴/480 = 5e-5 of the hole's area, here 3e-6 of the whole.
    """
    hole = CircleHole("h1", (85.0, 10.0), diameter)
    trapezium = Polygon([(x, 0.0), (LENGTH, 0.0), (LENGTH, HEIGHT), (x + 13.7, HEIGHT)])
    gone = math.pi * diameter**2 / 4.0
    area = trapezium.area - gone
    first = trapezium.area * np.array(trapezium.centroid.coords[0]) - gone * np.array(hole.centre)
    part = beam(
        cuts=(Cut("x1", "slant", (x, 0.0), (x + 13.7, HEIGHT)),),
        holes=(hole,) if diameter else (),
    )
    weight = Case("k1", "weight", (GravityLoad("l1", 0.0, -9.81),))
    spin = Case("k2", "spin", (SpinLoad("l2", 0.0, 0.0, 3000.0),))
    line = straight_cut(shape_of(part), part.cuts[0].start, part.cuts[0].end)
    ox, oy = x + 0.5 * 13.7, 0.5 * HEIGHT
    mass = STEEL.density * 1e-12 * T
    fx, fy = mass * (3000.0 * math.pi / 30.0) ** 2 * first
    down = -9810.0 * mass * area
    for case, force, about in (
        (weight, np.array([0.0, down]), (first[0] / area - ox) * down),
        (spin, np.array([fx, fy]), -(ox * fy - oy * fx)),
    ):
        found = only(replace(part, cases=(case,)), mesher).applied
        assert found is not None
        # the far body hangs on the near one: its forces, seen from the near side
        assert found.normal == pytest.approx(force @ line.normal, rel=rel)
        assert found.shear == pytest.approx(force @ line.along, rel=rel)
        assert found.moment == pytest.approx(-about, rel=rel)  # stretches the far end of the cut


def test_both_ligaments_beside_a_hole_carry_the_pull(mesher: Mesher) -> None:
    """Two spans share N; the stress at the hole's edge is the peak that the screening finds."""
    hole = CircleHole("h1", (50.0, 10.0), 6.0)
    part = beam(ForceLoad("l1", "e2", 3000.0, 0.0), cuts=(upright(50.0),), holes=(hole,))
    findings = screen(part, mesher)
    found = findings.cuts[0]
    assert len(found.spans) == 2
    assert found.applied is not None
    assert found.applied.normal == pytest.approx(3000.0, rel=1e-6)
    assert found.normal.low <= 3000.0 <= found.normal.high
    peak = next(p for p in findings.cases[0].peaks if p.feature == "h1")
    assert found.largest.value == pytest.approx(peak.estimate.value, rel=2e-3)
    assert found.largest.trust == "settled"
    assert found.trust == "settled"
    bands = [b for span in found.spans for b in span.half_bands["von_mises"]]
    assert all(0.0 < b < 0.1 * found.largest.value for b in bands)


def test_a_cut_that_does_not_divide_the_part_has_no_free_body(mesher: Mesher) -> None:
    hole = CircleHole("h1", (50.0, 10.0), 6.0)
    part = beam(
        ForceLoad("l1", "e2", 3000.0, 0.0),
        cuts=(Cut("x1", "one ligament", (50.0, -1.0), (50.0, 10.0)),),
        holes=(hole,),
    )
    found = only(part, mesher)
    assert found.applied is None
    assert found.spans[0].beam is None
    assert found.normal.value == pytest.approx(1500.0, rel=5e-3)  # by symmetry


def test_a_cut_along_a_rising_support_end_is_rising(mesher: Mesher) -> None:
    part = beam(
        ForceLoad("l1", "e2", 0.0, -500.0), cuts=(Cut("x1", "root", (0.0, 0.0), (0.1, 20.0)),)
    )
    found = only(part, mesher)
    assert found.trust == "rising"
    assert found.why


def test_cuts_that_miss_are_left_out_and_later_ones_are_read_from_the_fields(
    mesher: Mesher,
) -> None:
    part = beam(
        ForceLoad("l1", "e2", 2000.0, -500.0), cuts=(Cut("x1", "off", (0.0, 30.0), (9.0, 30.0)),)
    )
    part = replace(part, supports=(*part.supports, RollerSupport("s2", "e4", 0.0)))
    findings = screen(part, mesher)
    assert findings.cuts == ()
    later = replace(part, cuts=(upright(40.0),))
    found = read_cuts(later, shape_of(later), findings).cuts
    assert len(found) == 1
    assert found[0] == screen(later, mesher).cuts[0]


def test_a_cut_across_a_pad_has_a_span_for_each_thickness(mesher: Mesher) -> None:
    """A strip whose middle third is twice as thick, pulled by the same stress everywhere: the force
    is that stress on two strips of 20/3 x 3 mm and one of 20/3 x 6 mm."""
    low, high = HEIGHT / 3.0, 2.0 * HEIGHT / 3.0
    middle = loop([(0.0, low), (LENGTH, low), (LENGTH, high), (0.0, high)], prefix="z")
    pad = Zone(LoopHole("z1", middle), 6.0)
    part = beam(PressureLoad("l1", "e2", -100.0), cuts=(upright(50.0),))
    part = replace(
        part, zones=(pad,), supports=(RollerSupport("s1", "e4"), RollerSupport("s2", "e1"))
    )
    found = only(part, mesher)
    assert [len(found.spans), found.applied is not None] == [3, True]
    force = 100.0 * (HEIGHT * 2 / 3 * T + HEIGHT / 3 * 6.0)
    assert found.applied is not None
    assert found.applied.normal == pytest.approx(force, rel=1e-6)
    assert found.normal.value == pytest.approx(force, rel=1e-6)
    for span in found.spans:
        assert np.array(span.values["normal"]) == pytest.approx(100.0, rel=1e-6)
        assert span.beam == pytest.approx((100.0, 100.0), rel=1e-6)
