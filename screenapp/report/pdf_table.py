"""A table of the record's page in its PDF: as wide as the page, broken over pages, its head again
on each."""

from __future__ import annotations

from dataclasses import dataclass

from reportlab.lib.styles import ParagraphStyle
from reportlab.pdfbase.pdfmetrics import stringWidth
from reportlab.platypus import Flowable, Paragraph, Table, TableStyle

from screenapp.report.pdf_drawing import Drawn
from screenapp.report.pdf_type import CELL, LINE, NUMBER

GAP = 9.0  # between columns [pt]
MOST_WORD = 110.0  # a longer word is broken [pt]


@dataclass(frozen=True)
class Cell:
    """What stands in a cell: lines of marked-up text, their plain words, and drawings."""

    flow: tuple[Flowable, ...]
    words: str
    least: float = 0.0


def text_style(number: bool) -> ParagraphStyle:
    """Figures stand to the right."""
    return NUMBER if number else CELL


def page_table(rows: list[list[Cell]], room: float, heads: int) -> Table:
    """The table; `heads` rows at its top are its head.  Short rows are filled up."""
    columns = max(len(row) for row in rows)
    filled = [row + [Cell((Paragraph("", CELL),), "")] * (columns - len(row)) for row in rows]
    table = Table(
        [[list(cell.flow) for cell in row] for row in filled],
        colWidths=column_widths(filled, room),
        repeatRows=heads,
        splitInRow=1,
        spaceBefore=4.0,
        spaceAfter=6.0,
        hAlign="LEFT",
    )
    orders: list[tuple[object, ...]] = [
        ("VALIGN", (0, 0), (-1, -1), "TOP"),
        ("LEFTPADDING", (0, 0), (-1, -1), 0.0),
        ("RIGHTPADDING", (0, 0), (-1, -1), GAP),
        ("RIGHTPADDING", (-1, 0), (-1, -1), 0.0),
        ("TOPPADDING", (0, 0), (-1, -1), 2.0),
        ("BOTTOMPADDING", (0, 0), (-1, -1), 2.0),
        ("LINEBELOW", (0, heads), (-1, -1), 0.25, LINE),
    ]
    if heads:
        orders.append(("LINEBELOW", (0, heads - 1), (-1, heads - 1), 0.6, LINE))
    table.setStyle(TableStyle(orders))
    return table


def column_widths(rows: list[list[Cell]], room: float) -> list[float]:
    """Widths that fill the room: every column as wide as its longest word (or drawing), and what
    is left shared by how much more each would take for lines that do not wrap."""
    least: list[float] = []
    wish: list[float] = []
    for column in zip(*rows, strict=True):
        words = [word for cell in column for word in cell.words.split()]
        longest = max((_width(word) for word in words), default=0.0)
        drawn = max((cell.least for cell in column), default=0.0)
        low = max(min(longest, MOST_WORD), drawn) + GAP
        least.append(low)
        lines = [line for cell in column for line in cell.words.split("\n")]
        wish.append(max(low, max((_width(line) for line in lines), default=0.0) + GAP))
    if sum(least) > room:
        return [width * room / sum(least) for width in least]
    if sum(wish) <= room:
        return [width + (room - sum(wish)) / len(wish) for width in wish]
    share = (room - sum(least)) / (sum(wish) - sum(least))
    return [low + share * (high - low) for low, high in zip(least, wish, strict=True)]


def drawn_least(drawing: Drawn) -> float:
    """Width below which a drawing in a cell cannot be read [pt]."""
    return 0.8 * drawing.natural_width


def _width(words: str) -> float:
    return float(stringWidth(words, CELL.fontName, CELL.fontSize)) + 0.5
