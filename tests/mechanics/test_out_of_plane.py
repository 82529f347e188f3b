"""In plane strain the stress across the wall is each zone's own: σz = ν (σx + σy) by its ν."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import meshio
import numpy as np
import pytest

from screenapp.model.findings import Fields
from screenapp.model.out_of_plane import out_of_plane_ratio, out_of_plane_ratios
from screenapp.model.part import Case, ForceLoad, Part, RollerSupport
from screenapp.report.picture_field import measured
from screenapp.report.vtu import write_vtu
from screenapp.screening.passes import Pass
from screenapp.window.fields import stress_of
from tests.mechanics.zoned import Solved, pad, solved, steel, strip

SOFT, HARD = 0.45, 0.1


def pulled() -> Part:
    """A strip of two materials in series, pulled along x; free to contract."""
    part = strip(
        40.0,
        10.0,
        (pad([(20.0, 0.0), (40.0, 0.0), (40.0, 10.0), (20.0, 10.0)], material="hard"),),
        (RollerSupport("s1", "e4", 0.0), RollerSupport("s2", "c1", 90.0)),
        (Case("k1", "pull", (ForceLoad("l1", "e2", 2000.0, 0.0),)),),
        (steel(SOFT, name="soft"), steel(HARD, name="hard")),
    )
    return replace(part, wall=replace(part.wall, state="plane strain"))


@pytest.fixture(scope="module")
def strained() -> Solved:
    return solved(pulled(), size=2.0)


def fields(of: Solved) -> Fields:
    return Fields(of.mesh, of.solution, of.stress)


def expected(poisson: float) -> float:
    """100 MPa along x and ν 100 MPa across the wall."""
    return 100.0 * float(np.sqrt(1.0 - poisson + poisson**2))


def test_ratios_by_zone() -> None:
    part = pulled()
    assert out_of_plane_ratios(part).tolist() == [SOFT, HARD]
    assert out_of_plane_ratio(part, np.array([[0], [-1]])).tolist() == [[HARD], [SOFT]]
    stressed = replace(part, wall=replace(part.wall, state="plane stress"))
    assert out_of_plane_ratios(stressed).tolist() == [0.0, 0.0]


def far_from_the_step(of: Solved) -> tuple[np.ndarray, np.ndarray]:
    """Numbers of the field in the wall and in the zone, away from step and support."""
    x = of.mesh.nodes[of.mesh.field_nodes, 0]
    wall = (of.mesh.field_zones < 0) & (x < 8.0) & (x > 3.0)
    zone = (of.mesh.field_zones == 0) & (x > 34.0) & (x < 38.0)
    return np.flatnonzero(wall), np.flatnonzero(zone)


def test_everything_that_shows_von_mises_takes_the_ratio_of_its_zone(
    strained: Solved, tmp_path: Path
) -> None:
    part, found = strained.part, fields(strained)
    write_vtu(part, found, tmp_path / "fields.vtu")
    written = meshio.read(tmp_path / "fields.vtu").point_data["von Mises k1"]
    painted = measured(part, found, 0, "von_mises")
    shown = np.empty(len(painted))
    shown[strained.mesh.field_quads] = stress_of(found, 0, "von_mises", part)
    wall, zone = far_from_the_step(strained)
    for values in (written, painted, shown):
        assert values[wall] == pytest.approx(expected(SOFT), rel=0.02)
        assert values[zone] == pytest.approx(expected(HARD), rel=0.02)
    assert expected(HARD) > 1.05 * expected(SOFT)


def test_peaks_levels_and_readings_do_too(strained: Solved) -> None:
    this = Pass(strained.part, strained.shape, fields(strained))
    read = this.read(np.array([(5.0, 5.0), (36.0, 5.0), (36.0, 0.0)]))
    assert read.zones.tolist() == [[-1, 0, 0]]
    assert this.level("von_mises", 0) > 0.99 * expected(HARD)
    # the recovered stress is as good as the elements' own: a doubt by another ν would be 5 MPa
    wall, zone = far_from_the_step(strained)
    assert this.doubt[0][np.concatenate([wall, zone])].max() < 2.0
