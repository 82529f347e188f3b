"""The mesh's lines, pale and one pixel wide, hidden where they would crowd."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from screenapp.model.mesh import Mesh
from screenapp.report.colours import Words, veil
from screenapp.report.raster import Image, Viewport
from screenapp.window.board.field_item import bounds_of
from screenapp.window.board.line_raster import rasterise_lines
from screenapp.window.board.screen_item import Z_MESH
from screenapp.window.board.view_image import ViewImage

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

HIDDEN_BELOW, FULL_ABOVE = 4.0, 9.0
"""Mean element size [px] below which no mesh is drawn, and above which it has its full strength."""

PIECES = 6
"""A curved side is drawn as this many straight pieces."""


class MeshItem(ViewImage):
    """Shows the sides of the elements."""

    def __init__(self) -> None:
        super().__init__(Z_MESH)
        self._known: tuple[Mesh, Floats] | None = None

    def show_mesh(self, mesh: Mesh, points: Floats, colour: str, strength: float) -> None:
        """Show the mesh, nodes at `points` (n_nodes, 2) [mm], at a strength of 0 to 1."""
        words = line_colours(colour, strength)
        known = self._known
        if not self.blank and known is not None and known[0] is mesh and known[1] is points:
            self.set_colour(words)
            return
        self._known = (mesh, points)
        lines: list[tuple[Floats, Floats, Floats]] = []

        def render(view: Viewport) -> Image:
            if not lines:  # worked out in the thread, once
                lines.append((*mesh_lines(mesh, points), mesh.element_sizes))
            starts, ends, sizes = lines[0]
            share = _visible_share(mesh, points, sizes, view)
            if share <= 0.0:
                return np.zeros((view.height, view.width), dtype=np.float32)
            return np.asarray(rasterise_lines(starts, ends, view) * np.float32(share))

        self.set_render(render, words, bounds_of(points))

    def clear(self) -> None:
        """Show nothing."""
        self.hide_picture()


def line_colours(colour: str, strength: float) -> Callable[[Image], Words]:
    """Turns coverage into lines of a colour (#rrggbb) and strength."""
    table = veil(colour, strength)

    def words(coverage: Image) -> Words:
        return np.asarray(table[(coverage * np.float32(255)).astype(np.uint8)])

    return words


def mesh_lines(mesh: Mesh, points: Floats) -> tuple[Floats, Floats]:
    """Starts and ends (n, 2) [mm] of straight lines along every side, each side once.

    A side whose middle node lies off its chord is cut into pieces along its parabola.
    """
    quads = mesh.quads
    sides = np.concatenate([quads[:, [k, 4 + k, (k + 1) % 4]] for k in range(4)])
    _, first = np.unique(sides[:, 1], return_index=True)  # neighbours share the middle node
    a, mid, b = np.moveaxis(points[sides[first]], 1, 0)
    sag = np.hypot(*(mid - 0.5 * (a + b)).T)
    bent = sag > 1e-6 * np.hypot(*(b - a).T)
    t = np.linspace(0.0, 1.0, PIECES + 1)[:, None, None]
    a2, m2, b2 = a[bent], mid[bent], b[bent]
    curve = a2 * (1 - t) * (1 - 2 * t) + m2 * 4 * t * (1 - t) + b2 * t * (2 * t - 1)
    starts = np.concatenate([a[~bent], curve[:-1].reshape(-1, 2)])
    ends = np.concatenate([b[~bent], curve[1:].reshape(-1, 2)])
    return starts, ends


def _visible_share(mesh: Mesh, points: Floats, sizes: Floats, view: Viewport) -> float:
    """Strength from 0 to 1 by the mean size on the screen of the elements in view."""
    centres = view.to_pixels(points[mesh.quads[:, 8]])
    seen = (centres >= 0).all(axis=1) & (centres <= (view.width, view.height)).all(axis=1)
    if not seen.any():
        return 1.0  # zoomed into one element
    mean = float(sizes[seen].mean()) / view.per_pixel_x
    return float(np.clip((mean - HIDDEN_BELOW) / (FULL_ABOVE - HIDDEN_BELOW) * 0.8 + 0.2, 0, 1)) * (
        mean >= HIDDEN_BELOW
    )
