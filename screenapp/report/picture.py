"""The record's picture (PNG): the part with the field its verdict rests on, and the largest value.

Drawn with no display and no Qt: the field by our own rasteriser, lines and text by matplotlib,
which brings a text face of its own, so that a bare machine writes the same picture.
"""

from __future__ import annotations

import io
import logging
import math
import warnings
from dataclasses import dataclass, replace

import numpy as np
from matplotlib.axes import Axes
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.colors import ListedColormap, Normalize
from matplotlib.figure import Figure
from matplotlib.patches import Circle, PathPatch
from matplotlib.path import Path
from matplotlib.text import Text
from numpy.typing import NDArray

from screenapp.model.findings import Fields, Findings
from screenapp.model.part import Part, Point
from screenapp.model.progress import SILENT, Progress, Step
from screenapp.model.shape import Shape
from screenapp.report.colours import Scale
from screenapp.report.one_line import one_line
from screenapp.report.picture_field import PaintedField, governing_field
from screenapp.report.raster import Image, Viewport, rasterise

Bytes = NDArray[np.uint8]
Box = tuple[float, float, float, float]
"""x, y, width, height [px], from the lower left corner of the picture."""

WIDTH = 1600
MOST_HEIGHT = 1100
LEAST_HEIGHT = 420
"""Of the drawing alone [px]."""
DPI = 160
MOST_PICTURES = 12
"""Of one record: the case that governs, and others in their order."""

PAPER, INK, QUIET = "#fefefb", "#1c222b", "#5c6470"
VERDICTS = {"holds": ("●", "#2f7d4f"), "does not hold": ("■", "#b3360f")}
OPEN = ("▲", "#8a6100")
"""Shape and colour of a verdict: it is told by both."""

_LEFT, _RIGHT, _TOP, _BOTTOM = 56.0, 236.0, 196.0, 76.0  # margins round the drawing [px]
_PAD = 16.0  # inside the drawing, so that lines and rings at its ends are whole [px]
_LABEL_GAP = 34.0
_RING = 11.0  # radius of the ring at the largest value [px]

logging.getLogger("matplotlib.font_manager").setLevel(logging.ERROR)


@dataclass(frozen=True)
class RecordPicture:
    """A picture of the record: what it shows, in words, and the bytes of its PNG file."""

    words: str
    png: bytes


def record_pictures(
    part: Part, shape: Shape, findings: Findings, progress: Progress = SILENT
) -> tuple[RecordPicture, ...]:
    """The field that the verdict rests on, then for every other case the one of its limit that is
    used most; none where only the record of the findings was kept."""
    if findings.last is None:
        return ()
    first = findings.governing
    shown = [findings]
    for case in findings.cases:
        limits = tuple(limit for limit in findings.limits if limit.case == case.case)
        if limits and first is not None and case.case != first.case:
            own = replace(findings, limits=limits).governing
            assert own is not None
            words = f"{own.name}: {own.verdict}"
            shown.append(replace(findings, limits=limits, verdict=own.verdict, headline=words))
    pictures: list[RecordPicture] = []
    for number, one in enumerate(shown[:MOST_PICTURES]):
        progress.check()
        progress.report(Step("pictures", 0, 0.7 * number / len(shown)))
        field = governing_field(part, one)
        words = f"{field.title}, case “{field.case}”"
        pictures.append(RecordPicture(words, part_picture(part, shape, one)))
    return tuple(pictures)


def part_picture(part: Part, shape: Shape, findings: Findings) -> bytes:
    """The picture as the bytes of a PNG file.

    Raises:
        ValueError: only the record of the findings was kept, not its fields.
    """
    field = governing_field(part, findings)
    fields = findings.last
    assert fields is not None
    x0, y0, x1, y1 = shape.bounds
    room = WIDTH - _LEFT - _RIGHT
    scale = min((room - 2.0 * _PAD) / (x1 - x0), (MOST_HEIGHT - 2.0 * _PAD) / (y1 - y0))
    height = max((y1 - y0) * scale + 2.0 * _PAD, LEAST_HEIGHT)
    figure = Figure((WIDTH / DPI, (height + _TOP + _BOTTOM) / DPI), dpi=DPI, facecolor=PAPER)
    FigureCanvasAgg(figure)  # draws in memory
    view = Viewport(
        0.5 * (x0 + x1 - room / scale),
        0.5 * (y0 + y1 + height / scale),
        1.0 / scale,
        1.0 / scale,
        round(room),
        round(height),
    )
    with warnings.catch_warnings():
        # a letter that no text face on this machine has is drawn as a box
        warnings.filterwarnings("ignore", message="Glyph .* missing from")
        axes = _axes(figure, (_LEFT, _BOTTOM, room, height))
        painted = _paint(axes, shape, fields, field, view)
        _bar(figure, field, (WIDTH - _RIGHT + 44.0, _BOTTOM + 0.06 * height, 26.0, 0.88 * height))
        _heading(figure, part, findings, field)
        if field.at is not None:
            _point_at(axes, field, view, painted)
        data = io.BytesIO()
        title = part.title[:200].encode("ascii", "replace").decode()
        figure.savefig(data, format="png", facecolor=PAPER, metadata={"Title": title})
    return data.getvalue()


def _axes(figure: Figure, box: Box) -> Axes:
    """Axes over a box of the picture, measured in its pixels, with no frame."""
    width, height = figure.get_size_inches() * DPI
    axes = figure.add_axes((box[0] / width, box[1] / height, box[2] / width, box[3] / height))
    axes.set_axis_off()
    return axes


def _paint(
    axes: Axes, shape: Shape, fields: Fields, field: PaintedField, view: Viewport
) -> NDArray[np.bool_]:
    """The field, hatched where it cannot be trusted, and the outline; where the part is."""
    image = rasterise(fields.mesh.nodes, fields.mesh.quads, field.values, view)
    right = view.left + view.width * view.per_pixel_x
    bottom = view.top - view.height * view.per_pixel_y
    axes.imshow(
        coloured(field.scale, image),
        extent=(view.left, right, bottom, view.top),
        interpolation="nearest",
    )
    axes.set_xlim(view.left, right)
    axes.set_ylim(bottom, view.top)
    outline = PathPatch(_path(shape, 0.2 * view.per_pixel_x), fill=False, ec=INK, lw=1.1)
    axes.add_patch(outline)
    for interface in shape.interfaces:  # where thickness or material changes
        line = interface.curve.point(np.linspace(0.0, 1.0, 64))
        axes.plot(*line.T, color=INK, lw=0.7, ls=(0, (6, 3)))
    for at in field.doubtful:
        zone = Circle(
            at, 26.0 * view.per_pixel_x, fill=False, ec=INK, lw=0.0, hatch="//////", alpha=0.75
        )
        axes.add_patch(zone)
        zone.set_clip_path(outline)
    return np.isfinite(image)


def coloured(scale: Scale, image: Image) -> Bytes:
    """Red, green, blue and opacity of an image of values, (height, width, 4)."""
    words = scale.words(image)
    return np.stack([words >> shift & 255 for shift in (16, 8, 0, 24)], axis=-1).astype(np.uint8)


def _path(shape: Shape, tolerance: float) -> Path:
    rings = [shape.polyline(loop, tolerance) for loop in range(len(shape.loops))]
    return Path.make_compound_path(*(Path(np.vstack([r, r[:1]]), closed=True) for r in rings))


def _bar(figure: Figure, field: PaintedField, box: Box) -> None:
    """The colour bar with figures; 1.00 is written wherever utilisation is painted."""
    axes = _axes(figure, box)
    axes.set_axis_on()
    values = np.linspace(field.scale.low, field.scale.high, 1024)
    rgba = coloured(field.scale, values[:, None].astype(np.float32))
    colours = ListedColormap(rgba[:, 0].astype(float) / 255.0)
    low, high = field.scale.low * field.factor, field.scale.high * field.factor
    axes.imshow(
        field.factor * values[:, None],
        cmap=colours,
        norm=Normalize(low, high),
        extent=(0.0, 1.0, low, high),
        origin="lower",
        aspect="auto",
        interpolation="nearest",
    )
    axes.set_xticks([])
    axes.yaxis.tick_right()
    axes.tick_params(axis="y", length=3.0, color=QUIET, labelcolor=INK, labelsize=8.5)
    for edge in axes.spines.values():
        edge.set(color=QUIET, linewidth=0.6)
    above = float(field.values.max(initial=0.0)) > field.scale.high * (1.0 + 1e-9)
    if field.scale.exact_one:
        axes.axhline(1.0, color=INK, lw=1.0)
    if above:
        axes.set_title("and above", fontsize=8.0, color=QUIET, loc="left", pad=4.0)


def _heading(figure: Figure, part: Part, findings: Findings, field: PaintedField) -> None:
    """Title, verdict, what is painted; the caution at the foot."""
    height = float(figure.get_size_inches()[1]) * DPI
    room = WIDTH - 2.0 * _LEFT
    mark, colour = VERDICTS.get(findings.verdict, OPEN)
    _write(figure, (_LEFT, height - 54.0), part.title, room, 15.0, INK, "bold")
    verdict = f"{mark} {findings.headline}"
    below = _write(figure, (_LEFT, height - 94.0), verdict, room, 11.0, colour, "bold", most=2)
    what = f"{field.title} · case “{field.case}”"
    _write(figure, (_LEFT, below - 36.0), what, room, 9.5, QUIET)
    foot = "A screening, not an approval: local codes and a licensed engineer decide."
    if field.doubtful:
        foot = f"Hatched: not settled, no number there can be trusted.  {foot}"
    _write(figure, (_LEFT, 28.0), foot, room, 8.0, QUIET)


def _write(
    figure: Figure,
    at: Point,
    words: str,
    room: float,
    size: float,
    colour: str,
    weight: str = "normal",
    most: int = 1,
) -> float:
    """Text from `at` [px] on at most so many lines, each no longer than `room` [px]; what does not
    fit ends in an ellipsis.  Returns the height of the last line [px]."""
    width, height = figure.get_size_inches() * DPI
    left, y = at
    rest = one_line(words)
    for number in range(1, most + 1):
        text = figure.text(left / width, y / height, "", fontsize=size, color=colour)
        text.set(fontweight=weight, parse_math=False)
        rest = _fit(text, rest, room, whole_words=number < most)
        if not rest:
            break
        y -= 2.9 * size
    return y


def _fit(text: Text, words: str, room: float, whole_words: bool) -> str:
    """Give a text as many of the words as fit; what is left of them, unless it was cut off."""
    text.set_text(words)
    if text.get_window_extent().width <= room:
        return ""
    fits, too_long = 0, len(words)
    while too_long - fits > 1:
        middle = (fits + too_long) // 2
        text.set_text(words[:middle] + "…")
        if text.get_window_extent().width <= room:
            fits = middle
        else:
            too_long = middle
    gap = words.rfind(" ", 0, fits + 1)
    if whole_words and gap > 0:
        text.set_text(words[:gap])
        return words[gap + 1 :]
    text.set_text(words[:fits].rstrip() + "…")
    return ""


def _point_at(axes: Axes, field: PaintedField, view: Viewport, painted: NDArray[np.bool_]) -> None:
    """A ring at the largest value, joined to its words where they hide least of the part."""
    assert field.at is not None
    ring = 2.0 * _RING * 72.0 / DPI
    for width, colour in ((3.0, PAPER), (1.3, INK)):
        axes.plot(
            *field.at, "o", ms=ring, mfc="none", mec=colour, mew=width, zorder=5, clip_on=False
        )
    shown = {"boxstyle": "square,pad=0.5", "fc": PAPER, "ec": QUIET, "lw": 0.7}
    text = axes.text(*field.at, "", fontsize=9.0, color=INK, va="center", ha="center", zorder=7)
    text.set(parse_math=False, bbox=shown, linespacing=1.4)
    lines = [one_line(line) for line in (field.value, field.detail, f"case “{field.case}”")]
    text.set_text("\n".join(line if len(line) <= 60 else line[:59] + "…" for line in lines))
    extent = text.get_window_extent()
    half = 0.5 * extent.width + 16.0, 0.5 * extent.height + 16.0
    x, y = _freest(view.to_pixels(np.asarray(field.at)), half, painted)
    at = view.left + x * view.per_pixel_x, view.top - y * view.per_pixel_y
    text.set_position(at)
    share = _RING * view.per_pixel_x / max(math.dist(at, field.at), 1e-300)
    start = [a + share * (b - a) for a, b in zip(field.at, at, strict=True)]
    axes.plot([start[0], at[0]], [start[1], at[1]], color=INK, lw=0.9, zorder=4)


def _freest(
    at: NDArray[np.float64], half: tuple[float, float], painted: NDArray[np.bool_]
) -> tuple[float, float]:
    """Centre [px, y downwards] of a box of these half sizes beside `at`, inside the drawing, that
    covers the least of what is painted; the nearest of equals."""
    height, width = painted.shape
    best: tuple[float, float, float, float] | None = None
    for reach in (1.0, 1.6, 2.4):
        for angle in np.arange(12) * np.pi / 6.0:
            x = at[0] + np.cos(angle) * reach * (half[0] + _LABEL_GAP)
            y = at[1] + np.sin(angle) * reach * (half[1] + _LABEL_GAP)
            x = float(np.clip(x, half[0], max(width - half[0], half[0])))
            y = float(np.clip(y, half[1], max(height - half[1], half[1])))
            if abs(x - at[0]) < half[0] + 8.0 and abs(y - at[1]) < half[1] + 8.0:
                continue  # it would hide the place itself
            rows = slice(max(int(y - half[1]), 0), int(y + half[1]) + 1)
            columns = slice(max(int(x - half[0]), 0), int(x + half[0]) + 1)
            hidden = float(painted[rows, columns].mean())
            far = float(np.hypot(x - at[0], y - at[1]))
            if best is None or (hidden, far) < best[:2]:
                best = hidden, far, x, y
    return (best[2], best[3]) if best else (float(at[0]), float(at[1]))
