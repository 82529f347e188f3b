"""Colours, text sizes and spacing of the window: a paper and a slate theme.

Supports are teal, loads ochre, what the user draws is ink; all are told apart by shape as well.
Widgets ask `current()` when they paint and repaint on `notifier.changed`; the application's style
sheet (`window/style.py`) is made from the same palette.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from PySide6.QtCore import QObject, Qt, Signal
from PySide6.QtGui import QColor, QFont, QFontDatabase, QGuiApplication, QPalette

GRID = 4
"""Every margin and gap is a multiple of this [px]."""

TEXT_SMALL, TEXT_BODY, TEXT_HEAD = 11, 13, 18
"""The three text sizes [px]."""

Choice = Literal["system", "paper", "slate"]
CHOICES: tuple[Choice, ...] = ("system", "paper", "slate")


@dataclass(frozen=True)
class Palette:
    """Named colours as #rrggbb."""

    name: str
    paper: str  # the board
    sheet: str  # the check sheet
    chrome: str  # strips and the readings table
    ink: str  # outline, main text
    quiet: str  # secondary text
    faint: str  # grid lines, mesh lines, separators
    accent: str  # editable values, selection, main button
    on_accent: str  # text on the accent
    support: str
    load: str
    good: str
    bad: str
    bad_ground: str
    doubt: str
    doubt_ground: str
    good_ground: str
    hover: str  # ground of what the pointer is over
    chosen: str  # ground of what is selected


PAPER = Palette(
    name="paper",
    paper="#fbfaf6",
    sheet="#fefefb",
    chrome="#f4f3ee",
    ink="#1c222b",
    quiet="#5c6470",
    faint="#d9d7cf",
    accent="#1d5c8f",
    on_accent="#ffffff",
    support="#0f766e",
    load="#92570a",
    good="#2f7d4f",
    bad="#b3360f",
    bad_ground="#fdece4",
    doubt="#8a6100",
    doubt_ground="#fbf3dc",
    good_ground="#e7f4ea",
    hover="#eeece4",
    chosen="#dfeaf3",
)

SLATE = Palette(
    name="slate",
    paper="#1b2027",
    sheet="#20262e",
    chrome="#171b21",
    ink="#eceff3",
    quiet="#a3adb9",
    faint="#39424d",
    accent="#6fb1e6",
    on_accent="#0f1720",
    support="#4fc7ba",
    load="#e0a64c",
    good="#6ac48c",
    bad="#ff8a63",
    bad_ground="#3a241d",
    doubt="#e6bf57",
    doubt_ground="#352d18",
    good_ground="#1f3327",
    hover="#2a323c",
    chosen="#24405a",
)


class _Notifier(QObject):
    """Says when another palette is in force."""

    changed = Signal()


notifier = _Notifier()
_choice: Choice = "system"
_current: Palette = PAPER


def current() -> Palette:
    """The palette in force."""
    return _current


def choice() -> Choice:
    """What the user chose: a theme, or to follow the system."""
    return _choice


def choose(wanted: Choice) -> None:
    """Take a theme, or follow the system's colour scheme; tells `notifier` if colours change."""
    global _choice
    _choice = wanted
    _settle()


def follow_system(app: QGuiApplication) -> None:
    """Take note of the system's colour scheme now and whenever it changes."""
    app.styleHints().colorSchemeChanged.connect(lambda _scheme: _settle())
    _settle()


def _settle() -> None:
    global _current
    wanted = PAPER
    if _choice == "slate" or (_choice == "system" and _system_is_dark()):
        wanted = SLATE
    if wanted is not _current:
        _current = wanted
        notifier.changed.emit()


def _system_is_dark() -> bool:
    app = QGuiApplication.instance()
    if not isinstance(app, QGuiApplication):
        return False
    return app.styleHints().colorScheme() == Qt.ColorScheme.Dark


def colour(name: str, alpha: float = 1.0) -> QColor:
    """A colour of the palette in force by its field name, e.g. `colour("accent", 0.5)`."""
    found = QColor(str(getattr(_current, name)))
    found.setAlphaF(alpha)
    return found


def font(size: int = TEXT_BODY, weight: QFont.Weight = QFont.Weight.Normal) -> QFont:
    """The program's one text face at a size [px], with figures of equal width."""
    family = "Inter" if "Inter" in QFontDatabase.families() else ""
    made = (
        QFont(family) if family else QFontDatabase.systemFont(QFontDatabase.SystemFont.GeneralFont)
    )
    made.setPixelSize(size)
    made.setWeight(weight)
    made.setFeature(QFont.Tag("tnum"), 1)
    return made


def qt_palette(palette: Palette) -> QPalette:
    """The palette for what Qt draws by itself."""
    roles = QPalette.ColorRole
    made = QPalette()
    for role, name in {
        roles.Window: palette.chrome,
        roles.WindowText: palette.ink,
        roles.Base: palette.sheet,
        roles.AlternateBase: palette.chrome,
        roles.Text: palette.ink,
        roles.PlaceholderText: palette.quiet,
        roles.Button: palette.chrome,
        roles.ButtonText: palette.ink,
        roles.BrightText: palette.bad,
        roles.Highlight: palette.accent,
        roles.HighlightedText: palette.on_accent,
        roles.Link: palette.accent,
        roles.LinkVisited: palette.accent,
        roles.ToolTipBase: palette.ink,
        roles.ToolTipText: palette.sheet,
        roles.Light: palette.sheet,
        roles.Midlight: palette.chrome,
        roles.Mid: palette.faint,
        roles.Dark: palette.quiet,
        roles.Shadow: palette.ink,
        roles.Accent: palette.accent,
    }.items():
        made.setColor(role, QColor(name))
    for role in (roles.WindowText, roles.Text, roles.ButtonText):
        faded = QColor(palette.quiet)
        faded.setAlphaF(0.6)
        made.setColor(QPalette.ColorGroup.Disabled, role, faded)
    return made
