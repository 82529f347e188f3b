"""What a screening found: every number with its band and its trust, and the verdicts.

These records are what the window shows, what the cache keeps and what the result record
(`resources/schema/result.schema.json`) is written from.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from screenapp.model.mesh import Mesh
from screenapp.model.part import Point
from screenapp.model.solution import Balance, LoadResultant, Reaction, Solution, StressField

Trust = Literal["settled", "rising", "unsettled"]
Verdict = Literal["holds", "does not hold", "undecided"]

READING_QUANTITIES = (
    "sigma_x",
    "sigma_y",
    "tau_xy",
    "sigma_1",
    "sigma_2",
    "von_mises",
    "u_x",
    "u_y",
)
"""The quantities of every reading: stresses [MPa] and displacements [mm]."""


@dataclass(frozen=True)
class Estimate:
    """A number with its band.

    `low <= value <= high` holds the true value if `trust` is "settled".  A "rising" number has no
    finite value: `value` is what the last mesh showed, `high` is infinite.
    """

    value: float
    low: float
    high: float
    trust: Trust


@dataclass(frozen=True)
class Peak:
    """A separate maximum of one quantity in one case.

    Attributes:
        quantity: "von_mises", "tresca", "sigma_1" (largest tension) or "sigma_2" (largest
            compression).
        estimate: value and band [MPa].
        at: place [mm].
        feature: id of the edge, fillet corner or hole, or "" inside the part.
        place: the same in words, e.g. "hole h2, 344°", "fillet c3", "end of edge e5".
        why: for a rising or unsettled peak, the reason in words; else "".
        mend: for a rising peak, what would settle it; else "".
        history: value on each pass.
        sizes: size of the elements there on each pass [mm].
        rate: growth α = -d ln(value) / d ln(size) over the last passes; None where it is not known.
        allowed: half band within which it counts as settled [MPa]; None where it is not known.
        zone: id of the zone whose wall it is in; "" for the wall itself.
        structural: for a rising peak beside a free edge, the structural stress drawn on from
            0.4 t and 1.0 t [MPa]; else None.
    """

    quantity: str
    estimate: Estimate
    at: Point
    feature: str
    place: str
    why: str = ""
    mend: str = ""
    history: tuple[float, ...] = ()
    structural: Estimate | None = None
    sizes: tuple[float, ...] = ()
    rate: float | None = None
    allowed: float | None = None
    zone: str = ""


@dataclass(frozen=True)
class LineForce:
    """Where a weld or a bed of springs gives most for each length in a case.

    Attributes:
        support: its id.
        largest: size of the force per length [N/mm].
        at: where that is [mm].
        normal, along: its share across the boundary (positive pulls on the part) and along it
            (positive forwards, with the material on the left) on the last pass [N/mm].
        throat: of the weld [mm]; None for springs.
    """

    support: str
    largest: Estimate
    at: Point
    normal: float
    along: float
    throat: float | None = None


@dataclass(frozen=True)
class CaseFindings:
    """One load case: its peaks, largest first, and its statics.

    `applied` is the resultant of the loads on the last mesh: force x, y [N] and moment about the
    origin [N·mm]; `loads` what each of them amounts to on the boundary as it is drawn.
    """

    case: str
    name: str
    peaks: tuple[Peak, ...]
    displacement_max: Estimate
    displacement_at: Point
    applied: tuple[float, float, float]
    reactions: tuple[Reaction, ...]
    balance: Balance
    loads: tuple[LoadResultant, ...] = ()
    line_forces: tuple[LineForce, ...] = ()


@dataclass(frozen=True)
class Reading:
    """A probe read in one case; `values` follows READING_QUANTITIES.

    `history` holds, for each pass, the value of von Mises stress.  `feature`, `place`, `sizes`,
    `rate` and `allowed` are as in `Peak`, of that stress; `why` says why it is not settled.
    """

    probe: str
    name: str
    case: str
    at: Point
    values: dict[str, Estimate]
    trust: Trust
    feature: str = ""
    place: str = ""
    why: str = ""
    history: tuple[float, ...] = ()
    sizes: tuple[float, ...] = ()
    rate: float | None = None
    allowed: float | None = None


CUT_QUANTITIES = ("normal", "along", "shear", "von_mises")
"""What is read along a cut [MPa]: stress across it (tension is positive), stress along it, shear
(positive from start to end on the body left of the cut), von Mises stress."""


@dataclass(frozen=True)
class SectionForces:
    """What the material beyond a cut does to the free body on its left.

    Attributes:
        normal: N [N], positive in tension.
        shear: V [N], along the cut from start to end.
        moment: M about the middle of the section [N·mm], positive where it stretches the end.
    """

    normal: float
    shear: float
    moment: float


@dataclass(frozen=True)
class CutSpan:
    """One stretch of material on a cut.

    Attributes:
        distances: places along the cut, from its start [mm], rising.
        values: of each of CUT_QUANTITIES there [MPa].
        half_bands: of the same [MPa].
        membrane: mean of the normal stress [MPa].
        bending: linear part of it at the end of the span [MPa].
        beam: stress of beam theory at begin and end, from the forces on the free body [MPa];
            None where there is no free body.
    """

    distances: tuple[float, ...]
    values: dict[str, tuple[float, ...]]
    half_bands: dict[str, tuple[float, ...]]
    membrane: Estimate
    bending: Estimate
    beam: tuple[float, float] | None = None


@dataclass(frozen=True)
class CutFindings:
    """A cut read in one case.

    Attributes:
        start, end: of the cut when it was read [mm].
        spans: the stretches of material, a new one where thickness or material changes; none if
            it misses the part.
        normal, shear, moment: section forces by integrating the stress, signs as in
            `SectionForces` [N, N, N·mm].
        applied: the same from the loads and supports on the free body; None where the cut does not
            divide the part.
        largest: largest von Mises stress on the cut [MPa].
        largest_at: its distance from the start [mm].
        why: why it is not settled.
    """

    cut: str
    name: str
    case: str
    start: Point
    end: Point
    spans: tuple[CutSpan, ...]
    normal: Estimate
    shear: Estimate
    moment: Estimate
    applied: SectionForces | None
    largest: Estimate
    largest_at: float
    why: str = ""

    @property
    def trust(self) -> Trust:
        """Of its largest stress."""
        return self.largest.trust


@dataclass(frozen=True)
class LimitFindings:
    """One limit in one case: how much of it is used (1.0 is all), with band and verdict.

    A limit of several rules has one of these for each: `rule` tells them apart by words that stay
    when numbers change, e.g. "h1 bearing".  `assumed` says what the number takes for granted.
    """

    limit: str
    name: str
    case: str
    utilisation: Estimate
    verdict: Verdict
    at: Point
    place: str
    reason: str
    assumed: str = ""
    rule: str = ""


@dataclass(frozen=True)
class HandCheck:
    """A computed stress beside that of a handbook formula for the same feature.

    Attributes:
        kind: the handbook's case in words.
        case: id of the load case.
        feature: id of the hole or corner.
        place: the same in words, with what bounds it.
        at: where the computed stress is [mm].
        computed: largest von Mises stress there [MPa].
        formula: that of the formula [MPa].
        source: of the formula.
        valid: its range, and where in it this case lies.
        nominal: the force and section that it was worked out with.
    """

    kind: str
    case: str
    feature: str
    place: str
    at: Point
    computed: Estimate
    formula: float
    source: str
    valid: str
    nominal: str

    @property
    def difference(self) -> float:
        """Of the computed stress from the formula's, relative to the latter."""
        return self.computed.value / self.formula - 1.0


@dataclass(frozen=True)
class PassSummary:
    """One pass of the mesh: size, unknowns, estimated relative energy error, largest von Mises
    stress [MPa] over all cases, and smallest element size [mm]."""

    elements: int
    unknowns: int
    error: float
    peak: float
    smallest: float


@dataclass(frozen=True)
class WallGauge:
    """A thin wall of the part, and what plain bilinear quads would make of its bending.

    Attributes:
        between: ids of the two features that it lies between.
        place: the same in words, e.g. "edge e1 and hole h3".
        width: [mm].
        ends: the two nearest points of the features [mm].
        layers: elements across it on the last mesh.
        aspect: length of those elements along the wall over their size across it.
        stiffness: stiffness of plain bilinear rectangles of that number and aspect in pure bending
            over the true one, by the closed form of `mechanics.wall_bending`.
    """

    between: tuple[str, str]
    place: str
    width: float
    ends: tuple[Point, Point]
    layers: int
    aspect: float
    stiffness: float


@dataclass(frozen=True)
class PlainLoss:
    """What plain bilinear quads show too little of in one case, on the very mesh of the findings.

    Each share is 1 - (plain quads) / (nine-node quads, or the element that was chosen if that is
    another one), negative where they show more.

    Attributes:
        case: id.
        energy: share of the strain energy.
        displacement: share of the largest displacement, at its place.
        peak: share of the largest von Mises peak that is not rising; None where there is none.
        place: where that peak is, in words.
    """

    case: str
    energy: float
    displacement: float
    peak: float | None
    place: str


@dataclass(frozen=True)
class MeshFindings:
    """The last mesh and how it came about.

    `walls` are its thin walls, narrowest first; `plain` has one entry for each case, and is empty
    where the comparison was left out.
    """

    element: str
    elements: int
    unknowns: int
    passes: tuple[PassSummary, ...]
    error_estimate: float
    worst_jacobian: float
    across: int
    residual: float
    note: str = ""
    walls: tuple[WallGauge, ...] = ()
    plain: tuple[PlainLoss, ...] = ()


@dataclass(frozen=True, eq=False)
class Fields:
    """The arrays behind the findings, for drawing and for reading any point."""

    mesh: Mesh
    solution: Solution
    stress: StressField


@dataclass(frozen=True, eq=False)
class Findings:
    """Everything that one screening found.

    Attributes:
        part_sha256: hash of the part file's bytes.
        key: `part_json.screening_key` of the part: what title, notes, names, units and readings do
            not change, so that a new probe does not put the findings out of date.
        verdict: over all limits and cases.
        headline: the verdict in words for the head of the sheet, e.g. "Holds, 1.42 in hand".
        reasons: why, one sentence each; never empty unless the verdict is "holds".
        mass_kg: mass of the part [kg].
        area: of the part [mm²].
        cases, readings, limits: as named; readings list every probe for every case.
        cuts: every cut for every case.
        hand_checks: features that are handbook cases, beside their formulas.
        mesh: the last mesh.
        timing: seconds by stage ("meshing", "solving", "recovery", "total").
        cautions: sentences that belong beside the verdict (a point load, a fallback mesh ...).
        fields: the arrays of every pass, last one last; empty when only the record was kept.
    """

    part_sha256: str
    key: str
    verdict: Verdict
    headline: str
    reasons: tuple[str, ...]
    mass_kg: float
    area: float
    cases: tuple[CaseFindings, ...]
    readings: tuple[Reading, ...]
    limits: tuple[LimitFindings, ...]
    mesh: MeshFindings
    timing: dict[str, float]
    cautions: tuple[str, ...] = ()
    fields: tuple[Fields, ...] = ()
    cuts: tuple[CutFindings, ...] = ()
    hand_checks: tuple[HandCheck, ...] = ()

    @property
    def last(self) -> Fields | None:
        """The arrays of the last pass, None when only the record was kept."""
        return self.fields[-1] if self.fields else None

    @property
    def governing(self) -> LimitFindings | None:
        """The limit that the verdict rests on: the worst verdict, then the most used; None if no
        limit is set."""
        order: list[Verdict] = ["holds", "undecided", "does not hold"]
        return max(
            self.limits, key=lambda f: (order.index(f.verdict), f.utilisation.value), default=None
        )
