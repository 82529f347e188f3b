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
MOST_ROW = 500.0  # a taller row may be broken over pages [pt]
MOST_USUAL = 150.0  # longer lines are sentences, which may wrap [pt]


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
    widths = column_widths(filled, room)
    table = Table(
        [[list(cell.flow) for cell in row] for row in filled],
        colWidths=widths,
        repeatRows=heads,
        splitInRow=int(_tallest(filled, widths) > MOST_ROW),
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


def _tallest(rows: list[list[Cell]], widths: list[float]) -> float:
    """Height of the tallest row [pt], but for its padding."""
    return max(
        sum(float(flow.wrap(width - GAP, 10_000.0)[1]) for flow in cell.flow)
        for row in rows
        for cell, width in zip(row, widths, strict=True)
    )


def column_widths(rows: list[list[Cell]], room: float) -> list[float]:
    """Widths that fill the room [pt].

    Every column is as wide as its longest word (or drawing).  What is left goes first to lines
    that do not wrap in three rows of four, then to the longest lines: a long sentence in one row
    does not make the figures of all the others wrap.
    """
    least: list[float] = []
    usual: list[float] = []
    longest: list[float] = []
    for column in zip(*rows, strict=True):
        words = [word for cell in column for word in cell.words.split()]
        drawn = max((cell.least for cell in column), default=0.0)
        low = max(min(max(map(_width, words), default=0.0), MOST_WORD), drawn) + GAP
        lines = sorted(max(map(_width, cell.words.split("\n")), default=0.0) for cell in column)
        least.append(low)
        usual.append(max(low, min(lines[(3 * (len(lines) - 1)) // 4], MOST_USUAL) + GAP))
        longest.append(max(usual[-1], lines[-1] + GAP))
    if sum(least) > room:
        return [width * room / sum(least) for width in least]
    if sum(usual) > room:
        return _between(least, usual, room)
    if sum(longest) > room:
        return _between(usual, longest, room)
    return [width + (room - sum(longest)) / len(longest) for width in longest]


def _between(low: list[float], high: list[float], room: float) -> list[float]:
    """Widths from `low` to `high` that fill the room, all of them by the same share."""
    share = (room - sum(low)) / (sum(high) - sum(low))
    return [a + share * (b - a) for a, b in zip(low, high, strict=True)]


def drawn_least(drawing: Drawn) -> float:
    """Width below which a drawing in a cell cannot be read [pt]."""
    return 0.8 * drawing.natural_width


def _width(words: str) -> float:
    return float(stringWidth(words, CELL.fontName, CELL.fontSize)) + 0.5
