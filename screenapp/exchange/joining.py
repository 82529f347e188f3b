"""Joins curves end to end into closed rings, closes small gaps, and finds what stays open.

ends that lie in one place      -> a node (noise of the drawing's decimals)
loose ends closer than allowed  -> a gap, closed and reported, nearest first
nodes where more than two meet  -> `branches.py` finds the outer way round
chains with a loose end         -> open, reported with their ends
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.sparse import coo_array
from scipy.sparse.csgraph import connected_components
from scipy.spatial import cKDTree

from screenapp.exchange.branches import Chain, outer_rings
from screenapp.exchange.bulges import turned_edge
from screenapp.exchange.rings import Ring
from screenapp.model.curves import Arc, Curve, Segment
from screenapp.model.part import Point
from screenapp.model.progress import SILENT, Progress

NOISE = 1e-7
"""Ends nearer than this share of the drawing's size are one place, not a gap."""

FULL_TURN = 2.0 * math.pi * (1.0 - 1e-9)
"""An arc that turns further is a full circle and closes by itself [rad]."""

Step = tuple[int, bool]
"""A curve's number, and whether it is run backwards."""


@dataclass(frozen=True)
class Gap:
    """A gap [mm] that was closed, at a place [mm]."""

    at: Point
    size: float


@dataclass(frozen=True)
class OpenChain:
    """A chain that does not close: its curves in order, and the places [mm] of its ends."""

    curves: tuple[Curve, ...]
    ends: tuple[Point, Point]


@dataclass(frozen=True)
class Joined:
    """What joining gives.

    `sources[i]` are the numbers of the curves that ring i is made of; `branches` are places [mm]
    where more than two lines meet, and `inner` the numbers of lines left out there.
    """

    rings: tuple[Ring, ...]
    sources: tuple[tuple[int, ...], ...]
    gaps: tuple[Gap, ...]
    open_chains: tuple[OpenChain, ...]
    branches: tuple[Point, ...]
    inner: tuple[int, ...]


def join(curves: list[Curve], tolerance: float, progress: Progress = SILENT) -> Joined:
    """Rings and open chains of curves; gaps up to `tolerance` [mm] are closed."""
    circles = [isinstance(c, Arc) and abs(c.sweep) >= FULL_TURN for c in curves]
    whole = [k for k, circle in enumerate(circles) if circle]
    pieces = [k for k, circle in enumerate(circles) if not circle]
    graph = _Graph([curves[k] for k in pieces], tolerance)
    progress.check()
    ways, open_ways, branches, inner = graph.ways(progress)
    rings: list[Ring] = [[curves[k]] for k in whole]
    sources: list[tuple[int, ...]] = [(k,) for k in whole]
    for way in ways:
        rings.append(closed_up([graph.curve(step) for step in way]))
        sources.append(tuple(pieces[k] for k, _ in way))
    chains = []
    for way in open_ways:
        run = tuple(graph.curve(step) for step in way)
        chains.append(OpenChain(run, (run[0].start, run[-1].end)))
    left = tuple(pieces[k] for k in inner)
    return Joined(
        tuple(rings), tuple(sources), tuple(graph.gaps), tuple(chains), tuple(branches), left
    )


class _Graph:
    """Curves as links between nodes; end 2k is the start of curve k, 2k + 1 its end."""

    def __init__(self, curves: list[Curve], tolerance: float) -> None:
        self.curves = curves
        self.gaps: list[Gap] = []
        n = len(curves)
        self.ends = np.array([p for c in curves for p in (c.start, c.end)]).reshape(2 * n, 2)
        self.node: NDArray[np.int64] = np.arange(2 * n)
        self._links = np.empty((0, 2), dtype=np.int64)
        if n:
            size = float(np.hypot(*np.ptp(self.ends, axis=0)))
            self._gather(min(NOISE * size, tolerance))
            self._close_gaps(tolerance)
        self.at: dict[int, list[int]] = {}
        for end, node in enumerate(self.node.tolist()):
            self.at.setdefault(node, []).append(end)

    def curve(self, step: Step) -> Curve:
        """The curve of a step, run as the step says."""
        number, backwards = step
        return self.curves[number].reversed() if backwards else self.curves[number]

    def _gather(self, noise: float) -> None:
        """One node for all ends that lie in one place."""
        pairs = cKDTree(self.ends).query_pairs(noise, output_type="ndarray")
        self._merge(pairs)

    def _merge(self, pairs: NDArray[np.int64]) -> None:
        n = len(self.ends)
        self._links = links = np.concatenate([self._links, pairs.reshape(-1, 2)])
        matrix = coo_array((np.ones(len(links)), (links[:, 0], links[:, 1])), shape=(n, n))
        self.node = connected_components(matrix, directed=False)[1].astype(np.int64)

    def _close_gaps(self, tolerance: float) -> None:
        """Pair loose ends, the nearest first."""
        counts = np.bincount(self.node)
        loose = np.flatnonzero(counts[self.node] == 1)
        if len(loose) < 2:
            return
        pairs = cKDTree(self.ends[loose]).query_pairs(tolerance, output_type="ndarray")
        if not len(pairs):
            return
        a, b = loose[pairs[:, 0]], loose[pairs[:, 1]]
        far = np.hypot(*(self.ends[a] - self.ends[b]).T)
        taken: set[int] = set()
        chosen = []
        for k in np.lexsort((b, a, far)).tolist():
            i, j = int(a[k]), int(b[k])
            short = i // 2 == j // 2 and self.curves[i // 2].length <= 4.0 * far[k]
            if i in taken or j in taken or short:
                continue
            taken |= {i, j}
            chosen.append((i, j))
            middle = 0.5 * (self.ends[i] + self.ends[j])
            self.gaps.append(Gap((float(middle[0]), float(middle[1])), float(far[k])))
        if chosen:
            self._merge(np.array(chosen))

    def ways(
        self, progress: Progress
    ) -> tuple[list[list[Step]], list[list[Step]], list[Point], tuple[int, ...]]:
        """Closed ways, open ways, branching places, and curves left out at those."""
        used = np.zeros(len(self.curves), dtype=bool)
        open_ways = self._peel(used, progress)
        branching = [n for n in self.at if len(self._free(n, used)) > 2]
        rings: list[list[Step]] = []
        inner: tuple[int, ...] = ()
        if branching:
            chains = self._chains_between(set(branching), used)
            chosen, left = outer_rings(
                [
                    Chain(self._from(w[0]), self._to(w[-1]), [self.curve(s) for s in w])
                    for w in chains
                ]
            )
            rings += [self._strung(chains, ring) for ring in chosen]
            inner = tuple(k for number in left for k, _ in chains[number])
        for number in range(len(self.curves)):
            if not used[number]:
                rings.append(self._follow((number, False), used, set()))
                progress.check()
        places = [tuple(self.ends[self.at[n][0]].tolist()) for n in branching]
        return rings, open_ways, places, inner

    def _strung(self, chains: list[list[Step]], ring: list[Step]) -> list[Step]:
        way: list[Step] = []
        for number, backwards in ring:
            steps = chains[number]
            way += [(k, not b) for k, b in reversed(steps)] if backwards else steps
        return way

    def _peel(self, used: NDArray[np.bool_], progress: Progress) -> list[list[Step]]:
        """Chains from loose ends up to where they meet two or more others."""
        open_ways: list[list[Step]] = []
        waiting = [n for n in self.at if len(self.at[n]) == 1]
        while waiting:
            progress.check()
            free = self._free(waiting.pop(), used)
            if len(free) != 1:
                continue
            way = self._follow((free[0] // 2, free[0] % 2 == 1), used, set())
            open_ways.append(way)
        return open_ways

    def _chains_between(self, stops: set[int], used: NDArray[np.bool_]) -> list[list[Step]]:
        return [
            self._follow((end // 2, end % 2 == 1), used, stops)
            for node in stops
            for end in self.at[node]
            if not used[end // 2]
        ]

    def _follow(self, step: Step, used: NDArray[np.bool_], stops: set[int]) -> list[Step]:
        """The way from a step on until it closes, ends or reaches a stop."""
        way = [step]
        used[step[0]] = True
        while True:
            node = self._to(way[-1])
            free = [] if node in stops else self._free(node, used)
            if len(free) != 1:
                return way
            way.append((free[0] // 2, free[0] % 2 == 1))
            used[free[0] // 2] = True

    def _free(self, node: int, used: NDArray[np.bool_]) -> list[int]:
        return [end for end in self.at[node] if not used[end // 2]]

    def _from(self, step: Step) -> int:
        return int(self.node[2 * step[0] + (1 if step[1] else 0)])

    def _to(self, step: Step) -> int:
        return int(self.node[2 * step[0] + (0 if step[1] else 1)])


# --- closing -----------------------------------------------------------------------------------


def closed_up(ring: Ring) -> Ring:
    """The ring with each curve ending exactly where the next one begins.

    A straight line gives way to an arc; two lines are drawn on or cut back to where they cross if
    that is near; two arcs meet in the middle and keep the angle they turn through.
    """
    n = len(ring)
    joints = [_joint(ring[i - 1], ring[i], alone=n == 1) for i in range(n)]
    return [_moved(curve, joints[i], joints[(i + 1) % n]) for i, curve in enumerate(ring)]


def _joint(before: Curve, after: Curve, alone: bool) -> Point:
    p, q = before.end, after.start
    if p == q:
        return p
    if isinstance(before, Arc) and isinstance(after, Segment):
        return p
    if isinstance(before, Segment) and isinstance(after, Arc):
        return q
    middle = (0.5 * (p[0] + q[0]), 0.5 * (p[1] + q[1]))
    if isinstance(before, Segment) and isinstance(after, Segment) and not alone:
        return _crossing(before, after, middle, 4.0 * math.dist(p, q)) or middle
    return middle


def _crossing(a: Segment, b: Segment, near: Point, within: float) -> Point | None:
    """Where the lines of two segments cross, if that is near a place."""
    u, v = a.tangent(0.0), b.tangent(0.0)
    cross = float(u[0] * v[1] - u[1] * v[0])
    if abs(cross) < 1e-3:
        return None
    dx, dy = b.start[0] - a.end[0], b.start[1] - a.end[1]
    along = (dx * float(v[1]) - dy * float(v[0])) / cross
    found = (a.end[0] + along * float(u[0]), a.end[1] + along * float(u[1]))
    return found if math.dist(found, near) <= within else None


def _moved(curve: Curve, start: Point, end: Point) -> Curve:
    """The curve with other ends; an arc keeps the angle that it turns through."""
    if curve.start == start and curve.end == end:
        return curve
    if isinstance(curve, Segment):
        return Segment(start, end)
    if math.dist(curve.start, start) + math.dist(curve.end, end) <= 1e-12 * curve.radius:
        return curve
    return turned_edge(start, end, curve.sweep) if start != end else curve
