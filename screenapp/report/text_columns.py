"""Tables of plain text for a terminal."""

from __future__ import annotations

import unicodedata
from collections.abc import Callable, Sequence

from screenapp.report.one_line import one_line


def lined_up(rows: Sequence[Sequence[str]], spell: Callable[[str], str]) -> list[str]:
    """Rows of cells as lines, their columns lined up.

    `spell` may put other letters for those that the terminal lacks; columns are lined up after it.
    """
    cells = [[spell(one_line(cell)) for cell in row] for row in rows]
    widths = [max(columns_of(row[i]) for row in cells) for i in range(len(cells[0]))]
    lines: list[str] = []
    for row in cells:
        padded = (c + " " * (w - columns_of(c)) for c, w in zip(row, widths, strict=True))
        lines.append("  " + "  ".join(padded).rstrip())
    return lines


def columns_of(text: str) -> int:
    """How many columns of a terminal a text takes: wide East Asian letters two, accents none."""
    return sum(
        0 if unicodedata.combining(c) else 2 if unicodedata.east_asian_width(c) in "WF" else 1
        for c in text
    )
