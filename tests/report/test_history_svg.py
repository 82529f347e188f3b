"""The history in the record: a drawing for what is not settled and for what governs."""

from __future__ import annotations

import math
from dataclasses import replace
from datetime import UTC, datetime
from xml.etree import ElementTree

import pytest

from screenapp.model.findings import Estimate, Peak
from screenapp.model.history_figure import peak_figure
from screenapp.report.history_svg import history_svg
from screenapp.report.page import record_page
from tests.window import fabricate as made

SVG = "{http://www.w3.org/2000/svg}"


def peak(trust: str, place: str = "hole h1, 90°", at: tuple[float, float] = (0.0, 1.0)) -> Peak:
    """A peak with three passes."""
    estimate = Estimate(103.0, 102.0, 104.0, "settled")
    if trust == "rising":
        estimate = Estimate(103.0, 103.0, math.inf, "rising")
    return Peak(
        "von_mises",
        estimate,
        at,
        "h1",
        place,
        history=(90.0, 100.0, 103.0),
        sizes=(4.0, 2.0, 1.0),
        rate=0.1,
        allowed=2.06,
    )


@pytest.mark.parametrize(("trust", "growth", "band"), [("settled", 0, 1), ("rising", 1, 0)])
def test_the_drawing_is_well_formed_and_shows_what_there_is(
    trust: str, growth: int, band: int
) -> None:
    figure = peak_figure(peak(trust, 'edge "e1" & <hole>'), "mm-N-MPa")
    assert figure is not None
    root = ElementTree.fromstring(history_svg(figure))
    assert len(root.findall(f"{SVG}circle")) == 3
    assert len([e for e in root if e.get("class") == "growth"]) == growth
    assert len([e for e in root if e.get("class") == "band"]) == band
    assert root.get("aria-label") == figure.words
    wide, tall = (float(v) for v in root.get("viewBox", "").split()[2:])
    for circle in root.findall(f"{SVG}circle"):
        assert 0.0 <= float(circle.get("cx", "-1")) <= wide
        assert 0.0 <= float(circle.get("cy", "-1")) <= tall


def test_the_page_draws_what_governs_and_what_is_not_settled_alone() -> None:
    part = made.plate()
    found = made.findings(part, "k" * 8, made.ring(16, 4))
    first = found.cases[0]
    others = (peak("settled", at=(5.0, 5.0)), peak("rising", at=(6.0, 6.0)))
    cases = (replace(first, peaks=(first.peaks[0], *others)), *found.cases[1:])
    page = record_page(
        part, replace(found, cases=cases, readings=()), datetime(2026, 1, 1, tzinfo=UTC)
    )
    assert page.count('<svg xmlns="http://www.w3.org/2000/svg" class="history settled"') == 2
    assert page.count('<svg xmlns="http://www.w3.org/2000/svg" class="history rising"') == 1
    assert "grows as size^−0.10" in page
