"""What an engineer should know about a part that can be screened all the same."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from screenapp.model.curve_table import CurveTable
from screenapp.model.errors import Fault
from screenapp.model.part import Part, PointLoad
from screenapp.model.shape import Shape


def cautions_of(part: Part, shape: Shape) -> list[Fault]:
    """All cautions; none of them blocks."""
    return [
        *_corner_cautions(shape),
        *_point_cautions(part, shape),
        *_limit_cautions(part),
        *_probe_cautions(part, shape),
    ]


def material_angles(shape: Shape) -> list[tuple[str, tuple[float, float], float]]:
    """Id, place [mm] and angle within the material [deg] of each sharp corner; 270 re-enters."""
    table = CurveTable.of(shape.curves)
    n = len(table)
    ahead = table.tangents(np.arange(n), np.zeros(n))
    behind = table.tangents(np.arange(n), np.ones(n))
    before = np.arange(-1, n - 1)
    for first, last in shape.loops:
        before[first] = last - 1
    u, v = behind[before], ahead
    turn = np.degrees(np.arctan2(u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0], np.sum(u * v, axis=1)))
    at_start = {tuple(np.round(p, 9)): k for k, p in enumerate(table.start)}
    angles = []
    for id_, at in shape.sharp_corners:
        k = at_start.get(tuple(np.round(np.asarray(at, dtype=float), 9)))
        if k is not None:
            angles.append((id_, at, float(180.0 - turn[k])))
    return angles


def _corner_cautions(shape: Shape) -> Iterator[Fault]:
    for id_, at, angle in material_angles(shape):
        if angle > 185.0:
            yield Fault(
                f"corner {id_} re-enters the material at {angle:.0f}° and is sharp: "
                "the stress there has no finite value",
                "round it, or read the stress at a distance from it",
                "",
                (id_,),
                at,
                blocks=False,
            )


def _point_cautions(part: Part, shape: Shape) -> Iterator[Fault]:
    sharp = dict(shape.sharp_corners)
    for case in part.cases:
        for load in case.loads:
            if isinstance(load, PointLoad) and load.on in sharp:
                yield Fault(
                    f"point load {load.id} at corner {load.on}: "
                    "the stress under it has no finite value",
                    "spread it along an edge, or do not judge the stress near it",
                    f"cases.{case.id}.loads.{load.id}",
                    (load.id, load.on),
                    sharp[load.on],
                    blocks=False,
                )
    for support in part.supports:
        if support.on in sharp:
            yield Fault(
                f"support {support.id} holds the single point of corner {support.on}: "
                "the stress there has no finite value if it carries a force",
                "hold an edge or a hole, or do not judge the stress near it",
                f"supports.{support.id}",
                (support.id, support.on),
                sharp[support.on],
                blocks=False,
            )


def _limit_cautions(part: Part) -> Iterator[Fault]:
    if not part.limits:
        yield Fault(
            "no limit is set, so there is nothing to judge",
            "add a limit on stress or displacement",
            "limits",
            blocks=False,
        )


def _probe_cautions(part: Part, shape: Shape) -> Iterator[Fault]:
    probes = [p for p in part.readings if np.isfinite(p.at).all()]
    if not probes:
        return
    table = CurveTable.of(shape.curves)
    points = np.array([p.at for p in probes], dtype=float)
    inside = table.inside(0, points)
    for loop in range(1, len(shape.loops)):
        inside &= ~table.inside(loop, points)
    everyone = np.arange(len(table))
    for probe, point, ok in zip(probes, points, inside, strict=True):
        if ok:
            continue
        t = table.nearest(everyone, np.broadcast_to(point, (len(table), 2)))
        gap = float(np.hypot(*(table.points(everyone, t) - point).T).min())
        if gap > 1e-3 * shape.size:
            yield Fault(
                f"probe {probe.id} lies outside the part, {gap:.3g} mm from its boundary",
                "move it onto the part or remove it",
                f"readings.{probe.id}.at",
                (probe.id,),
                probe.at,
                blocks=False,
            )
