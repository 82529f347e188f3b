"""The part as a vector drawing (SVG) for the record: outline, holes, mesh and peaks."""

from __future__ import annotations

import math
from typing import Protocol
from xml.sax.saxutils import escape

import numpy as np

from screenapp.model.curves import Curve, Segment
from screenapp.model.findings import Findings
from screenapp.model.part import Part
from screenapp.model.shape import Shape
from screenapp.model.support_records import stands_on
from screenapp.report.dimension_paper import Label, Paper, width_of

WIDTH = 720.0
MARGIN = 48.0


class Scaled(Protocol):
    """Turns mm into a drawing's pixels, y downwards; `scale` is pixels per mm."""

    scale: float

    def at(self, x: float, y: float) -> tuple[float, float]:
        """A place [mm] on the paper [px]."""


class _Paper:
    """Turns mm into the drawing's pixels, y downwards."""

    def __init__(self, shape: Shape) -> None:
        x0, y0, x1, y1 = shape.bounds
        span = max(x1 - x0, (y1 - y0) * 1.2)
        self.scale = (WIDTH - 2.0 * MARGIN) / span
        self.x0, self.y1 = x0, y1
        self.width = (x1 - x0) * self.scale + 2.0 * MARGIN
        self.height = (y1 - y0) * self.scale + 2.0 * MARGIN

    def at(self, x: float, y: float) -> tuple[float, float]:
        return MARGIN + (x - self.x0) * self.scale, MARGIN + (self.y1 - y) * self.scale


def part_svg(part: Part, shape: Shape, findings: Findings) -> str:
    """The part with its mesh in the background and its peaks numbered as in the tables."""
    paper = _Paper(shape)
    body = [_mesh_path(findings, paper), *zone_paths(shape, paper), boundary_path(shape, paper)]
    body += _names(part, shape, paper)
    names: dict[tuple[int, int], list[str]] = {}
    number = 0
    for case in findings.cases:
        for peak in case.peaks:
            number += 1
            x, y = paper.at(*peak.at)
            kind = "open" if peak.estimate.trust != "settled" else "firm"
            body.append(f'<circle class="peak {kind}" cx="{x:.1f}" cy="{y:.1f}" r="4"/>')
            names.setdefault((round(x), round(y)), []).append(str(number))
    for probe in part.readings:
        x, y = paper.at(*probe.at)
        body.append(f'<path class="probe" d="M{x - 5:.1f} {y:.1f}h10M{x:.1f} {y - 5:.1f}v10"/>')
        names.setdefault((round(x), round(y)), []).append(probe.name)
    body += _beside(names, paper)
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" role="img" aria-label="The part with its mesh" '
        f'viewBox="0 0 {paper.width:.0f} {paper.height:.0f}" width="{paper.width:.0f}">'
        + "".join(body)
        + "</svg>"
    )


def _beside(names: dict[tuple[int, int], list[str]], paper: _Paper) -> list[str]:
    """Numbers and names beside their places; those of one place in one text, none on another."""
    room = Paper(paper.width, paper.height)
    room.taken += [(x - 5.0, y - 5.0, x + 5.0, y + 5.0) for x, y in names]
    out: list[str] = []
    for (x, y), several in names.items():
        text = ", ".join(several)
        half = width_of(text) / 2.0
        places = [
            (x + way * (half + 8.0 + reach), y + up * (8.0 + reach))
            for reach in (0.0, 8.0, 18.0, 30.0)
            for way, up in ((1, -1), (-1, -1), (1, 1), (-1, 1), (1, 0), (-1, 0))
        ]
        labels = [Label(text, place) for place in places]
        label = next((one for one in labels if not room.overlaps(one)), labels[0])
        room.taken.append(label.box)
        at = f'x="{label.middle[0]:.1f}" y="{label.middle[1] + 4.0:.1f}"'
        out.append(f'<text class="number" {at} text-anchor="middle">{escape(text)}</text>')
    return out


def boundary_path(shape: Shape, paper: Scaled) -> str:
    """Outline and holes as one path."""
    data: list[str] = []
    for first, last in shape.loops:
        start = paper.at(*shape.curves[first].curve.start)
        data.append(f"M{start[0]:.2f} {start[1]:.2f}")
        data += [_piece(piece.curve, paper) for piece in shape.curves[first:last]]
        data.append("Z")
    return f'<path class="outline" d="{"".join(data)}"/>'


def zone_paths(shape: Shape, paper: Scaled) -> list[str]:
    """Lines between zones."""
    paths = []
    for interface in shape.interfaces:
        x, y = paper.at(*interface.curve.start)
        paths.append(f'<path class="zone" d="M{x:.2f} {y:.2f}{_piece(interface.curve, paper)}"/>')
    return paths


def _piece(curve: Curve, paper: Scaled) -> str:
    x, y = paper.at(*curve.end)
    if isinstance(curve, Segment):
        return f"L{x:.2f} {y:.2f}"
    r = curve.radius * paper.scale
    large = int(abs(curve.sweep) > math.pi)
    turn = int(curve.sweep < 0.0)  # y points down on paper
    return f"A{r:.2f} {r:.2f} 0 {large} {turn} {x:.2f} {y:.2f}"


def _mesh_path(findings: Findings, paper: _Paper) -> str:
    fields = findings.last
    if fields is None:
        return ""
    mesh = fields.mesh
    pairs = np.sort(np.concatenate([mesh.quads[:, [i, (i + 1) % 4]] for i in range(4)]), axis=1)
    pairs = np.unique(pairs, axis=0)
    rim = {tuple(sorted((int(a), int(b)))) for a, _, b in mesh.side_nodes}
    data: list[str] = []
    for a, b in pairs:
        if (int(a), int(b)) in rim:
            continue
        x0, y0 = paper.at(*mesh.nodes[a])
        x1, y1 = paper.at(*mesh.nodes[b])
        data.append(f"M{x0:.1f} {y0:.1f}L{x1:.1f} {y1:.1f}")
    return f'<path class="mesh" d="{"".join(data)}"/>'


def _names(part: Part, shape: Shape, paper: _Paper) -> list[str]:
    """What supports and loads stand on, named where it is."""
    held = {on for s in part.supports for on in stands_on(s)}
    loaded = {load.on for case in part.cases for load in case.loads if hasattr(load, "on")}
    out: list[str] = []
    for feature in sorted(held | loaded):
        pieces = shape.pieces_of(feature)
        if pieces:
            at = np.mean([shape.curves[i].curve.point(0.5) for i in pieces], axis=0)
        else:
            found = dict(shape.sharp_corners).get(feature)
            if found is None:
                continue
            at = np.asarray(found)
        x, y = paper.at(float(at[0]), float(at[1]))
        kind = "support" if feature in held else "load"
        out.append(
            f'<text class="{kind}" x="{x:.1f}" y="{y + 4:.1f}" text-anchor="middle">'
            f"{escape(feature)}</text>"
        )
    return out
