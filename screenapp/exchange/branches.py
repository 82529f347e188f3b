"""Where more than two lines meet: the way round the outside, with what divides it left out.

The chains between branching places are links of a plane graph.  Its outer face is found by always
turning as far right as possible; a face that passes one place twice falls into two rings there.
"""

from __future__ import annotations

import math
from collections import Counter
from dataclasses import dataclass

from screenapp.exchange.rings import enclosed
from screenapp.model.curves import Curve


@dataclass(frozen=True)
class Chain:
    """Curves in a row between two nodes."""

    begin: int
    end: int
    curves: list[Curve]


Step = tuple[int, bool]
"""A chain's number, and whether it is run backwards."""


def outer_rings(chains: list[Chain]) -> tuple[list[list[Step]], list[int]]:
    """Rings round each connected group of chains, and the numbers of the chains in none."""
    faces = _faces(chains)
    outer = [face for face in faces if _area(chains, face) < 0.0]
    rings: list[list[Step]] = []
    for face in outer:
        rings += _simple(chains, face)
    used = {number for ring in rings for number, _ in ring}
    return rings, [number for number in range(len(chains)) if number not in used]


def _faces(chains: list[Chain]) -> list[list[Step]]:
    """Every face of the graph as the steps round it, the face on the left."""
    around: dict[int, list[tuple[float, float, Step]]] = {}
    for number in range(len(chains)):
        for backwards in (False, True):
            step = number, backwards
            around.setdefault(_from(chains, step), []).append((*_leaving(chains, step), step))
    following: dict[Step, Step] = {}
    for leaving in around.values():
        leaving.sort()
        steps = [step for *_, step in leaving]
        for i, (number, backwards) in enumerate(steps):
            # who comes in along this step's reverse goes on by the next one clockwise
            following[number, not backwards] = steps[i - 1]
    faces: list[list[Step]] = []
    while following:
        step = next(iter(following))
        face = []
        while step in following:
            face.append(step)
            step = following.pop(step)
        faces.append(face)
    return faces


def _leaving(chains: list[Chain], step: Step) -> tuple[float, float]:
    """Direction [rad] in which a step leaves its node, and its curvature where that is equal."""
    curve = _first(chains, step)
    d = curve.tangent(0.0)
    angle = round(math.atan2(float(d[1]), float(d[0])), 9)
    return (angle if angle > -math.pi + 1e-9 else math.pi), curve.curvature


def _first(chains: list[Chain], step: Step) -> Curve:
    number, backwards = step
    curves = chains[number].curves
    return curves[-1].reversed() if backwards else curves[0]


def _from(chains: list[Chain], step: Step) -> int:
    chain = chains[step[0]]
    return chain.end if step[1] else chain.begin


def _area(chains: list[Chain], face: list[Step]) -> float:
    """The area [mm²] that the face encloses, negative if it is run clockwise."""
    return sum(
        -enclosed(chains[number].curves) if backwards else enclosed(chains[number].curves)
        for number, backwards in face
    )


def _simple(chains: list[Chain], face: list[Step]) -> list[list[Step]]:
    """The face cut into rings that pass no node twice; a chain run both ways is in none."""
    times = Counter(number for number, _ in face)
    rings: list[list[Step]] = []
    way: list[Step] = []
    passed: dict[int, int] = {}
    for step in face:
        if times[step[0]] > 1:
            continue
        passed.setdefault(_from(chains, step), len(way))
        way.append(step)
        back = passed.get(_to(chains, step))
        if back is not None:
            rings.append(way[back:])
            for gone in way[back:]:
                passed.pop(_from(chains, gone), None)
            del way[back:]
    return rings


def _to(chains: list[Chain], step: Step) -> int:
    chain = chains[step[0]]
    return chain.begin if step[1] else chain.end
