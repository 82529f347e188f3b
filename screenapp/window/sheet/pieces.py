"""What a sentence of the check sheet is made of: words, values that can be changed, and links.

    (Words("The wall is "), Value("thickness", "3 mm", ...), Words(" thick."))

Pieces are plain records; `Sentence` keeps the widget of a value or link as long as its `key` stays,
so that the focus and what is being typed survive any change of the part.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass


@dataclass(frozen=True)
class Words:
    """Plain text; it breaks at its spaces.  `quiet` is secondary text, `strong` half bold."""

    text: str
    quiet: bool = False
    strong: bool = False
    colour: str = ""


@dataclass(frozen=True)
class Choice:
    """One line of a chooser: what is passed on, what is shown, and a remark beside it.

    A key that begins with "-" makes a heading, or a line if it has no text.  A line with children
    opens a chooser of its own.
    """

    key: str
    text: str
    remark: str = ""
    children: tuple[Choice, ...] = ()


@dataclass(frozen=True)
class Value:
    """A value that is changed in place.

    Attributes:
        key: unique within its sentence.
        text: as shown, e.g. "3 mm".
        name: what it is, for tooltip and screen reader, e.g. "Wall thickness".
        commit: takes what was typed (or the key of a choice); raises ScreenappError if it will not
            do.
        choices: lines of a chooser; empty for a value that is typed.  Called when it opens.
        hint: more for the tooltip, e.g. which units are taken.
        typed: the text to begin with when it is typed, if it differs from what is shown.
        about: id that the board lights while the pointer is on it.
        formula: the expression that gives it, "" for a plain value; a sign in front says so.
    """

    key: str
    text: str
    name: str
    commit: Callable[[str], None]
    choices: Callable[[], tuple[Choice, ...]] | None = None
    hint: str = ""
    typed: str | None = None
    about: str = ""
    formula: str = ""


@dataclass(frozen=True)
class Link:
    """Words that do something when clicked, or when Enter is pressed on them.

    With `choices` it opens a chooser first and passes the chosen key on; else the key is "".
    """

    key: str
    text: str
    act: Callable[[str], None]
    tip: str = ""
    choices: Callable[[], tuple[Choice, ...]] | None = None
    about: str = ""


Piece = Words | Value | Link

SEPARATOR = Words(" · ", quiet=True)
"""Between links that stand side by side."""


def plain_text(pieces: tuple[Piece, ...]) -> str:
    """The sentence as a reader hears it."""
    return "".join(piece.text for piece in pieces)
