"""The record as a PDF on A4, made from its page: the same words, tables and drawings.

No system library is needed. Two documents of one part are equal but for their date.
"""

from __future__ import annotations

import base64
import io
from collections.abc import Callable, Iterator
from datetime import datetime
from itertools import zip_longest
from xml.etree.ElementTree import Element
from xml.sax.saxutils import escape

from reportlab.lib.pagesizes import A4
from reportlab.lib.styles import ParagraphStyle
from reportlab.lib.units import mm
from reportlab.pdfgen.canvas import Canvas
from reportlab.platypus import (
    BaseDocTemplate,
    CondPageBreak,
    Flowable,
    Frame,
    HRFlowable,
    Image,
    KeepTogether,
    PageTemplate,
    Paragraph,
    Spacer,
    Table,
    TableStyle,
)

from screenapp import __version__
from screenapp.model.part import Part
from screenapp.report.one_line import one_line
from screenapp.report.page_tree import DrawingStyles, classes_of, page_tree, part_of
from screenapp.report.pdf_drawing import Drawn
from screenapp.report.pdf_pages import Numbered, Running
from screenapp.report.pdf_table import Cell, drawn_least, page_table, text_style
from screenapp.report.pdf_type import (
    BODY,
    HEAD,
    INK,
    NOTE,
    SUBHEAD,
    TITLE,
    VERDICT,
    VERDICTS,
    has_letter,
    load_type,
)

MARGIN = 18.0 * mm
ROOM = A4[0] - 2.0 * MARGIN
MOST_DRAWING = 330.0  # height of a drawing [pt]
MOST_PICTURE = 318.0  # height of a picture: two stand on a sheet with their words [pt]
LEAST_UNDER_HEAD = 72.0  # a head with less room under it goes to the next sheet [pt]
DRAWING = "\x00"  # stands in marked-up text where a drawing stands


def record_pdf(part: Part, sha256: str, page: str, when: datetime) -> bytes:
    """The PDF of a record's page.

    Args:
        part: its title stands at the head of every sheet.
        sha256: of the part file; its first letters stand there too.
        page: of `page.record_page`.
        when: the date in it.

    Raises:
        ValueError: the page holds something that the PDF cannot show.
    """
    load_type()
    tree = page_tree(page)
    styles = DrawingStyles("".join(part_of(tree, "style").itertext()))
    flow = list(_flow(part_of(tree, "body"), styles))
    lacking = sorted({c for c in "".join(tree.itertext()) if c.isprintable() and not has_letter(c)})
    if lacking:
        words = "Letters that this document's text face lacks stand as boxes; the page has them."
        flow.append(Paragraph(words, NOTE))
    data = io.BytesIO()
    title = one_line(part.title)
    document = BaseDocTemplate(
        data,
        pagesize=A4,
        leftMargin=MARGIN,
        rightMargin=MARGIN,
        topMargin=24.0 * mm,
        bottomMargin=20.0 * mm,
        title=title,
        author="",
        subject="Screening record",
        creator=f"screenapp {__version__}",
        lang="en",
        invariant=1,
    )
    frame = Frame(MARGIN, 20.0 * mm, ROOM, A4[1] - 44.0 * mm, 0.0, 0.0, 0.0, 0.0, id="sheet")
    document.addPageTemplates([PageTemplate("sheet", [frame])])
    running = Running(
        title, f"part {sha256[:16]}", f"screenapp {__version__} · {when:%Y-%m-%d %H:%M}", MARGIN
    )
    document.build(flow, canvasmaker=_canvas_of(running, when))
    return data.getvalue()


def _canvas_of(running: Running, when: datetime) -> Callable[..., Canvas]:
    def make(*arguments: object, **options: object) -> Canvas:
        return Numbered(running, when, *arguments, **options)

    return make


# --- the page's blocks ----------------------------------------------------------------------


def _flow(body: Element, styles: DrawingStyles) -> Iterator[Flowable]:
    """Every block of the page in its order."""
    for block in body:
        names = classes_of(block)
        if block.tag == "h1":
            yield Paragraph(_markup(block), TITLE)
        elif block.tag == "h2":
            yield CondPageBreak(LEAST_UNDER_HEAD)
            yield Paragraph(_markup(block), HEAD)
        elif block.tag == "h3":
            yield Paragraph(_markup(block), SUBHEAD)
        elif block.tag == "p":
            yield Paragraph(_markup(block), NOTE if "quiet" in names else BODY)
        elif block.tag == "table":
            yield _table(block, styles)
        elif block.tag == "svg":
            yield Drawn(block, styles, MOST_DRAWING)
        elif block.tag == "img":
            yield _picture(block)
        elif block.tag == "div" and "verdict" in names:
            yield _verdict(block, names)
        elif block.tag == "div" and "sign" in names:
            yield _signs(block)
        else:
            raise ValueError(f"the record's PDF cannot show <{block.tag}> of its page")


def _verdict(block: Element, names: tuple[str, ...]) -> Flowable:
    """The verdict in its box: a heavy line at the left and a tinted ground."""
    line, ground = next(VERDICTS[name] for name in names if name in VERDICTS)
    lines = [Paragraph(_markup(child), VERDICT) for child in block]
    table = Table([[one] for one in lines], colWidths=[ROOM], spaceBefore=8.0, spaceAfter=8.0)
    table.setStyle(
        TableStyle(
            [
                ("BACKGROUND", (0, 0), (-1, -1), ground),
                ("LINEBEFORE", (0, 0), (0, -1), 3.0, line),
                ("LEFTPADDING", (0, 0), (-1, -1), 10.0),
                ("TOPPADDING", (0, 0), (-1, -1), 3.0),
                ("BOTTOMPADDING", (0, 0), (-1, -1), 3.0),
            ]
        )
    )
    return table


def _signs(block: Element) -> Flowable:
    """Lines to sign on."""
    labels = [[Paragraph(_markup(child), NOTE) for child in block]]
    width = ROOM / len(labels[0])
    table = Table(labels, colWidths=[width] * len(labels[0]))
    rules: list[tuple[object, ...]] = [("LEFTPADDING", (0, 0), (-1, -1), 0.0)]
    table.setStyle(TableStyle(rules))
    lines = Table([[HRFlowable(0.9 * width, 0.7, color=INK, hAlign="LEFT")] * len(labels[0])])
    lines.setStyle(TableStyle([*rules, ("BOTTOMPADDING", (0, 0), (-1, -1), 0.0)]))
    return KeepTogether([Spacer(1.0, 36.0), lines, table])


def _picture(block: Element) -> Flowable:
    """A picture that the page carries in itself."""
    head, _, data = block.attrib["src"].partition(",")
    if not head.endswith(";base64"):
        raise ValueError("a picture of the record's page is not inside it")
    picture = Image(io.BytesIO(base64.b64decode(data)), hAlign="LEFT")
    share = min(ROOM / picture.imageWidth, MOST_PICTURE / picture.imageHeight)
    picture.drawWidth, picture.drawHeight = (
        picture.imageWidth * share,
        picture.imageHeight * share,
    )
    return picture


def _table(block: Element, styles: DrawingStyles) -> Flowable:
    rows = [[_cell(cell, styles) for cell in row] for row in block.iter("tr")]
    heads = sum(1 for row in block.iter("tr") if all(cell.tag == "th" for cell in row))
    return page_table(rows, ROOM, heads)


def _cell(block: Element, styles: DrawingStyles) -> Cell:
    style = text_style("n" in classes_of(block))
    if block.tag == "th":
        style = ParagraphStyle(f"{style.name} head", style, textColor=NOTE.textColor)
    drawings = [Drawn(svg, styles, MOST_DRAWING) for svg in block.iter("svg")]
    between = [_without_breaks(text) for text in _markup(block, DRAWING).split(DRAWING)]
    flow: list[Flowable] = []
    for text, drawing in zip_longest(between, drawings):
        if text or not drawings:
            flow.append(Paragraph(text, style))
        if drawing is not None:
            flow.append(drawing)
    words = _clean("".join(_texts(block)))
    return Cell(tuple(flow), words, max(map(drawn_least, drawings), default=0.0))


def _without_breaks(markup: str) -> str:
    """Marked-up text without breaks of the line at its ends: a drawing breaks it too."""
    while markup.startswith("<br/>"):
        markup = markup.removeprefix("<br/>")
    while markup.endswith("<br/>"):
        markup = markup.removesuffix("<br/>")
    return markup


def _texts(block: Element) -> Iterator[str]:
    """The words of a block, drawings left out, lines kept apart."""
    yield block.text or ""
    for child in block:
        if child.tag == "br":
            yield "\n"
        elif child.tag != "svg":
            yield from _texts(child)
        yield child.tail or ""


def _markup(block: Element, drawing: str = "") -> str:
    """The words of a block as marked-up text, `drawing` in place of each drawing."""
    out = [escape(_clean(block.text or ""))]
    for child in block:
        inner = "" if child.tag in ("svg", "br") else _markup(child, drawing)
        if child.tag == "br":
            out.append("<br/>")
        elif child.tag == "span" and block.tag == "h2":
            out.append(f'<font color="#5c6470">{inner}</font>&nbsp;&nbsp; ')
        elif child.tag in ("span", "small"):
            out.append(f'<font color="#5c6470">{inner}</font>' if inner else "")
        elif child.tag in ("strong", "p"):
            out.append(inner)
        elif child.tag == "svg":
            out.append(drawing)
        else:
            raise ValueError(f"the record's PDF cannot show <{child.tag}> in <{block.tag}>")
        out.append(escape(_clean(child.tail or "")))
    words = "".join(out).strip()
    return f"<b>{words}</b>" if block.tag == "strong" and words else words


def _clean(words: str) -> str:
    """Without control characters, which a document cannot hold."""
    return "".join(c if c.isprintable() or c == "\n" else " " for c in words)
