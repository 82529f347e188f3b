"""The dimensioned drawing of the record: which sizes it shows, and that they can be read."""

from __future__ import annotations

import re
from dataclasses import replace
from pathlib import Path
from xml.etree import ElementTree

import numpy as np
import pytest

from screenapp.model.part import CircleHole, Corner, Edge, Loop, Part, SlotHole, Zone
from screenapp.model.part_json import read_part
from screenapp.model.pattern import BoltCircle, GridPattern, RowPattern
from screenapp.model.regions import shape_with_zones
from screenapp.report.dimensioned import TALL, WIDE, dimensioned_svg
from screenapp.report.drawing import _beside, _Paper
from tests.model.plates import plate

SAMPLES = sorted((Path(__file__).parents[2] / "samples").glob("*.part.json"))
TAG = "{http://www.w3.org/2000/svg}"


def drawn(part: Part) -> ElementTree.Element:
    return ElementTree.fromstring(dimensioned_svg(part, shape_with_zones(part)))


def texts(root: ElementTree.Element) -> list[str]:
    return [(e.text or "").replace("\u2009", "") for e in root.iter(f"{TAG}text")]


def seams(root: ElementTree.Element) -> list[tuple[np.ndarray, np.ndarray]]:
    """Lower and upper corner of the upright box about each text [px]."""
    found = []
    for polygon in root.iter(f"{TAG}polygon"):
        if polygon.attrib["class"] == "seam":
            points = np.array(re.findall(r"([\d.-]+),([\d.-]+)", polygon.attrib["points"]), float)
            found.append((points.min(axis=0), points.max(axis=0)))
    return found


@pytest.mark.parametrize("path", SAMPLES, ids=lambda p: p.name.split(".")[0])
def test_every_sample_shows_its_size_and_no_text_lies_on_another(path: Path) -> None:
    part = read_part(path)
    root = drawn(part)
    x0, y0, x1, y1 = shape_with_zones(part).bounds
    written = texts(root)
    for size in (x1 - x0, y1 - y0):
        assert f"{size:.4g}" in written, (size, written)
    for hole in part.holes:
        if isinstance(hole, CircleHole):
            assert any(t.endswith(f"⌀{hole.diameter:g}") for t in written), hole
    width, height = map(float, root.attrib["viewBox"].split()[2:])
    assert width <= WIDE + 1.0
    assert height <= TALL + 1.0
    boxes = seams(root)
    assert len(boxes) == len(written) >= 3
    for k, (low, high) in enumerate(boxes):
        assert (low > 0.0).all()
        assert (high < (width, height)).all()
        for other_low, other_high in boxes[k + 1 :]:
            assert not ((low < other_high) & (other_low < high)).all()


def test_alike_is_told_once_with_its_number() -> None:
    """Plate 100 × 50 of the tests, with corners and holes of several kinds."""
    part = plate()
    assert part.outline is not None
    a, b, c, d = part.outline.corners
    corners = (replace(a, round=5.0), replace(b, round=5.0), replace(c, chamfer=4.0), d)
    part = replace(
        part,
        outline=Loop(corners, part.outline.edges),
        holes=(
            CircleHole("h1", (20.0, 25.0), 6.0),
            CircleHole("h2", (40.0, 25.0), 6.0),
            SlotHole("h3", (75.0, 20.0), 20.0, 8.0),
        ),
        zones=(Zone(CircleHole("z1", (20.0, 25.0), 14.0), 6.0),),
    )
    written = texts(drawn(part))
    for text in ("2 × ⌀6", "2 × R5", "4 × 45°", "zone ⌀14", "20", "40", "25", "8"):
        assert text in written, text
    assert written.count("2 × ⌀6") == 1


@pytest.mark.parametrize(
    ("pattern", "wanted"),
    [
        (RowPattern(4, 12.0), ["4 × ⌀5", "3 × 12"]),
        (GridPattern(3, 2, 11.0, 9.0), ["6 × ⌀5", "2 × 11", "9"]),
    ],
)
def test_the_pitch_of_a_pattern_is_shown(pattern: RowPattern, wanted: list[str]) -> None:
    part = replace(plate(), holes=(CircleHole("h1", (20.0, 20.0), 5.0, pattern),))
    written = texts(drawn(part))
    assert set(wanted) <= set(written), written


def test_a_bolt_circle_is_drawn_with_its_diameter() -> None:
    part = replace(plate(), holes=(CircleHole("h1", (50.0, 25.0), 5.0, BoltCircle(6, 15.0)),))
    root = drawn(part)
    assert {"6 × ⌀5", "⌀30"} <= set(texts(root))
    (circle,) = root.iter(f"{TAG}circle")
    scale = float(circle.attrib["r"]) / 15.0
    assert 4.0 < scale < WIDE / 100.0


def test_what_an_expression_gives_and_inches_are_written_as_shown() -> None:
    part = replace(plate(), display_units="in-lbf-ksi")
    written = texts(drawn(part))
    assert "3.937" in written, "100 mm / 25.4"


def test_hundreds_of_sizes_stay_readable() -> None:
    """Sixty holes of different sizes: what finds no room is left out, nothing overlaps."""
    holes = tuple(
        CircleHole(f"h{k}", (8.0 + 7.5 * (k % 12), 5.0 + 8.0 * (k // 12)), 2.0 + 0.05 * k)
        for k in range(60)
    )
    part = plate()
    assert part.outline is not None
    rounds = tuple(replace(c, round=1.0 + k) for k, c in enumerate(part.outline.corners))
    part = replace(part, holes=holes, outline=Loop(rounds, part.outline.edges))
    boxes = seams(drawn(part))
    assert len(boxes) > 20
    for k, (low, high) in enumerate(boxes):
        assert not any(((low < b) & (a < high)).all() for a, b in boxes[k + 1 :])


def test_a_part_of_one_arc_and_no_hole_is_drawn() -> None:
    half = Loop(
        (Corner("c1", (0.0, 0.0)), Corner("c2", (40.0, 0.0))),
        (Edge("e1"), Edge("e2", (20.0, 20.0))),
    )
    written = texts(drawn(replace(plate(), outline=half, holes=())))
    assert {"40", "20", "R20"} <= set(written)


def test_numbers_at_peaks_do_not_lie_on_one_another() -> None:
    """Six places within a few pixels, two of them with several numbers."""
    paper = _Paper(shape_with_zones(plate()))
    names = {(100 + 6 * k, 100 + 3 * (k % 2)): ["1", "12"][: 1 + k % 2] for k in range(6)}
    written = [ElementTree.fromstring(text) for text in _beside(names, paper)]
    assert len(written) == 6
    boxes = []
    for text in written:
        half = 3.3 * len(text.text or "")
        x, y = float(text.attrib["x"]), float(text.attrib["y"])
        boxes.append((x - half, y - 9.0, x + half, y))
    for k, (x0, y0, x1, y1) in enumerate(boxes):
        assert not any(x0 < c and a < x1 and y0 < d and b < y1 for a, b, c, d in boxes[k + 1 :])
