"""Random parts for property tests: any record with any values, whether they make sense or not."""

from __future__ import annotations

from dataclasses import fields
from typing import get_args

from hypothesis import strategies as st

from screenapp.model.part import (
    BearingLoad,
    BoltSupport,
    Case,
    CircleHole,
    Combination,
    Corner,
    Cut,
    Dimension,
    DisplacementLimit,
    Edge,
    ElasticSupport,
    FatigueLimit,
    FixedSupport,
    ForceLoad,
    Formula,
    GravityLoad,
    JointLimit,
    LineLoad,
    Loop,
    LoopHole,
    Material,
    MaterialFamily,
    MeshWishes,
    MisfitLoad,
    MomentLoad,
    Part,
    PinSupport,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    Probe,
    RollerSupport,
    ShearLoad,
    SlotHole,
    SpinLoad,
    StrainLimit,
    StressLimit,
    SymmetrySupport,
    TemperatureLoad,
    Term,
    Wall,
    WeldSupport,
)
from screenapp.model.pattern import BoltCircle, GridPattern, RowPattern

numbers = st.one_of(
    st.floats(allow_nan=False, allow_infinity=False),
    st.integers(-1000, 1000).map(float),
    st.decimals(-500, 500, places=3).map(float),
)
maybe = st.none() | numbers
points = st.tuples(numbers, numbers)
texts = st.text(st.characters(exclude_categories=["Cs"]), max_size=30)
on = st.sampled_from(["e1", "h1", "h1.2", "h2.1-3", "c1", "gone"])


@st.composite
def _loops(draw: st.DrawFn, prefix: str) -> Loop:
    n = draw(st.integers(2, 5))
    sizes = st.just(0.0) | numbers
    corners = tuple(
        Corner(f"{prefix}c{i}", draw(points), draw(sizes), draw(sizes)) for i in range(n)
    )
    edges = tuple(Edge(f"{prefix}e{i}", draw(st.none() | points)) for i in range(n))
    return Loop(corners, edges)


counts = st.integers(1, 12)
patterns = st.one_of(
    st.none(),
    st.builds(RowPattern, counts, numbers, numbers),
    st.builds(GridPattern, counts, counts, numbers, numbers, numbers),
    st.builds(BoltCircle, counts, numbers, numbers),
)


@st.composite
def _holes(draw: st.DrawFn, number: int) -> CircleHole | SlotHole | LoopHole:
    name = f"h{number}"
    kind = draw(st.integers(0, 2))
    if kind == 0:
        return CircleHole(name, draw(points), draw(numbers), draw(patterns))
    if kind == 1:
        sizes = draw(numbers), draw(numbers), draw(numbers)
        return SlotHole(name, draw(points), *sizes, draw(patterns))
    return LoopHole(name, draw(_loops(f"{name}-")))


def _listed(make, size: int = 3):  # type: ignore[no-untyped-def]
    """Tuples of what `make(number)` draws, with running numbers for the ids."""
    return st.integers(0, size).flatmap(lambda n: st.tuples(*(make(i) for i in range(n))))


def _supports(i: int) -> st.SearchStrategy[object]:
    name = st.just(f"s{i}")
    return st.one_of(
        st.builds(FixedSupport, name, on, maybe, maybe),
        st.builds(PinSupport, name, on),
        st.builds(SymmetrySupport, name, on, maybe, maybe),
        st.builds(ElasticSupport, name, on, numbers, numbers, maybe, maybe),
        st.builds(BoltSupport, name, on, st.sampled_from([(), ("h1",), ("h2.1-3", "gone")]), maybe),
        st.builds(WeldSupport, name, on, numbers, maybe, maybe),
        st.builds(RollerSupport, name, on, maybe, maybe, maybe),
        st.builds(PrescribedSupport, name, on, maybe, maybe, maybe, maybe),
    )


def _loads(case: int):  # type: ignore[no-untyped-def]
    def make(i: int) -> st.SearchStrategy[object]:
        name = st.just(f"l{case}-{i}")
        vectors = (BearingLoad, PointLoad)
        return st.one_of(
            st.builds(PressureLoad, name, on, numbers, maybe, maybe, maybe),
            st.builds(ShearLoad, name, on, numbers, maybe, maybe),
            st.builds(LineLoad, name, on, numbers, numbers, maybe, maybe, maybe, maybe),
            st.builds(ForceLoad, name, on, numbers, numbers, maybe, maybe),
            *(st.builds(cls, name, on, numbers, numbers) for cls in vectors),
            st.builds(MomentLoad, name, on, numbers),
            st.builds(MisfitLoad, name, st.sampled_from(["s0", "s1", "gone"]), numbers, numbers),
            st.builds(GravityLoad, name, numbers, numbers),
            st.builds(SpinLoad, name, numbers, numbers, numbers, numbers),
            st.builds(
                TemperatureLoad,
                name,
                numbers,
                numbers,
                numbers,
                numbers,
                st.none() | st.sampled_from(["z1", "gone"]),
            ),
        )

    return make


def _materials(i: int) -> st.SearchStrategy[Material]:
    name = texts.map(lambda text: f"{text} {i}")
    optional = {f.name: maybe for f in fields(Material) if f.default is None and f.name != "family"}
    families = st.one_of(st.none(), st.sampled_from(get_args(MaterialFamily)))
    return st.builds(
        Material, name, numbers, numbers, numbers, family=families, source=texts, **optional
    )


def _limits(i: int) -> st.SearchStrategy[object]:
    name = st.just(f"m{i}")
    measures, bounds = ["von_mises", "tresca", "sigma_1"], ["proof_stress", "strength"]
    return st.one_of(
        st.builds(StressLimit, name, st.sampled_from(measures), st.sampled_from(bounds), numbers),
        st.builds(JointLimit, name, st.sampled_from(["h1", "h4.2"]), texts, numbers, maybe, maybe),
        st.builds(
            FatigueLimit,
            name,
            st.just("k1"),
            st.sampled_from([None, "k2"]),
            numbers,
            numbers,
            st.sampled_from(["goodman", "smith_watson_topper"]),
            st.sampled_from(["none", "peterson", "neuber"]),
        ),
        st.builds(StrainLimit, name, numbers),
        st.builds(DisplacementLimit, name, numbers, st.none() | points, maybe),
    )


elements = st.sampled_from(["quad4", "quad4-incompatible", "quad8", "quad9"])

parts = st.builds(
    Part,
    title=texts,
    notes=texts,
    display_units=st.sampled_from(["mm-N-MPa", "in-lbf-ksi"]),
    dimensions=_listed(
        lambda i: st.builds(Dimension, st.sampled_from([f"width{i}", f"höhe_{i}"]), numbers, maybe)
    ),
    formulas=st.just(()),
    outline=st.none() | _loops(""),
    holes=_listed(_holes),
    wall=st.builds(Wall, numbers, texts, st.sampled_from(["plane stress", "plane strain"])),
    materials=_listed(_materials),
    supports=_listed(_supports),
    cases=_listed(lambda i: st.builds(Case, st.just(f"k{i}"), texts, _listed(_loads(i)))),
    limits=_listed(_limits),
    mesh=st.builds(MeshWishes, elements, numbers, maybe, st.integers(0, 9)),
    readings=_listed(lambda i: st.builds(Probe, st.just(f"p{i}"), texts, points)),
    combinations=_listed(
        lambda i: st.builds(
            Combination,
            st.just(f"combination{i}"),
            texts,
            _listed(lambda j: st.builds(Term, st.just(f"k{j}"), numbers)),
        )
    ),
    cuts=_listed(lambda i: st.builds(Cut, st.just(f"x{i}"), texts, points, points)),
)
"""Parts without formulas."""


@st.composite
def _with_formulas(draw: st.DrawFn) -> Part:
    from dataclasses import replace

    width = draw(st.integers(-500, 500).map(float))
    part = draw(parts)
    bound = Dimension("breadth", width)
    x = width / 2 - 5
    probe = Probe("p-formula", "mid", (x, 1.0))
    wall = replace(part.wall, thickness=abs(width))
    return replace(
        part,
        dimensions=(*part.dimensions, bound),
        readings=(probe, *part.readings),
        wall=wall,
        formulas=(
            Formula("wall.thickness", "abs(breadth)"),
            Formula("readings.p-formula.at.0", "breadth/2 - 5"),
        ),
    )


parts_with_formulas = _with_formulas()
"""Parts in which two numbers are expressions."""
