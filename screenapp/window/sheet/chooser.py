"""The menu that a value or link with choices opens: headings, lines with remarks, submenus."""

from __future__ import annotations

from PySide6.QtWidgets import QMenu

from screenapp.window.sheet.pieces import Choice


def fill_menu(menu: QMenu, choices: tuple[Choice, ...], shown: str | None) -> None:
    """Add the lines; the one whose text is `shown` is marked, and the keyboard begins there.

    The key of a line is its action's data.
    """
    _add_lines(menu, choices, shown)
    if menu.activeAction() is None:
        first = next((a for a in menu.actions() if a.isEnabled() and not a.isSeparator()), None)
        if first is not None:
            menu.setActiveAction(first)


def _add_lines(menu: QMenu, choices: tuple[Choice, ...], shown: str | None) -> None:
    for choice in choices:
        if choice.key.startswith("-"):
            if choice.text:
                menu.addAction(choice.text).setEnabled(False)
            else:
                menu.addSeparator()
        elif choice.children:
            _add_lines(menu.addMenu(_plain(choice.text)), choice.children, shown)
        else:
            label = f"{choice.text}\t{choice.remark}" if choice.remark else choice.text
            action = menu.addAction(_plain(label))
            action.setData(choice.key)
            if shown is not None and choice.text == shown:
                action.setCheckable(True)
                action.setChecked(True)
                menu.setActiveAction(action)


def _plain(text: str) -> str:
    """The text with its ampersands shown, not taken for keys."""
    return text.replace("&", "&&")
