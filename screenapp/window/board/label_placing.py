"""Places texts so that they cover neither one another nor what must stay seen: greedy, the first
wish first, each at the best of its choices."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from PySide6.QtCore import QPointF, QRectF, QSizeF

LOST, CLASH, CROSS, LATER = 30.0, 12.0, 1.5, 0.06
"""What speaks against a choice: the share that leaves the view, the share of it or of what it
covers (whichever is smaller), each line that runs through it, each better choice passed over."""

GAP = 3.0
"""Least distance between two texts [px]."""

Spot = QPointF


@dataclass(frozen=True)
class Wish:
    """A text to be placed: its size and its choices of upper left corners [px], best first."""

    size: QSizeF
    choices: tuple[QPointF, ...]


def place(
    wishes: Sequence[Wish],
    taken: Sequence[QRectF],
    area: QRectF,
    lines: Sequence[QRectF] = (),
) -> list[QRectF]:
    """Where each text goes [px].

    Args:
        wishes: the texts, the most important first.
        taken: what must not be covered.
        area: the view.
        lines: boxes of thin lines that are better not crossed.
    """
    full = [box for box in taken if not box.isEmpty()]
    found: list[QRectF] = []
    for wish in wishes:
        boxes = [QRectF(corner, wish.size) for corner in wish.choices]
        costs = [_cost(box, i, full, area, lines) for i, box in enumerate(boxes)]
        best = boxes[costs.index(min(costs))]
        found.append(best)
        full.append(best.adjusted(-GAP, -GAP, GAP, GAP))
    return found


def _cost(
    box: QRectF, rank: int, taken: Sequence[QRectF], area: QRectF, lines: Sequence[QRectF]
) -> float:
    size = box.width() * box.height()
    lost = 1.0 - _common(box, area) / size
    covered = sum(_common(box, o) / min(size, o.width() * o.height()) for o in taken)
    touched = sum(1 for other in taken if other.intersects(box))
    crossed = sum(1 for line in lines if line.intersects(box))
    return LOST * lost + CLASH * (covered + 0.25 * touched) + CROSS * min(crossed, 3) + LATER * rank


def _common(a: QRectF, b: QRectF) -> float:
    both = a.intersected(b)
    return max(both.width(), 0.0) * max(both.height(), 0.0)


def round_about(anchor: QPointF, size: QSizeF, gaps: Sequence[float]) -> tuple[QPointF, ...]:
    """Upper left corners of boxes all round a place: below, above, right, left, then between, at
    each of the gaps [px] in turn."""
    w, h = size.width(), size.height()
    corners: list[QPointF] = []
    for gap in gaps:
        slant = gap * math.sqrt(0.5)
        x, y = anchor.x(), anchor.y()
        corners += [
            QPointF(x - w / 2, y + gap),
            QPointF(x - w / 2, y - gap - h),
            QPointF(x + gap, y - h / 2),
            QPointF(x - gap - w, y - h / 2),
            QPointF(x + slant, y + slant),
            QPointF(x - slant - w, y + slant),
            QPointF(x + slant, y - slant - h),
            QPointF(x - slant - w, y - slant - h),
        ]
    return tuple(corners)


def round_text(middle: QPointF, size: QSizeF) -> tuple[QPointF, ...]:
    """Upper left corners for a text that best stands round `middle`, then ever farther off."""
    w, h = size.width(), size.height()
    first = QPointF(middle.x() - w / 2, middle.y() - h / 2)
    steps = [
        (0.0, 0.0),
        *((0.0, s * h) for s in (-0.7, 0.7, -1.3, 1.3)),
        *((s * (w / 2 + 8.0), 0.0) for s in (1.0, -1.0)),
        *((sx * (w / 2 + 8.0), sy * h) for sy in (-1.0, 1.0) for sx in (1.0, -1.0)),
        *((0.0, s * h) for s in (-2.4, 2.4)),
        *((s * (w + 12.0), 0.0) for s in (1.0, -1.0)),
    ]
    return tuple(first + QPointF(dx, dy) for dx, dy in steps)
