"""Random findings for property tests, and a small one with arrays."""

from __future__ import annotations

import numpy as np
from hypothesis import strategies as st

from screenapp.model.findings import (
    CUT_QUANTITIES,
    READING_QUANTITIES,
    CaseFindings,
    CutFindings,
    CutSpan,
    Estimate,
    Fields,
    Findings,
    LimitFindings,
    MeshFindings,
    PassSummary,
    Peak,
    PlainLoss,
    Reading,
    SectionForces,
    WallGauge,
)
from screenapp.model.mesh import Mesh
from screenapp.model.solution import Balance, LoadResultant, Reaction, Solution, StressField

texts = st.text(st.characters(exclude_categories=["Cs"]), max_size=12)
numbers = st.floats(allow_nan=False, allow_infinity=False)
points = st.tuples(numbers, numbers)
counts = st.integers(0, 10**6)
hashes = st.text("0123456789abcdef", min_size=64, max_size=64)
histories = st.lists(numbers, max_size=4).map(tuple)
trusts = st.sampled_from(["settled", "rising", "unsettled"])
verdicts = st.sampled_from(["holds", "does not hold", "undecided"])

estimates = st.builds(
    Estimate, numbers, numbers | st.just(-np.inf), numbers | st.just(np.inf), trusts
)
peaks = st.builds(
    Peak,
    st.sampled_from(["von_mises", "sigma_1", "sigma_2"]),
    estimates,
    points,
    texts,
    texts,
    texts,
    texts,
    histories,
    st.none() | estimates,
    histories,
    st.none() | numbers,
    st.none() | numbers,
)
cases = st.builds(
    CaseFindings,
    texts,
    texts,
    st.lists(peaks, max_size=3).map(tuple),
    estimates,
    points,
    st.tuples(numbers, numbers, numbers),
    st.lists(st.builds(Reaction, texts, numbers, numbers, numbers), max_size=2).map(tuple),
    st.builds(Balance, numbers, numbers),
    st.lists(
        st.builds(LoadResultant, texts, numbers, numbers, numbers, st.none() | points), max_size=2
    ).map(tuple),
)
readings = st.builds(
    Reading,
    texts,
    texts,
    texts,
    points,
    st.fixed_dictionaries(dict.fromkeys(READING_QUANTITIES, estimates)),
    trusts,
    texts,
    texts,
    texts,
    histories,
    histories,
    st.none() | numbers,
    st.none() | numbers,
)
walls = st.builds(
    WallGauge,
    st.tuples(texts, texts),
    texts,
    numbers,
    st.tuples(points, points),
    st.integers(1, 40),
    numbers,
    numbers,
)
losses = st.builds(PlainLoss, texts, numbers, numbers, st.none() | numbers, texts)
limits = st.builds(LimitFindings, texts, texts, texts, estimates, verdicts, points, texts, texts)
meshes = st.builds(
    MeshFindings,
    st.sampled_from(["quad4", "quad4-incompatible", "quad8", "quad9"]),
    counts,
    counts,
    st.lists(st.builds(PassSummary, counts, counts, numbers, numbers, numbers), max_size=3).map(
        tuple
    ),
    numbers,
    numbers,
    counts,
    numbers,
    texts,
    st.lists(walls, max_size=2).map(tuple),
    st.lists(losses, max_size=2).map(tuple),
)
sections = st.builds(SectionForces, numbers, numbers, numbers)
curves = st.fixed_dictionaries(dict.fromkeys(CUT_QUANTITIES, histories))
spans = st.builds(
    CutSpan,
    histories,
    curves,
    curves,
    estimates,
    estimates,
    st.none() | st.tuples(numbers, numbers),
)
cuts = st.builds(
    CutFindings,
    texts,
    texts,
    texts,
    points,
    points,
    st.lists(spans, max_size=2).map(tuple),
    estimates,
    estimates,
    estimates,
    st.none() | sections,
    estimates,
    numbers,
    texts,
)
findings = st.builds(
    Findings,
    part_sha256=hashes,
    key=hashes,
    verdict=verdicts,
    headline=texts,
    reasons=st.lists(texts, max_size=2).map(tuple),
    mass_kg=numbers,
    area=numbers,
    cases=st.lists(cases, max_size=2).map(tuple),
    readings=st.lists(readings, max_size=2).map(tuple),
    limits=st.lists(limits, max_size=2).map(tuple),
    mesh=meshes,
    timing=st.dictionaries(texts, numbers, max_size=3),
    cautions=st.lists(texts, max_size=2).map(tuple),
    fields=st.just(()),
    cuts=st.lists(cuts, max_size=2).map(tuple),
)
"""Findings without arrays."""


def fields_of_one_quad(scale: float, modes: bool = False) -> Fields:
    """Arrays of the right shapes on one square quad, every value different."""
    xs, ys = np.meshgrid([0.0, 1.0, 2.0], [0.0, 1.0, 2.0])
    nodes = scale * np.stack([xs.ravel(), ys.ravel()], axis=1)
    mesh = Mesh(
        nodes=nodes,
        quads=np.array([[0, 2, 8, 6, 1, 5, 7, 3, 4]]),
        sides=np.array([[0, 0], [0, 1], [0, 2], [0, 3]]),
        side_piece=np.arange(4),
        side_t=np.tile([0.0, 1.0], (4, 1)),
        corner_nodes={"c1": 0, "c2": 2},
        worst_jacobian=1.0,
        fallback="none needed",
    )
    solution = Solution(
        element="quad9",
        displacements=scale * np.arange(36.0).reshape(2, 9, 2),
        reactions=((Reaction("s1", 1.0, -2.0, scale),), ()),
        balance=(Balance(1e-12, 2e-12), Balance(0.0, 0.0)),
        residual=1e-13,
        unknowns=12,
        internal_modes=np.ones((2, 1, 4)) if modes else None,
    )
    stress = StressField(
        nodal=scale * np.arange(54.0).reshape(2, 9, 3),
        side=scale * np.arange(72.0).reshape(2, 4, 3, 3),
        energy_error=np.array([[0.1], [0.2]]),
    )
    return Fields(mesh, solution, stress)
