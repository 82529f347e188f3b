"""The record's picture: what it paints, what it says, that no text breaks it."""

from __future__ import annotations

import dataclasses
import io
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest
from matplotlib import image

from screenapp.meshing.service import Mesher
from screenapp.model.findings import Findings
from screenapp.model.part import DisplacementLimit, Part
from screenapp.model.part_json import read_part
from screenapp.model.shape import Shape, shape_of
from screenapp.report.picture import part_picture
from screenapp.report.picture_field import governing_field
from screenapp.screening.screen import screen

SAMPLES = Path(__file__).parents[2] / "samples"
Screened = tuple[Part, Shape, Findings]


@pytest.fixture(scope="module")
def bracket() -> Screened:
    part = read_part(SAMPLES / "pump-bracket.part.json")
    with Mesher() as mesher:
        return part, shape_of(part), screen(part, mesher, fast=True)


def pixels(screened: Screened) -> np.ndarray:
    """Red, green, blue of the picture, 0 to 255, (height, width, 3)."""
    read = image.imread(io.BytesIO(part_picture(*screened)), format="png")
    return np.rint(255.0 * read[..., :3]).astype(int)


def test_it_paints_the_limit_that_the_verdict_rests_on(bracket: Screened) -> None:
    part, _, findings = bracket
    field = governing_field(part, findings)
    rests_on = findings.governing
    assert rests_on is not None
    names = {case.case: case.name for case in findings.cases}
    assert field.case == names[rests_on.case]
    assert field.at == rests_on.at
    assert field.values.max() == pytest.approx(rests_on.utilisation.value, rel=0.02)
    assert rests_on.place in field.detail


def test_a_displacement_that_governs_is_painted(bracket: Screened) -> None:
    part, _, findings = bracket
    limit = DisplacementLimit("g9", 1.0)
    uses = [dataclasses.replace(f, limit="g9") for f in findings.limits[:1]]
    field = governing_field(
        dataclasses.replace(part, limits=(limit,)),
        dataclasses.replace(findings, limits=tuple(uses)),
    )
    assert field.title == "Displacement, mm"
    case = next(c for c in findings.cases if c.case == uses[0].case)
    assert field.values.max() == pytest.approx(case.displacement_max.value)
    assert field.at == case.displacement_at


def test_without_limits_it_paints_the_stress_of_the_worst_case(bracket: Screened) -> None:
    part, _, findings = bracket
    field = governing_field(part, dataclasses.replace(findings, limits=()))
    tops = {c.name: c.peaks[0].estimate.value for c in findings.cases}
    assert field.case == max(tops, key=lambda name: tops[name])
    assert field.title == "von Mises stress, MPa"


def test_findings_without_fields_are_refused(bracket: Screened) -> None:
    part, shape, findings = bracket
    with pytest.raises(ValueError, match="without fields"):
        part_picture(part, shape, dataclasses.replace(findings, fields=()))


def test_the_part_is_painted_over_its_area(bracket: Screened) -> None:
    part, shape, findings = bracket
    seen = pixels((part, shape, findings))[200:-80, :-240]
    painted = np.abs(seen - (254, 254, 251)).max(axis=-1) > 4
    # the part reaches from the first to the last painted column
    columns = np.flatnonzero(painted.any(axis=0))
    scale = (columns[-1] - columns[0]) / (shape.bounds[2] - shape.bounds[0])
    # the frame and letters of the label lie on the paper: a few percent of the part at most
    assert 0.99 < painted.sum() / (shape.area * scale**2) < 1.04


HOSTILE = [
    "$\\frac{1}{",
    "<script>alert(1)</script>",
    "a\"b'c",
    "two\nlines\x00\x1b[31m",
    "梁 ▦ 🙂",
    "n" * 5000,
    "",
]


@pytest.mark.parametrize("text", HOSTILE)
def test_no_text_breaks_it(bracket: Screened, text: str) -> None:
    part, shape, findings = bracket
    cases = tuple(dataclasses.replace(c, name=text) for c in findings.cases)
    named = dataclasses.replace(part, title=text)
    seen = pixels((named, shape, dataclasses.replace(findings, cases=cases, headline=text)))
    assert seen.shape[1] == 1600
    assert (seen[:, -8:] > 240).all(), "nothing runs over the right rim"


def test_same_findings_same_bytes(bracket: Screened) -> None:
    assert part_picture(*bracket) == part_picture(*bracket)


def test_it_needs_neither_qt_nor_a_display() -> None:
    code = (
        "import sys, screenapp.report.record, screenapp.cli;"
        "sys.exit(any(m.split('.')[0] in ('PySide6', 'pyqtgraph') for m in sys.modules))"
    )
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0
