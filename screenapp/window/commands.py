"""What can be done, by which key: the one list that keys, tooltips and the commands panel share.

A tool, the board and the menus each give their commands; `Command.pressed` tells whether a key
event is one of a command's keys, so a key that is shown is a key that works.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from typing import Literal

from PySide6.QtCore import QKeyCombination, Qt
from PySide6.QtGui import QKeyEvent, QKeySequence

Where = Literal["everywhere", "board", "sheet", "readings"]

WORDS: dict[Where, str] = {
    "everywhere": "everywhere",
    "board": "on the board",
    "sheet": "in the sheet",
    "readings": "in the readings",
}
_PORTABLE = QKeySequence.SequenceFormat.PortableText
_NATIVE = QKeySequence.SequenceFormat.NativeText


def always() -> bool:
    """A command that can be given at any time."""
    return True


@dataclass(frozen=True)
class Command:
    """Something that can be done.

    Attributes:
        name: in a few words, e.g. "Round hole".
        line: what it does, one line.
        keys: key sequences as Qt writes them ("Ctrl+A", "PgDown"); for a gesture plain words.
        run: does it; None for a gesture, which is only told of.
        where: where its keys work.
        ready: whether it can be done now.
    """

    name: str
    line: str
    keys: tuple[str, ...] = ()
    run: Callable[[], object] | None = None
    where: Where = "board"
    ready: Callable[[], bool] = always

    def pressed(self, event: QKeyEvent) -> bool:
        """Whether a key event is one of its keys."""
        if self.run is None:
            return False
        modifiers = event.modifiers() & ~Qt.KeyboardModifier.KeypadModifier
        combination = QKeyCombination(modifiers, Qt.Key(event.key()))
        portable = QKeySequence(combination).toString(_PORTABLE)
        if portable in self.keys:
            return True
        text = event.text()  # a sign such as + may need Shift, on another key everywhere
        bare = not modifiers & ~Qt.KeyboardModifier.ShiftModifier
        return bare and text != "" and not text.isalpha() and text in self.keys

    @property
    def shown_keys(self) -> str:
        """Its keys as the system writes them."""
        if self.run is None:
            return ", ".join(self.keys)
        return ", ".join(shown_key(key) for key in self.keys)

    @property
    def tip(self) -> str:
        """Name, key and one line, for a tooltip."""
        keys = f" ({shown_key(self.keys[0])})" if self.keys and self.run is not None else ""
        return f"{self.name}{keys}\n{self.line}"


def shown_key(key: str) -> str:
    """A key sequence as the system writes it; "−" instead of a hyphen."""
    native = QKeySequence(key).toString(_NATIVE) or key
    return "−" if native == "-" else native


def run_pressed(commands: Iterable[Command], event: QKeyEvent) -> bool:
    """Do the first command that is ready and whose key was pressed; False if there is none."""
    for command in commands:
        if command.run is not None and command.pressed(event) and command.ready():
            command.run()
            return True
    return False


def matches(command: Command, wanted: str) -> bool:
    """Whether every word of a search begins a word of the command's name, line or keys."""
    text = f"{command.name} {command.line} {command.shown_keys} {WORDS[command.where]}".lower()
    words = text.replace(",", " ").replace("+", " + ").split()
    return all(
        any(word.startswith(part) for word in words) or part in command.name.lower()
        for part in wanted.lower().replace("+", " + ").split()
    )
