"""A vector drawing (SVG) of the record set as vectors into its PDF."""

from __future__ import annotations

import re
from xml.etree.ElementTree import Element

from fontTools.pens.recordingPen import RecordingPen
from fontTools.svgLib.path import parse_path
from reportlab.lib.colors import HexColor
from reportlab.pdfgen.canvas import Canvas
from reportlab.platypus import Flowable

from screenapp.report.page_tree import DrawingStyles
from screenapp.report.pdf_type import BOLD, PLAIN

POINTS_PER_PIXEL = 0.75
"""A CSS pixel is 1/96 inch, a point 1/72."""
LEAST_TEXT = 6.0
"""Height of the smallest letters of a drawing on paper [pt]."""


class Drawn(Flowable):  # type: ignore[misc]
    """A drawing, made smaller where it is wider or taller than its room."""

    def __init__(self, svg: Element, styles: DrawingStyles, most_height: float) -> None:
        super().__init__()
        self._svg, self._styles, self._most = svg, styles, most_height
        _, _, self._wide, self._tall = (float(v) for v in svg.attrib["viewbox"].split())
        self._scale = POINTS_PER_PIXEL

    @property
    def natural_width(self) -> float:
        """Its width where there is room enough [pt]."""
        return self._wide * POINTS_PER_PIXEL

    def wrap(self, width: float, height: float) -> tuple[float, float]:
        """Its size in a room of that size [pt]."""
        self._scale = min(POINTS_PER_PIXEL, width / self._wide, self._most / self._tall)
        return self._wide * self._scale, self._tall * self._scale

    def draw(self) -> None:
        """Set it on the page."""
        canvas: Canvas = self.canv
        for element in self._svg:
            look = self._styles.of(element, self._svg)
            canvas.saveState()
            if element.tag == "text":
                self._write(canvas, element, look)
            else:
                self._trace(canvas, _pen_of(element), look)
            canvas.restoreState()

    def _at(self, point: tuple[float, float]) -> tuple[float, float]:
        return point[0] * self._scale, (self._tall - point[1]) * self._scale

    def _trace(self, canvas: Canvas, pen: RecordingPen, look: dict[str, str]) -> None:
        fill, stroke = look.get("fill", "#000"), look.get("stroke", "none")
        if fill != "none":
            canvas.setFillColor(HexColor(_long(fill)))
        if stroke != "none":
            canvas.setStrokeColor(HexColor(_long(stroke)))
            canvas.setLineWidth(float(look.get("stroke-width", "1")) * self._scale)
        if "stroke-dasharray" in look:
            canvas.setDash([float(v) * self._scale for v in look["stroke-dasharray"].split()])
        if "opacity" in look:
            canvas.setFillAlpha(float(look["opacity"]))
            canvas.setStrokeAlpha(float(look["opacity"]))
        path = canvas.beginPath()
        for order, points in pen.value:
            places = [v for point in points for v in self._at(point)]
            if order == "moveTo":
                path.moveTo(*places)
            elif order == "lineTo":
                path.lineTo(*places)
            elif order == "curveTo":
                path.curveTo(*places)
            elif order == "closePath":
                path.close()
        canvas.drawPath(path, stroke=int(stroke != "none"), fill=int(fill != "none"))

    def _write(self, canvas: Canvas, element: Element, look: dict[str, str]) -> None:
        words = "".join(element.itertext())
        size = max(_text_size(look) * self._scale, LEAST_TEXT)
        canvas.setFont(BOLD if look.get("font-weight", "") >= "600" else PLAIN, size)
        canvas.setFillColor(HexColor(_long(look.get("fill", "#000"))))
        x, y = self._at((float(element.attrib["x"]), float(element.attrib["y"])))
        turn = re.match(r"rotate\((-?[\d.]+)", element.get("transform", ""))
        canvas.translate(x, y)
        canvas.rotate(-float(turn.group(1)) if turn else 0.0)
        write = {"end": canvas.drawRightString, "middle": canvas.drawCentredString}
        write.get(element.get("text-anchor", ""), canvas.drawString)(0.0, 0.0, words)


def _pen_of(element: Element) -> RecordingPen:
    """The strokes of an element in the drawing's pixels.

    Raises:
        ValueError: the record draws no such element.
    """
    pen = RecordingPen()
    if element.tag == "path":
        parse_path(element.attrib["d"], pen)
        return pen
    if element.tag == "circle":
        x, y, r = (float(element.attrib[name]) for name in ("cx", "cy", "r"))
        parse_path(f"M{x - r} {y}a{r} {r} 0 1 0 {2 * r} 0a{r} {r} 0 1 0 {-2 * r} 0Z", pen)
        return pen
    if element.tag in ("polyline", "polygon"):
        first, *rest = (tuple(map(float, p.split(","))) for p in element.attrib["points"].split())
        pen.moveTo(first)
        for point in rest:
            pen.lineTo(point)
        if element.tag == "polygon":
            pen.closePath()
        return pen
    if element.tag == "rect":
        x, y, w, h = (float(element.attrib[name]) for name in ("x", "y", "width", "height"))
        parse_path(f"M{x} {y}h{w}v{h}h{-w}Z", pen)
        return pen
    raise ValueError(f"a drawing of the record holds <{element.tag}>, which the PDF cannot draw")


def _text_size(look: dict[str, str]) -> float:
    """Height of letters [px]."""
    size = look.get("font-size") or next(
        (word for word in look.get("font", "").split() if word.endswith("px")), "12px"
    )
    return float(size.removesuffix("px"))


def _long(colour: str) -> str:
    """#rgb as #rrggbb."""
    return colour if len(colour) != 4 else "#" + "".join(2 * digit for digit in colour[1:])
