"""Type and colours of the record's PDF.

The text face is the one that matplotlib brings, so that a bare machine writes the same document.
"""

from __future__ import annotations

from functools import cache
from pathlib import Path

import matplotlib
from reportlab.lib.colors import HexColor
from reportlab.lib.enums import TA_RIGHT
from reportlab.lib.styles import ParagraphStyle
from reportlab.pdfbase import pdfmetrics
from reportlab.pdfbase.ttfonts import TTFont

PLAIN, BOLD = "DejaVuSans", "DejaVuSans-Bold"
INK, QUIET, LINE = HexColor("#1c222b"), HexColor("#5c6470"), HexColor("#d9d7cf")
VERDICTS = {
    "holds": (HexColor("#2f7d4f"), HexColor("#e7f4ea")),
    "fails": (HexColor("#b3360f"), HexColor("#fdece4")),
    "open": (HexColor("#8a6100"), HexColor("#fbf3dc")),
}
"""Line and ground of the verdict's box, by its class in the page."""


@cache
def load_type() -> None:
    """Register the text face, once."""
    folder = Path(matplotlib.get_data_path()) / "fonts" / "ttf"
    for name in (PLAIN, BOLD):
        pdfmetrics.registerFont(TTFont(name, str(folder / f"{name}.ttf")))
    pdfmetrics.registerFontFamily(PLAIN, normal=PLAIN, bold=BOLD, italic=PLAIN, boldItalic=BOLD)


def has_letter(letter: str) -> bool:
    """Whether the text face has a letter; what it lacks is printed as a box."""
    load_type()
    return ord(letter) in pdfmetrics.getFont(PLAIN).face.charToGlyph


def _style(name: str, size: float, **more: object) -> ParagraphStyle:
    options: dict[str, object] = {
        "fontName": PLAIN,
        "fontSize": size,
        "leading": 1.4 * size,
        "textColor": INK,
        "splitLongWords": 1,
        **more,
    }
    return ParagraphStyle(name, **options)


BODY = _style("body", 9.0, spaceBefore=2.0, spaceAfter=2.0)
NOTE = _style("note", 8.0, spaceBefore=2.0, spaceAfter=2.0, textColor=QUIET)
TITLE = _style("title", 15.0, fontName=BOLD, spaceAfter=2.0)
HEAD = _style("head", 10.5, fontName=BOLD, spaceBefore=14.0, spaceAfter=3.0)
SUBHEAD = _style("subhead", 9.0, fontName=BOLD, spaceBefore=8.0, spaceAfter=2.0, keepWithNext=1)
CELL = _style("cell", 8.0, leading=10.5)
NUMBER = _style("number", 8.0, leading=10.5, alignment=TA_RIGHT)
VERDICT = _style("verdict", 9.0)
