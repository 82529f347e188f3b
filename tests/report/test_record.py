"""The record of a screening: every file of it read back by somebody else's reader."""

from __future__ import annotations

import csv
import dataclasses
import io
import json
import re
import unicodedata
import xml.etree.ElementTree as ElementTree
from collections.abc import Iterator
from html.parser import HTMLParser
from pathlib import Path

import meshio
import numpy as np
import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.findings import READING_QUANTITIES, Estimate, Findings
from screenapp.model.part import Case, JobDetails, Part
from screenapp.model.part_json import part_sha256, read_part
from screenapp.model.schema_check import schema_faults
from screenapp.model.shape import shape_of
from screenapp.model.solution import von_mises
from screenapp.report.drawing import part_svg
from screenapp.report.record import record_stem, write_record
from screenapp.report.verdict_table import verdict_table
from screenapp.screening.screen import screen

SAMPLES = Path(__file__).parents[2] / "samples"
SOURCE = SAMPLES / "pump-bracket.part.json"
VOID = {"meta", "br", "link", "img", "hr", "input", "circle", "path"}

HOSTILE = "<script>alert(1)</script> \"q\" 's' & a,b;c\nline two\r\n=1+1 梁 🙂 " + "long " * 80


class Page(HTMLParser):
    """Reads a page, checks that its tags close, and keeps its text and what it would load."""

    def __init__(self, text: str) -> None:
        super().__init__(convert_charrefs=True)
        self.open: list[str] = []
        self.text: list[str] = []
        self.tags: set[str] = set()
        self.loads: list[str] = []
        self.feed(text)
        self.close()
        assert self.open == [], "every tag is closed"

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.add(tag)
        self.loads += [v or "" for k, v in attrs if k in ("src", "href", "data", "action")]
        assert not any(k.startswith("on") for k, _ in attrs)
        if tag not in VOID:
            self.open.append(tag)

    def handle_endtag(self, tag: str) -> None:
        if tag not in VOID:
            assert self.open.pop() == tag

    def handle_data(self, data: str) -> None:
        self.text.append(data)


@pytest.fixture(scope="module")
def screened() -> Iterator[tuple[Part, Findings]]:
    part = read_part(SOURCE)
    with Mesher() as mesher:
        yield part, screen(part, mesher)


@pytest.fixture(scope="module")
def folder(screened: tuple[Part, Findings], tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("record") / "new" / "deeper"
    write_record(*screened, folder, SOURCE)
    return folder


def hostile(part: Part, findings: Findings) -> tuple[Part, Findings]:
    """The same with every text that a user can type replaced by an unpleasant one."""
    material = dataclasses.replace(part.materials[0], name=HOSTILE, source=HOSTILE)
    cases = tuple(Case(c.id, HOSTILE, c.loads) for c in part.cases)
    named = dataclasses.replace(
        part,
        title=HOSTILE,
        notes=HOSTILE,
        record=JobDetails(HOSTILE, HOSTILE, HOSTILE, HOSTILE, HOSTILE),
        materials=(material,),
        wall=dataclasses.replace(part.wall, material=HOSTILE),
        cases=cases,
        readings=tuple(dataclasses.replace(p, name=HOSTILE) for p in part.readings),
    )
    found = dataclasses.replace(
        findings,
        headline=HOSTILE,
        reasons=(HOSTILE,),
        cautions=(HOSTILE,),
        cases=tuple(dataclasses.replace(c, name=HOSTILE) for c in findings.cases),
        readings=tuple(dataclasses.replace(r, name=HOSTILE) for r in findings.readings),
    )
    return named, found


# --- files ----------------------------------------------------------------------------------


def test_the_files_and_their_names(folder: Path) -> None:
    endings = ("html", "result.json", "part.json", "peaks.csv", "readings.csv", "vtu", "png")
    endings += ("pdf", "cuts.csv")
    assert {p.name for p in folder.iterdir()} == {f"pump-bracket.{e}" for e in endings}
    assert record_stem(Path("a/x.part.json")) == "x"
    assert record_stem(Path("a/x.y.json")) == "x.y"


def test_the_part_in_the_record_is_the_part(screened: tuple[Part, Findings], folder: Path) -> None:
    part, findings = screened
    again = read_part(folder / "pump-bracket.part.json")
    assert again == part
    record = json.loads((folder / "pump-bracket.result.json").read_text(encoding="utf-8"))
    assert record["part_sha256"] == part_sha256(again) == findings.part_sha256


def test_the_result_record_keeps_its_schema(folder: Path) -> None:
    text = (folder / "pump-bracket.result.json").read_text(encoding="utf-8")
    record = json.loads(text)
    assert schema_faults(record, "result.schema.json") == ()
    assert "NaN" not in text
    assert "Infinity" not in text


def test_two_records_of_one_part_differ_in_date_and_timing_only(tmp_path: Path) -> None:
    part = read_part(SAMPLES / "hose-clip.part.json")
    for name in ("one", "two"):
        with Mesher() as mesher:
            findings = screen(part, mesher, fast=True)
        write_record(part, findings, tmp_path / name, SAMPLES / "hose-clip.part.json")
    for file in (tmp_path / "one").iterdir():
        one, two = file.read_bytes(), (tmp_path / "two" / file.name).read_bytes()
        if file.suffix == ".html":
            one, two = (re.sub(rb"\d{4}-\d\d-\d\d \d\d:\d\d", b"", page) for page in (one, two))
        if file.suffix == ".pdf":
            continue  # its date is packed: tests/report/test_pdf.py
        if file.name.endswith("result.json"):
            one, two = (re.sub(rb'"timing": \{[^}]*\}', b"", text) for text in (one, two))
        assert one == two, file.name


# --- page and drawing -----------------------------------------------------------------------


def test_the_page_stands_alone(folder: Path, screened: tuple[Part, Findings]) -> None:
    part, findings = screened
    text = (folder / "pump-bracket.html").read_text(encoding="utf-8")
    page = Page(text)
    assert all(x.startswith("data:image/png;base64,") for x in page.loads), "nothing from elsewhere"
    assert len(page.loads) == len(findings.cases), "a picture for each case"
    assert "script" not in page.tags
    assert "url(" not in text
    assert "@import" not in text
    words = " ".join(page.text)
    reasons = [f"{reason[:1].upper()}{reason[1:]}" for reason in findings.reasons]
    for said in (part.title, findings.headline, *reasons, "licensed engineer"):
        assert said in words
    for case in findings.cases:
        assert case.name in words


def test_names_stand_where_the_page_else_leaves_a_blank(
    screened: tuple[Part, Findings], folder: Path, tmp_path: Path
) -> None:
    blank = (folder / "pump-bracket.html").read_text(encoding="utf-8")
    assert "screened by, date" in blank
    assert "checked by, date" in blank
    part, findings = screened
    details = JobDetails("R. Okafor", "M. Lind", "41", "A-7", "C")
    write_record(dataclasses.replace(part, record=details), findings, tmp_path / "named", SOURCE)
    named = (tmp_path / "named" / "pump-bracket.html").read_text(encoding="utf-8")
    for said in ("screened by R. Okafor", "checked by M. Lind", "Job 41, drawing A-7, revision C"):
        assert said in named
    assert ", date</div>" not in named


def test_hostile_texts_stay_texts(screened: tuple[Part, Findings], tmp_path: Path) -> None:
    part, findings = hostile(*screened)
    write_record(part, findings, tmp_path, Path("h.part.json"))
    page = Page((tmp_path / "h.html").read_text(encoding="utf-8"))
    assert "script" not in page.tags
    assert "<script>alert(1)</script>" in " ".join(page.text)
    record = json.loads((tmp_path / "h.result.json").read_text(encoding="utf-8"))
    assert record["title"] == HOSTILE
    assert read_part(tmp_path / "h.part.json") == part
    text = (tmp_path / "h.peaks.csv").read_bytes().decode("utf-8")
    rows = list(csv.DictReader(io.StringIO(text, newline="")))
    assert {row["case"] for row in rows} == {HOSTILE}
    assert all(None not in row for row in rows), "no row has more cells than the head"
    svg = part_svg(part, shape_of(part), findings)
    texts = [e.text or "" for e in ElementTree.fromstring(svg).iter() if e.tag.endswith("text")]
    assert any("<script>" in t for t in texts)
    table = verdict_table(part, findings)
    assert not any(c in table for c in "\r\x1b")
    meshio.read(tmp_path / "h.vtu")


@pytest.mark.parametrize("name", ["pump-bracket", "hose-clip", "lifting-lug"])
def test_the_drawing_is_well_formed_and_inside_its_box(name: str) -> None:
    part = read_part(SAMPLES / f"{name}.part.json")
    with Mesher() as mesher:
        findings = screen(part, mesher, fast=True)
    root = ElementTree.fromstring(part_svg(part, shape_of(part), findings))
    x0, y0, width, height = map(float, root.attrib["viewBox"].split())
    assert (x0, y0) == (0.0, 0.0)
    peaks = sum(len(case.peaks) for case in findings.cases)
    tag = "{http://www.w3.org/2000/svg}"
    circles = root.findall(f"{tag}circle")
    assert len(circles) == peaks
    for c in circles:
        assert 4 <= float(c.attrib["cx"]) <= width - 4
        assert 4 <= float(c.attrib["cy"]) <= height - 4
    for path in root.findall(f"{tag}path"):
        if path.attrib["class"] == "probe":
            continue
        corners = re.findall(r"[ML]([\d.-]+) ([\d.-]+)", path.attrib["d"])
        arcs = re.findall(r"A[\d.]+ [\d.]+ 0 [01] [01] ([\d.-]+) ([\d.-]+)", path.attrib["d"])
        at = np.array(corners + arcs, dtype=float)
        assert at.min() >= 0.0
        assert (at <= (width, height)).all()
    for text in root.findall(f"{tag}text"):
        assert 0.0 < float(text.attrib["x"]) < width
        assert 0.0 < float(text.attrib["y"]) < height
        assert text.text


# --- tables ---------------------------------------------------------------------------------


def rows_of(folder: Path, name: str) -> list[dict[str, str]]:
    text = (folder / f"pump-bracket.{name}.csv").read_text(encoding="utf-8")
    return list(csv.DictReader(io.StringIO(text)))


def test_the_table_of_peaks(screened: tuple[Part, Findings], folder: Path) -> None:
    _, findings = screened
    rows = rows_of(folder, "peaks")
    peaks = [(case.name, p) for case in findings.cases for p in case.peaks]
    assert len(rows) == len(peaks)
    for row, (case, p) in zip(rows, peaks, strict=True):
        assert (row["case"], row["quantity"], row["trust"]) == (case, p.quantity, p.estimate.trust)
        assert row["place"] == p.place
        got = [float(row[k]) for k in ("value_MPa", "low_MPa", "high_MPa", "x_mm", "y_mm")]
        e = p.estimate
        assert got == [e.value, e.low, e.high, *p.at]


def test_the_table_of_readings(screened: tuple[Part, Findings], folder: Path) -> None:
    _, findings = screened
    rows = rows_of(folder, "readings")
    assert len(rows) == len(findings.readings) == 6
    for row, r in zip(rows, findings.readings, strict=True):
        assert (row["reading"], row["trust"]) == (r.name, r.trust)
        for q in READING_QUANTITIES:
            e = r.values[q]
            assert [float(row[q + k]) for k in ("", "_low", "_high")] == [e.value, e.low, e.high]


def test_an_end_without_bound_is_an_empty_cell(
    screened: tuple[Part, Findings], tmp_path: Path
) -> None:
    part, findings = screened
    for open_ in (
        Estimate(5.0, 5.0, float("inf"), "rising"),
        Estimate(5.0, float("-inf"), float("inf"), "unsettled"),
        Estimate(-5.0, float("-inf"), -5.0, "rising"),
    ):
        case = findings.cases[0]
        peak = dataclasses.replace(case.peaks[0], estimate=open_)
        reading = dataclasses.replace(
            findings.readings[0], values=dict.fromkeys(READING_QUANTITIES, open_), trust=open_.trust
        )
        odd = dataclasses.replace(
            findings,
            cases=(dataclasses.replace(case, peaks=(peak,)), *findings.cases[1:]),
            readings=(reading,),
            limits=(),
        )
        write_record(part, odd, tmp_path, SOURCE)
        for name, row in (
            ("peaks", rows_of(tmp_path, "peaks")[0]),
            ("readings", rows_of(tmp_path, "readings")[0]),
        ):
            assert not {"inf", "-inf", "nan"} & set(row.values()), (name, row)
        row = rows_of(tmp_path, "peaks")[0]
        assert (row["low_MPa"] == "") == (open_.low == float("-inf"))
        assert (row["high_MPa"] == "") == (open_.high == float("inf"))


# --- fields ---------------------------------------------------------------------------------


def test_the_fields_read_by_meshio(screened: tuple[Part, Findings], folder: Path) -> None:
    part, findings = screened
    fields = findings.last
    assert fields is not None
    read = meshio.read(folder / "pump-bracket.vtu")
    assert np.array_equal(read.points[:, :2], fields.mesh.nodes)
    assert [block.type for block in read.cells] == ["quad9"]
    assert np.array_equal(read.cells[0].data, fields.mesh.quads)
    for k, case in enumerate(part.cases):
        stress = fields.stress.nodal[k]
        assert np.array_equal(read.point_data[f"stress {case.id}"], stress)
        assert np.array_equal(read.point_data[f"von Mises {case.id}"], von_mises(stress))
        moved = read.point_data[f"displacement {case.id}"]
        assert np.array_equal(moved[:, :2], fields.solution.displacements[k])
        error = read.cell_data[f"energy error {case.id}"][0]
        assert error.shape == (fields.mesh.n_elements,)
        assert (
            float(np.sqrt((error**2).sum()))
            == pytest.approx(findings.mesh.error_estimate, rel=1e-9)
            or float(np.sqrt((error**2).sum())) < findings.mesh.error_estimate
        )


def test_findings_without_fields_write_what_they_can(
    screened: tuple[Part, Findings], tmp_path: Path
) -> None:
    part, findings = screened
    written = write_record(part, dataclasses.replace(findings, fields=()), tmp_path, SOURCE)
    assert not {".vtu", ".png"} & {p.suffix for p in written}
    assert (tmp_path / "pump-bracket.html").exists()
    Page((tmp_path / "pump-bracket.html").read_text(encoding="utf-8"))


def test_a_record_that_cannot_be_written_leaves_no_half_file(
    screened: tuple[Part, Findings], tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    write_record(*screened, tmp_path, SOURCE)
    before = {p.name: p.read_bytes() for p in tmp_path.iterdir()}

    def broken(self: object, file: Path, **_: object) -> None:
        file.write_bytes(b"half of it")
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(meshio.Mesh, "write", broken)
    with pytest.raises(OSError, match="No space"):
        write_record(*screened, tmp_path, SOURCE)
    assert (tmp_path / "pump-bracket.vtu").read_bytes() == before["pump-bracket.vtu"]
    assert {p.name for p in tmp_path.iterdir()} == set(before)


# --- the table in the terminal --------------------------------------------------------------


def test_columns_line_up_with_wide_and_accented_letters(screened: tuple[Part, Findings]) -> None:
    part, findings = screened
    names = ["梁のけが", "e\u0301clat"]
    cases = tuple(
        dataclasses.replace(c, name=n) for c, n in zip(findings.cases, names, strict=True)
    )
    table = verdict_table(part, dataclasses.replace(findings, cases=cases))
    rows = [r for r in table.splitlines() if r.startswith("  von Mises under")]
    assert len(rows) == 2
    before = [re.split(r"[01]\.\d{3,} ±", row)[0] for row in rows]
    assert columns(before[0]) == columns(before[1])


def columns(text: str) -> int:
    """Columns of a terminal (Unicode annex 11: wide letters two, combining ones none)."""
    bare = unicodedata.normalize("NFC", text)
    return len(bare) + sum(unicodedata.east_asian_width(c) in "WF" for c in bare)
