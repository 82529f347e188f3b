"""Standard output as it is found: any encoding, and a reader that may leave before the end."""

from __future__ import annotations

import os
import re
import sys
import unicodedata
from collections.abc import Callable
from typing import TextIO

_PLAIN = {
    "±": "+/-",
    "≥": ">=",
    "≤": "<=",
    "−": "-",
    "–": "-",
    "·": "-",
    "×": "x",
    "°": " deg",
    "²": "2",
    "³": "3",
    "…": "...",
    "→": "->",
    "“": '"',
    "”": '"',
    "’": "'",
    "σ": "sigma ",
    "τ": "tau ",
    "ν": "nu",
    "ß": "ss",
}


def tell(
    text: str, plain: Callable[[str], str] | None = None, stream: TextIO | None = None
) -> None:
    """Print a text and a line break.

    Args:
        text: the text.
        plain: turns it into ASCII where the stream's encoding lacks a letter; `plain_text` if not
            given.
        stream: standard output if not given.

    A reader that has left (`screenapp screen ... | head`) ends the printing, not the work.
    """
    out = sys.stdout if stream is None else stream
    try:
        text.encode(out.encoding or "utf-8")
    except (UnicodeEncodeError, LookupError):
        text = (plain or plain_text)(text)
    try:
        out.write(text + "\n")
        out.flush()
    except BrokenPipeError:
        nowhere = os.open(os.devnull, os.O_WRONLY)
        os.dup2(nowhere, out.fileno())
        os.close(nowhere)


def plain_text(text: str) -> str:
    """The text in ASCII: signs spelt out, accents dropped, anything else as "?".

    Example:
        >>> plain_text("≥ 310 MPa at 45° (Träger)")
        '>= 310 MPa at 45 deg (Trager)'
    """
    for sign, word in _PLAIN.items():
        text = text.replace(sign, word)
    bare = "".join(c for c in unicodedata.normalize("NFKD", text) if not unicodedata.combining(c))
    return bare.encode("ascii", "replace").decode("ascii")


def plain_json(text: str) -> str:
    """The same JSON in ASCII: outside ASCII it has letters in its texts only."""
    return re.sub(r"[^\x00-\x7f]", lambda found: _escaped(found[0]), text)


def _escaped(letter: str) -> str:
    units = letter.encode("utf-16-be", "surrogatepass")
    return "".join(f"\\u{units[i]:02x}{units[i + 1]:02x}" for i in range(0, len(units), 2))
