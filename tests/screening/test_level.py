"""The level of a case: not taken from singular places, so that nothing is hidden behind them."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

import numpy as np
import pytest

from screenapp.mechanics.singular_spot import SingularSpot
from screenapp.meshing.service import Mesher
from screenapp.model.findings import Findings
from screenapp.model.part import (
    Case,
    CircleHole,
    Cut,
    FixedSupport,
    LoopHole,
    Part,
    PointLoad,
    Probe,
    Wall,
)
from screenapp.model.validity import check
from screenapp.screening.level import LEAST_LEVEL, level, round_spots
from screenapp.screening.passes import passes_of
from screenapp.screening.screen import screen
from tests.mechanics.structured import Structured, rectangle
from tests.model.plates import loop, plate

LATCH = [(0.0, 0.0), (90.0, 0.0), (90.0, 10.0), (60.0, 10.0), (60.0, 25.0), (0.0, 25.0)]
WINDOW = [(20.0, 9.0), (36.0, 9.0), (36.0, 17.0), (20.0, 17.0)]


def latch() -> Part:
    """A latch held at its root, with a sharp window and a force at the corner of its nose."""
    window = LoopHole("w1", loop(WINDOW, prefix="w"))
    part = plate(loop(LATCH, rounds={3: 3.0}), window, CircleHole("h1", (8.0, 16.0), 6.0))
    return replace(
        part,
        wall=Wall(1.0, "steel"),
        supports=(FixedSupport("s1", "e6"),),
        cases=(Case("k1", "latched", (PointLoad("l1", "c3", 0.0, -200.0),)),),
        readings=(Probe("p1", "far", (55.0, 22.0)),),
        cuts=(Cut("x1", "far", (55.0, 18.0), (55.0, 26.0)),),
    )


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as made:
        yield made


@pytest.fixture(scope="module")
def latched(mesher: Mesher) -> tuple[Part, Findings]:
    part = latch()
    return part, screen(part, mesher)


def test_other_peaks_are_found_beside_a_point_load(latched: tuple[Part, Findings]) -> None:
    """Under the force the stress goes beyond all bounds; the sharp corners of the window and the
    settled peaks along the edges stay on the list."""
    peaks = {p.place: p for p in latched[1].cases[0].peaks}
    under = peaks["corner c3"].estimate
    assert under.trust == "rising"
    for corner in ("wc1", "wc2", "wc3", "wc4"):
        assert peaks[f"corner {corner}"].estimate.trust == "rising"
    settled = [p for p in peaks.values() if p.estimate.trust == "settled"]
    assert {"e1", "h1"} <= {p.feature for p in settled}
    assert all(p.estimate.value < 0.05 * under.value for p in settled)
    assert len(latched[1].cases[0].peaks) <= 24


def test_the_level_stays_while_the_singular_stress_rises(latched: tuple[Part, Findings]) -> None:
    part, findings = latched
    passes = passes_of(part, check(part), findings.fields)
    levels = [p.level("von_mises", 0) for p in passes]
    largest = [p.measure_max("von_mises", 0) for p in passes]
    assert largest[-1] > 10.0 * largest[0]
    assert max(levels[1:]) < 1.1 * min(levels[1:])
    # the bending at the root of the nose, 200 N over 30 mm on 10 mm by 1 mm, is 360 MPa
    assert 0.5 * 360.0 < levels[-1] < 2.0 * 360.0


def test_a_reading_far_from_a_point_load_is_judged_by_what_is_there(
    latched: tuple[Part, Findings],
) -> None:
    """It used to be allowed a tolerance of 5 % of the stress under the force."""
    part, findings = latched
    passes = passes_of(part, check(part), findings.fields)
    (reading,) = findings.readings
    value = reading.values["von_mises"]
    scale = max(value.value, 0.05 * passes[-1].level("von_mises", 0))
    assert reading.allowed == pytest.approx(0.02 * scale)
    assert scale < 0.05 * passes[-1].measure_max("von_mises", 0)
    assert value.trust == "settled"
    assert value.high - value.value <= reading.allowed
    (cut,) = findings.cuts
    assert cut.largest.high - cut.largest.value <= 0.02 * max(cut.largest.value, scale)


# --- what is left out -----------------------------------------------------------------------


def near(case: Structured, *spots: SingularSpot) -> np.ndarray:
    """Nodes left out on a structured mesh."""
    mesh = case.mesh
    sizes = mesh.element_sizes
    nodes = np.full(mesh.n_nodes, np.inf)
    np.minimum.at(nodes, mesh.quads, np.broadcast_to(sizes[:, None], mesh.quads.shape))
    return round_spots(spots, case.shape, mesh, nodes, sizes)


def spot(x: float, y: float, rate: float = 0.45) -> SingularSpot:
    return SingularSpot((x, y), ("c",), "why", "mend", rate, "there")


def reach(case: Structured, out: np.ndarray, x: float, y: float) -> float:
    return float(np.hypot(*(case.mesh.nodes[out] - (x, y)).T).max())


FINE = rectangle(100.0, 60.0, 200, 120)


def test_nothing_is_left_out_without_spots() -> None:
    assert not near(FINE).any()


def test_two_per_cent_of_the_part_and_more_at_a_point() -> None:
    size = FINE.shape.size
    assert reach(FINE, near(FINE, spot(0, 0)), 0, 0) == pytest.approx(0.02 * size, abs=0.5)
    assert reach(FINE, near(FINE, spot(0, 0, 1.0)), 0, 0) == pytest.approx(0.08 * size, abs=0.5)


def test_at_least_three_elements() -> None:
    coarse = rectangle(100.0, 60.0, 25, 15)  # 4 mm
    assert reach(coarse, near(coarse, spot(0, 0)), 0, 0) == pytest.approx(12.0)


def test_a_narrow_wall_is_not_swallowed() -> None:
    narrow = rectangle(100.0, 2.0, 800, 16)  # eight per cent of its size is four walls
    assert reach(narrow, near(narrow, spot(0, 0, 1.0)), 0, 0) == pytest.approx(1.0, abs=0.1)


def test_where_all_is_near_something_still_counts() -> None:
    coarse = rectangle(40.0, 40.0, 4, 4)
    spots = [spot(x, y) for x in (0, 20, 40) for y in (0, 40)]
    out = near(coarse, *spots)
    assert out.any()
    centres = out[coarse.mesh.quads[:, 8]]
    assert centres.mean() <= 0.5


def test_the_level_is_the_largest_of_the_rest_and_never_nothing() -> None:
    values = np.array([5000.0, 40.0, 30.0])
    assert level(values, np.array([True, False, False])) == 40.0
    assert level(values, np.zeros(3, dtype=bool)) == 5000.0
    assert level(values, np.ones(3, dtype=bool)) == 5000.0 * LEAST_LEVEL
    assert level(np.zeros(0), np.zeros(0, dtype=bool)) == 0.0
