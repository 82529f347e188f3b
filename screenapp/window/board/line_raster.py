"""Thin smooth lines, many at once, brought to a screen-size image of coverage by numpy alone."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from screenapp.report.raster import Viewport, counted

Floats = NDArray[np.float64]
Image = NDArray[np.float32]


def rasterise_lines(starts: Floats, ends: Floats, view: Viewport) -> Image:
    """Coverage (height, width), 0 to 1, of lines one pixel wide between points (n, 2) [mm].

    Each line is stepped along its longer direction; every step spreads over the two nearest pixels
    across it (Wu 1991, from memory).
    """
    size = view.width * view.height
    a, b = view.to_pixels(starts), view.to_pixels(ends)
    a, b = _clip(a, b, view.width, view.height)
    steep = np.abs(b[:, 1] - a[:, 1]) > np.abs(b[:, 0] - a[:, 0])
    total = np.zeros(size)
    for swap in (False, True):
        chosen = steep == swap
        along, across = (1, 0) if swap else (0, 1)
        _draw(total, a[chosen], b[chosen], along, across, view)
    return np.minimum(total, 1.0).astype(np.float32).reshape(view.height, view.width)


def _draw(total: Floats, a: Floats, b: Floats, along: int, across: int, view: Viewport) -> None:
    """Add lines that run mainly along axis `along` to the flat image."""
    backwards = a[:, along] > b[:, along]
    low = np.where(backwards[:, None], b, a)
    high = np.where(backwards[:, None], a, b)
    length = high[:, along] - low[:, along]
    slope = np.divide(
        high[:, across] - low[:, across], length, out=np.zeros_like(length), where=length > 0
    )
    begin = np.ceil(low[:, along])
    count = np.maximum(np.ceil(high[:, along]) - begin, 0).astype(np.int64)
    step = counted(count)
    position = np.repeat(begin.astype(np.int64), count) + step
    place = np.repeat(low[:, across] + (begin - low[:, along]) * slope, count)
    place += step * np.repeat(slope, count)
    floor = np.floor(place)
    share = place - floor
    line = floor.astype(np.int64)
    stride_along, stride_across = (view.width, 1) if along == 1 else (1, view.width)
    most_along, most_across = (view.height, view.width) if along == 1 else (view.width, view.height)
    for offset, weight in ((0, 1.0 - share), (1, share)):
        row = line + offset
        kept = (row >= 0) & (row < most_across) & (position >= 0) & (position < most_along)
        pixel = position[kept] * stride_along + row[kept] * stride_across
        total += np.bincount(pixel, weights=weight[kept], minlength=len(total))


def _clip(a: Floats, b: Floats, width: int, height: int) -> tuple[Floats, Floats]:
    """The pieces within two pixels of the image (Liang and Barsky 1984, from memory)."""
    d = b - a
    enter, leave = np.zeros(len(a)), np.ones(len(a))
    for axis, most in ((0, width), (1, height)):
        for sign, limit in ((-1.0, 2.0), (1.0, most + 1.0)):
            speed = sign * d[:, axis]
            room = limit - sign * a[:, axis]
            t = np.divide(room, speed, out=np.zeros_like(room), where=speed != 0)
            enter = np.where(speed < 0, np.maximum(enter, t), enter)
            leave = np.where(speed > 0, np.minimum(leave, t), leave)
            leave = np.where((speed == 0) & (room < 0), -1.0, leave)
    kept = np.flatnonzero(enter < leave)
    a, d, enter, leave = a[kept], d[kept], enter[kept], leave[kept]
    return a + enter[:, None] * d, a + leave[:, None] * d
