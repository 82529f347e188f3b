"""The keys of the select tool, as commands."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from functools import partial
from typing import TYPE_CHECKING

from screenapp.window.board import clipboard
from screenapp.window.commands import Command

if TYPE_CHECKING:
    from screenapp.window.board.tools.select import SelectTool

STEPS = {"left": (-1.0, 0.0), "right": (1.0, 0.0), "up": (0.0, 1.0), "down": (0.0, -1.0)}
"""Ways to nudge, in grid steps."""

NEXT = (
    ("Next thing", "Selects the thing after the selected one and says what it is.", ("PgDown",), 1),
    (
        "Thing before",
        "Selects the thing before the selected one and says what it is.",
        ("PgUp",),
        -1,
    ),
)

SIZES = (
    ("Nudge", "", 1.0, "a grid step"),
    ("Nudge far", "Shift+", 10.0, "ten grid steps"),
    ("Nudge finely", "Ctrl+", 0.1, "a tenth of a grid step"),
)


def select_commands(tool: SelectTool) -> tuple[Command, ...]:
    """Select, copy, remove, nudge, edit, and go from one thing to the next."""
    document = tool.canvas.document

    def chosen() -> bool:
        return tool.canvas.tool is tool and bool(document.selection)

    return (
        Command(
            "Select everything", "All corners, holes and probes.", ("Ctrl+A",), tool.select_all
        ),
        *(
            Command(name, words, keys, partial(tool.select_next, step))
            for name, words, keys, step in NEXT
        ),
        *(
            Command(name, words, keys, act, ready=chosen)
            for name, words, keys, act in (
                (
                    "Edit what is selected",
                    "Opens the fields for exact values beside it.",
                    ("F2", "Return", "Enter"),
                    tool.edit_selected,
                ),
                (
                    "Remove what is selected",
                    "Says what else goes with it; undo brings it back.",
                    ("Del", "Backspace"),
                    tool.remove_selected,
                ),
                (
                    "Copy holes",
                    "Puts the selected holes on the clipboard.",
                    ("Ctrl+C",),
                    partial(clipboard.copy, document),
                ),
                (
                    "Cut holes",
                    "Puts the selected holes on the clipboard and takes them out of the part.",
                    ("Ctrl+X",),
                    partial(clipboard.cut, document),
                ),
            )
        ),
        Command(
            "Paste holes",
            "Adds the holes of the clipboard under the cursor.",
            ("Ctrl+V",),
            tool.paste,
        ),
        Command(
            "What can be done here",
            "Opens the menu of the selected thing; the right button does so for what is under it.",
            ("Menu", "Shift+F10"),
            tool.open_context,
        ),
        *_nudges(tool, chosen),
    )


def _nudges(tool: SelectTool, chosen: Callable[[], bool]) -> Iterator[Command]:
    for name, key, size, words in SIZES:
        for way, (x, y) in STEPS.items():
            yield Command(
                f"{name} {way}",
                f"Moves what is selected by {words}.",
                (f"{key}{way.capitalize()}",),
                partial(tool.nudge, size * x, size * y),
                ready=chosen,
            )
