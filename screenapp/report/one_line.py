"""Texts of the user made safe for one line of a table or a picture."""

from __future__ import annotations

import unicodedata


def one_line(words: str) -> str:
    """The same words on one line, without control characters.

    Example:
        >>> one_line("two\\n lines\\x1b[31m")
        'two lines [31m'
    """
    return " ".join("".join(c if c.isprintable() else " " for c in words).split())


def columns_of(text: str) -> int:
    """How many columns of a terminal a text takes: wide East Asian letters two, accents none."""
    return sum(
        0 if unicodedata.combining(c) else 2 if unicodedata.east_asian_width(c) in "WF" else 1
        for c in text
    )
