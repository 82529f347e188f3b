"""The lenses on the real board: what is painted, where, and in what words."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

import numpy as np
import pytest
from PySide6.QtCore import QRectF, Qt
from PySide6.QtGui import QColor, QImage
from PySide6.QtTest import QTest
from PySide6.QtWidgets import QApplication
from pytestqt.qtbot import QtBot

from screenapp.model.findings import Estimate, Trust
from screenapp.model.part import Part
from screenapp.model.solution import von_mises
from screenapp.window import theme
from screenapp.window.board.board import Board
from screenapp.window.board.lens_bar import LENSES, LensBar
from screenapp.window.board.lens_painter import LensPainter
from screenapp.window.document import Document
from tests.window import fabricate as made

MESH = made.ring(48, 12)


class Bench:
    """A board with lenses, 900 x 640 px."""

    def __init__(self, qtbot: QtBot, part: Part | None = None) -> None:
        self.qtbot = qtbot
        self.document = Document(part if part is not None else made.plate())
        self.board = Board(self.document)
        qtbot.addWidget(self.board)
        self.lenses = LensBar(self.document)
        self.board.set_lens_bar(self.lenses)
        self.painter = LensPainter(self.document, self.board)
        self.said: list[str] = []
        self.document.said.connect(self.said.append)
        self.board.resize(900, 640)
        self.board.show()
        qtbot.waitExposed(self.board)
        QApplication.processEvents()
        self.board.fit()

    def screen(self, trust: Trust = "settled") -> None:
        part, key = self.document.part, self.document.key
        self.document.set_findings(made.findings(part, key, MESH, trust))

    def settle(self) -> None:
        items = (self.painter.field, self.painter.mesh)
        self.qtbot.waitUntil(lambda: not any(item.busy for item in items), timeout=10_000)
        QApplication.processEvents()

    def image(self) -> QImage:
        self.settle()
        return self.board.canvas.grab().toImage()

    def colour_at(self, x: float, y: float) -> QColor:
        image = self.image()
        px = self.board.canvas.frame_now.px((x, y)) * image.devicePixelRatio()
        return image.pixelColor(round(px.x()), round(px.y()))

    @property
    def caption(self) -> str:
        return self.painter.heading.caption.text()

    @property
    def warning(self) -> str:
        return self.painter.heading.warning.text()


@pytest.fixture
def bench(qtbot: QtBot) -> Iterator[Bench]:
    theme.choose("paper")
    return Bench(qtbot)


def close(a: QColor, b: QColor, by: int = 6) -> bool:
    return all(abs(x - y) <= by for x, y in zip(a.getRgb()[:3], b.getRgb()[:3], strict=True))


def test_lens_buttons_choose_and_follow(bench: Bench) -> None:
    for lens in LENSES:
        QTest.mouseClick(bench.lenses.buttons[lens], Qt.MouseButton.LeftButton)
        assert bench.document.view.lens == lens
    bench.document.look(lens="Mesh")
    assert bench.lenses.buttons["Mesh"].isChecked()
    for number, lens in enumerate(LENSES, start=1):
        QTest.keyClick(bench.board, Qt.Key(Qt.Key.Key_0 + number), Qt.KeyboardModifier.AltModifier)
        assert bench.document.view.lens == lens


def test_lens_buttons_are_named_and_told(bench: Bench) -> None:
    for number, (lens, button) in enumerate(bench.lenses.buttons.items(), start=1):
        assert button.accessibleName() == f"Lens {lens}"
        assert f"Alt+{number}" in button.toolTip()
        assert button.focusPolicy() & Qt.FocusPolicy.TabFocus


def test_nothing_screened_says_how_to_get_it(bench: Bench) -> None:
    for lens in LENSES[1:]:
        bench.document.look(lens=lens)
        assert bench.caption.startswith("Screen the part to see")
        assert bench.painter.field.blank
        assert not bench.painter.bar.isVisible()
    bench.document.look(lens="Shape")
    assert bench.caption == ""


def test_empty_board_says_nothing_of_lenses(qtbot: QtBot) -> None:
    bench = Bench(qtbot, Part())
    bench.document.look(lens="Stress")
    assert bench.caption == ""


def test_stress_is_painted_in_the_colour_of_its_value(bench: Bench) -> None:
    bench.document.look(lens="Stress", stress="sigma_x")
    bench.screen()
    bench.settle()
    scale = bench.painter.bar.content.scale
    for at in ((35.0, -20.0), (-40.0, 25.0), (14.0, -14.0)):
        value = made.kirsch(np.array([at]))[0, 0]
        want = QColor.fromRgba(scale.word(float(value)))
        # mesh lines over the field darken it a little where one falls on the place
        assert close(bench.colour_at(*at), want, 30), at
    bench.painter.mesh.clear()
    assert close(
        bench.colour_at(35.0, -20.0),
        QColor.fromRgba(scale.word(float(made.kirsch(np.array([[35.0, -20.0]]))[0, 0]))),
        4,
    )


def test_hole_and_outside_stay_bare(bench: Bench) -> None:
    bench.document.look(lens="Shape")
    bare = bench.image()
    bench.document.look(lens="Stress")
    bench.screen()
    painted = bench.image()
    frame = bench.board.canvas.frame_now
    for at in ((3.5, 5.0), (-3.0, -6.0), (-66.0, 0.0), (-20.0, -46.0)):
        px = frame.px(at).toPoint()
        assert bare.pixelColor(px) == painted.pixelColor(px), at
    px = frame.px((-30.0, 5.0)).toPoint()
    assert bare.pixelColor(px) != painted.pixelColor(px)


def test_field_moves_with_the_view_before_it_is_sharp_again(bench: Bench) -> None:
    bench.document.look(lens="Stress", stress="sigma_x")
    bench.screen()
    bench.settle()
    bench.painter.mesh.clear()
    before = bench.colour_at(35.0, -20.0)
    bench.board.canvas.view_box.translateBy(x=7.0, y=-5.0)
    bench.board.canvas.view_box.scaleBy((0.9, 0.9))
    frame = bench.board.canvas.frame_now
    during = bench.board.canvas.grab().toImage()
    assert bench.painter.field.busy, "the sharp picture is still to come"
    px = frame.px((35.0, -20.0))
    assert close(during.pixelColor(round(px.x()), round(px.y())), before, 8)
    assert close(bench.colour_at(35.0, -20.0), before, 8)


def test_field_that_comes_into_view_is_not_blank(bench: Bench) -> None:
    bench.document.look(lens="Stress", stress="sigma_x")
    bench.screen()
    bench.board.canvas.zoom(6.0)
    bench.settle()
    bench.painter.mesh.clear()
    bench.board.canvas.zoom(1 / 6.0)
    frame = bench.board.canvas.frame_now
    during = bench.board.canvas.grab().toImage()
    px = frame.px((-50.0, -30.0))
    there = during.pixelColor(round(px.x()), round(px.y()))
    assert close(there, bench.colour_at(-50.0, -30.0), 8)


def test_new_findings_replace_old_ones(bench: Bench) -> None:
    bench.document.look(lens="Stress", stress="sigma_x")
    bench.screen()
    first = bench.colour_at(40.0, -22.0)
    bench.document.look(stress="sigma_y")
    assert bench.colour_at(40.0, -22.0) != first
    bench.document.set_findings(None)
    assert bench.painter.field.blank
    assert bench.caption.startswith("Screen the part")


def test_out_of_date_findings_fade_and_say_so(bench: Bench) -> None:
    bench.document.look(lens="Stress")
    bench.screen()
    assert bench.warning == ""
    full = bench.colour_at(-40.0, 22.0)
    part = bench.document.part
    bench.document.apply("thicker", replace(part, wall=replace(part.wall, thickness=6.0)))
    assert bench.warning.startswith("Out of date")
    faded = bench.colour_at(-40.0, 22.0)
    assert faded.lightness() > full.lightness() + 20
    bench.document.undo()
    assert bench.warning == ""
    assert close(bench.colour_at(-40.0, 22.0), full)


def test_part_change_without_effect_on_the_field_paints_nothing_anew(bench: Bench) -> None:
    bench.document.look(lens="Stress")
    bench.screen()
    bench.settle()
    picture = bench.painter.field.picture
    bench.document.apply("name", replace(bench.document.part, title="Another"))
    bench.settle()
    assert bench.painter.field.picture is picture


def test_passes_are_painted_while_screening_runs(bench: Bench) -> None:
    bench.document.look(lens="Stress")
    bench.painter.show_pass(made.fields(made.ring(16, 4)))
    assert bench.warning.startswith("Pass 1")
    assert not bench.painter.field.blank
    bench.painter.show_pass(made.fields(made.ring(24, 6)))
    assert bench.warning.startswith("Pass 2")
    assert bench.painter.callouts.callouts == ()
    bench.screen()
    assert bench.warning == ""
    assert len(bench.painter.callouts.callouts) == 1
    bench.painter.show_pass(made.fields(made.ring(16, 4)))
    bench.painter.show_pass(None)
    assert bench.warning == ""


def test_untrusted_zone_is_hatched_not_tinted(bench: Bench) -> None:
    bench.document.look(lens="Trust")
    bench.screen("rising")
    (zone,) = bench.painter.hatch.zones
    assert (zone.colour, zone.dashed) == ("bad", False)
    # inside the zone some pixels have the colour of the lines, others do not
    image = bench.image()
    box = bench.board.canvas.frame_now.transform.map(zone.path).boundingRect().toRect()
    red = QColor(theme.PAPER.bad)
    inside = [
        close(image.pixelColor(x, y), red, 60)
        for x in range(box.left(), box.right())
        for y in range(box.top(), box.bottom())
    ]
    assert 0.08 < np.mean(inside) < 0.6
    bench.screen("unsettled")
    assert bench.painter.hatch.zones[0].dashed


def test_largest_value_is_called_out_off_the_part(bench: Bench) -> None:
    bench.document.look(lens="Stress")
    bench.screen()
    (callout,) = bench.painter.callouts.callouts
    assert callout.at == (0.0, made.RADIUS)
    assert callout.head == "150.2 ± 0.6 MPa"


def test_displacement_moves_callout_and_shows_both_shapes(bench: Bench) -> None:
    bench.document.look(lens="Displacement", deformation=400.0)
    bench.screen()
    bench.settle()
    case = bench.document.findings.cases[0]
    (callout,) = bench.painter.callouts.callouts
    fields = bench.document.findings.last
    node = np.hypot(*(fields.mesh.nodes - case.displacement_at).T).argmin()
    expected = np.array(case.displacement_at) + 400 * fields.solution.displacements[0, node]
    assert callout.at == pytest.approx(tuple(expected))
    assert bench.board.canvas.outline.faint
    bench.document.look(lens="Stress")
    assert not bench.board.canvas.outline.faint


def test_deformation_factor_is_typed(bench: Bench) -> None:
    bench.document.look(lens="Displacement")
    bench.screen()
    line = bench.painter.heading.deformation
    assert line.isVisible()
    for text, factor in (("50", 50.0), ("0", 0.0), ("auto", None), ("2,5", 2.5)):
        line.setFocus()
        line.selectAll()
        QTest.keyClicks(line, text)
        QTest.keyClick(line, Qt.Key.Key_Return)
        assert bench.document.view.deformation == factor
    line.selectAll()
    QTest.keyClicks(line, "much")
    QTest.keyClick(line, Qt.Key.Key_Return)
    assert bench.document.view.deformation == 2.5
    assert "no factor" in bench.said[-1]


def test_choosers_show_with_their_lens_only(bench: Bench) -> None:
    bench.screen()
    heading = bench.painter.heading
    shown = {
        lens: (heading.stress, heading.displacement, heading.case)
        for lens in LENSES
        if bench.document.look(lens=lens) is None
    }
    assert len(shown) == len(LENSES)
    for lens, wanted in {
        "Shape": (False, False, False),
        "Mesh": (False, False, False),
        "Utilisation": (False, False, True),
        "Stress": (True, False, True),
        "Displacement": (False, True, True),
        "Trust": (False, False, True),
    }.items():
        bench.document.look(lens=lens)
        assert tuple(w.isVisible() for w in shown[lens]) == wanted, lens


def test_case_and_component_are_chosen_by_keys(bench: Bench) -> None:
    bench.document.look(lens="Stress")
    bench.screen()
    bench.painter.heading.stress.setFocus()
    QTest.keyClick(bench.painter.heading.stress, Qt.Key.Key_Down)
    assert bench.document.view.stress == "tresca"
    bench.painter.heading.case.setFocus()
    QTest.keyClick(bench.painter.heading.case, Qt.Key.Key_Down)
    assert bench.document.view.case == 1


def test_case_that_was_not_screened_is_not_painted(bench: Bench) -> None:
    bench.document.look(lens="Stress", case=1)
    bench.screen()
    found = bench.document.findings
    bench.document.set_findings(replace(found, cases=found.cases[:1]))
    assert bench.painter.field.blank
    assert "not been screened" in bench.caption


def test_ends_of_the_bar_are_typed_and_reset(bench: Bench) -> None:
    bench.document.look(lens="Stress")
    bench.screen()
    bench.settle()
    bar = bench.painter.bar
    automatic = bar.content.scale.high
    picture = bench.painter.field.picture
    QTest.mouseClick(bar._ends[1], Qt.MouseButton.LeftButton)
    QTest.keyClicks(bar._line, "100 MPa")
    QTest.keyClick(bar._line, Qt.Key.Key_Return)
    assert bar.content.scale.high == 100.0
    assert bar._ends[1].text() == "≥ 100"
    assert bench.painter.field.picture is picture, "a range costs no new picture"
    bench.document.look(stress="sigma_x")
    assert bar.content.scale.high != 100.0
    bench.document.look(stress="von_mises")
    assert bar.content.scale.high == 100.0
    QTest.mouseClick(bar._reset, Qt.MouseButton.LeftButton)
    assert bar.content.scale.high == automatic


def test_senseless_ends_are_refused_in_words(bench: Bench) -> None:
    bench.document.look(lens="Stress")
    bench.screen()
    bar = bench.painter.bar
    before = bar.content.scale.high
    for text, words in (("12 mm", "mm"), ("-50", "above the lower end"), ("abc", "no number")):
        QTest.mouseClick(bar._ends[1], Qt.MouseButton.LeftButton)
        QTest.keyClicks(bar._line, text)
        QTest.keyClick(bar._line, Qt.Key.Key_Return)
        assert words in bench.said[-1]
        QTest.keyClick(bar._line, Qt.Key.Key_Escape)
        assert bar._line.isHidden()
    assert bar.content.scale.high == before


def test_utilisation_bar_marks_one_and_cannot_be_typed(bench: Bench) -> None:
    bench.document.look(lens="Utilisation")
    bench.screen()
    bar = bench.painter.bar
    assert bar.content.marks == ((1.0, "1.00"),)
    assert not bar._ends[0].isEnabled()


def test_inch_units_reach_bar_and_cards(bench: Bench) -> None:
    bench.document.apply("units", replace(bench.document.part, display_units="in-lbf-ksi"))
    bench.document.look(lens="Stress")
    bench.screen()
    assert bench.painter.bar.content.title.endswith("ksi")
    assert bench.painter.callouts.callouts[0].head.endswith("ksi")
    # 150 MPa is 21.76 ksi (6.894757 MPa to the ksi, from memory)
    assert float(bench.painter.bar._ends[1].text()) == pytest.approx(150 / 6.894757, rel=5e-3)


def test_theme_changes_what_lies_over_the_board(bench: Bench) -> None:
    bench.document.look(lens="Trust")
    bench.screen()
    light = bench.colour_at(-40.0, 22.0)
    theme.choose("slate")
    try:
        assert bench.colour_at(-40.0, 22.0).lightness() < light.lightness() - 30
    finally:
        theme.choose("paper")


def test_fault_while_painting_is_told_and_harms_nothing(bench: Bench) -> None:
    bench.document.look(lens="Stress")
    bench.screen()
    bench.settle()

    def broken(_view: object) -> np.ndarray:
        raise MemoryError("no room for the picture")

    bench.painter.field._render = broken
    bench.board.canvas.zoom(1.5)
    bench.settle()
    assert "no room for the picture" in bench.said[-1]
    bench.document.look(stress="sigma_x")
    bench.settle()
    assert bench.painter.field.picture is not None


def test_old_picture_stays_in_its_own_colours_until_the_new_one_is_there(bench: Bench) -> None:
    bench.document.look(lens="Utilisation")
    bench.screen()
    bench.settle()
    px = bench.board.canvas.frame_now.px((-40.0, 22.0)).toPoint()
    before = bench.board.canvas.grab().toImage().pixelColor(px)
    bench.document.look(lens="Stress")
    assert close(bench.board.canvas.grab().toImage().pixelColor(px), before, 8)
    assert not close(bench.colour_at(-40.0, 22.0), before, 30)


def test_a_rising_peak_does_not_take_the_colours_from_the_rest(bench: Bench) -> None:
    """The bar ends at the largest value outside the rising zone and says what lies beyond."""
    bench.document.look(lens="Stress")
    bench.screen()
    content = bench.painter.bar.content
    assert content is not None
    assert content.beyond == ""
    whole = content.scale.high
    assert whole == pytest.approx(3.0 * made.REMOTE, rel=0.01)  # Kirsch 1898: at the hole
    bench.screen("rising")
    content = bench.painter.bar.content
    assert content is not None
    assert content.beyond == "rising beyond"
    zones = bench.painter._shown.painting.zones
    steady = np.ones(MESH.n_nodes, dtype=bool)
    steady[MESH.quads[zones[0].elements]] = False
    fields = bench.document.findings.last
    outside = von_mises(fields.stress.nodal[0])[steady].max()
    assert content.scale.high == pytest.approx(float(outside), rel=1e-6)
    assert "rising beyond" in bench.painter.bar.accessibleDescription()
    assert not bench.painter.bar._ends[1].text().startswith("≥")
    # a settled peak beside it sets the end
    found = bench.document.findings
    settled = replace(
        found.cases[0].peaks[0],
        estimate=Estimate(97.0, 96.0, 98.0, "settled"),
        at=(60.0, 40.0),
        place="edge e2 at c3",
    )
    first = replace(found.cases[0], peaks=(*found.cases[0].peaks, settled))
    bench.document.set_findings(replace(found, cases=(first, *found.cases[1:])))
    content = bench.painter.bar.content
    assert content is not None
    assert content.scale.high == pytest.approx(97.0)
    # a typed range is the user's own
    bench.painter._take_range(0.0, 200.0)
    content = bench.painter.bar.content
    assert content is not None
    assert (content.scale.high, content.beyond) == (200.0, "")


def test_few_elements_of_large_error_do_not_leave_the_map_white(bench: Bench) -> None:
    bench.document.look(lens="Trust")
    found = made.findings(bench.document.part, bench.document.key, MESH)
    error = found.fields[0].stress.energy_error.copy()
    error[:, 0] = 1.0
    stress = replace(found.fields[0].stress, energy_error=error)
    bench.document.set_findings(replace(found, fields=(replace(found.fields[0], stress=stress),)))
    content = bench.painter.bar.content
    assert content is not None
    assert content.scale.high == 3.0
    assert content.over


@pytest.mark.parametrize("size", [(620, 420), (760, 560), (1150, 860)])
def test_nothing_at_the_edges_covers_a_fitted_part(bench: Bench, size: tuple[int, int]) -> None:
    """Colour bar, choosers and scale bar lie beside the part after a fit."""
    bench.board.resize(*size)
    bench.document.look(lens="Stress")
    bench.screen()
    QApplication.processEvents()
    bench.board.fit()
    QApplication.processEvents()
    frame = bench.board.canvas.frame_now
    x, y = made.HALF_LENGTH, made.HALF_WIDTH
    part = QRectF(frame.px((-x, y)), frame.px((x, -y)))
    canvas = bench.board.canvas.rect()
    assert QRectF(canvas).contains(part)
    bar, heading = bench.painter.bar, bench.painter.heading
    assert part.right() < bar.x() + bar._bar().left()
    assert part.top() > heading.geometry().bottom()
    assert part.bottom() < canvas.bottom() - 44  # the scale bar with its figure


def test_pointing_at_all_cases_names_the_one_that_governs_there(bench: Bench) -> None:
    """Kirsch: beside the hole the pull compresses (-100 MPa), far off only the push does."""
    bench.document.look(lens="Stress", stress="sigma_2", envelope=True)
    bench.screen()
    bench.settle()

    def said_at(x: float, y: float) -> str:
        QTest.mouseMove(
            bench.board.canvas.viewport(), bench.board.canvas.frame_now.px((x, y)).toPoint()
        )
        QApplication.processEvents()
        return bench.board._corner.full

    assert "“Push” governs" in said_at(45.0, 20.0)
    assert "“Pull” governs" in said_at(-made.RADIUS - 0.4, 0.0)
    assert "governs" not in said_at(0.0, 0.0), "in the hole"
    bench.document.look(envelope=False)
    assert "governs" not in said_at(45.0, 20.0)


def test_probes_of_all_cases_name_the_case_of_their_value(bench: Bench) -> None:
    bench.document.look(lens="Stress", stress="von_mises", envelope=True)
    bench.screen()
    texts = [value.text for value in bench.board.canvas.labels.values]
    assert texts
    assert all("\nunder “P" in text for text in texts)
