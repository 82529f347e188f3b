"""The eight paragraphs: what they say, what is open, and what is lit together."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.model.errors import Fault
from screenapp.model.findings import PlainLoss, WallGauge
from screenapp.model.materials import material_named
from screenapp.model.own_materials import own_materials
from screenapp.model.part import (
    BearingLoad,
    CircleHole,
    DisplacementLimit,
    FatigueLimit,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    JointLimit,
    Part,
    PrescribedSupport,
    RollerSupport,
    StrainLimit,
    StressLimit,
)
from screenapp.model.solution import Reaction
from screenapp.window.document import Document
from screenapp.window.sheet import changes, limit_changes
from screenapp.window.sheet.findings_paragraph import FindingsParagraph
from screenapp.window.sheet.held_paragraph import HeldParagraph
from screenapp.window.sheet.limits_paragraph import LimitsParagraph
from screenapp.window.sheet.loaded_paragraph import LoadedParagraph
from screenapp.window.sheet.mesh_paragraph import MeshParagraph
from screenapp.window.sheet.part_paragraph import PartParagraph
from screenapp.window.sheet.sheet import Sheet
from screenapp.window.sheet.verdict_paragraph import ALWAYS, VerdictParagraph
from screenapp.window.sheet.wall_paragraph import WallParagraph
from tests.model.plates import loop
from tests.window.fabricate import plate
from tests.window.window_kit import made_up, pick, settle, shown_sheet, texts, type_into


@pytest.fixture
def sheet(qtbot: QtBot) -> Sheet:
    """The sheet of a strip with a hole."""
    return shown_sheet(qtbot, plate())


def the(sheet: Sheet, kind: type) -> object:
    """The paragraph of a kind."""
    return next(p for p in sheet.paragraphs if isinstance(p, kind))


def states(sheet: Sheet) -> list[str]:
    """States of the eight marks."""
    return [p.mark.state for p in sheet.paragraphs]


def test_a_new_part_is_open_everywhere_but_in_its_mesh(qtbot: QtBot) -> None:
    sheet = shown_sheet(qtbot, Part())
    assert states(sheet) == ["open"] * 5 + ["set"] + ["open"] * 2
    for paragraph in sheet.paragraphs:
        assert paragraph.missing.isVisibleTo(sheet) == (paragraph.state == "open")
    said = texts(sheet)
    assert len(said) == len(set(said)), "nothing is said twice"
    assert not sheet.foot.button.isEnabled()
    assert "no outline" in sheet.foot.button.toolTip()


def test_a_complete_part_is_set_until_findings_are_wanted(sheet: Sheet) -> None:
    assert states(sheet) == ["set"] * 6 + ["open"] * 2
    assert sheet.foot.button.isEnabled()
    assert ALWAYS in texts(sheet)


def test_the_part_in_words(sheet: Sheet) -> None:
    paragraph = the(sheet, PartParagraph)
    assert isinstance(paragraph, PartParagraph)
    # 120 × 80 less a hole of 20: 9285.8 mm², 4 mm thick of 7850 kg/m³ is 291.6 g
    assert paragraph.summary.text.startswith(
        "Outline of 4 edges, 1 hole; 120 × 80 mm, 9286 mm², 292 g."
    )
    assert "Narrowest ligament 30 mm, between edge e1 and hole h1." in paragraph.summary.text
    QTest.mouseClick(paragraph.summary.field("ligament"), Qt.MouseButton.LeftButton)
    assert set(sheet.document.selection) == {"e1", "h1"}
    type_into(paragraph.holes.row("h1").sentence.field("diameter"), "24")
    type_into(paragraph.holes.row("h1").sentence.field("x"), "5")
    assert sheet.document.part.holes == (CircleHole("h1", (5.0, 0.0), 24.0),)
    sheet.document.select("c2")
    settle()
    type_into(paragraph.picked.row("c2").sentence.field("round"), "8 mm")
    outline = sheet.document.part.outline
    assert outline is not None
    assert outline.corners[1].round == 8.0


def test_other_units_show_other_numbers_and_store_the_same(sheet: Sheet) -> None:
    paragraph = the(sheet, PartParagraph)
    assert isinstance(paragraph, PartParagraph)
    wall = sheet.document.part.wall
    pick(paragraph.summary.field("units"), "in, lbf, ksi")
    assert "4.724 × 3.15 in" in paragraph.summary.text
    assert sheet.document.part.wall == wall


# --- supports -------------------------------------------------------------------------------


def held(sheet: Sheet) -> HeldParagraph:
    paragraph = the(sheet, HeldParagraph)
    assert isinstance(paragraph, HeldParagraph)
    return paragraph


def test_a_support_is_added_changed_and_removed(sheet: Sheet) -> None:
    pick(held(sheet).add.field("add"), "hole h1")
    document = sheet.document
    assert document.part.supports[1:] == (FixedSupport("s2", "h1"),)
    assert document.selection == ("s2",)
    row = held(sheet).list.row("s2")
    pick(row.sentence.field("kind"), "held along one direction")
    type_into(row.sentence.field("angle"), "30°")
    assert document.part.supports[1] == RollerSupport("s2", "h1", 30.0)
    pick(row.sentence.field("kind"), "moved by a given amount")
    type_into(row.sentence.field("x"), "0.2 mm")
    type_into(row.sentence.field("y"), "free")
    assert document.part.supports[1] == PrescribedSupport("s2", "h1", 0.2, None)
    QTest.mouseClick(row.cross, Qt.MouseButton.LeftButton)
    settle()
    assert document.part.supports == plate().supports
    assert held(sheet).list.ids == ("s1",)


def test_delete_on_a_value_removes_its_row(sheet: Sheet) -> None:
    field = held(sheet).list.row("s1").sentence.field("kind")
    field.setFocus()
    QTest.keyClick(field, Qt.Key.Key_Delete)
    settle()
    assert sheet.document.part.supports == ()
    assert held(sheet).state == "open"
    assert "Nothing holds the part" in held(sheet).missing.text
    pick(held(sheet).missing.field("hold"), "edge e4")
    assert held(sheet).state == "set"


def test_a_part_that_can_still_move_says_so_in_its_paragraph(sheet: Sheet) -> None:
    pick(held(sheet).list.row("s1").sentence.field("kind"), "held across its boundary")
    assert held(sheet).state == "open"
    assert any("sliding along y" in text for text in texts(held(sheet)))


# --- loads ----------------------------------------------------------------------------------


def loaded(sheet: Sheet) -> LoadedParagraph:
    paragraph = the(sheet, LoadedParagraph)
    assert isinstance(paragraph, LoadedParagraph)
    return paragraph


def test_loads_are_read_and_changed_by_size_and_direction(sheet: Sheet) -> None:
    row = loaded(sheet).block("case1").loads.row("l1")
    assert row.sentence.text.startswith("pulled by 16000 N, right · on part of it –")
    type_into(row.sentence.field("way"), "down")
    type_into(row.sentence.field("size"), "2 kN")
    load = sheet.document.part.cases[0].loads[0]
    assert load == ForceLoad("l1", "e2", 0.0, -2000.0)
    type_into(row.sentence.field("way"), "30")
    load = sheet.document.part.cases[0].loads[0]
    assert isinstance(load, ForceLoad)
    assert (load.x, load.y) == pytest.approx((2000 * 3**0.5 / 2, 1000.0))
    type_into(row.sentence.field("way"), "sideways")
    assert "not a direction" in row.sentence.complaint


def test_loads_of_every_kind_can_be_added_by_place(sheet: Sheet) -> None:
    block = loaded(sheet).block("case1")
    pick(block.foot.field("add"), "hole h1", "a pin bears on it")
    pick(block.foot.field("add"), "edge e1", "a pressure")
    pick(block.foot.field("add"), "the part's own weight")
    kinds = [type(load).__name__ for load in sheet.document.part.cases[0].loads]
    assert kinds == ["ForceLoad", "BearingLoad", "PressureLoad", "GravityLoad"]
    assert isinstance(sheet.document.part.cases[0].loads[1], BearingLoad)
    weight = sheet.document.part.cases[0].loads[3]
    assert isinstance(weight, GravityLoad)
    assert "own weight under 9.807 m/s², down" in block.loads.row(weight.id).sentence.text


def test_cases_are_added_renamed_shown_and_removed(sheet: Sheet) -> None:
    document = sheet.document
    QTest.mouseClick(loaded(sheet).add.field("add"), Qt.MouseButton.LeftButton)
    settle()
    assert [c.name for c in document.part.cases][:2] == ["Pull", "Push"]
    assert document.view.case == 2
    new = document.part.cases[2]
    type_into(loaded(sheet).block(new.id).head.field("name"), "Push", Qt.Key.Key_Return)
    assert "Push" in loaded(sheet).block(new.id).head.complaint
    editor = loaded(sheet).block(new.id).head.field("name").editor
    assert editor is not None
    editor.selectAll()
    QTest.keyClicks(editor, "Jolt")
    QTest.keyClick(editor, Qt.Key.Key_Return)
    assert document.part.cases[2].name == "Jolt"
    QTest.mouseClick(loaded(sheet).block("case1").foot.field("view"), Qt.MouseButton.LeftButton)
    assert document.view.case == 0
    QTest.mouseClick(loaded(sheet).block(new.id).foot.field("remove"), Qt.MouseButton.LeftButton)
    settle()
    assert [c.name for c in document.part.cases] == ["Pull", "Push"]


def test_the_first_load_brings_its_case(qtbot: QtBot) -> None:
    sheet = shown_sheet(qtbot, replace(plate(), cases=()))
    pick(loaded(sheet).missing.field("load"), "edge e2", "a force, spread evenly")
    assert [type(x) for c in sheet.document.part.cases for x in c.loads] == [ForceLoad]


# --- limits and mesh ------------------------------------------------------------------------


def test_limits_say_what_they_allow(sheet: Sheet) -> None:
    paragraph = the(sheet, LimitsParagraph)
    assert isinstance(paragraph, LimitsParagraph)
    row = paragraph.list.row("m1")
    # 235 / 1.5
    assert "stays under the proof stress: at most 156.7 MPa." in row.sentence.text
    assert row.sentence.text.endswith("Where it keeps rising, the verdict is undecided.")
    type_into(row.sentence.field("factor"), "2")
    pick(row.sentence.field("measure"), "largest tension")
    pick(row.sentence.field("at_rising"), "the stress drawn on from 0.4 and 1.0 walls away counts")
    wanted = StressLimit("m1", "sigma_1", factor=2.0, at_rising="structural")
    assert sheet.document.part.limits[0] == wanted
    QTest.mouseClick(paragraph.add.field("displacement"), Qt.MouseButton.LeftButton)
    settle()
    new = sheet.document.part.limits[1]
    assert isinstance(new, DisplacementLimit)
    type_into(paragraph.list.row(new.id).sentence.field("most"), "0.5")
    assert sheet.document.part.limits[1] == DisplacementLimit(new.id, 0.5)
    sentence = paragraph.list.row(new.id).sentence
    assert sentence.text == "Nothing moves by more than 0.5 mm in any direction."
    pick(sentence.field("where"), "a point")
    type_into(sentence.field("x"), "12")
    type_into(sentence.field("angle"), "90")
    changed = sheet.document.part.limits[1]
    assert isinstance(changed, DisplacementLimit)
    assert changed.at is not None
    assert changed == DisplacementLimit(new.id, 0.5, (12.0, changed.at[1]), 90.0)
    pick(paragraph.add.field("joint"), "hole h1")
    joint = sheet.document.part.limits[2]
    assert joint == JointLimit(joint.id, "h1")
    sentence = paragraph.list.row(joint.id).sentence
    assert sentence.text == (
        "The pin in hole h1 keeps to EN 1993-1-8 under its force times 1; pin as large as the "
        "hole, its strength at least the wall's."
    )
    type_into(sentence.field("factor"), "1.35")
    type_into(sentence.field("pin"), "8")
    assert sheet.document.part.limits[2] == JointLimit(joint.id, "h1", factor=1.35, pin=8.0)
    QTest.mouseClick(paragraph.add.field("fatigue"), Qt.MouseButton.LeftButton)
    settle()
    swing = sheet.document.part.limits[3]
    assert isinstance(swing, FatigueLimit)
    assert (swing.other, swing.cycles) == (None, 1e6)
    sentence = paragraph.list.row(swing.id).sentence
    assert "and no load" in sentence.text
    type_into(sentence.field("cycles"), "2e5")
    pick(sentence.field("mean"), "Smith–Watson–Topper")
    pick(sentence.field("notch"), "count less by Peterson")
    assert sheet.document.part.limits[3] == replace(
        swing, cycles=2e5, mean="smith_watson_topper", notch="peterson"
    )
    QTest.mouseClick(paragraph.add.field("strain"), Qt.MouseButton.LeftButton)
    settle()
    strain = sheet.document.part.limits[4]
    sentence = paragraph.list.row(strain.id).sentence
    assert sentence.text == "The local strain by Neuber's rule is nowhere above 1 %."
    type_into(sentence.field("most"), "0.5 %")
    assert sheet.document.part.limits[4] == StrainLimit(strain.id, 0.005)
    pick(row.sentence.field("measure"), "Tresca stress")
    assert sheet.document.part.limits[0] == replace(wanted, measure="tresca")
    pick(row.sentence.field("against"), "tensile strength")
    told = [*texts(paragraph), row.sentence.complaint]
    assert any("strength, which “Steel” has not" in text for text in told)


def test_plain_bilinear_quads_carry_a_warning(sheet: Sheet) -> None:
    paragraph = the(sheet, MeshParagraph)
    assert isinstance(paragraph, MeshParagraph)
    assert not paragraph.warning.isVisibleTo(sheet)
    pick(paragraph.wishes.field("element"), "plain bilinear quads")
    assert sheet.document.part.mesh.element == "quad4"
    assert paragraph.warning.isVisibleTo(sheet)
    assert "too stiff" in paragraph.warning.text
    type_into(paragraph.wishes.field("tolerance"), "0.5 %")
    type_into(paragraph.wishes.field("across"), "4")
    type_into(paragraph.wishes.field("size"), "6 mm")
    mesh = sheet.document.part.mesh
    assert (mesh.tolerance, mesh.across, mesh.size) == (0.005, 4, 6.0)
    type_into(paragraph.wishes.field("across"), "2.5")
    assert "whole number" in paragraph.wishes.complaint


GAUGE = WallGauge(
    ("e1", "h1"), "edge e1 and hole h1", 30.0, ((0.0, -40.0), (0.0, -10.0)), 2, 3.0, 1.4532
)


def test_the_warning_has_the_figure_of_the_closed_form_before_a_screening(sheet: Sheet) -> None:
    """Three squares across 30 mm between edge and hole, ν 0.3: Cook's ratio 1.4835 by layers."""
    paragraph = the(sheet, MeshParagraph)
    assert isinstance(paragraph, MeshParagraph)
    pick(paragraph.wishes.field("element"), "plain bilinear quads")
    assert "3 squares across the wall between edge e1 and hole h1" in paragraph.warning.text
    assert "1.05 × as stiff" in paragraph.warning.text  # 1 + 0.4835 / 3²
    type_into(paragraph.wishes.field("across"), "1")
    assert "one square across" in paragraph.warning.text
    assert "1.48 × as stiff" in paragraph.warning.text


def test_the_warning_has_the_measured_figure_after_a_screening(sheet: Sheet) -> None:
    document = sheet.document
    paragraph = the(sheet, MeshParagraph)
    assert isinstance(paragraph, MeshParagraph)
    pick(paragraph.wishes.field("element"), "plain bilinear quads")
    loss = PlainLoss("case2", 0.1, 0.08, 0.23, "hole h1, 90°")
    found = made_up(document.part)
    document.set_findings(replace(found, mesh=replace(found.mesh, walls=(GAUGE,), plain=(loss,))))
    settle()
    assert "displacement 8.0 % low, stress at hole h1, 90° 23 % low" in paragraph.warning.text
    assert not paragraph.losses.isVisibleTo(sheet)  # the warning has said it


def test_thin_walls_stand_in_a_table_that_lights_their_features(sheet: Sheet) -> None:
    document = sheet.document
    paragraph = the(sheet, MeshParagraph)
    assert isinstance(paragraph, MeshParagraph)
    assert not paragraph.table.isVisibleTo(sheet)
    loss = PlainLoss("case1", 0.1, 0.08, None, "")
    found = made_up(document.part)
    document.set_findings(replace(found, mesh=replace(found.mesh, walls=(GAUGE,), plain=(loss,))))
    settle()
    assert paragraph.table.isVisibleTo(sheet)
    line = paragraph.table.line_at(0)
    assert line.texts == ("edge e1 and hole h1", "30", "2", "1.45 ×")
    assert "1.45 times as stiff" in line.tip
    document.select("h1")
    assert paragraph.table.selectionModel().hasSelection()
    assert "displacement 8.0 % low" in paragraph.losses.text


# --- findings and verdict -------------------------------------------------------------------


def test_findings_fill_the_last_paragraphs(sheet: Sheet) -> None:
    document = sheet.document
    document.set_findings(made_up(document.part))
    settle()
    assert states(sheet) == ["set"] * 8
    findings, verdict = the(sheet, FindingsParagraph), the(sheet, VerdictParagraph)
    assert isinstance(findings, FindingsParagraph)
    assert isinstance(verdict, VerdictParagraph)
    lines = findings.table.figures.lines
    # 150.2 MPa · 1.5 / 235 MPa = 0.959
    assert lines[0].texts == ("hole h1, 90°", "Pull", "150.2 ± 0.6", "0.96", "settled")
    assert verdict.table.figures.lines[0].texts[-1] == "holds"
    assert sheet.head.verdict.standing == "holds"
    assert sheet.head.verdict.headline.text == "Holds, 1.04 in hand"
    assert "up to date" in sheet.foot.text.text()


def test_a_change_puts_findings_out_of_date_and_undo_takes_it_back(sheet: Sheet) -> None:
    document = sheet.document
    document.set_findings(made_up(document.part))
    type_into(sheet.paragraph(2).wall.field("thickness"), "6")  # type: ignore[attr-defined]
    assert states(sheet)[5:] == ["out of date"] * 3
    assert sheet.head.verdict.standing == "out of date"
    assert sheet.head.verdict.headline.text == "Out of date"
    assert "Holds, 1.04 in hand" in sheet.head.verdict.detail.text
    document.undo()
    settle()
    assert states(sheet)[5:] == ["set"] * 3
    assert sheet.head.verdict.standing == "holds"


def test_a_rising_peak_has_no_value_only_a_bound(sheet: Sheet) -> None:
    from screenapp.model.part_json import screening_key
    from tests.window.fabricate import findings

    document = sheet.document
    document.set_findings(findings(document.part, screening_key(document.part), trust="rising"))
    settle()
    paragraph = the(sheet, FindingsParagraph)
    assert isinstance(paragraph, FindingsParagraph)
    texts_ = paragraph.table.figures.lines[0].texts
    assert texts_[2:] == ("≥ 310", "≥ 1.98", "rising")


def test_a_reaction_that_is_rounding_is_said_in_words(sheet: Sheet) -> None:
    document = sheet.document
    found = made_up(document.part)
    reactions = (Reaction("s1", 3e-13, -1e-13, 0.0),)
    cases = (replace(found.cases[0], reactions=reactions), *found.cases[1:])
    document.set_findings(replace(found, cases=cases))
    settle()
    assert "carries nothing in Pull" in texts(sheet)
    reactions = (Reaction("s1", -16_000.0, 0.0, 0.0),)
    cases = (replace(found.cases[0], reactions=reactions), *found.cases[1:])
    document.set_findings(replace(found, cases=cases))
    settle()
    assert "gives 16000 N left in Pull" in texts(sheet)


# --- lit together ---------------------------------------------------------------------------


def test_hovering_a_row_lights_it_on_the_board_and_back(sheet: Sheet) -> None:
    document = sheet.document
    row = held(sheet).list.row("s1")
    QTest.mouseMove(row, QPoint(row.width() // 2, row.height() // 2))
    QApplication.processEvents()
    row.enterEvent(_enter(row))
    assert document.hovered == "s1"
    row.leaveEvent(_leave())
    assert document.hovered is None
    document.hover("e4")  # the edge that it holds
    assert row.lit
    document.hover("l1")
    assert not row.lit
    assert loaded(sheet).block("case1").loads.row("l1").lit


def test_a_click_on_a_row_selects_it(sheet: Sheet) -> None:
    row = held(sheet).list.row("s1")
    QTest.mouseClick(row.where, Qt.MouseButton.LeftButton, pos=QPoint(40, 10))
    assert sheet.document.selection == ("s1",)


def _enter(widget: object) -> object:
    from PySide6.QtCore import QPointF
    from PySide6.QtGui import QEnterEvent

    return QEnterEvent(QPointF(5, 5), QPointF(5, 5), QPointF(5, 5))


def _leave() -> object:
    from PySide6.QtCore import QEvent

    return QEvent(QEvent.Type.Leave)


def test_a_reason_is_told_once_and_what_stands_above_is_counted(sheet: Sheet) -> None:
    """The head tells it in full; Findings and Verdict do not tell it again."""
    document = sheet.document
    found = made_up(document.part, "undecided", "Undecided: the corner c4 is sharp: round it")
    why = "the corner c4 is sharp"
    peak = replace(
        found.cases[0].peaks[0],
        estimate=replace(found.cases[0].peaks[0].estimate, trust="rising"),
        place="corner c4",
        why=why,
        mend="round it",
    )
    other = replace(peak, place="corner c1", why="a support ends at corner c1", feature="c1")
    limit = replace(found.limits[0], verdict="undecided", reason=f"{why}: round it")
    told = "a caution of the part that the wall's paragraph tells"
    document._examined = (document.part, (Fault(told, "look", "wall", blocks=False),), None)
    found = replace(
        found,
        reasons=(f"{why}: round it",),
        cases=(replace(found.cases[0], peaks=(peak, other)), *found.cases[1:]),
        limits=(limit,),
        cautions=(told, "a caution of the screening alone"),
    )
    document.set_findings(found)
    settle()
    findings, verdict = the(sheet, FindingsParagraph), the(sheet, VerdictParagraph)
    assert isinstance(findings, FindingsParagraph)
    assert isinstance(verdict, VerdictParagraph)
    said = " ".join(texts(findings))
    assert "c4 is sharp" not in said
    assert "A support ends at corner c1. Round it." in said
    said = " ".join(texts(verdict))
    assert "c4 is sharp" not in said
    assert "A caution of the screening alone." in said
    assert told not in said.lower()
    assert "One caution stands in the paragraphs above." in said


def test_sharp_corners_are_told_in_one_sentence_with_a_link_to_each(qtbot: QtBot) -> None:
    """A cross has four corners that re-enter; a part with one of them gets its own sentence."""
    points = [(20, 0), (40, 0), (40, 20), (60, 20), (60, 40), (40, 40)]
    points += [(40, 60), (20, 60), (20, 40), (0, 40), (0, 20), (20, 20)]
    cross = replace(plate(), outline=loop(points), holes=(), supports=(), cases=())
    sheet = shown_sheet(qtbot, cross)
    paragraph = the(sheet, PartParagraph)
    assert isinstance(paragraph, PartParagraph)
    (said,) = [t for t in texts(paragraph) if "re-enter" in t]
    assert said.startswith("These corners re-enter the material and are sharp")
    assert said.endswith(": c3, c6, c9, c12.")
    row = paragraph._faults.row("fault 0")
    link = row.sentence.field("show 2")
    assert "corner c9 re-enters the material at 270°" in link.toolTip()
    link.enterEvent(_enter(link))
    assert sheet.document.hovered == "c9"
    link.leaveEvent(_leave())
    assert sheet.document.hovered != "c9"
    QTest.mouseClick(link, Qt.MouseButton.LeftButton)
    assert sheet.document.selection == ("c9",)
    one = replace(cross, outline=loop(points, rounds={2: 2.0, 5: 2.0, 8: 2.0}))
    sheet.document.apply("round three", one)
    settle()
    (said,) = [t for t in texts(paragraph) if "re-enter" in t]
    assert said.startswith("Corner c12 re-enters the material at 270° and is sharp")
    assert said.endswith("Show it")


def test_combinations_are_added_weighted_renamed_and_removed(sheet: Sheet) -> None:
    document = sheet.document
    paragraph = loaded(sheet)
    QTest.mouseClick(paragraph.add.field("add combination"), Qt.MouseButton.LeftButton)
    settle()
    made = document.part.combinations[0]
    assert [(t.case, t.factor) for t in made.terms] == [(c.id, 1.0) for c in document.part.cases]
    row = paragraph.combinations.row(made.id)
    first, second = (c.id for c in document.part.cases)
    type_into(row.sentence.field(f"factor {first}"), "1.35")
    type_into(row.sentence.field(f"factor {second}"), "0")
    assert [(t.case, t.factor) for t in document.part.combinations[0].terms] == [(first, 1.35)]
    assert document.history.undo_name == f"factor in combination {made.id}"
    assert "1.35 × Pull + 0 × Push" in row.sentence.text
    type_into(row.sentence.field(f"factor {first}"), "0")  # refused: nothing would be left
    assert [(t.case, t.factor) for t in document.part.combinations[0].terms] == [(first, 1.35)]
    type_into(row.where.field("name"), "Full pull")
    assert document.part.combinations[0].name == "Full pull"
    document.undo()
    document.undo()
    document.undo()
    document.undo()
    assert document.part.combinations == ()


def test_the_head_sets_the_verdict_apart_from_its_mend(qtbot: QtBot) -> None:
    part = plate()
    sheet = Sheet(Document(part))
    qtbot.addWidget(sheet)
    cause, mend = "the corner c4 is sharp and has no finite stress", "give it a radius"
    found = made_up(part, "undecided", f"Undecided: {cause}: {mend}")
    sheet.document.set_findings(replace(found, reasons=(f"{cause}: {mend}",)))
    head = sheet.head.verdict
    assert head.headline.text == f"Undecided: {cause}"
    assert head.detail.text == "Give it a radius."


# --- who did it -----------------------------------------------------------------------------


def test_who_screened_and_checked_it_is_said_in_the_verdict(sheet: Sheet) -> None:
    verdict = the(sheet, VerdictParagraph)
    assert isinstance(verdict, VerdictParagraph)
    said = verdict.details.text
    assert said.startswith("Screened by nobody yet, checked by nobody yet; job not given")
    type_into(verdict.details.field("done_by"), "R. Okafor")
    assert sheet.document.part.record.done_by == "R. Okafor"
    assert verdict.details.text.startswith("Screened by R. Okafor, checked by nobody yet")
    sheet.document.undo()
    assert sheet.document.part.record.done_by == ""


# --- orthotropic sheets ---------------------------------------------------------------------


def test_an_orthotropic_sheet_has_its_axis_and_its_figures(qtbot: QtBot) -> None:
    glass = material_named("Glass/epoxy, unidirectional", 3.0)
    assert glass is not None
    part = plate()
    part = replace(
        part, wall=replace(part.wall, material=glass.name), materials=(glass,), limits=()
    )
    sheet = shown_sheet(qtbot, part)
    wall = the(sheet, WallParagraph)
    assert isinstance(wall, WallParagraph)
    assert "its 1-axis at 0° from x" in wall.wall.text
    type_into(wall.wall.field("axis"), "30")
    assert sheet.document.part.wall.axis == 30.0
    assert "G12 3.8 GPa" in wall.figures.text
    type_into(wall.figures.field("shear_modulus"), "4.2")
    (changed,) = sheet.document.part.materials
    assert changed.shear_modulus == pytest.approx(4200.0)
    assert changed.source.startswith("own")
    limits = the(sheet, LimitsParagraph)
    assert isinstance(limits, LimitsParagraph)
    limit_changes.add_stress_limit(sheet.document)
    settle()
    assert sheet.document.part.limits[0].measure == "tsai_hill"  # type: ignore[union-attr]
    assert "under the strengths in the material's axes." in texts(limits)[0]


def test_a_sheet_of_one_s_own_begins_with_the_wall_s_modulus(sheet: Sheet) -> None:
    (old, *_) = sheet.document.part.materials
    changes.own_sheet(sheet.document)
    own = sheet.document.part.material
    assert own is not None
    assert own.orthotropic
    assert own.youngs_modulus_2 == old.youngs_modulus
    assert own.shear_modulus == pytest.approx(old.youngs_modulus / 2.0 / (1.0 + old.poissons_ratio))
    assert own.proof_stress is None


def test_a_material_of_one_s_own_is_kept_chosen_and_removed(
    qtbot: QtBot, sheet: Sheet, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("SCREENAPP_CONFIG", str(tmp_path))
    changes.own_material(sheet.document)
    settle()
    wall = the(sheet, WallParagraph)
    assert isinstance(wall, WallParagraph)
    QTest.mouseClick(wall.figures.field("keep"), Qt.MouseButton.LeftButton)
    settle()
    kept = own_materials().named("Own material")
    assert kept == sheet.document.part.material
    assert "Kept in my materials" in wall.figures.text
    other = shown_sheet(qtbot, plate())
    there = the(other, WallParagraph)
    assert isinstance(there, WallParagraph)
    pick(there.wall.field("material"), "Own material")
    assert other.document.part.material == kept
    QTest.mouseClick(there.figures.field("forget"), Qt.MouseButton.LeftButton)
    settle()
    assert own_materials().materials == ()
    assert other.document.part.material == kept, "the part has its own copy"


def test_a_broken_file_of_own_materials_is_told_and_harms_nothing(
    qtbot: QtBot, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("SCREENAPP_CONFIG", str(tmp_path))
    (tmp_path / "materials.json").write_text("{", encoding="utf-8")
    sheet = shown_sheet(qtbot, plate())
    wall = the(sheet, WallParagraph)
    assert isinstance(wall, WallParagraph)
    assert "My materials cannot be read" in wall.mine.text
    assert not wall.mine.isHidden()
    assert wall.mark.state == "set"
    (tmp_path / "materials.json").unlink()
    wall.refresh()
    assert wall.mine.isHidden()
