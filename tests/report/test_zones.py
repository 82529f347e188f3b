"""The record of a part with zones: its page, fields and picture tell what changes where."""

from __future__ import annotations

import io
from dataclasses import replace
from datetime import UTC, datetime
from pathlib import Path

import meshio
import numpy as np
import pytest
from matplotlib import image

from screenapp.meshing.service import Mesher
from screenapp.model.findings import Findings
from screenapp.model.part import Case, FixedSupport, ForceLoad, Part, StressLimit
from screenapp.model.regions import shape_with_zones
from screenapp.model.shape import Shape
from screenapp.report.page import record_page
from screenapp.report.picture import part_picture
from screenapp.report.picture_field import governing_field
from screenapp.report.vtu import write_vtu
from screenapp.screening.screen import screen
from tests.mechanics.zoned import disc, pad, steel, strip

Screened = tuple[Part, Shape, Findings]


@pytest.fixture(scope="module")
def padded() -> Screened:
    weak = replace(steel(name="weak", modulus=70_000.0), proof_stress=90.0)
    part = strip(
        60.0,
        30.0,
        (
            replace(disc((40.0, 15.0), 16.0, 6.0), name="boss", sides="one"),
            pad([(-5.0, -5.0), (10.0, -5.0), (10.0, 40.0), (-5.0, 40.0)], None, "weak", "z2"),
        ),
        (FixedSupport("s1", "e4"),),
        (Case("k1", "pull", (ForceLoad("l1", "e2", 1500.0, 0.0),)),),
        (steel(), weak),
    )
    part = replace(part, limits=(StressLimit("g1"),))
    with Mesher() as mesher:
        return part, shape_with_zones(part), screen(part, mesher, fast=True)


def test_the_page_names_every_zone_with_its_wall(padded: Screened) -> None:
    part, _, findings = padded
    page = record_page(part, findings, datetime(2026, 1, 2, tzinfo=UTC))
    assert "Zone z1 (boss) is 6 mm thick (on one side only), of steel. Its form: " in page
    assert "Zone z2 is 2 mm thick, of weak: E 70000 MPa" in page
    assert page.count('class="zone"') == 2 * len(padded[1].interfaces), "in both drawings"
    assert "middle plane" in page


def test_fields_have_a_value_on_either_hand(padded: Screened, tmp_path: Path) -> None:
    part, _, findings = padded
    assert findings.last is not None
    mesh = findings.last.mesh
    write_vtu(part, findings.last, tmp_path / "fields.vtu")
    read = meshio.read(tmp_path / "fields.vtu")
    assert len(read.points) == len(mesh.field_nodes) > mesh.n_nodes
    assert set(read.cell_data["zone"][0]) == {0, 1, 2}
    assert np.isfinite(read.point_data["von Mises k1"]).all()


def test_utilisation_is_painted_by_the_material_that_is_there(padded: Screened) -> None:
    part, _, findings = padded
    field = governing_field(part, findings)
    assert findings.last is not None
    assert field.values.shape == findings.last.mesh.quads.shape
    assert "156.7 MPa, 60 MPa" in field.title


def test_lines_between_zones_are_drawn_in_the_picture(padded: Screened) -> None:
    part, shape, findings = padded
    undivided = replace(shape, interfaces=())
    with_lines, without = (
        np.rint(255.0 * image.imread(io.BytesIO(part_picture(part, s, findings)))[..., :3])
        for s in (shape, undivided)
    )
    changed = (np.abs(with_lines - without).max(axis=2) > 60).sum()
    assert 300 < changed < 0.05 * with_lines.shape[0] * with_lines.shape[1]
