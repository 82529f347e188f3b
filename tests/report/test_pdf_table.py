"""Widths of columns: figures stand on one line though one row has a long sentence."""

from __future__ import annotations

import pytest
from reportlab.pdfbase.pdfmetrics import stringWidth

from screenapp.report.pdf_table import GAP, Cell, column_widths
from screenapp.report.pdf_type import CELL, load_type

ROOM = 490.0
SENTENCE = "the corner is sharp and has no finite stress: give it a radius of at least the wall"


def cells(*texts: str) -> list[Cell]:
    return [Cell((), text) for text in texts]


def wide(text: str) -> float:
    return float(stringWidth(text, CELL.fontName, CELL.fontSize))


def test_a_long_sentence_does_not_make_the_figures_wrap() -> None:
    load_type()
    rows = [cells("hole h1.1, 270°", "129.9 ± 0.6 MPa", "settled") for _ in range(6)]
    rows.append(cells("corner c4", "≥ 530 MPa", f"rising\n{SENTENCE} {SENTENCE}"))
    widths = column_widths(rows, ROOM)
    assert sum(widths) == pytest.approx(ROOM)
    assert widths[0] >= wide("hole h1.1, 270°") + GAP
    assert widths[1] >= wide("129.9 ± 0.6 MPa") + GAP
    assert widths[2] > 0.5 * ROOM  # and the sentence has the rest


def test_long_words_in_every_column_are_shrunk_to_the_sheet() -> None:
    load_type()
    rows = [cells(*(["unbreakably" * 5] * 8))]
    assert sum(column_widths(rows, ROOM)) == pytest.approx(ROOM)


def test_sentences_in_every_row_share_what_the_figures_leave() -> None:
    load_type()
    rows = [cells("1", SENTENCE, SENTENCE) for _ in range(4)]
    number, first, second = column_widths(rows, ROOM)
    assert number < 30.0
    assert first == pytest.approx(second)
