"""The history of a number over the passes as a small vector drawing (SVG) for the record."""

from __future__ import annotations

from xml.sax.saxutils import escape

from screenapp.model.history_figure import HistoryFigure

WIDE, TALL = 216.0, 84.0
_LEFT, _RIGHT, _TOP, _FOOT = 44.0, 12.0, 6.0, 18.0


def history_svg(figure: HistoryFigure) -> str:
    """The drawing; what it shows is said in words too."""
    wide, tall = WIDE - _LEFT - _RIGHT, TALL - _TOP - _FOOT

    def x(share: float) -> float:
        return _LEFT + share * wide

    def y(share: float) -> float:
        return _TOP + (1.0 - share) * tall

    def line(spots: tuple[tuple[float, float], ...]) -> str:
        return " ".join(f"{x(a):.1f},{y(b):.1f}" for a, b in spots)

    body: list[str] = []
    if figure.band is not None:
        low, high = (min(max(end, 0.0), 1.0) for end in figure.band)
        height = max(y(low) - y(high), 1.0)
        body.append(
            f'<rect class="band" x="{_LEFT:.1f}" y="{y(high):.1f}" width="{wide:.1f}" '
            f'height="{height:.1f}"/>'
        )
    body.append(f'<path class="axis" d="M{_LEFT:.1f} {y(0.0):.1f}h{wide:.1f}"/>')
    if figure.allowed is not None:
        low, high = (y(end) for end in figure.allowed)
        body.append(f'<path class="axis" d="M{x(1.0):.1f} {high:.1f}h6V{low:.1f}h-6"/>')
    if figure.growth:
        body.append(f'<polyline class="growth" points="{line(figure.growth)}"/>')
    body.append(f'<polyline class="run" points="{line(figure.points)}"/>')
    body += [f'<circle cx="{x(a):.1f}" cy="{y(b):.1f}" r="2.4"/>' for a, b in figure.points]
    ends = [figure.top]
    if y(figure.bottom[0]) - y(figure.top[0]) > 12.0:
        ends.append(figure.bottom)
    body += [_text(_LEFT - 6.0, y(at) + 4.0, text, "end") for at, text in ends]
    body += [
        _text(_LEFT, TALL - 4.0, figure.left, "start"),
        _text(x(1.0), TALL - 4.0, figure.right, "end"),
    ]
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" class="history {figure.trust}" role="img" '
        f'aria-label="{escape(figure.words, {chr(34): "&quot;"})}" '
        f'viewBox="0 0 {WIDE:.0f} {TALL:.0f}" width="{WIDE:.0f}">' + "".join(body) + "</svg>"
    )


def _text(x: float, y: float, text: str, anchor: str) -> str:
    return f'<text x="{x:.1f}" y="{y:.1f}" text-anchor="{anchor}">{escape(text)}</text>'
