"""The paper of a dimensioned drawing: strokes and texts in pixels, and what is taken of it."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from xml.sax.saxutils import escape

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Spot = tuple[float, float]
"""A place on the paper [px], y downwards."""

LETTER_WIDE, TEXT_TALL = 6.6, 13.0
"""Room for a letter of 11 px and for a line of them [px]; a text face is not known here."""

PAD = 3.0
ARROW, ARROW_HALF = 8.0, 2.2
BETWEEN = 3.0
"""Lines are known by places so far apart [px]."""


@dataclass(frozen=True)
class Label:
    """A text about its middle [px], turned by `angle` [deg] clockwise as SVG counts."""

    text: str
    middle: Spot
    angle: float = 0.0

    @property
    def half(self) -> Spot:
        """Half its width and height [px] before it is turned."""
        return width_of(self.text) / 2.0 + PAD, TEXT_TALL / 2.0

    @property
    def corners(self) -> Floats:
        """Its four corners (4, 2) [px]."""
        (w, h), turn = self.half, math.radians(self.angle)
        c, s = math.cos(turn), math.sin(turn)
        box = np.array([(-w, -h), (w, -h), (w, h), (-w, h)])
        return np.asarray(box @ np.array([(c, s), (-s, c)]) + self.middle)

    @property
    def box(self) -> tuple[float, float, float, float]:
        """The upright box about it [px]."""
        (x0, y0), (x1, y1) = self.corners.min(axis=0), self.corners.max(axis=0)
        return float(x0), float(y0), float(x1), float(y1)


def width_of(text: str) -> float:
    """About how wide a text is [px]."""
    return LETTER_WIDE * (len(text) - 0.7 * text.count("\u2009"))


@dataclass
class Paper:
    """What is drawn, in order, and what of the paper is taken by it."""

    width: float
    height: float
    lines: list[str] = field(default_factory=list)
    texts: list[str] = field(default_factory=list)
    taken: list[tuple[float, float, float, float]] = field(default_factory=list)
    _along: list[Floats] = field(default_factory=list)
    _joined: Floats | None = None

    def avoid(self, places: Floats) -> None:
        """Texts keep off these places (n, 2) [px]."""
        self._along.append(np.asarray(places, dtype=float).reshape(-1, 2))
        self._joined = None

    @property
    def drawn(self) -> Floats:
        """Places along all that is drawn (n, 2) [px]."""
        if self._joined is None:
            self._joined = np.concatenate([np.empty((0, 2)), *self._along])
        return self._joined

    def line(self, a: Spot, b: Spot, kind: str = "dim") -> None:
        """A thin line."""
        way = f"M{a[0]:.1f} {a[1]:.1f}L{b[0]:.1f} {b[1]:.1f}"
        self.lines.append(f'<path class="{kind}" d="{way}"/>')
        self.avoid(places_along(a, b))

    def circle(self, centre: Spot, radius: float) -> None:
        """A centre line round a place."""
        (x, y), turn = centre, np.linspace(0.0, 2.0 * math.pi, max(8, int(2.0 * radius)))
        self.lines.append(f'<circle class="centre" cx="{x:.1f}" cy="{y:.1f}" r="{radius:.1f}"/>')
        self.avoid(np.stack([x + radius * np.cos(turn), y + radius * np.sin(turn)], axis=1))

    def arrow(self, tip: Spot, way: Spot) -> None:
        """A slender filled head that points along `way` (unit vector)."""
        x, y = tip[0] - way[0] * ARROW, tip[1] - way[1] * ARROW
        dx, dy = -way[1] * ARROW_HALF, way[0] * ARROW_HALF
        points = f"{tip[0]:.1f},{tip[1]:.1f} {x + dx:.1f},{y + dy:.1f} {x - dx:.1f},{y - dy:.1f}"
        self.lines.append(f'<polygon class="arrow" points="{points}"/>')

    def write(self, label: Label) -> None:
        """A text on a seam of paper, so that lines do not run into it."""
        self.taken.append(label.box)
        seam = " ".join(f"{x:.1f},{y:.1f}" for x, y in label.corners)
        turn = math.radians(label.angle)
        x = label.middle[0] - 4.0 * math.sin(turn)
        y = label.middle[1] + 4.0 * math.cos(turn)
        turned = f' transform="rotate({label.angle:.1f} {x:.1f} {y:.1f})"' if label.angle else ""
        self.texts.append(f'<polygon class="seam" points="{seam}"/>')
        self.texts.append(
            f'<text class="size" x="{x:.1f}" y="{y:.1f}" text-anchor="middle"{turned}>'
            f"{escape(label.text)}</text>"
        )

    def overlaps(self, label: Label) -> bool:
        """Whether a text would lie on another, or off the paper."""
        x0, y0, x1, y1 = label.box
        if min(x0, y0) < 1.0 or x1 > self.width - 1.0 or y1 > self.height - 1.0:
            return True
        return any(x0 < c and a < x1 and y0 < d and b < y1 for a, b, c, d in self.taken)

    def hides(self, label: Label) -> int:
        """About how much of what is drawn a text would hide, in places that it lies on."""
        x0, y0, x1, y1 = label.box
        x, y = self.drawn.T
        return int(np.count_nonzero((x > x0) & (x < x1) & (y > y0) & (y < y1)))

    def crosses(self, a: Spot, b: Spot) -> int:
        """How many texts a line would run through."""
        p = places_along(a, b)
        return sum(
            bool(np.any(np.all((p > box[:2]) & (p < box[2:]), axis=1))) for box in self.taken
        )

    def meets(self, a: Spot, b: Spot) -> int:
        """About how many drawn lines a line crosses."""
        long = math.dist(a, b) or 1.0
        ux, uy = (b[0] - a[0]) / long, (b[1] - a[1]) / long
        every = self.drawn - a
        along, aside = every @ (ux, uy), every @ (-uy, ux)
        near = along[(np.abs(aside) < 0.75 * BETWEEN) & (along > 0.0) & (along < long)]
        return int(np.count_nonzero(np.diff(np.sort(near)) > 2.0 * BETWEEN) + bool(len(near)))


def places_along(a: Spot, b: Spot) -> Floats:
    """Places along a line (n, 2) [px]."""
    count = max(2, math.ceil(math.dist(a, b) / BETWEEN) + 1)
    return np.linspace(a, b, count)
