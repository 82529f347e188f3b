"""Limits on displacement judged: everywhere, or at one place, along a direction or not."""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np

from screenapp.model.findings import CaseFindings, Estimate, LimitFindings
from screenapp.model.part import DisplacementLimit, Part
from screenapp.model.place_words import point_words
from screenapp.model.shape import Shape
from screenapp.screening.passes import Pass
from screenapp.screening.peaks import on_boundary
from screenapp.screening.probes import LEAST_SCALE, judge_movement
from screenapp.screening.spots import sizes_at_points
from screenapp.screening.use import scaled, upright, verdict_on


def displacement_limit_name(limit: DisplacementLimit) -> str:
    """The limit in a few words."""
    where = "" if limit.at is None else f" at {point_words(limit.at)}"
    along = "" if limit.angle is None else f" along {limit.angle:g}°"
    return f"displacement{where}{along} under {limit.most:g} mm"


def judge_displacement(
    limit: DisplacementLimit,
    part: Part,
    case: CaseFindings,
    k: int,
    shape: Shape | None,
    passes: Sequence[Pass],
) -> LimitFindings:
    """A displacement limit in case `k`.

    Without a place and a direction the case's largest displacement is judged; else the last passes
    are read.  Where there are none of them (a record that was only read) it stays undecided.
    """
    name = displacement_limit_name(limit)
    if limit.at is None and limit.angle is None:
        moved, at = case.displacement_max, case.displacement_at
        what, part_moves = "the largest displacement", "the part moves"
    else:
        if shape is None or not passes:
            return _unread(limit, name, case, "the fields of the screening were not kept")
        moved, at = _read(limit, part, k, case.case, shape, passes)
        if not math.isfinite(moved.value):
            return _unread(limit, name, case, f"{point_words(at)} lies outside the part")
        along = "" if limit.angle is None else f" along {limit.angle:g}°"
        what, part_moves = f"the displacement at {point_words(at)}{along}", "the part moves"
        part_moves += along
    used = scaled(moved, 1.0 / limit.most)
    verdict = verdict_on(used)
    place, reason = point_words(at), ""
    if verdict == "does not hold":
        reason = f"{part_moves} by {moved.value:.4g} mm at {place} under “{case.name}”"
    elif moved.trust == "rising":
        reason = (
            f"{what} under “{case.name}” has no finite value: a force or a support acts at a "
            "point; spread it over an edge or a hole"
        )
    elif verdict == "undecided":
        reason = f"{what} under “{case.name}” is not settled enough to tell"
    return LimitFindings(limit.id, name, case.case, used, verdict, at, place, reason)


def _unread(limit: DisplacementLimit, name: str, case: CaseFindings, why: str) -> LimitFindings:
    at = limit.at or (0.0, 0.0)
    used = Estimate(0.0, 0.0, math.inf, "unsettled")
    reason = f"the limit “{name}” cannot be judged: {why}"
    return LimitFindings(limit.id, name, case.case, used, "undecided", at, point_words(at), reason)


def _read(
    limit: DisplacementLimit,
    part: Part,
    k: int,
    case: str,
    shape: Shape,
    passes: Sequence[Pass],
) -> tuple[Estimate, tuple[float, float]]:
    """What is limited [mm], and where: at the place, or where it is largest along the direction."""
    last = passes[-1].fields
    if limit.at is not None:
        at = on_boundary(shape, limit.at)
    else:
        nodes = last.mesh.nodes
        most = int(np.argmax(np.abs(_along(limit, last.solution.displacements[k]))))
        at = (float(nodes[most, 0]), float(nodes[most, 1]))
    read = [this.read(np.array([at])) for this in passes]
    numbers = [float(_along(limit, values.displacement[k])[0]) for values in read]
    if not math.isfinite(numbers[-1]):
        return Estimate(math.nan, math.nan, math.nan, "unsettled"), at
    largest = float(np.hypot(*last.solution.displacements[k].T).max())
    scale = max(abs(numbers[-1]), LEAST_SCALE * largest)
    if scale == 0.0:
        return Estimate(0.0, 0.0, 0.0, "settled"), at
    creeping = sizes_at_points(case, passes)
    return upright(judge_movement(numbers, read, creeping, part.mesh.tolerance, scale)), at


def _along(limit: DisplacementLimit, moved: np.ndarray) -> np.ndarray:
    """Of displacements (n, 2) [mm] their lengths, or their components along the direction."""
    if limit.angle is None:
        return np.asarray(np.hypot(moved[:, 0], moved[:, 1]))
    a = math.radians(limit.angle)
    return np.asarray(moved @ np.array([math.cos(a), math.sin(a)]))
