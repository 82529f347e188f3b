"""Themes: legible, followed, chosen, kept; nothing shows in default grey."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QColor, QFont, QFontMetrics, QPalette
from PySide6.QtWidgets import QApplication

from screenapp.window import theme
from screenapp.window.settings import Settings
from screenapp.window.style import blend, dress, style_sheet
from screenapp.window.theme import PAPER, SLATE, Palette


@pytest.fixture(autouse=True)
def back_to_paper(qapp: QApplication) -> Iterator[None]:
    """Leave the theme as other tests expect it."""
    yield
    theme.choose("system")


def luminance(colour: str) -> float:
    """Relative luminance by WCAG 2.1 (from memory)."""
    parts = [QColor(colour).redF(), QColor(colour).greenF(), QColor(colour).blueF()]
    linear = [c / 12.92 if c <= 0.03928 else ((c + 0.055) / 1.055) ** 2.4 for c in parts]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]


def contrast(a: str, b: str) -> float:
    """Contrast ratio by WCAG 2.1."""
    light, dark = sorted((luminance(a), luminance(b)), reverse=True)
    return (light + 0.05) / (dark + 0.05)


@pytest.mark.parametrize("palette", [PAPER, SLATE], ids=lambda p: p.name)
def test_all_text_is_legible(palette: Palette) -> None:
    grounds = [palette.paper, palette.sheet, palette.chrome, palette.hover, palette.chosen]
    for ground in grounds:
        for ink in (palette.ink, palette.quiet, palette.accent):
            assert contrast(ink, ground) >= 4.5, (ink, ground)
    for ink, ground in (
        (palette.on_accent, palette.accent),
        (palette.bad, palette.sheet),
        (palette.doubt, palette.sheet),
        (palette.good, palette.sheet),
        (palette.ink, palette.bad_ground),
        (palette.ink, palette.doubt_ground),
        (palette.ink, palette.good_ground),
        (palette.support, palette.paper),
        (palette.load, palette.paper),
        (palette.bad, palette.chrome),
        (palette.doubt, palette.chrome),
    ):
        assert contrast(ink, ground) >= 4.5, (ink, ground)


def test_choosing_tells_once_and_only_a_change(qapp: QApplication) -> None:
    theme.choose("paper")
    told: list[str] = []
    theme.notifier.changed.connect(lambda: told.append(theme.current().name))
    theme.choose("slate")
    theme.choose("slate")
    theme.choose("paper")
    assert told == ["slate", "paper"]


def test_the_system_is_followed(qapp: QApplication, monkeypatch: pytest.MonkeyPatch) -> None:
    dress(qapp)
    theme.choose("system")
    scheme = {"now": Qt.ColorScheme.Dark}

    class Hints:
        def colorScheme(self) -> Qt.ColorScheme:
            return scheme["now"]

    monkeypatch.setattr(QApplication, "styleHints", lambda _self: Hints())
    qapp.styleHints()
    theme.choose("system")
    assert theme.current() is SLATE
    scheme["now"] = Qt.ColorScheme.Light
    theme.choose("system")
    assert theme.current() is PAPER
    scheme["now"] = Qt.ColorScheme.Dark
    theme.choose("paper")
    assert theme.current() is PAPER


def test_the_style_sheet_takes_the_palette(qapp: QApplication) -> None:
    for palette in (PAPER, SLATE):
        text = style_sheet(palette)
        assert palette.accent in text
        assert "{{" not in text
        assert text.count("{") == text.count("}")


def test_qt_itself_takes_the_palette(qapp: QApplication) -> None:
    dress(qapp)
    for choice, palette in (("slate", SLATE), ("paper", PAPER)):
        theme.choose(choice)  # type: ignore[arg-type]
        assert qapp.palette().color(QPalette.ColorRole.Window).name() == palette.chrome
        assert qapp.palette().color(QPalette.ColorRole.Highlight).name() == palette.accent


def test_figures_have_one_width(qapp: QApplication) -> None:
    for weight in (QFont.Weight.Normal, QFont.Weight.DemiBold):
        metrics = QFontMetrics(theme.font(theme.TEXT_BODY, weight))
        assert len({metrics.horizontalAdvance(d * 20) for d in "0123456789"}) == 1


def test_blending() -> None:
    assert blend("#000000", "#ffffff", 0.5) == "#808080"
    assert blend("#102030", "#ffffff", 0.0) == "#102030"


def test_the_choice_is_kept(tmp_path: Path) -> None:
    first = Settings(tmp_path / "w.ini")
    assert first.theme == "system"
    first.theme = "slate"
    first.sync()
    assert Settings(tmp_path / "w.ini").theme == "slate"
