"""The stress along a cut as a vector drawing (SVG) for the record."""

from __future__ import annotations

from xml.sax.saxutils import escape

from screenapp.model.cut_figure import CutFigure

WIDE, TALL = 420.0, 150.0
_LEFT, _RIGHT, _TOP, _FOOT = 52.0, 10.0, 6.0, 18.0


def cut_svg(figure: CutFigure) -> str:
    """The drawing; what it shows is said in words too."""
    wide, tall = WIDE - _LEFT - _RIGHT, TALL - _TOP - _FOOT

    def spots(line: tuple[tuple[float, float], ...]) -> str:
        return " ".join(f"{_LEFT + x * wide:.1f},{_TOP + (1.0 - y) * tall:.1f}" for x, y in line)

    zero = _TOP + (1.0 - figure.zero) * tall
    body = [f'<polygon class="band" points="{spots(band)}"/>' for band in figure.bands]
    body.append(f'<path class="axis" d="M{_LEFT:.1f} {zero:.1f}h{wide:.1f}"/>')
    body += [f'<polyline class="linear" points="{spots(line)}"/>' for line in figure.linear]
    body += [f'<polyline class="beam" points="{spots(line)}"/>' for line in figure.beam]
    body += [f'<polyline class="run" points="{spots(line)}"/>' for line in figure.stress]
    taken: list[float] = []
    for height, text in (*figure.values, (figure.zero, "0")):
        y = _TOP + (1.0 - height) * tall
        if all(abs(y - other) >= 12.0 for other in taken):
            body.append(_text(_LEFT - 6.0, y + 4.0, text, "end"))
            taken.append(y)
    body.append(_text(_LEFT, TALL - 4.0, figure.left, "start"))
    body.append(_text(WIDE - _RIGHT, TALL - 4.0, figure.right, "end"))
    words = escape(figure.words, {'"': "&quot;"})
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" class="history {figure.trust}" role="img" '
        f'aria-label="{words}" viewBox="0 0 {WIDE:.0f} {TALL:.0f}" width="{WIDE:.0f}">'
        + "".join(body)
        + "</svg>"
    )


def _text(x: float, y: float, text: str, anchor: str) -> str:
    return f'<text x="{x:.1f}" y="{y:.1f}" text-anchor="{anchor}">{escape(text)}</text>'
