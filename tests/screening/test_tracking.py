"""Peaks followed back through passes that are made up: what counts as the same peak, and what the
history makes of it."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from typing import cast

import numpy as np
import pytest

from screenapp.mechanics.singular_spot import SingularSpot
from screenapp.mechanics.singular_spots import singular_spots
from screenapp.model.findings import Peak
from screenapp.model.part import Case, LoopHole, Part, Point, StressLimit, Zone
from screenapp.model.shape import Shape, shape_of
from screenapp.screening.passes import Pass, PointValues
from screenapp.screening.peaks import REACH, RawPeak
from screenapp.screening.tracking import measures, track
from tests.model.plates import loop, plate, rectangle

HERE = (40.0, 0.0)
"""On edge e1 of the plate."""

PLAIN = 7.0
"""Stress along x that made-up passes read everywhere [MPa]."""


@dataclass
class MadeUp:
    """Stands in for a pass: its peaks by measure and case, one stress wherever it is read."""

    found: dict[tuple[str, int], list[RawPeak]]
    size: float = 1.0
    doubt: float = 0.0
    level: float = 100.0
    stress: float = PLAIN
    met: tuple[int, ...] = ()
    reads: list[int] = field(default_factory=list)

    def peaks(self, name: str, case: int) -> list[RawPeak]:
        return self.found.get((name, case), [])

    def counted_level(self, _name: str, _case: int) -> float:
        return self.level

    def read(self, points: np.ndarray, _measure: str = "von_mises") -> PointValues:
        n = len(points)
        self.reads.append(n)
        stress = np.zeros((2, n, 3))
        stress[..., 0] = self.stress
        return PointValues(
            stress,
            np.zeros((2, n, 2)),
            np.full((2, n), self.doubt),
            np.full(n, self.size),
            np.full((2, n), -1),
        )

    @property
    def reader(self) -> MadeUp:
        return self

    def zones_at(self, points: Sequence[Point]) -> list[tuple[int, ...]]:
        return [self.met] * len(points)


def raw(
    value: float, at: Point = HERE, piece: int = 0, size: float = 1.0, **more: object
) -> RawPeak:
    return RawPeak(value, at, piece, 0.0, size, **more)  # type: ignore[arg-type]


def one(*peaks: RawPeak, **more: object) -> MadeUp:
    """A pass with these peaks of the von Mises stress in the first case."""
    return MadeUp({("von_mises", 0): list(peaks)}, **more)  # type: ignore[arg-type]


def history(values: Sequence[float], ratio: float = 2.0, **more: object) -> list[MadeUp]:
    """Passes whose one peak has these values, elements `ratio` times smaller each."""
    sizes = [ratio**-i for i in range(len(values))]
    return [one(raw(v, size=h), size=h, **more) for v, h in zip(values, sizes, strict=True)]


def followed(
    passes: Sequence[MadeUp], spots: Sequence[SingularSpot] = (), part: Part | None = None
) -> tuple[tuple[Peak, ...], ...]:
    part = part or plate()
    return track(part, shape_of(part), [cast(Pass, p) for p in passes], spots)


def only(passes: Sequence[MadeUp], spots: Sequence[SingularSpot] = (), **more: Part) -> Peak:
    ((peak,),) = followed(passes, spots, **more)
    return peak


def corner_spot(at: Point = HERE, **more: object) -> SingularSpot:
    made = SingularSpot(at, ("c9", "e1"), "corner c9 has no finite stress", "round it", 0.45, "c9")
    return replace(made, **more)  # type: ignore[arg-type]


# --- which measures -----------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("asked", "wanted"),
    [
        ((), ("von_mises",)),
        (("von_mises",), ("von_mises",)),
        (("sigma_1", "tresca", "sigma_1"), ("von_mises", "sigma_1", "tresca")),
    ],
)
def test_von_mises_is_followed_always_and_others_once(
    asked: tuple[str, ...], wanted: tuple[str, ...]
) -> None:
    limits = tuple(StressLimit(f"g{i}", name) for i, name in enumerate(asked))  # type: ignore[arg-type]
    assert measures(replace(plate(), limits=limits)) == wanted


# --- what is the same peak ----------------------------------------------------------------------


def test_a_peak_is_followed_by_the_nearest_of_its_kind() -> None:
    earlier = one(raw(80.0, (42.0, 0.0)), raw(90.0, (40.5, 0.0)), raw(70.0, (39.0, 0.0)))
    assert only([earlier, one(raw(100.0))]).history == (90.0, 100.0)


@pytest.mark.parametrize(
    "other",
    [
        raw(90.0, (HERE[0] + 1.01 * REACH, 0.0)),  # farther than it reaches
        raw(90.0, piece=-1),  # inside the part
        raw(90.0, zone=0),  # on the other side of a step
    ],
)
def test_where_an_earlier_pass_has_no_such_peak_its_stress_there_counts(other: RawPeak) -> None:
    assert only([one(other), one(raw(100.0))]).history == (PLAIN, 100.0)


def test_the_larger_of_both_elements_reaches() -> None:
    """A coarse pass places its peak no better than its own elements are small."""
    coarse = one(raw(90.0, (HERE[0] + 0.9 * REACH * 4.0, 0.0), size=4.0))
    assert only([coarse, one(raw(100.0))]).history == (90.0, 100.0)


def test_every_pass_is_read_once_for_all_peaks() -> None:
    passes = [one(raw(100.0)), one(raw(100.0), raw(60.0, (70.0, 0.0)))]
    assert len(followed(passes)[0]) == 2
    assert [p.reads for p in passes] == [[2], [2]]


def test_a_part_without_peaks_has_none() -> None:
    assert followed([one(), one()]) == ((),)


# --- order and cases ----------------------------------------------------------------------------


def test_the_largest_comes_first_and_von_mises_before_other_measures() -> None:
    part = replace(plate(), limits=(StressLimit("g1", "sigma_1"),))
    last = MadeUp(
        {
            ("von_mises", 0): [raw(50.0, (20.0, 0.0)), raw(60.0, (60.0, 0.0))],
            ("sigma_1", 0): [raw(99.0)],
        }
    )
    (found,) = followed([last], part=part)
    shown = [(p.quantity, p.estimate.value) for p in found]
    assert shown == [("von_mises", 60.0), ("von_mises", 50.0), ("sigma_1", 99.0)]


def test_each_case_has_its_own_peaks_and_singular_places() -> None:
    part = replace(plate(), cases=(Case("k1", "one"), Case("k2", "two")))
    values = [100.0, 140.0, 196.0]
    passes = [
        MadeUp({("von_mises", k): [raw(v, size=2.0**-i)] for k in (0, 1)}, size=2.0**-i)
        for i, v in enumerate(values)
    ]
    (first,), (second,) = followed(passes, [corner_spot(case="k2")], part=part)
    assert first.estimate.trust == "unsettled"
    assert second.estimate.trust == "rising"


# --- what the history makes of it ---------------------------------------------------------------


def test_a_steady_peak_is_settled_and_placed() -> None:
    peak = only(history([99.0, 100.0, 100.1]))
    assert peak.estimate.trust == "settled"
    assert (peak.feature, peak.zone, peak.why, peak.mend) == ("e1", "", "", "")
    assert peak.place.startswith("edge e1")
    assert peak.sizes == (1.0, 0.5, 0.25)
    assert peak.history == (99.0, 100.0, 100.1)
    # by the rule: the last change, or 0.3 of the one before, and 0.1 % of the value
    half = max(0.1, 0.3 * 1.0) + 0.001 * 100.1
    assert peak.estimate.high == pytest.approx(100.1 + half)
    assert peak.estimate.low == pytest.approx(100.1 - half)
    assert peak.rate == pytest.approx(math.log(100.1 / 99.0) / math.log(4.0), rel=0.2)


def test_a_small_peak_need_not_be_known_more_closely_than_it_matters() -> None:
    tolerance = plate().mesh.tolerance
    values = [10.0, 10.4, 10.2]
    strict = only(history(values, level=10.0))
    loose = only(history(values, level=100.0))
    assert strict.allowed == pytest.approx(tolerance * 10.2)
    assert loose.allowed == pytest.approx(tolerance * 50.0)
    assert (strict.estimate.trust, loose.estimate.trust) == ("unsettled", "settled")


def test_a_peak_that_counts_more_is_known_more_closely() -> None:
    """`demand` 4: a zone of a weaker material, where the same stress means more."""
    last = one(raw(10.0, demand=4.0), level=100.0)
    assert only([last]).allowed == pytest.approx(plate().mesh.tolerance * 0.5 * 100.0 / 4.0)


@pytest.mark.parametrize(
    ("values", "spots", "words"),
    [
        ([100.0], (), "one pass alone says nothing about its accuracy"),
        ([60.0, 80.0, 100.0], (), "its band is still ±20.1 %"),
        ([100.0, 100.0, 100.0], (corner_spot(),), "but it does not clearly rise yet"),
    ],
)
def test_an_unsettled_peak_says_why(
    values: list[float], spots: tuple[SingularSpot, ...], words: str
) -> None:
    peak = only(history(values), spots)
    assert peak.estimate.trust == "unsettled"
    assert words in peak.why
    assert peak.mend == ""


def test_growth_where_no_theory_expects_it_is_rising() -> None:
    values = [100.0 * 2.0 ** (0.4 * i) for i in range(5)]
    peak = only(history(values))
    assert peak.estimate.trust == "rising"
    assert peak.rate == pytest.approx(0.4)
    assert peak.why == f"the stress at {peak.place} keeps rising as the mesh is refined"
    assert peak.mend
    assert peak.feature == "e1"


# --- singular places ----------------------------------------------------------------------------


def test_peaks_at_one_singular_place_count_as_one_and_stand_at_it() -> None:
    at = (HERE[0] + 0.5, 0.0)
    passes = [
        one(
            raw(v, size=2.0**-i),
            raw(0.9 * v, (41.0, 0.0), size=2.0**-i),
            raw(0.5 * v, (80.0, 0.0), size=2.0**-i),
            size=2.0**-i,
        )
        for i, v in enumerate([100.0, 140.0, 196.0])
    ]
    (found,) = followed(passes, [corner_spot(at)])
    assert [p.estimate.trust for p in found] == ["rising", "unsettled"]
    peak = found[0]
    assert (peak.at, peak.place, peak.feature) == (at, "c9", "c9")
    assert (peak.why, peak.mend) == ("corner c9 has no finite stress", "round it")
    assert math.isinf(peak.estimate.high)
    assert peak.structural is None  # nothing of the wall's thickness is free beside it


def test_a_singular_place_of_another_case_or_farther_away_does_not_count() -> None:
    passes = history([100.0, 140.0, 196.0])
    reach = REACH * 0.25
    for spot in (corner_spot(case="k9"), corner_spot((HERE[0] + 1.01 * reach, 0.0))):
        assert only(passes, [spot]).estimate.trust == "unsettled"
    near = corner_spot((HERE[0] + 0.99 * reach, 0.0))
    assert only(passes, [near]).estimate.trust == "rising"


@pytest.mark.parametrize(("spots", "wanted"), [((), 1.0), ((corner_spot(),), 0.25)])
def test_at_a_singular_place_the_smaller_of_side_and_element_is_felt(
    spots: tuple[SingularSpot, ...], wanted: float
) -> None:
    assert only([one(raw(100.0, size=0.25), size=1.0)], spots).sizes == (wanted,)


def test_beside_a_sharp_corner_the_structural_stress_is_offered() -> None:
    ell = [(0.0, 0.0), (80.0, 0.0), (80.0, 30.0), (30.0, 30.0), (30.0, 80.0), (0.0, 80.0)]
    part = replace(plate(loop(ell)), holes=(), supports=())
    shape: Shape = shape_of(part)
    (spot,) = singular_spots(part, shape)
    piece = next(i for i, c in enumerate(shape.curves) if c.feature == "e3")
    passes = [
        one(raw(v, spot.at, piece, size=2.0**-i), size=2.0**-i)
        for i, v in enumerate([100.0, 140.0, 196.0])
    ]
    peak = only(passes, [spot], part=part)
    assert peak.estimate.trust == "rising"
    assert peak.structural is not None
    assert peak.structural.value == pytest.approx(PLAIN)  # an even field is drawn on unchanged
    assert "or accept the structural stress beside it" in peak.mend


# --- zones --------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("zone", "met", "ends"),
    [
        (-1, (-1,), ""),
        (0, (0,), ", in zone z1"),
        (0, (-1, 0), ", in zone z1, at the step to the wall"),
        (-1, (-1, 0), ", at the step to zone z1"),
    ],
)
def test_a_peak_says_its_zone_and_its_step(zone: int, met: tuple[int, ...], ends: str) -> None:
    part = replace(plate(), zones=(Zone(LoopHole("z1", rectangle(30.0, 10.0)), 6.0),))
    wall = only([one(raw(100.0))])
    peak = only([one(raw(100.0, zone=zone), met=met)], part=part)
    assert peak.zone == ("z1" if zone == 0 else "")
    assert peak.place == f"{wall.place}{ends}"
