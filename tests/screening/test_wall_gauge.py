"""Thin walls with the elements across them, and the same mesh with plain bilinear quads."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from screenapp.mechanics.recovery import recover
from screenapp.mechanics.solve import solve
from screenapp.mechanics.wall_bending import bending_overstiffness
from screenapp.meshing.across import elements_between
from screenapp.meshing.service import Mesher
from screenapp.model.errors import Cancelled
from screenapp.model.findings import CaseFindings, Estimate, Fields, Peak, PlainLoss
from screenapp.model.part import Case, FixedSupport, ForceLoad, LineLoad, Part, PrescribedSupport
from screenapp.model.part_json import read_part
from screenapp.model.progress import Progress, Step
from screenapp.model.shape import shape_of
from screenapp.screening.passes import Pass
from screenapp.screening.plain_quads import plain_losses
from screenapp.screening.screen import screen
from screenapp.screening.wall_gauge import expected_gauge, thin_walls, wall_gauges
from tests.mechanics.structured import Structured, rectangle

SAMPLES = Path(__file__).parents[2] / "samples"


@pytest.fixture(scope="module")
def mesher() -> Iterator[Mesher]:
    with Mesher() as warm:
        yield warm


@pytest.mark.parametrize(("along", "across"), [(20, 1), (10, 2), (24, 3), (25, 5)])
def test_a_strip_of_equal_rectangles_is_counted_and_measured(along: int, across: int) -> None:
    strip = rectangle(100.0, 10.0, along, across)
    (gauge,) = wall_gauges(strip.part, strip.shape, strip.mesh)
    assert set(gauge.between) == {"e1", "e3"}
    assert gauge.width == pytest.approx(10.0, rel=1e-12)
    assert gauge.layers == across
    aspect = (100.0 / along) / (10.0 / across)
    assert gauge.aspect == pytest.approx(aspect, rel=1e-9)
    assert gauge.stiffness == pytest.approx(bending_overstiffness(0.3, aspect, across), rel=1e-9)


def test_the_chain_runs_from_one_face_to_the_other() -> None:
    strip = rectangle(100.0, 10.0, 20, 4)
    (wall,) = thin_walls(strip.shape)
    (chain,) = elements_between(strip.mesh, strip.shape, [wall])
    heights = strip.mesh.nodes[strip.mesh.quads[chain, 8], 1]
    assert sorted(heights) == pytest.approx([1.25, 3.75, 6.25, 8.75])
    assert len({round(float(x), 6) for x in strip.mesh.nodes[strip.mesh.quads[chain, 8], 0]}) == 1


def test_walls_of_a_part_are_narrowest_first_and_each_told_once(mesher: Mesher) -> None:
    part = read_part(SAMPLES / "pump-bracket.part.json")
    findings = screen(part, mesher)
    walls = findings.mesh.walls
    assert walls[0].width == pytest.approx(12.0, rel=1e-6)
    assert walls[0].place == "edge e1 and hole h3"
    widths = [wall.width for wall in walls]
    assert widths == sorted(widths)
    assert all(wall.layers >= part.mesh.across for wall in walls)
    assert walls[0].layers == findings.mesh.across
    assert [loss.case for loss in findings.mesh.plain] == ["k1", "k2"]
    assert "comparing" in findings.timing


def test_a_fast_screening_leaves_the_comparison_out(mesher: Mesher) -> None:
    findings = screen(read_part(SAMPLES / "hose-clip.part.json"), mesher, fast=True)
    assert findings.mesh.plain == ()
    assert findings.mesh.walls != ()


def test_the_comparison_can_be_cancelled(mesher: Mesher) -> None:
    steps: list[Step] = []

    def stop() -> bool:
        return bool(steps) and steps[-1].stage == "comparing with plain quads"

    with pytest.raises(Cancelled):
        screen(read_part(SAMPLES / "hose-clip.part.json"), mesher, Progress(steps.append, stop))


def test_what_is_expected_before_any_mesh_follows_the_wishes() -> None:
    part = read_part(SAMPLES / "pump-bracket.part.json")
    shape = shape_of(part)
    plain = expected_gauge(part, shape)
    assert plain is not None
    assert (plain.layers, plain.width) == (3, pytest.approx(12.0))
    assert plain.stiffness == pytest.approx(bending_overstiffness(0.3, 1.0, 3), rel=1e-12)
    finer = expected_gauge(replace(part, mesh=replace(part.mesh, size=1.5)), shape)
    assert finer is not None
    assert finer.layers == 8


def cantilever(along: int, across: int, element: str) -> tuple[Structured, Part, Pass]:
    """A strip held at its left end and pushed at its right one, solved."""
    strip = rectangle(100.0, 10.0, along, across)
    part = replace(
        strip.part,
        supports=(FixedSupport("s1", "e4"),),
        cases=(Case("k1", "Bend", (LineLoad("l1", "e2", 0.0, -10.0),)),),
        mesh=replace(strip.part.mesh, element=element),
    )
    solution = solve(part, strip.shape, strip.mesh)
    fields = Fields(strip.mesh, solution, recover(part, strip.shape, strip.mesh, solution))
    return strip, part, Pass(part, strip.shape, fields)


def losses_of(part: Part, strip: Structured, this: Pass) -> PlainLoss:
    """The comparison, with a settled peak on the upper edge near the hold."""
    at = (40.0, 10.0)
    peak = Peak("von_mises", Estimate(100.0, 99.0, 101.0, "settled"), at, "e3", "edge e3")
    solution = this.fields.solution
    case = CaseFindings(
        "k1",
        "Bend",
        (peak,),
        Estimate(1.0, 1.0, 1.0, "settled"),
        (100.0, 0.0),
        (0.0, -100.0, 0.0),
        solution.reactions[0],
        solution.balance[0],
    )
    (loss,) = plain_losses(part, strip.shape, this, (case,))
    return loss


def test_a_slender_strip_loses_what_the_closed_form_says() -> None:
    """Of a cantilever whose own shear does not count, stiffness is that of bending alone: plain
    quads are R times too stiff, so they lose 1 - 1/R; the hold's end effect is a few per cent."""
    strip, part, this = cantilever(10, 2, "quad9")
    loss = losses_of(part, strip, this)
    ratio = bending_overstiffness(0.3, 2.0, 2)
    assert loss.displacement == pytest.approx(1.0 - 1.0 / ratio, rel=0.05)
    assert loss.energy == pytest.approx(loss.displacement, rel=0.02)
    assert loss.peak is not None
    assert loss.peak > 0.1


def test_a_part_of_plain_quads_is_compared_with_nine_node_ones() -> None:
    """Whichever of the two the part is made of, the comparison is the same."""
    as_good = losses_of(*_pick(cantilever(20, 2, "quad9")))
    as_plain = losses_of(*_pick(cantilever(20, 2, "quad4")))
    assert as_plain.displacement == pytest.approx(as_good.displacement, rel=1e-9)
    assert as_plain.energy == pytest.approx(as_good.energy, rel=1e-9)


def _pick(made: tuple[Structured, Part, Pass]) -> tuple[Part, Structured, Pass]:
    strip, part, this = made
    return part, strip, this


def test_energy_of_moved_supports_counts() -> None:
    """A strip that is stretched by its support stores energy though no load acts."""
    strip = rectangle(100.0, 10.0, 20, 2)
    part = replace(
        strip.part,
        supports=(FixedSupport("s1", "e4"), PrescribedSupport("s2", "e2", 0.0, -1.0)),
        cases=(Case("k1", "Moved", (ForceLoad("l1", "e2", 0.0, 0.0),)),),
    )
    solution = solve(part, strip.shape, strip.mesh)
    fields = Fields(strip.mesh, solution, recover(part, strip.shape, strip.mesh, solution))
    loss = losses_of(part, strip, Pass(part, strip.shape, fields))
    assert loss.energy < -0.02  # moved by as much, what is too stiff stores more
    assert np.isfinite(loss.displacement)
