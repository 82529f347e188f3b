"""The commands of the board: its tools, the view, and the gestures that no menu has."""

from __future__ import annotations

from functools import partial
from typing import TYPE_CHECKING

from screenapp.window.commands import Command

if TYPE_CHECKING:
    from screenapp.window.board.board import Board

GESTURES = (
    Command("Zoom about the cursor", "Turn the wheel.", ("wheel",)),
    Command("Move the board", "Drag it.", ("Space, middle or right button, held",)),
    Command("Hold snaps off", "While it is down, nothing snaps.", ("Ctrl, held",)),
    Command(
        "Type exact values",
        "A figure or Tab opens the fields beside the cursor; = begins an expression.",
        ("Tab, = or a figure",),
    ),
    Command("Accept", "Takes what is typed; closes the ring of a chain.", ("Enter",)),
    Command(
        "Select several",
        "Shift and a click adds; a drag from empty board draws a box.",
        ("Shift, held",),
    ),
    Command("Edit in place", "Opens the thing or number under the cursor.", ("double-click",)),
)


def board_commands(board: Board) -> tuple[Command, ...]:
    """Tools first, then what they do, then the view."""
    tools = [
        Command(tool.name, tool.line, (tool.key,), partial(board.take_by_key, tool.name))
        for tool in board.tools
    ]
    within = [command for tool in board.tools for command in tool.commands()]
    view = [
        Command("Zoom in", "Magnifies the board.", ("+", "Ctrl++", "Ctrl+="), board.zoom_in),
        Command("Zoom out", "Shows more of the board.", ("-", "Ctrl+-"), board.zoom_out),
        Command("Fit", "Shows the whole part.", ("Home",), board.fit),
        Command(
            "All dimensions",
            "Shows every dimension, or only overall sizes and those of what is selected.",
            ("D",),
            partial(board.show_dimensions, "all"),
        ),
        Command(
            "Hide dimensions",
            "Hides the dimensions, or shows them again.",
            ("Shift+D",),
            partial(board.show_dimensions, "none"),
        ),
        Command(
            "Edit a dimension",
            "Edits the first number on the board; Tab goes on to the next.",
            ("Ctrl+D",),
            board.canvas.dimensions.edit_first,
        ),
        Command(
            "Principal directions",
            "Shows crosses in the lenses of stress and utilisation, or hides them.",
            ("Shift+P",),
            board.show_crosses,
        ),
        Command(
            "Put open lines away",
            "Hides the lines of a drawing that stayed open and are ringed on the board.",
            ("Shift+L",),
            board.canvas.open_chains.clear,
            ready=lambda: bool(board.canvas.open_chains.ends),
        ),
        Command(
            "Step back",
            "Drops what is half done, then the tool, then the selection.",
            ("Esc",),
            board.step_back,
        ),
    ]
    return (*tools, *within, *view, *GESTURES)
