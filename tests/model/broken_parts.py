"""Random parts that are wrong in every way a record allows, for `faults_of` to survive.

Coordinates come from a small grid as often as from wild numbers, so that many parts get as far as
the checks of crossing boundaries, supports and rank.
"""

from __future__ import annotations

import math

from hypothesis import strategies as st

from screenapp.model.part import (
    BearingLoad,
    Case,
    CircleHole,
    Corner,
    Dimension,
    DisplacementLimit,
    Edge,
    FixedSupport,
    ForceLoad,
    GravityLoad,
    LineLoad,
    Loop,
    LoopHole,
    Material,
    MeshWishes,
    Part,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    Probe,
    RollerSupport,
    ShearLoad,
    SlotHole,
    StressLimit,
    Wall,
)

ODD = [0.0, -0.0, 1.0, -1.0, 5e-324, 1e-12, 1e-5, 1e6, 1e12, 1e308, -1e308, 0.5, 90.0]
wild = st.sampled_from([*ODD, math.nan, math.inf, -math.inf]) | st.floats()
tame = st.integers(0, 8).map(float)
ids = st.sampled_from(["c0", "c1", "c2", "e0", "e1", "e2", "h0", "h1", "a0", "b0", "s0", ""])


def _number(calm: bool) -> st.SearchStrategy[float]:
    return tame if calm else wild | tame


@st.composite
def _loop(draw: st.DrawFn, calm: bool, prefix: str) -> Loop:
    number = _number(calm)
    n = draw(st.integers(2, 6) if calm else st.integers(0, 6))
    m = n if calm else draw(st.integers(0, 6))
    point = st.tuples(number, number)
    name = (lambda kind, i: st.just(f"{prefix}{kind}{i}")) if calm else (lambda kind, i: ids)
    rounds = st.sampled_from([0.0, 0.0, 0.0, 0.2, 1.0]) if calm else number
    return Loop(
        tuple(Corner(draw(name("c", i)), draw(point), draw(rounds)) for i in range(n)),
        tuple(Edge(draw(name("e", i)), draw(st.none() | st.none() | point)) for i in range(m)),
    )


@st.composite
def _hole(draw: st.DrawFn, calm: bool, i: int) -> CircleHole | SlotHole | LoopHole:
    number = _number(calm)
    point = st.tuples(number, number)
    id_ = f"h{i}" if calm else draw(ids)
    size = st.sampled_from([0.5, 1.0, 2.0]) if calm else number
    return draw(
        st.builds(CircleHole, st.just(id_), point, size)
        | st.builds(SlotHole, st.just(id_), point, size, size, number)
        | st.builds(LoopHole, st.just(id_), _loop(calm, "b"))
    )


def _few(one: st.SearchStrategy[object], most: int = 2) -> st.SearchStrategy[tuple[object, ...]]:
    return st.lists(one, max_size=most).map(tuple)


@st.composite
def broken_parts(draw: st.DrawFn) -> Part:
    """A part of any values; half of them have calm geometry."""
    calm = draw(st.booleans())
    number = wild | tame
    maybe = st.none() | number
    supports = st.one_of(
        st.builds(FixedSupport, ids, ids),
        st.builds(RollerSupport, ids, ids, maybe),
        st.builds(PrescribedSupport, ids, ids, maybe, maybe),
    )
    loads = st.one_of(
        st.builds(PressureLoad, ids, ids, number),
        st.builds(ShearLoad, ids, ids, number),
        *(
            st.builds(cls, ids, ids, number, number)
            for cls in (LineLoad, ForceLoad, BearingLoad, PointLoad)
        ),
        st.builds(GravityLoad, ids, number, number),
    )
    names = st.sampled_from(["", "steel", "tin"])
    words = st.sampled_from(["von_mises", "strength", "plane stress", "quad9", "nonsense"])
    holes = tuple(draw(_hole(calm, i)) for i in range(draw(st.integers(0, 3))))
    if calm and draw(st.booleans()):  # nothing wrong but the geometry, so that it is looked at
        return Part(
            outline=draw(_loop(calm, "")),
            holes=holes,
            wall=Wall(1.0, "steel"),
            materials=(Material("steel", 2e5, 0.3, 7850.0, 235.0),),
            supports=draw(
                st.sampled_from([(FixedSupport("s0", "e0"),), (FixedSupport("s0", "c1"),)])
            ),
            cases=(Case("k0", "x", (GravityLoad("l0", 0.0, -9.81),)),),
            limits=(StressLimit("g0"),),
            readings=(Probe("p0", "", draw(st.tuples(tame, tame))),),
        )
    return Part(
        display_units=draw(words),
        dimensions=draw(_few(st.builds(Dimension, names, number, maybe, maybe))),
        outline=draw(st.none() | _loop(calm, "") if not calm else _loop(calm, "")),
        holes=holes,
        wall=draw(st.builds(Wall, number, names, words)),
        materials=draw(
            _few(st.builds(Material, names, number, number, number, maybe, maybe, maybe))
        ),
        supports=draw(_few(supports, 3)),
        cases=draw(_few(st.builds(Case, ids, names, _few(loads)))),
        limits=draw(
            _few(
                st.builds(StressLimit, ids, words, words, number)
                | st.builds(DisplacementLimit, ids, number)
            )
        ),
        mesh=draw(st.builds(MeshWishes, words, number, maybe, st.integers(-5, 50))),
        readings=draw(_few(st.builds(Probe, ids, names, st.tuples(number, number)))),
    )
