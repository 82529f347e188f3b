"""Reads JSON and remembers on which line everything stood, so that a fault can name its line.

Objects and arrays come back as `JsonObject` and `JsonArray`: a dict and a list that carry the lines
of what they hold.  They keep them when a migration moves them to another place in the tree.
"""

from __future__ import annotations

import bisect
import json
import math
import re
from dataclasses import dataclass
from typing import Any

from screenapp.model.errors import Fault, PartFileError

Path = tuple[str | int, ...]
"""Keys and indices that lead from the root to a value."""

DEEPEST = 60
"""More nested arrays and objects than this are refused."""

_SPACE = re.compile(r"[ \t\r\n]*")


class JsonObject(dict[str, Any]):
    """An object; `line` is where it begins, `lines` where each key stands."""

    def __init__(self, *args: Any, line: int = 0, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        self.line = line
        self.lines: dict[str, int] = {}


class JsonArray(list[Any]):
    """An array; `line` is where it begins, `lines` where each element begins."""

    def __init__(self, *args: Any, line: int = 0) -> None:
        super().__init__(*args)
        self.line = line
        self.lines: list[int] = []


@dataclass(frozen=True)
class JsonText:
    """What was read, and faults that did not stop the reading (double keys, NaN ...)."""

    root: Any
    faults: tuple[Fault, ...]


def read_json(text: str, name: str = "") -> JsonText:
    """Read a whole JSON text.

    Raises:
        PartFileError: the text is not JSON; says the line, and whether it was cut short.
    """
    return _Reader(text, name).read()


def line_of(root: Any, path: Path) -> int | None:
    """The line on which the value at `path` stands, or its nearest known container."""
    node, line = root, getattr(root, "line", 0)
    for step in path:
        if isinstance(node, JsonObject) and isinstance(step, str):
            line = node.lines.get(step, 0) or line
            node = node.get(step)
        elif isinstance(node, JsonArray) and isinstance(step, int) and step < len(node):
            line = (node.lines[step] if step < len(node.lines) else 0) or line
            node = node[step]
        else:
            break
    return line or None


def dotted(root: Any, path: Path) -> str:
    """The path in words: ids (or names) instead of indices, without the leading "shape".

    Example:
        >>> dotted({"shape": {"holes": [{"id": "h1"}]}}, ("shape", "holes", 0, "diameter"))
        'holes.h1.diameter'
    """
    words: list[str] = []
    node = root
    for step in path:
        try:
            node = node[step]
        except (KeyError, IndexError, TypeError):
            node = None
        word = str(step)
        if isinstance(step, int) and isinstance(node, dict):
            own = node.get("id", node.get("name"))
            word = own if isinstance(own, str) and own else word
        words.append(word)
    if len(words) > 1 and words[0] == "shape":
        del words[0]
    return ".".join(words)


class _Reader:
    """One pass over one text."""

    def __init__(self, text: str, name: str) -> None:
        self.text = text
        self.name = name
        self.at = 0
        self.depth = 0
        self.breaks = [m.start() for m in re.finditer("\n", text)]
        self.odd: list[tuple[Path, str, str, int]] = []
        self.scalar = json.JSONDecoder(
            parse_int=_whole, parse_constant=lambda word: math.nan
        ).raw_decode

    def read(self) -> JsonText:
        self.skip()
        if self.at == len(self.text):
            raise self.error("the file is empty", "open another file, or restore it from a copy")
        root = self.value(())
        self.skip()
        if self.at < len(self.text):
            raise self.error("there is more text after the end of the part", "remove what follows")
        faults = tuple(
            Fault(cause, mend, dotted(root, path), line=line)
            for path, cause, mend, line in self.odd
        )
        return JsonText(root, faults)

    def value(self, path: Path) -> Any:
        """The value that begins at the present place."""
        opening = self.peek()
        if opening not in "{[":
            return self.plain(path)
        if self.depth >= DEEPEST:
            raise self.error("brackets are nested too deeply", "this is not a part file")
        self.depth += 1
        value = self.object(path) if opening == "{" else self.array(path)
        self.depth -= 1
        return value

    def object(self, path: Path) -> JsonObject:
        found = JsonObject(line=self.line)
        self.at += 1
        if self.ends("}"):
            return found
        while True:
            line = self.line
            if self.peek() != '"':
                raise self.error("a key in double quotes is wanted here", 'write "key": value')
            key = self.plain(path)
            if self.peek() != ":":
                raise self.error(f'a colon is wanted after "{key}"', 'write "key": value')
            self.at += 1
            self.peek()
            here = (*path, key)
            if key in found:
                first = found.lines[key]
                cause = f'the key "{key}" stands twice, first in line {first}'
                self.odd.append((here, cause, "keep one of the two", line))
            found[key] = self.value(here)
            found.lines[key] = line
            if self.closes("}"):
                return found

    def array(self, path: Path) -> JsonArray:
        found = JsonArray(line=self.line)
        self.at += 1
        if self.ends("]"):
            return found
        while True:
            self.peek()
            found.lines.append(self.line)
            found.append(self.value((*path, len(found))))
            if self.closes("]"):
                return found

    def plain(self, path: Path) -> Any:
        """A text, number, true, false or null."""
        start = self.at
        try:
            value, self.at = self.scalar(self.text, start)
        except json.JSONDecodeError as error:
            cut = self.text[start] == '"' and '"' not in self.text[start + 1 :]
            self.at = len(self.text) if cut else min(error.pos, len(self.text))
            raise self.error("this is no JSON value", _mend_of(self.text[start])) from error
        if isinstance(value, float) and not math.isfinite(value):
            token = self.text[start : self.at]
            self.odd.append((path, f"{token} is not a finite number", "give a number", self.line))
        if isinstance(value, str) and any("\ud800" <= c <= "\udfff" for c in value):
            cause = "the text holds half a character (a lone surrogate)"
            self.odd.append((path, cause, "type the text again", self.line))
        return value

    def ends(self, closing: str) -> bool:
        """Whether the container is empty; steps over its closing bracket."""
        found = self.peek() == closing
        self.at += found
        return found

    def closes(self, closing: str) -> bool:
        """After a value: steps over a comma (False) or the closing bracket (True)."""
        sign = self.peek()
        if sign == closing:
            self.at += 1
            return True
        if sign != ",":
            raise self.error(f"a comma or {closing} is wanted here", "look at the end of the line")
        self.at += 1
        if self.peek() == closing:
            raise self.error(f"there is a comma before {closing}", "remove the comma")
        return False

    def peek(self) -> str:
        """The next character that is not space."""
        self.skip()
        if self.at >= len(self.text):
            raise self.error("", "")
        return self.text[self.at]

    def skip(self) -> None:
        self.at = _SPACE.match(self.text, self.at).end()  # type: ignore[union-attr]

    @property
    def line(self) -> int:
        return bisect.bisect_left(self.breaks, self.at) + 1

    def error(self, cause: str, mend: str) -> PartFileError:
        line = self.line
        column = self.at - (self.breaks[line - 2] if line > 1 else -1)
        if self.at >= len(self.text) and self.text.strip():
            line = len(self.text.rstrip().split("\n"))
            cause = f"the file ends in the middle, at line {line}; it was cut short"
            mend = "restore it from a copy; the end is missing"
        elif self.text.strip():
            cause = f"line {line}, column {column}: {cause}"
        fault = Fault(cause, mend, line=line)
        return PartFileError(f"{self.name}: {cause}" if self.name else cause, mend, (fault,))


def _whole(digits: str) -> int | float:
    """Whole numbers beyond what a float holds exactly become floats (and maybe infinite)."""
    return int(digits) if len(digits) < 16 else float(digits)


def _mend_of(sign: str) -> str:
    if sign == "'":
        return "use double quotes"
    if sign in "+.":
        return "begin the number with a digit or a minus, e.g. 0.5"
    return "write a number, a text in double quotes, an object {...} or an array [...]"
