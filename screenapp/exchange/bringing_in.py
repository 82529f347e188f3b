"""From a drawing to a part: choose layers, scale, fit, tidy, join, nest, recognise, report.

    Drawing ──layers, unit──▶ curves [mm] ──▶ segments and arcs ──▶ nothing twice ──▶ rings
                                                                                        │
        Part ◀── circles, slots, rounds recognised ◀── outline and holes by nesting ◀───┘

Nothing is changed in silence: whatever was fitted, closed, taken once or left out is in the
remarks, with its place.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

import numpy as np

from screenapp.exchange import report
from screenapp.exchange.biarcs import arcs_of
from screenapp.exchange.choosing import Wishes, chosen_curves, in_inches, roles_of, scale_of
from screenapp.exchange.drawing import (
    AnyCurve,
    Drawing,
    DrawingError,
    DrawnCurve,
    PlainCurve,
    Remark,
)
from screenapp.exchange.free_curves import EllipseArc, Spline
from screenapp.exchange.joining import Joined, OpenChain, join
from screenapp.exchange.nesting import Nest, meets, nests_of
from screenapp.exchange.overlaps import without_overlaps
from screenapp.exchange.recognition import Ids, hole_of, loop_of
from screenapp.exchange.rings import Ring, boxes, enclosed
from screenapp.model.curves import Arc, Curve, Segment
from screenapp.model.part import Part, Point, Zone
from screenapp.model.progress import SILENT, Progress, Step

FARTHEST = 1e4
"""A part that lies farther from the origin than this many times its size is moved there."""

THICKER = 2.0
"""A zone begins as a pad of so many times the wall: a drawing does not say how thick it is."""

OFTEN = 256


@dataclass(frozen=True)
class Candidate:
    """One of several outlines: its bounds [mm], the number of its holes, whether in a hole."""

    bounds: tuple[float, float, float, float]
    holes: int
    inside: bool


@dataclass(frozen=True)
class Brought:
    """What became of a drawing.

    Attributes:
        part: the part, or None; its shape may still have faults.
        error: why there is none.
        remarks: sentences for the user, with places [mm].
        candidates: all outlines found, the largest first.
        lines: the curves of the layers used, tidied [mm].
        open_chains: chains that do not close [mm].
    """

    part: Part | None
    error: DrawingError | None
    remarks: tuple[Remark, ...] = ()
    candidates: tuple[Candidate, ...] = ()
    lines: tuple[Curve, ...] = ()
    open_chains: tuple[OpenChain, ...] = ()


def bring_in(drawing: Drawing, wishes: Wishes, progress: Progress = SILENT) -> Brought:
    """The part that a drawing shows; what stands in the way is in `error`.

    Raises:
        QuantityError: the unit wished for is no length.
        Cancelled: the user wanted to stop.
    """
    remarks = report.of_reading(drawing)
    try:
        scale = scale_of(drawing, wishes)
        groups = chosen_curves(drawing, wishes)
    except DrawingError as error:
        if wishes.unit is None and drawing.unit is None:
            remarks.insert(0, report.of_extent(*_extent(drawing)))
        return Brought(None, error, tuple(remarks))
    left_out = [name for name, role in roles_of(drawing, wishes) if role == "left out"]
    remarks += report.of_layers(drawing, left_out)
    curves = {
        role: _plain_curves(drawn, scale, wishes.tolerance, remarks, progress)
        for role, drawn in groups.items()
    }
    shift = _shift(curves["shape"])
    if shift != (0.0, 0.0):
        curves = {
            role: [replace(c, curve=moved(c.curve, shift)) for c in listed]
            for role, listed in curves.items()
        }
        remarks.append(report.of_shift(shift))
    joined = {
        role: _joined(listed, wishes.tolerance, remarks, progress)
        for role, listed in curves.items()
    }
    progress.report(Step("finding outline and holes", 0, 0.8))
    brought = _part_of(drawing, wishes, joined["shape"], joined["zone"], remarks, progress)
    lines = tuple(c.curve for listed in curves.values() for c in listed)
    return replace(brought, lines=lines, remarks=tuple(remarks))


def _extent(drawing: Drawing) -> Point:
    """Width and height of all lines, about, in units of the drawing."""
    places = [
        c.curve.point(np.asarray(c.curve.breaks))
        if isinstance(c.curve, EllipseArc | Spline)
        else c.curve.point(np.linspace(0.0, 1.0, 5))
        for c in drawing.curves
    ]
    wide, tall = np.ptp(np.concatenate(places), axis=0)
    return float(wide), float(tall)


def _joined(
    curves: list[PlainCurve], tolerance: float, remarks: list[Remark], progress: Progress
) -> Joined:
    progress.check()
    progress.report(Step("joining lines", 0, 0.5))
    single, removed = without_overlaps(curves, tolerance, progress)
    joined = join([c.curve for c in single], tolerance, progress)
    remarks += report.of_removed(removed)
    remarks += report.of_joining(joined)
    return joined


# --- curves -------------------------------------------------------------------------------------


def _plain_curves(
    chosen: list[DrawnCurve],
    scale: float,
    tolerance: float,
    remarks: list[Remark],
    progress: Progress,
) -> list[PlainCurve]:
    """Segments and arcs in mm; splines and ellipses fitted, pieces without length dropped."""
    plain: list[PlainCurve] = []
    fitted = arcs = specks = 0
    for number, drawn in enumerate(chosen):
        if number % OFTEN == 0:
            progress.check()
            progress.report(Step("fitting curves", 0, 0.4 * number / len(chosen)))
        curve = scaled(drawn.curve, scale)
        if isinstance(curve, EllipseArc | Spline):
            pieces = arcs_of(curve, tolerance)
            fitted += 1
            arcs += len(pieces)
        else:
            pieces = [curve]
        long_ = [p for p in pieces if p.length > 0.0 and math.isfinite(p.length)]
        specks += len(pieces) - len(long_)
        plain += [PlainCurve(p, drawn.layer) for p in long_]
    remarks += report.of_fitting(fitted, arcs, specks, tolerance)
    return plain


def scaled(curve: AnyCurve, factor: float) -> AnyCurve:
    """A curve in another unit of length."""
    if factor == 1.0:
        return curve
    if isinstance(curve, Segment):
        (ax, ay), (bx, by) = curve.start, curve.end
        return Segment((ax * factor, ay * factor), (bx * factor, by * factor))
    if isinstance(curve, Arc):
        x, y = curve.centre
        return replace(curve, centre=(x * factor, y * factor), radius=curve.radius * factor)
    return curve.scaled(factor)


def moved(curve: Curve, by: Point) -> Curve:
    """A curve somewhere else."""
    if isinstance(curve, Arc):
        return replace(curve, centre=(curve.centre[0] + by[0], curve.centre[1] + by[1]))
    (ax, ay), (bx, by_) = curve.start, curve.end
    return Segment((ax + by[0], ay + by[1]), (bx + by[0], by_ + by[1]))


def _shift(curves: list[PlainCurve]) -> Point:
    """How to bring a drawing that lies far out to the origin; nothing for all others."""
    if not curves:
        return 0.0, 0.0
    ends = np.array([p for c in curves for p in (c.curve.start, c.curve.end)])
    low, high = ends.min(axis=0), ends.max(axis=0)
    size = float(np.hypot(*(high - low))) or 1.0
    if float(np.abs(ends).max()) <= FARTHEST * size:
        return 0.0, 0.0
    return -float(low[0]), -float(low[1])


# --- the part -----------------------------------------------------------------------------------


def _part_of(
    drawing: Drawing,
    wishes: Wishes,
    joined: Joined,
    zones: Joined,
    remarks: list[Remark],
    progress: Progress,
) -> Brought:
    rings = [ring for ring in joined.rings if _has_area(ring)]
    size = _size(rings)
    nests = nests_of(rings, 1e-4 * size)
    progress.check()
    if wishes.outline is None and (chain := _open_round(nests, joined)) is not None:
        return Brought(None, _stays_open(chain, drawing.name), open_chains=joined.open_chains)
    candidates = tuple(Candidate(n.bounds, len(n.holes), n.depth > 0) for n in nests)
    open_chains = (*joined.open_chains, *zones.open_chains)
    try:
        nest = _the_nest(nests, wishes.outline, drawing.name, joined)
    except DrawingError as error:
        return Brought(None, error, candidates=candidates, open_chains=open_chains)
    noise = max(min(0.1 * wishes.tolerance, 1e-5 * size), 1e-9 * size)
    ids = Ids()
    bare = Part()
    part = replace(
        bare,
        title=_title(drawing.name),
        display_units="in-lbf-ksi" if in_inches(drawing, wishes) else "mm-N-MPa",
        outline=loop_of(rings[nest.outline], noise, ids),
        holes=tuple(hole_of(rings[k], noise, ids) for k in nest.holes),
        zones=tuple(
            Zone(hole_of(ring, noise, ids, "z"), THICKER * bare.wall.thickness)
            for ring in zones.rings
            if _has_area(ring) and meets(ring, rings[nest.outline], 1e-4 * size)
        ),
    )
    remarks += report.of_part(part, len(nests) - 1)
    return Brought(part, None, candidates=candidates, open_chains=open_chains)


def _open_round(nests: list[Nest], joined: Joined) -> OpenChain | None:
    """An open chain round an outline, which then is a hole in a part that is not closed."""
    if not nests:
        return None
    inner = np.array([nest.bounds for nest in nests])
    for chain in joined.open_chains:
        found = boxes(chain.curves)
        low, high = found[:, :2].min(axis=0), found[:, 2:].max(axis=0)
        if np.any(np.all((low < inner[:, :2]) & (inner[:, 2:] < high), axis=1)):
            return chain
    return None


def _stays_open(chain: OpenChain, name: str) -> DrawingError:
    begin, end = (report.place(p) for p in chain.ends)
    return DrawingError(
        f"the lines round the closed ones in {name} are open at {begin} and {end}",
        "allow a larger gap, close them in the drawing, or leave their layer out",
    )


def _the_nest(nests: list[Nest], wanted: int | None, name: str, joined: Joined) -> Nest:
    if not nests:
        n = len(joined.open_chains)
        stay = f": {n} chains of lines stay open" if n > 1 else ": 1 chain of lines stays open"
        raise DrawingError(
            f"{name} shows no closed outline{stay if n else ''}",
            "choose the layer of the outline, allow a larger gap, or close it in the drawing",
        )
    if wanted is not None:
        if not 1 <= wanted <= len(nests):
            raise DrawingError(
                f"there is no outline {wanted}: {len(nests)} were found", "choose one of them"
            )
        return nests[wanted - 1]
    if len(nests) > 1:
        listed = "; ".join(
            f"{k}: {report.extent(n.bounds)} at {report.place(n.middle)}, {_holes(len(n.holes))}"
            + (", inside a hole" if n.depth else "")
            for k, n in enumerate(nests[:8], start=1)
        )
        more = f" and {len(nests) - 8} more" if len(nests) > 8 else ""
        raise DrawingError(
            f"{name} shows {len(nests)} outlines ({listed}{more})",
            "choose one by its number, e.g. --outline 1, or leave layers out",
        )
    return nests[0]


def _holes(n: int) -> str:
    return f"{n} hole" if n == 1 else f"{n} holes"


def _has_area(ring: Ring) -> bool:
    """Whether a ring encloses more than there is in the noise of its own lines."""
    length = sum(curve.length for curve in ring)
    return abs(enclosed(ring)) > 1e-9 * length * length


def _size(rings: list[Ring]) -> float:
    places = [p for ring in rings for c in ring for p in c.point([0.0, 0.5]).tolist()]
    return float(np.hypot(*np.ptp(np.array(places), axis=0))) if places else 1.0


def _title(name: str) -> str:
    """A title made of the file's name.

    Example:
        >>> _title("cable_tray-bracket.dxf")
        'Cable tray bracket'
    """
    stem = name.rsplit(".", 1)[0] if "." in name else name
    words = " ".join(stem.replace("_", " ").replace("-", " ").split())
    return words[:1].upper() + words[1:] or "Untitled part"
