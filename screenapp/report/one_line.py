"""Texts of the user made safe for one line of a table or a picture."""

from __future__ import annotations


def one_line(words: str) -> str:
    """The same words on one line, without control characters.

    Example:
        >>> one_line("two\\n lines\\x1b[31m")
        'two lines [31m'
    """
    return " ".join("".join(c if c.isprintable() else " " for c in words).split())
