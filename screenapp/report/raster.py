"""Scalar fields on curved nine-node quads, brought to a screen-size image by numpy alone.

Each element is cut into a few plain quads, as many as its size on the screen needs; every plain
quad is filled row by row between the crossings of its edges (scan-line conversion), the value being
linear along edges and along rows.  A field that is linear in x and y is therefore exact.  All work
is vectorised over elements, edges, rows and pixels; nothing loops over elements.

Neighbours never leave a gap: the number of cuts belongs to the element *side* (it depends only on
what both neighbours see of it), and an element that is cut finer than its side pulls its points
there onto the side's coarser line.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.mechanics.shape_functions import values as shape_values

Floats = NDArray[np.float64]
Image = NDArray[np.float32]
Ints = NDArray[np.int64]

CUT_PIXELS = 10.0
"""Longest plain-quad side aimed at [px]."""

MOST_CUTS = 64
"""No side is cut finer than this."""

_NUDGE = 1.37e-7
"""Pixel centres are sampled this far off [px], so that mesh lines that fall on pixel centres (as
those of structured meshes do) never meet a sample: rounding could put it in neither neighbour."""

_SIDE_NODES = ((0, 4, 1), (1, 5, 2), (2, 6, 3), (3, 7, 0))
_CHUNK = 30_000  # plain quads filled at a time: keeps the working arrays in the cache


@dataclass(frozen=True)
class Viewport:
    """What the screen shows: `width` x `height` pixels, row 0 at the top.

    Attributes:
        left, top: the upper left corner of the upper left pixel [mm].
        per_pixel_x, per_pixel_y: size of one pixel [mm], both positive.
    """

    left: float
    top: float
    per_pixel_x: float
    per_pixel_y: float
    width: int
    height: int

    def to_pixels(self, points: Floats) -> Floats:
        """Points (..., 2) [mm] in pixels, integers being the centres of pixels; y downwards."""
        return np.stack(
            [
                (points[..., 0] - self.left) / self.per_pixel_x - 0.5,
                (self.top - points[..., 1]) / self.per_pixel_y - 0.5,
            ],
            axis=-1,
        )

    def pixel_centres(self) -> tuple[Floats, Floats]:
        """x of each column (width,) and y of each row (height,) [mm]."""
        x = self.left + (np.arange(self.width) + 0.5) * self.per_pixel_x
        y = self.top - (np.arange(self.height) + 0.5) * self.per_pixel_y
        return np.asarray(x), np.asarray(y)


def rasterise(points: Floats, quads: Ints, values: Floats, view: Viewport) -> Image:
    """The field as an image (height, width), NaN where there is no element.

    Args:
        points: places of the nodes, as drawn (deformed if wished) [mm], (n_nodes, 2).
        quads: nine-node quads as in `screenapp.model.mesh`, (n_elements, 9).
        values: one scalar for each node (n_nodes,), or each element's own at its nodes
            (n_elements, 9) for fields that jump between elements.
        view: the part of the plane to draw and its pixels.

    Raises:
        ValueError: `values` fits neither the nodes nor the elements.
    """
    if values.shape not in ((len(points),), quads.shape):
        raise ValueError(
            f"values of shape {values.shape} fit neither {len(points)} nodes "
            f"nor {len(quads)} quads of nine nodes"
        )
    image = np.full(view.height * view.width, np.nan, dtype=np.float32)
    if len(quads) == 0 or image.size == 0:
        return image.reshape(view.height, view.width)
    xy = view.to_pixels(points) + _NUDGE
    seen = _in_view(xy, quads, view)
    quads = quads[seen]
    nodal = values[quads] if values.ndim == 1 else values[seen]
    for vertices in _plain_quads(xy, quads, nodal):
        for start in range(0, len(vertices), _CHUNK):
            _fill(image, _convex(vertices[start : start + _CHUNK]), view.width, view.height)
    return image.reshape(view.height, view.width)


def _in_view(xy: Floats, quads: Ints, view: Viewport) -> Ints:
    """Indices of the quads whose box meets the image."""
    x, y = xy[quads, 0], xy[quads, 1]
    # A curved side may bulge past its nodes by at most a quarter of its mid-node's offset; a box
    # widened by a third of its size holds it whatever the curve.
    x0, x1, y0, y1 = x.min(axis=1), x.max(axis=1), y.min(axis=1), y.max(axis=1)
    dx, dy = (x1 - x0) / 3.0, (y1 - y0) / 3.0
    keep = (x1 + dx >= 0) & (x0 - dx <= view.width) & (y1 + dy >= 0) & (y0 - dy <= view.height)
    return np.flatnonzero(keep)


def _side_cuts(xy: Floats, quads: Ints) -> Ints:
    """Number of pieces of each side, a power of two, (n_elements, 4)."""
    cuts = np.empty((len(quads), 4), dtype=np.int64)
    for k, (i, m, j) in enumerate(_SIDE_NODES):
        a, b, mid = xy[quads[:, i]], xy[quads[:, j]], xy[quads[:, m]]
        chord = b - a
        sag = mid - 0.5 * (a + b)
        # Both terms are the same seen from either neighbour, to the last bit.
        length = np.hypot(chord[:, 0], chord[:, 1]) + 2.0 * np.hypot(sag[:, 0], sag[:, 1])
        level = np.ceil(np.log2(np.maximum(length / CUT_PIXELS, 1.0)))
        cuts[:, k] = np.minimum(2 ** np.minimum(level, 20).astype(np.int64), MOST_CUTS)
    return cuts


def _plain_quads(xy: Floats, quads: Ints, nodal: Floats) -> Iterator[Floats]:
    """Vertices of plain quads (n, 4, 3) with x, y [px] and value, one array for each fineness."""
    side_cuts = _side_cuts(xy, quads)
    cuts = side_cuts.max(axis=1, initial=1)
    for n in np.unique(cuts):
        chosen = np.flatnonzero(cuts == n)
        corners = np.concatenate([xy[quads[chosen]], nodal[chosen, :, None]], axis=2)
        if n == 1:
            yield corners[:, :4]
            continue
        step = max(1, _CHUNK // int(n * n))
        for start in range(0, len(chosen), step):
            part = slice(start, start + step)
            grid = _grid(corners[part], int(n))
            _join_sides(grid, side_cuts[chosen[part]], int(n))
            yield _cells(grid)


def _grid(corners: Floats, n: int) -> Floats:
    """(n_elements, n + 1, n + 1, 3): points of each element, η along axis 1, ξ along axis 2."""
    line = np.linspace(-1.0, 1.0, n + 1)
    eta, xi = np.meshgrid(line, line, indexing="ij")
    shape = shape_values(9, np.stack([xi.ravel(), eta.ravel()], axis=1))
    return np.asarray(shape @ corners).reshape(len(corners), n + 1, n + 1, 3)


def _join_sides(grid: Floats, side_cuts: Ints, n: int) -> None:
    """Pull the points of each side that is cut into fewer than n pieces onto its coarser line."""
    lines = (grid[:, 0, :], grid[:, :, n], grid[:, n, :], grid[:, :, 0])  # views, ends included
    for k, line in enumerate(lines):
        for m in np.unique(side_cuts[:, k]):
            if m == n:
                continue
            chosen = np.flatnonzero(side_cuts[:, k] == m)
            stride = n // int(m)
            coarse = line[chosen][:, ::stride]
            t = (np.arange(stride) / stride)[:, None]
            between = coarse[:, :-1, None] * (1.0 - t) + coarse[:, 1:, None] * t
            line[chosen, :n] = between.reshape(len(chosen), n, 3)


def _cells(grid: Floats) -> Floats:
    """Vertices (n_cells, 4, 3) of all cells of the grids, each run round once."""
    return np.stack(
        [grid[:, :-1, :-1], grid[:, :-1, 1:], grid[:, 1:, 1:], grid[:, 1:, :-1]], axis=3
    ).reshape(-1, 4, 3)


def _convex(vertices: Floats) -> Floats:
    """The same quads, those with an inward corner cut there into two triangles (last vertex twice).

    Rows would cross such a quad four times.
    """
    back = vertices[:, [3, 0, 1, 2], :2] - vertices[..., :2]
    on = vertices[:, [1, 2, 3, 0], :2] - vertices[..., :2]
    turn = on[..., 0] * back[..., 1] - on[..., 1] * back[..., 0]
    most = (turn > 0).sum(axis=1)
    bent = np.flatnonzero((most == 1) | (most == 3))
    if len(bent) == 0:
        return vertices
    odd = (turn[bent] > 0) == (most[bent] == 1)[:, None]
    first = odd.argmax(axis=1)
    at = (first[:, None] + np.arange(4)) % 4
    turned = vertices[bent[:, None], at]  # the inward corner first
    straight = np.delete(vertices, bent, axis=0)
    return np.concatenate([straight, turned[:, [0, 1, 2, 2]], turned[:, [0, 2, 3, 3]]])


def _fill(image: Image, vertices: Floats, width: int, height: int) -> None:
    """Paint plain convex quads (n, 4, 3) into the flat image (height * width,)."""
    first, last, base, rows = _row_ranges(vertices[..., 1], height)
    if rows == 0:
        return
    left, right, row = _crossings(vertices, first, last, base, rows, height)
    _paint_rows(image, left, right, row, width)


def _row_ranges(y: Floats, height: int) -> tuple[Ints, Ints, Ints, int]:
    """First row and the row past the last of each quad, where its rows start in one long list of
    rows, and the length of that list."""
    first = np.ceil(np.clip(y.min(axis=1), 0, height)).astype(np.int64)
    last = np.ceil(np.clip(y.max(axis=1), 0, height)).astype(np.int64)
    ends = np.cumsum(last - first)
    return first, last, ends - (last - first), int(ends[-1]) if len(ends) else 0


def _crossings(
    vertices: Floats, first: Ints, last: Ints, base: Ints, rows: int, height: int
) -> tuple[Floats, Floats, Ints]:
    """Where each row of each quad starts and ends: (rows, 2) with x and value, and the row.

    A convex quad has one edge that rises and one that falls across any row, so the two crossings
    go to two lists by the edge's sense; ordering each edge from its lower end first makes both
    neighbours compute the same crossing.
    """
    other = vertices[:, [1, 2, 3, 0]]
    rising = vertices[..., 1] < other[..., 1]
    low = np.where(rising[..., None], vertices, other).reshape(-1, 3)
    high = np.where(rising[..., None], other, vertices).reshape(-1, 3)
    begin = np.ceil(np.clip(low[:, 1], 0, height))
    count = (np.ceil(np.clip(high[:, 1], 0, height)) - begin).astype(np.int64)
    edges = np.flatnonzero(count)
    low, high, begin, count = low[edges], high[edges], begin[edges], count[edges]
    slope = (high - low) / (high[:, 1] - low[:, 1])[:, None]
    start = low + (begin - low[:, 1])[:, None] * slope
    quad = edges // 4
    place = base[quad] + begin.astype(np.int64) - first[quad]
    place += np.where(rising.reshape(-1)[edges], 0, rows)
    table = np.stack([start[:, 0], slope[:, 0], start[:, 2], slope[:, 2]], axis=1)
    long = np.repeat(table, count, axis=0)
    step = counted(count)
    target = np.repeat(place, count) + step
    crossing = np.empty((2 * rows, 2))
    crossing[target, 0] = long[:, 0] + step * long[:, 1]
    crossing[target, 1] = long[:, 2] + step * long[:, 3]
    height_of = last - first
    row = np.repeat(first, height_of) + counted(height_of)
    return crossing[:rows], crossing[rows:], row


def _paint_rows(image: Image, a: Floats, b: Floats, row: Ints, width: int) -> None:
    """Paint the pixels whose centres lie between crossings `a` and `b` of each row."""
    swap = a[:, 0] > b[:, 0]
    left = np.where(swap[:, None], b, a)
    right = np.where(swap[:, None], a, b)
    begin = np.ceil(np.clip(left[:, 0], 0, width))
    count = (np.ceil(np.clip(right[:, 0], 0, width)) - begin).astype(np.int64)
    kept = np.flatnonzero(count)
    left, right, begin, count = left[kept], right[kept], begin[kept], count[kept]
    slope = (right[:, 1] - left[:, 1]) / (right[:, 0] - left[:, 0])
    value = left[:, 1] + (begin - left[:, 0]) * slope
    step = counted(count)
    pixel = np.repeat(row[kept] * width + begin.astype(np.int64), count) + step
    image[pixel] = np.repeat(value, count) + step * np.repeat(slope, count)


def counted(count: Ints) -> Ints:
    """0, 1, ... count[0] - 1, 0, 1, ... count[1] - 1, and so on."""
    ends = np.cumsum(count)
    total = int(ends[-1]) if len(ends) else 0
    return np.arange(total) - np.repeat(ends - count, count)
