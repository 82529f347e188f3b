"""The same mesh, element and quadrature in an independent library must move the same way.

scikit-fem assembles stiffness, edge load and weight by its own shape functions, mappings and
numbering; only the Gauss points are shared.  The 9-node geometry carries all three elements: the
centre node by the transfinite blend makes it the 8-node geometry too, and for the bilinear quad
the sides are straight.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.sparse.linalg import spsolve
from scipy.spatial import cKDTree
from skfem import (
    Basis,
    BilinearForm,
    ElementQuad0,
    ElementQuad1,
    ElementQuad2,
    ElementQuadS2,
    ElementVector,
    FacetBasis,
    LinearForm,
    MeshQuad,
    MeshQuad2,
)
from skfem.helpers import ddot, sym_grad, trace

from screenapp.mechanics.quadrature import gauss_line, gauss_square
from screenapp.mechanics.solve import solve
from screenapp.meshing.making import make_mesh
from screenapp.meshing.sizing import initial_sizes
from screenapp.model.part import (
    Case,
    ElementName,
    FixedSupport,
    GravityLoad,
    LineLoad,
    Material,
    MeshWishes,
    Wall,
)
from screenapp.model.regions import shape_with_zones
from screenapp.model.validity import faults_of
from tests.evidence.table import record
from tests.mechanics.structured import Structured, four_sided, ring_sector, shaken
from tests.mechanics.test_orthotropic import compliance
from tests.model.random_zones import zoned_plate

Floats = NDArray[np.float64]
SETS = {"quad4": (ElementQuad1, 2), "quad8": (ElementQuadS2, 3), "quad9": (ElementQuad2, 3)}
PARTS = 20
_worst: dict[str, float] = {}


@dataclass(frozen=True)
class Drawn:
    """A random part, with what its load and material were drawn to be."""

    case: Structured
    material: Material
    line: tuple[float, float]
    gravity: tuple[float, float]


@pytest.mark.parametrize("element", SETS)
@pytest.mark.parametrize("seed", range(PARTS))
def test_displacements_agree(element: ElementName, seed: int) -> None:
    drawn = _random_part(seed)
    case = drawn.case
    part = replace(
        case.part,
        supports=(FixedSupport("s", "e4"),),
        cases=(
            Case("k", "only", (LineLoad("q", "e2", *drawn.line), GravityLoad("g", *drawn.gravity))),
        ),
        mesh=MeshWishes(element),
    )
    ours = solve(part, case.shape, case.mesh).displacements[0]
    places, theirs = _by_scikit_fem(drawn, element)
    used = np.unique(case.mesh.quads[:, : {"quad4": 4, "quad8": 8, "quad9": 9}[element]])
    far, at = cKDTree(places).query(case.mesh.nodes[used])
    assert far.max() < 1e-9 * np.ptp(case.mesh.nodes)
    error = float(np.abs(ours[used] - theirs[at]).max() / np.abs(theirs).max())
    assert error < 1e-9
    _worst[element] = max(_worst.get(element, 0.0), error)
    record(
        f"{element}: displacements on {PARTS} random parts with distorted meshes",
        f"scikit-fem, {SETS[element][0].__name__} (run here)",
        "the same",
        "the same",
        100.0 * _worst[element],
        "1e-9",
    )


ZONED = [s for s in range(60) if not any(f.blocks for f in faults_of(zoned_plate(s)))][:12]


@pytest.mark.parametrize("element", SETS)
@pytest.mark.parametrize("seed", ZONED)
def test_displacements_agree_where_thickness_and_material_change(
    element: ElementName, seed: int
) -> None:
    """Zones with curved interfaces on our own meshes; their coefficients element by element."""
    part = replace(
        zoned_plate(seed),
        cases=(Case("k", "", (LineLoad("q", "e2", 30.0, -20.0), GravityLoad("g", 5e3, -9e3))),),
        mesh=MeshWishes(element),
    )
    shape = shape_with_zones(part)
    mesh = make_mesh(shape, initial_sizes(shape, part.mesh))
    case = Structured(part, shape, mesh)
    ours = solve(part, shape, mesh).displacements[0]
    drawn = Drawn(case, part.materials[0], (30.0, -20.0), (5e3, -9e3))
    places, theirs = _by_scikit_fem(drawn, element)
    used = np.unique(mesh.quads[:, : {"quad4": 4, "quad8": 8, "quad9": 9}[element]])
    far, at = cKDTree(places).query(mesh.nodes[used])
    assert far.max() < 1e-9 * np.ptp(mesh.nodes)
    error = float(np.abs(ours[used] - theirs[at]).max() / np.abs(theirs).max())
    assert error < 1e-9
    _worst[f"zoned {element}"] = max(_worst.get(f"zoned {element}", 0.0), error)
    record(
        f"{element}: displacements on {len(ZONED)} random parts with zones of other thickness and "
        "material",
        f"scikit-fem, {SETS[element][0].__name__} (run here)",
        "the same",
        "the same",
        100.0 * _worst[f"zoned {element}"],
        "1e-9",
    )


@pytest.mark.parametrize("element", SETS)
@pytest.mark.parametrize("seed", [s for s in range(16) if s % 2 == 0])  # in plane stress
def test_displacements_of_orthotropic_sheets_agree(element: ElementName, seed: int) -> None:
    """The 1-axis at any angle; their coefficients are the inverse of the turned compliance as the
    textbook has it, term by term."""
    drawn = _random_part(seed)
    rng = np.random.default_rng(1000 + seed)
    e1, nu = float(rng.uniform(5e3, 1.5e5)), float(rng.uniform(0.0, 0.4))
    sheet = replace(
        drawn.material,
        youngs_modulus=e1,
        poissons_ratio=nu,
        youngs_modulus_2=e1 * float(rng.uniform(0.05, 1.0)),
        shear_modulus=e1 * float(rng.uniform(0.03, 0.4)),
    )
    axis = float(rng.uniform(-90.0, 90.0))
    case = drawn.case
    part = replace(
        case.part,
        wall=replace(case.part.wall, axis=axis),
        materials=(sheet,),
        supports=(FixedSupport("s", "e4"),),
        cases=(
            Case("k", "only", (LineLoad("q", "e2", *drawn.line), GravityLoad("g", *drawn.gravity))),
        ),
        mesh=MeshWishes(element),
    )
    ours = solve(part, case.shape, case.mesh).displacements[0]
    law = np.linalg.inv(compliance(sheet, axis)) * part.wall.thickness
    places, theirs = _by_scikit_fem(replace(drawn, material=sheet), element, law)
    used = np.unique(case.mesh.quads[:, : {"quad4": 4, "quad8": 8, "quad9": 9}[element]])
    far, at = cKDTree(places).query(case.mesh.nodes[used])
    assert far.max() < 1e-9 * np.ptp(case.mesh.nodes)
    error = float(np.abs(ours[used] - theirs[at]).max() / np.abs(theirs).max())
    assert error < 1e-9
    _worst[f"sheet {element}"] = max(_worst.get(f"sheet {element}", 0.0), error)
    record(
        f"{element}: displacements of 8 random orthotropic parts, the 1-axis at any angle",
        f"scikit-fem, {SETS[element][0].__name__} (run here)",
        "the same",
        "the same",
        100.0 * _worst[f"sheet {element}"],
        "1e-9",
    )


def _random_part(seed: int) -> Drawn:
    rng = np.random.default_rng(seed)
    state = ("plane stress", "plane strain")[seed % 2]
    wall = Wall(float(rng.uniform(0.5, 12.0)), "", state)  # type: ignore[arg-type]
    material = Material(
        "drawn", float(rng.uniform(2e3, 2.1e5)), float(rng.uniform(0.0, 0.45)), 2700.0
    )
    along, across = (int(n) for n in rng.integers(2, 9, 2))
    if seed % 4 < 2:
        corners = np.array([[0, 0], [60, 0], [60, 40], [0, 40]]) + rng.uniform(-9, 9, (4, 2))
        case = four_sided(tuple(map(tuple, corners)), along, across, wall, material)
    else:
        inner = float(rng.uniform(10, 30))
        angle = float(rng.uniform(40, 200))
        outer = inner * float(rng.uniform(1.3, 2.5))
        case = ring_sector(inner, outer, angle, 3 * along, across, wall, material)
    case = replace(case, mesh=shaken(case.mesh, case.shape, 0.15, seed))
    line, gravity = rng.uniform(-50, 50, 2), rng.uniform(-1e4, 1e4, 2)
    return Drawn(case, material, (line[0], line[1]), (gravity[0], gravity[1]))


def _by_scikit_fem(
    drawn: Drawn, element: ElementName, law: Floats | None = None
) -> tuple[Floats, Floats]:
    """Places of the nodes (n, 2) and their displacements (n, 2).

    `law` takes εx, εy, γxy to forces per length, (3, 3) [N/mm], where the wall is not isotropic.
    """
    case, part = drawn.case, drawn.case.part
    mesh = _their_mesh(case, curved=element != "quad4")
    kind, points = SETS[element]
    xi, weights = gauss_square(points)
    s, line_weights = gauss_line(5)
    vector = ElementVector(kind())
    # their reference square and line are [0, 1]
    basis = Basis(mesh, vector, quadrature=(0.5 * (xi.T + 1.0), weights / 4.0))
    loaded = mesh.facets_satisfying(_on_piece(case, "e2"), boundaries_only=True)
    edge = FacetBasis(
        mesh, vector, facets=loaded, quadrature=(0.5 * (s[None] + 1.0), line_weights / 2.0)
    )
    walls = [part.wall_of(zone) for zone in range(-1, len(part.zones))]
    of_zone = [part.material_of(zone) or drawn.material for zone in range(-1, len(part.zones))]
    of_zone[0] = drawn.material
    zone = case.mesh.element_zones + 1
    e = np.array([m.youngs_modulus for m in of_zone])
    nu = np.array([m.poissons_ratio for m in of_zone])
    mu, lam = e / (2 * (1 + nu)), e * nu / ((1 + nu) * (1 - 2 * nu))
    if part.wall.state == "plane stress":
        lam = 2 * mu * lam / (lam + 2 * mu)
    t = np.array([w.thickness for w in walls])
    weight = 1e-9 * t * np.array([m.density for m in of_zone])
    even = basis.with_element(ElementQuad0())
    fields = {
        name: even.interpolate(values[zone])
        for name, values in {"mu": t * mu, "lam": t * lam, "weight": weight}.items()
    }

    @BilinearForm
    def stiffness(u, v, w):  # type: ignore[no-untyped-def]
        strain, virtual = sym_grad(u), sym_grad(v)
        return 2 * w.mu * ddot(strain, virtual) + w.lam * trace(strain) * trace(virtual)

    @LinearForm
    def on_edge(v, _):  # type: ignore[no-untyped-def]
        return drawn.line[0] * v[0] + drawn.line[1] * v[1]

    @LinearForm
    def on_body(v, w):  # type: ignore[no-untyped-def]
        return w.weight * (drawn.gravity[0] * v[0] + drawn.gravity[1] * v[1])

    @BilinearForm
    def of_law(u, v, _):  # type: ignore[no-untyped-def]
        strain, virtual = ((g[0, 0], g[1, 1], 2 * g[0, 1]) for g in (sym_grad(u), sym_grad(v)))
        return sum(law[i, j] * strain[i] * virtual[j] for i in range(3) for j in range(3))

    matrix = stiffness.assemble(basis, **fields) if law is None else of_law.assemble(basis)
    force = on_edge.assemble(edge) + on_body.assemble(basis, **fields)
    held = basis.get_dofs(mesh.facets_satisfying(_on_piece(case, "e4"), boundaries_only=True))
    free = np.setdiff1d(np.arange(basis.N), held.all())
    moved = np.zeros(basis.N)
    moved[free] = spsolve(matrix.tocsc()[free][:, free], force[free])
    # x and y of a node follow one another in their numbering of vertices, facets and interiors
    places = basis.doflocs.T
    order = np.lexsort((np.arange(len(places)) % 2, *np.round(places, 9).T))
    return places[order[::2]], np.stack([moved[order[::2]], moved[order[1::2]]], axis=1)


def _their_mesh(case: Structured, curved: bool) -> MeshQuad:
    corners, inverse = np.unique(case.mesh.quads[:, :4], return_inverse=True)
    straight = MeshQuad(case.mesh.nodes[corners].T.copy(), inverse.reshape(-1, 4).T.copy())
    if not curved:
        return straight
    second = MeshQuad2.from_mesh(straight)
    # their middle and centre nodes start on the straight quads; move them to ours
    quads = case.mesh.quads
    ends = case.mesh.nodes[quads[:, :4]]
    flat = np.concatenate(
        [ends, 0.5 * (ends + np.roll(ends, -1, axis=1)), ends.mean(axis=1, keepdims=True)], axis=1
    )
    far, at = cKDTree(flat.reshape(-1, 2)).query(second.doflocs.T)
    assert far.max() < 1e-9 * np.ptp(case.mesh.nodes)
    return replace(second, doflocs=case.mesh.nodes[quads.ravel()[at]].T.copy())


def _on_piece(case: Structured, feature: str):  # type: ignore[no-untyped-def]
    """Their test of facets by midpoint: the middle of one of our sides on the feature."""
    sides = case.mesh.sides_on(case.shape.pieces_of(feature))
    ends = case.mesh.nodes[case.mesh.side_nodes[sides]]
    middles = 0.5 * (ends[:, 0] + ends[:, 2])
    tree = cKDTree(middles)
    slack = 1e-9 * np.ptp(case.mesh.nodes)

    def on(x: Floats) -> NDArray[np.bool_]:
        return np.asarray(tree.query(x.T)[0] < slack)

    return on
