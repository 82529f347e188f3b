"""Made-up meshes and findings with known fields, for tests of what the window paints.

The part is a strip with a round hole, the mesh a structured ring of nine-node quads round the hole
that is blended out to the strip's edges; the stresses are Kirsch's for an infinite plate in
tension (Kirsch 1898, from memory), which peak at three times the remote stress.
"""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from screenapp.model.findings import (
    CaseFindings,
    Estimate,
    Fields,
    Findings,
    LimitFindings,
    MeshFindings,
    PassSummary,
    Peak,
    Reading,
    Trust,
)
from screenapp.model.mesh import Mesh
from screenapp.model.part import (
    Case,
    CircleHole,
    Corner,
    Edge,
    FixedSupport,
    ForceLoad,
    Loop,
    Material,
    Part,
    Probe,
    StressLimit,
    Wall,
)
from screenapp.model.solution import Balance, Solution, StressField, von_mises

Floats = NDArray[np.float64]

HALF_LENGTH, HALF_WIDTH, RADIUS, REMOTE = 60.0, 40.0, 10.0, 50.0
SIZES = (4.0, 2.0, 1.0)
"""Size of the elements at every number, pass by pass [mm]."""


def plate(unit_hole: bool = True) -> Part:
    """A strip 120 x 80 mm, 4 mm thick, with a hole of 20 mm; pulled at its right end."""
    x, y = HALF_LENGTH, HALF_WIDTH
    corners = ((-x, -y), (x, -y), (x, y), (-x, y))
    outline = Loop(
        tuple(Corner(f"c{i + 1}", at) for i, at in enumerate(corners)),
        tuple(Edge(f"e{i + 1}") for i in range(4)),
    )
    return Part(
        title="Strip with a hole",
        outline=outline,
        holes=(CircleHole("h1", (0.0, 0.0), 2 * RADIUS),) if unit_hole else (),
        wall=Wall(4.0, "Steel"),
        materials=(Material("Steel", 210_000.0, 0.3, 7850.0, proof_stress=235.0),),
        supports=(FixedSupport("s1", "e4"),),
        cases=(
            Case("case1", "Pull", (ForceLoad("l1", "e2", 16_000.0, 0.0),)),
            Case("case2", "Push", (ForceLoad("l2", "e2", -8_000.0, 0.0),)),
        ),
        limits=(StressLimit("m1"),),
        readings=(Probe("p1", "P1", (20.0, 20.0)),),
    )


def structured(nx: int, ny: int, width: float = 1.0, height: float = 1.0) -> Mesh:
    """nx x ny nine-node rectangles over [0, width] x [0, height]."""
    x = np.linspace(0.0, width, 2 * nx + 1)
    y = np.linspace(0.0, height, 2 * ny + 1)
    grid_y, grid_x = np.meshgrid(y, x, indexing="ij")
    nodes = np.stack([grid_x.ravel(), grid_y.ravel()], axis=1)
    return _mesh(nodes, _quads(nx, ny, wrap=False))


def ring(around: int = 64, out: int = 20) -> Mesh:
    """The strip with its hole: `around` quads round the hole (a multiple of 8), `out` outwards.

    Interior sides are straight, as in the meshes of the program.
    """
    corner = math.atan2(HALF_WIDTH, HALF_LENGTH)
    stops = [0.0, corner, math.pi / 2, math.pi - corner]
    stops = [*stops, *(math.pi + a for a in stops), 2 * math.pi]
    angle = np.interp(np.arange(2 * around) * 4 / around, np.arange(9), stops)
    c, s = np.cos(angle), np.sin(angle)
    reach = 1.0 / np.maximum(np.abs(c) / HALF_LENGTH, np.abs(s) / HALF_WIDTH)
    share = np.linspace(0.0, 1.0, 2 * out + 1) ** 1.6
    radius = RADIUS + share[:, None] * (reach - RADIUS)
    nodes = np.stack([radius * c, radius * s], axis=-1)
    # middle nodes of all but the hole's own sides go to the middle of their straight sides
    nodes[1::2] = 0.5 * (nodes[:-1:2] + nodes[2::2])
    nodes[1:, 1::2] = 0.5 * (nodes[1:, ::2] + np.roll(nodes[1:, ::2], -1, axis=1))
    mesh = _mesh(nodes.reshape(-1, 2), _quads(around, out, wrap=True)[:, _TURN])
    return mesh


_TURN = [0, 3, 2, 1, 7, 6, 5, 4, 8]  # rings run outwards: swap ξ and η to stay counter-clockwise


def _quads(nx: int, ny: int, wrap: bool) -> NDArray[np.int64]:
    columns = 2 * nx if wrap else 2 * nx + 1
    i, j = np.meshgrid(2 * np.arange(nx), 2 * np.arange(ny), indexing="xy")
    i, j = i.ravel(), j.ravel()

    def at(di: int, dj: int) -> NDArray[np.int64]:
        return (j + dj) * columns + (i + di) % columns

    steps = ((0, 0), (2, 0), (2, 2), (0, 2), (1, 0), (2, 1), (1, 2), (0, 1), (1, 1))
    return np.stack([at(*step) for step in steps], axis=1)


def _mesh(nodes: Floats, quads: NDArray[np.int64]) -> Mesh:
    """Boundary sides are those that one element has alone, in no special order."""
    ends = np.sort(np.stack([quads[:, :4], quads[:, [1, 2, 3, 0]]], axis=-1).reshape(-1, 2), axis=1)
    _, inverse, count = np.unique(ends, axis=0, return_inverse=True, return_counts=True)
    alone = np.flatnonzero(count[inverse.ravel()] == 1)
    sides = np.stack([alone // 4, alone % 4], axis=1)
    n = len(sides)
    return Mesh(
        nodes,
        quads,
        sides,
        np.zeros(n, dtype=np.int64),
        np.tile([0.0, 1.0], (n, 1)),
        {},
        worst_jacobian=0.5,
    )


def kirsch(points: Floats) -> Floats:
    """σx, σy, τxy [MPa], (n, 3), round the hole under a remote tension along x."""
    r2 = np.maximum((points**2).sum(axis=1), RADIUS**2)
    q = RADIUS**2 / r2
    angle = np.arctan2(points[:, 1], points[:, 0])
    c2, s2, c4, s4 = (f(k * angle) for k in (2, 4) for f in (np.cos, np.sin))
    sx = REMOTE * (1 - q * (1.5 * c2 + c4) + 1.5 * q**2 * c4)
    sy = REMOTE * (-q * (0.5 * c2 - c4) - 1.5 * q**2 * c4)
    txy = REMOTE * (-q * (0.5 * s2 + s4) + 1.5 * q**2 * s4)
    return np.stack([sx, sy, txy], axis=1)


def fields(mesh: Mesh, cases: int = 2) -> Fields:
    """Kirsch's stresses, and a stretch with a bow, on any mesh; case 2 is minus half of case 1."""
    stress = kirsch(mesh.nodes)
    x, y = mesh.nodes.T
    u = np.stack([REMOTE / 210e3 * (x + HALF_LENGTH), -0.3 * REMOTE / 210e3 * y], axis=1)
    u[:, 1] += 1e-6 * (x + HALF_LENGTH) ** 2
    factor = np.array([1.0, -0.5, 0.25, 0.1])[:cases]
    error = np.full((cases, mesh.n_elements), 0.01 / math.sqrt(mesh.n_elements))
    return Fields(
        mesh,
        Solution(
            "quad9",
            factor[:, None, None] * u,
            ((),) * cases,
            (Balance(1e-12, 1e-12),) * cases,
            1e-12,
            2 * mesh.n_nodes,
        ),
        StressField(
            factor[:, None, None] * stress,
            np.zeros((cases, len(mesh.sides), 3, 3)),
            error,
        ),
    )


def findings(part: Part, key: str, mesh: Mesh | None = None, trust: Trust = "settled") -> Findings:
    """Findings of `plate()` with the peak at the top of the hole in the given trust."""
    arrays = fields(mesh if mesh is not None else ring(), max(1, len(part.cases)))
    peak = Estimate(150.2, 149.6, 150.8, trust)
    if trust == "rising":
        peak = Estimate(310.2, 310.2, math.inf, trust)
    cases = tuple(_case(case.id, case.name, arrays, i, peak) for i, case in enumerate(part.cases))
    use = Estimate(peak.value * 1.5 / 235, peak.low * 1.5 / 235, peak.high * 1.5 / 235, trust)
    return Findings(
        part_sha256="0" * 64,
        key=key,
        verdict="undecided",
        headline="Undecided",
        reasons=("made up",),
        mass_kg=0.3,
        area=9286.0,
        cases=cases,
        readings=_readings(part, peak),
        limits=(LimitFindings("m1", "", "case1", use, "holds", (0.0, RADIUS), "hole h1, 90°", ""),),
        mesh=MeshFindings(
            "quad9",
            arrays.mesh.n_elements,
            2 * arrays.mesh.n_nodes,
            (PassSummary(arrays.mesh.n_elements, 2 * arrays.mesh.n_nodes, 0.01, 150.2, 0.3),),
            0.01,
            0.5,
            3,
            1e-12,
        ),
        timing={"total": 0.8},
        fields=(arrays,),
    )


def _case(id_: str, name: str, arrays: Fields, i: int, peak: Estimate) -> CaseFindings:
    size = np.hypot(*arrays.solution.displacements[i].T)
    most = int(size.argmax())
    top = float(von_mises(arrays.stress.nodal[i]).max())
    scaled = peak if i == 0 else Estimate(top, 0.99 * top, 1.01 * top, peak.trust)
    value = float(size[most])
    at = arrays.mesh.nodes[most]
    return CaseFindings(
        id_,
        name,
        (
            Peak(
                "von_mises",
                scaled,
                (0.0, RADIUS),
                "h1",
                "hole h1, 90°",
                history=tuple(share * scaled.value for share in (0.9, 0.98, 1.0)),
                sizes=SIZES,
                rate=0.25 if scaled.trust == "rising" else 0.01,
                allowed=0.02 * scaled.value,
            ),
        ),
        Estimate(value, 0.995 * value, 1.005 * value, "settled"),
        (float(at[0]), float(at[1])),
        (16_000.0, 0.0, 0.0),
        (),
        arrays.solution.balance[i],
    )


def _readings(part: Part, peak: Estimate) -> tuple[Reading, ...]:
    values = {"von_mises": Estimate(61.3, 60.9, 61.7, "settled")}
    return tuple(
        Reading(
            probe.id,
            probe.name,
            case.id,
            probe.at,
            values,
            peak.trust,
            history=(55.0, 61.0, 61.3),
            sizes=SIZES,
            rate=0.01,
            allowed=1.2,
        )
        for probe in part.readings
        for case in part.cases
    )
