"""The cuts of a record: every place with its stresses and bands, as CSV and in the PDF."""

from __future__ import annotations

import csv
import dataclasses
import io
import math
from datetime import UTC, datetime
from pathlib import Path

import pytest
from pypdf import PdfReader

from screenapp.meshing.service import Mesher
from screenapp.model.cut_figure import cut_figure
from screenapp.model.findings import CUT_QUANTITIES, Estimate, Findings
from screenapp.model.part import Cut, Part
from screenapp.model.part_json import read_part
from screenapp.report.page import record_page
from screenapp.report.pdf import record_pdf
from screenapp.report.tables import cuts_csv
from screenapp.screening.screen import screen

SAMPLE = Path(__file__).parents[2] / "samples" / "pump-bracket.part.json"


@pytest.fixture(scope="module")
def screened() -> tuple[Part, Findings]:
    part = read_part(SAMPLE)
    cut = Cut("q9", "Across, the wall", (-10.0, 100.0), (60.0, 100.0))
    part = dataclasses.replace(part, cuts=(cut,))
    with Mesher() as mesher:
        return part, screen(part, mesher, fast=True)


def rows_of(findings: Findings) -> list[dict[str, str]]:
    return list(csv.DictReader(io.StringIO(cuts_csv(findings))))


def test_every_place_of_every_cut_has_a_row(screened: tuple[Part, Findings]) -> None:
    part, findings = screened
    rows = rows_of(findings)
    assert len(findings.cuts) == len(part.cases)
    places = [
        (cut, span, i)
        for cut in findings.cuts
        for span in cut.spans
        for i in range(len(span.distances))
    ]
    assert len(rows) == len(places) > 0
    names = {case.case: case.name for case in findings.cases}
    for row, (cut, span, i) in zip(rows, places, strict=True):
        assert (row["cut"], row["case"], row["trust"]) == (cut.name, names[cut.case], cut.trust)
        at = float(row["x_mm"]), float(row["y_mm"])
        assert math.dist(cut.start, at) == pytest.approx(float(row["distance_mm"]))
        assert at[1] == pytest.approx(100.0)
        for q in CUT_QUANTITIES:
            value, low, high = (float(row[f"{q}{end}_MPa"]) for end in ("", "_low", "_high"))
            assert value == span.values[q][i]
            assert high - low == pytest.approx(2.0 * span.half_bands[q][i])


def test_a_band_without_bound_is_empty(screened: tuple[Part, Findings]) -> None:
    _, findings = screened
    cut = findings.cuts[0]
    endless = {q: tuple(math.inf for _ in cut.spans[0].distances) for q in CUT_QUANTITIES}
    span = dataclasses.replace(cut.spans[0], half_bands=endless)
    odd = dataclasses.replace(findings, cuts=(dataclasses.replace(cut, spans=(span,)),))
    rows = rows_of(odd)
    assert rows
    for row in rows:
        assert row["normal_low_MPa"] == row["von_mises_high_MPa"] == ""
        assert math.isfinite(float(row["normal_MPa"]))


def test_the_pdf_draws_the_cut_and_says_what_it_gives(screened: tuple[Part, Findings]) -> None:
    part, findings = screened
    when = datetime(2026, 1, 2, tzinfo=UTC)
    data = record_pdf(part, findings.part_sha256, record_page(part, findings, when), when)
    text = " ".join("".join(s.extract_text() for s in PdfReader(io.BytesIO(data)).pages).split())
    for words in ("Across, the wall", "Section forces", "Full line: stress across the cut"):
        assert words in text


def test_section_forces_have_their_bands_and_rounding_is_nought(
    screened: tuple[Part, Findings],
) -> None:
    part, findings = screened
    cut = findings.cuts[0]
    applied = cut.applied
    assert applied is not None
    known = Estimate(-2453.2, -2460.7, -2445.7, "settled")
    odd = dataclasses.replace(
        cut,
        normal=known,
        shear=Estimate(0.0469, -7.46, 7.56, "settled"),
        moment=Estimate(-811935.0, -812749.0, -811121.0, "settled"),
        applied=dataclasses.replace(applied, normal=-2453.0, shear=2.1e-9),
    )
    words = " ".join(cut_figure(odd, part.display_units).sentences)
    for told in ("N −2453 ± 8 N (−2453 N)", "V 0 ± 8 N (0 N)", "M −811.9 ± 0.9 N·m ("):
        assert told in words
