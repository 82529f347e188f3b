"""The record's PDF, read back by pypdf: the words of the page, whole, on numbered sheets."""

from __future__ import annotations

import dataclasses
import io
import re
import subprocess
import sys
from datetime import datetime, timedelta, timezone
from pathlib import Path

import pytest
from pypdf import PdfReader

from screenapp.meshing.service import Mesher
from screenapp.model.assets import resource
from screenapp.model.findings import Findings
from screenapp.model.part import Part
from screenapp.model.part_json import read_part
from screenapp.model.regions import shape_with_zones
from screenapp.report.page import record_page
from screenapp.report.page_tree import DrawingStyles, page_tree, part_of
from screenapp.report.pdf import record_pdf
from screenapp.report.pdf_drawing import Drawn
from screenapp.report.picture import record_pictures
from screenapp.screening.screen import screen

SAMPLES = Path(__file__).parents[2] / "samples"
WHEN = datetime(2026, 3, 4, 5, 6, 7, tzinfo=timezone(timedelta(hours=2)))
Screened = tuple[Part, Findings]


def pdf_of(part: Part, findings: Findings, when: datetime = WHEN) -> bytes:
    return record_pdf(part, findings.part_sha256, record_page(part, findings, when), when)


def bare(text: str) -> str:
    """Without blanks: a long word may have been broken."""
    return "".join(text.split())


@pytest.fixture(scope="module", params=sorted(p.name for p in SAMPLES.glob("*.part.json")))
def sample(request: pytest.FixtureRequest) -> Screened:
    part = read_part(SAMPLES / request.param)
    with Mesher() as mesher:
        return part, screen(part, mesher, fast=True)


@pytest.fixture(scope="module")
def bracket() -> Screened:
    part = read_part(SAMPLES / "pump-bracket.part.json")
    with Mesher() as mesher:
        return part, screen(part, mesher, fast=True)


def sheets(data: bytes) -> list[str]:
    return [page.extract_text() for page in PdfReader(io.BytesIO(data)).pages]


def test_every_word_of_the_page_is_in_it(sample: Screened) -> None:
    part, findings = sample
    body = part_of(page_tree(record_page(part, findings, WHEN)), "body")
    said = bare("".join(sheets(pdf_of(part, findings))))
    for block in body.iter():
        if block.tag in ("h1", "p", "td", "th", "h3", "text"):
            for piece in "".join(block.itertext()).split():
                assert bare(piece) in said, piece


def test_sheets_are_numbered_and_bear_title_and_hash(bracket: Screened) -> None:
    part, findings = bracket
    texts = sheets(pdf_of(part, findings))
    assert len(texts) > 2
    for number, text in enumerate(texts, 1):
        assert f"page {number} of {len(texts)}" in text
        assert part.title in text
        assert findings.part_sha256[:16] in text
        assert "not an approval" in text
    last = texts[-1]
    for words in ("screened by", "checked by", "licensed engineer"):
        assert words in last


def test_it_is_a4_with_title_and_date(bracket: Screened) -> None:
    part, findings = bracket
    reader = PdfReader(io.BytesIO(pdf_of(part, findings)))
    box = reader.pages[0].mediabox
    assert [round(float(v) / 72.0 * 25.4) for v in (box.width, box.height)] == [210, 297]
    assert reader.metadata is not None
    assert reader.metadata.title == part.title
    assert reader.metadata.creation_date == WHEN


def test_the_same_part_gives_the_same_bytes_but_for_the_date(bracket: Screened) -> None:
    part, findings = bracket
    one, two = pdf_of(part, findings), pdf_of(part, findings)
    assert one == two
    later = pdf_of(part, findings, WHEN + timedelta(minutes=1))
    assert later != one
    texts = [[re.sub(r"\d{4}-\d\d-\d\d \d\d:\d\d", "", s) for s in sheets(d)] for d in (one, later)]
    assert texts[0] == texts[1]


def test_texts_are_letters_and_drawings_are_lines(bracket: Screened) -> None:
    part, findings = bracket
    first = PdfReader(io.BytesIO(pdf_of(part, findings))).pages[0]
    assert not first.images, "the drawing of the part is no picture"
    strokes = first.get_contents().get_data()
    fields = findings.last
    assert fields is not None
    assert strokes.count(b" l") > fields.mesh.n_elements, "the mesh is drawn"
    fonts = first["/Resources"]["/Font"].values()
    embedded = [f.get_object() for f in fonts if "/FontDescriptor" in f.get_object()]
    assert embedded
    for font in embedded:
        assert "/FontFile2" in font["/FontDescriptor"]


def test_pictures_are_set_in(bracket: Screened) -> None:
    part, findings = bracket
    pictures = record_pictures(part, shape_with_zones(part), findings)
    assert len(pictures) == len(findings.cases)
    page = record_page(part, findings, WHEN, pictures)
    reader = PdfReader(io.BytesIO(record_pdf(part, findings.part_sha256, page, WHEN)))
    assert sum(len(sheet.images) for sheet in reader.pages) == len(pictures)
    said = bare("".join(sheet.extract_text() for sheet in reader.pages))
    for picture in pictures:
        assert bare(picture.words) in said


def test_the_picture_of_another_case_tells_its_own_verdict(bracket: Screened) -> None:
    part, findings = bracket
    assert findings.governing is not None
    cases = [case.name for case in findings.cases if case.case == findings.governing.case]
    pictures = record_pictures(part, shape_with_zones(part), findings)
    assert cases[0] in pictures[0].words
    assert cases[0] not in pictures[1].words


def test_long_and_odd_names_stay_inside_the_sheet(bracket: Screened) -> None:
    part, findings = bracket
    name = "Wg7-" * 60 + " <b>&amp;</b> \x1b 梁 " + "so " * 300
    odd = dataclasses.replace(part, title=name, notes=f"{name}\n" * 40)
    found = dataclasses.replace(
        findings,
        headline=name,
        reasons=(name,),
        cases=tuple(dataclasses.replace(c, name=name) for c in findings.cases),
    )
    reader = PdfReader(io.BytesIO(pdf_of(odd, found)))
    right = float(reader.pages[0].mediabox.width)
    text = ""
    for sheet in reader.pages:
        spots: list[float] = []
        text += sheet.extract_text(
            visitor_text=lambda words, cm, tm, *_, spots=spots: (
                spots.append(cm[0] * tm[4] + cm[4]) if words.strip() else None
            )
        )
        assert spots
        assert min(spots) >= 0.0
        assert max(spots) < right
    said = bare(text)
    assert "<b>&amp;</b>" in said
    assert bare("Letters that this document's text face lacks stand as boxes") in said


def test_a_page_with_something_unknown_is_refused(bracket: Screened) -> None:
    part, _ = bracket
    for body, word in (
        ("<video></video>", "video"),
        ("<p><i>x</i></p>", "<i>"),
        ('<img src="https://a/b.png">', "inside"),
        ('<svg viewBox="0 0 9 9"><ellipse/></svg>', "ellipse"),
    ):
        page = f"<html><style></style><body>{body}</body></html>"
        with pytest.raises(ValueError, match=word):
            record_pdf(part, "0" * 64, page, WHEN)


def test_every_tag_of_the_template_can_be_shown() -> None:
    """Also those that no sample reaches."""
    body = resource("report/record.html").read_text(encoding="utf-8").split("<body>")[1]
    blocks = {"h1", "h2", "h3", "p", "div", "table", "tr", "th", "td", "img", "body", "html"}
    assert set(re.findall(r"</?([a-z]+\d?)", body)) <= blocks | {"span", "small", "strong", "br"}


def test_styles_of_drawings_follow_the_page() -> None:
    sheet = (
        "p { fill: red } svg text { fill: #111; font-size: 12px } svg .a.b { fill: #222 }"
        " svg .a { fill: #333 } svg.one .c { stroke: #444 } svg.two .c { stroke: #555 }"
    )
    page = (
        '<svg class="one" viewBox="0 0 4 4"><path class="a b" d="M0 0h4"/>'
        '<path class="c" d="M0 0h4"/><text x="0" y="0">w</text></svg>'
    )
    svg = page_tree(page)
    styles = DrawingStyles(sheet)
    both, c, text = (styles.of(child, svg) for child in svg)
    assert both == {"fill": "#222"}, "two classes say more than one, wherever they stand"
    assert c == {"stroke": "#444"}
    assert text == {"fill": "#111", "font-size": "12px"}


def test_a_drawing_shrinks_to_its_room() -> None:
    svg = page_tree('<svg viewBox="0 0 200 100"></svg>')
    drawn = Drawn(svg, DrawingStyles(""), 300.0)
    assert drawn.wrap(1000.0, 1000.0) == (150.0, 75.0)
    assert drawn.wrap(100.0, 1000.0) == (100.0, 50.0)
    assert Drawn(svg, DrawingStyles(""), 30.0).wrap(1000.0, 1000.0) == (60.0, 30.0)


def test_it_is_written_without_qt() -> None:
    code = (
        "import sys, screenapp.report.record\n"
        "assert not [m for m in sys.modules if m.startswith(('PySide6', 'pyqtgraph'))]"
    )
    subprocess.run([sys.executable, "-c", code], check=True, timeout=60)
