"""The application's style sheet, made from a palette, so that nothing shows in default grey."""

from __future__ import annotations

from PySide6.QtWidgets import QApplication

from screenapp.model.assets import resource
from screenapp.window import theme
from screenapp.window.theme import Palette

_TEMPLATE = """
QWidget {{ color: {ink}; }}
QMainWindow, QDialog, QMessageBox {{ background: {chrome}; }}
QToolTip {{
    background: {ink}; color: {sheet}; border: 1px solid {ink}; padding: 4px 8px;
}}

QMenuBar {{ background: {chrome}; color: {ink}; border-bottom: 1px solid {faint};
    padding: 2px 8px; }}
QMenuBar::item {{ padding: 4px 8px; border-radius: 4px; background: transparent; }}
QMenuBar::item:selected, QMenuBar::item:pressed {{ background: {hover}; }}
QMenu {{
    background: {sheet}; color: {ink}; border: 1px solid {faint}; padding: 4px;
}}
QMenu::item {{ padding: 4px 24px 4px 24px; border-radius: 4px; }}
QMenu::item:selected {{ background: {chosen}; color: {ink}; }}
QMenu::item:checked {{ color: {accent}; font-weight: 600; }}
QMenu::item:disabled {{ color: {dim}; }}
QMenu::separator {{ height: 1px; background: {faint}; margin: 4px 8px; }}
QMenu::indicator {{ width: 8px; height: 8px; left: 8px; border-radius: 4px; }}
QMenu::indicator:checked {{ background: {accent}; }}

QPushButton {{
    background: {sheet}; color: {ink}; border: 1px solid {line}; border-radius: 4px;
    padding: 4px 12px; min-height: 20px;
}}
QPushButton:hover {{ background: {hover}; }}
QPushButton:pressed {{ background: {chosen}; }}
QPushButton:focus {{ border: 2px solid {accent}; padding: 3px 11px; }}
QPushButton:disabled {{ color: {dim}; border-color: {faint}; background: {chrome}; }}
QPushButton[main="true"] {{
    background: {accent}; color: {on_accent}; border: 2px solid {accent}; font-weight: 600;
    padding: 4px 16px;
}}
QPushButton[main="true"]:hover {{ background: {accent_warm}; border-color: {accent_warm}; }}
QPushButton[main="true"]:focus {{ border: 2px solid {ink}; padding: 4px 16px; }}
QPushButton[main="true"]:disabled {{
    background: {faint}; color: {dim}; border-color: {faint};
}}

QToolButton {{
    background: transparent; color: {ink}; border: 1px solid transparent; border-radius: 4px;
    padding: 4px;
}}
QToolButton:hover {{ background: {hover}; }}
QToolButton:checked {{ background: {ink}; color: {sheet}; }}
QToolButton:focus {{ border: 1px solid {accent}; }}
QToolButton:disabled {{ color: {dim}; }}
QToolButton::menu-indicator {{ image: none; }}

QLineEdit, QPlainTextEdit, QSpinBox, QDoubleSpinBox {{
    background: {sheet}; color: {ink}; border: 1px solid {line}; border-radius: 4px;
    padding: 2px 6px; selection-background-color: {accent}; selection-color: {on_accent};
}}
QLineEdit:focus, QPlainTextEdit:focus, QSpinBox:focus, QDoubleSpinBox:focus {{
    border: 1px solid {accent};
}}
QLineEdit:disabled {{ color: {dim}; }}
QLineEdit#inPlace {{ border: 1px solid {accent}; border-radius: 3px; padding: 0 2px; }}
QLineEdit#title {{
    background: transparent; border: 1px solid transparent; border-radius: 4px; padding: 0 4px;
}}
QLineEdit#title:hover {{ background: {hover}; }}
QLineEdit#title:focus {{ background: {sheet}; border: 1px solid {accent}; }}

QComboBox {{
    background: {sheet}; color: {ink}; border: 1px solid {line}; border-radius: 4px;
    padding: 2px 8px; min-height: 20px;
}}
QComboBox:hover {{ background: {hover}; }}
QComboBox:focus {{ border: 1px solid {accent}; }}
QComboBox:disabled {{ color: {dim}; border-color: {faint}; background: {chrome}; }}
QComboBox::drop-down {{ border: none; width: 20px; }}
QComboBox::down-arrow {{ {down_arrow} width: 8px; height: 8px; }}
QComboBox QAbstractItemView {{
    background: {sheet}; color: {ink}; border: 1px solid {faint}; padding: 4px; outline: none;
    selection-background-color: {chosen}; selection-color: {ink};
}}
QCheckBox, QRadioButton {{ color: {ink}; spacing: 8px; background: transparent; }}
QCheckBox::indicator, QRadioButton::indicator {{
    width: 12px; height: 12px; border: 1px solid {quiet}; background: {sheet};
}}
QCheckBox::indicator {{ border-radius: 2px; }}
QRadioButton::indicator {{ border-radius: 7px; }}
QCheckBox::indicator:checked, QRadioButton::indicator:checked {{
    background: {accent}; border-color: {accent};
}}
QCheckBox:focus, QRadioButton:focus {{ color: {accent}; }}
QSlider::groove:horizontal {{ height: 4px; background: {faint}; border-radius: 2px; }}
QSlider::sub-page:horizontal {{ background: {accent}; border-radius: 2px; }}
QSlider::handle:horizontal {{
    width: 12px; margin: -4px 0; border-radius: 6px; background: {accent};
}}

QScrollArea {{ background: transparent; border: none; }}
QScrollBar {{ background: transparent; border: none; margin: 0; }}
QScrollBar:vertical {{ width: 12px; }}
QScrollBar:horizontal {{ height: 12px; }}
QScrollBar::handle {{ background: {line}; border-radius: 3px; margin: 3px; }}
QScrollBar::handle:vertical {{ min-height: 32px; }}
QScrollBar::handle:horizontal {{ min-width: 32px; }}
QScrollBar::handle:hover {{ background: {quiet}; }}
QScrollBar::add-line, QScrollBar::sub-line {{ width: 0; height: 0; border: none; }}
QScrollBar::add-page, QScrollBar::sub-page {{ background: transparent; }}

QTableView {{
    background: transparent; alternate-background-color: {chrome}; color: {ink};
    border: none; gridline-color: transparent; outline: none;
    selection-background-color: {chosen}; selection-color: {ink};
}}
QHeaderView, QHeaderView::section {{
    background: transparent; color: {quiet}; border: none; padding: 0;
}}
QTableCornerButton::section {{ background: transparent; border: none; }}
QTableView QLineEdit {{ border: 1px solid {accent}; border-radius: 3px; padding: 0 4px; }}

QProgressBar {{
    background: {faint}; border: none; border-radius: 3px; max-height: 6px; min-height: 6px;
    color: transparent;
}}
QProgressBar::chunk {{ background: {accent}; border-radius: 3px; }}
QProgressBar[done="true"]::chunk {{ background: {good}; }}

QSplitter::handle {{ background: {faint}; }}
QSplitter::handle:hover {{ background: {accent}; }}
QStatusBar {{ background: {chrome}; color: {quiet}; }}
QStatusBar::item {{ border: none; }}
QLabel {{ background: transparent; }}
QLabel[quiet="true"] {{ color: {quiet}; }}
"""


def style_sheet(palette: Palette) -> str:
    """The style sheet in the colours of `palette`."""
    names = {k: getattr(palette, k) for k in palette.__dataclass_fields__}
    return _TEMPLATE.format(
        **names,
        line=blend(palette.faint, palette.quiet, 0.35),
        dim=blend(palette.quiet, palette.chrome, 0.45),
        accent_warm=blend(palette.accent, palette.ink, 0.18),
        down_arrow=_image(f"style/down-{palette.name}.svg"),
    )


def _image(name: str) -> str:
    """The rule that shows one of the program's own pictures."""
    return f'image: url("{resource(name).as_posix()}");'


def blend(a: str, b: str, share: float) -> str:
    """The colour that stands `share` of the way from `a` to `b`, as #rrggbb."""
    pairs = [(int(a[i : i + 2], 16), int(b[i : i + 2], 16)) for i in (1, 3, 5)]
    return "#" + "".join(f"{round(x + (y - x) * share):02x}" for x, y in pairs)


def dress(app: QApplication) -> None:
    """Give the application its face and colours, now and whenever the theme changes."""
    app.setStyle("Fusion")
    app.setFont(theme.font())

    def colour_anew() -> None:
        app.setPalette(theme.qt_palette(theme.current()))
        app.setStyleSheet(style_sheet(theme.current()))

    theme.follow_system(app)
    theme.notifier.changed.connect(colour_anew)
    colour_anew()
