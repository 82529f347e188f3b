"""The main job: from a part to its findings, by as many passes as the numbers need."""

from __future__ import annotations

import time
from collections.abc import Callable, Iterator, Sequence
from contextlib import contextmanager
from dataclasses import dataclass, field

import numpy as np

from screenapp.mechanics.bed_ends import with_bed_ends
from screenapp.mechanics.equilibrium import resultant
from screenapp.mechanics.loads import nodal_forces
from screenapp.mechanics.recovery import recover
from screenapp.mechanics.resultants import load_resultants
from screenapp.mechanics.singular_spot import SingularSpot
from screenapp.mechanics.singular_spots import singular_spots
from screenapp.mechanics.solve import estimate_memory, estimate_unknowns, solve
from screenapp.meshing.across import elements_across
from screenapp.meshing.service import Mesher
from screenapp.meshing.sizing import (
    SHARE_OF_PART,
    adapted_sizes,
    estimate_elements,
    initial_sizes,
)
from screenapp.model.combinations import loadings
from screenapp.model.errors import causes_of
from screenapp.model.findings import (
    CaseFindings,
    Estimate,
    Fields,
    Findings,
    LimitFindings,
    MeshFindings,
    PassSummary,
    PlainLoss,
    Reading,
)
from screenapp.model.gauge_text import loss_text
from screenapp.model.mass import mass_of
from screenapp.model.part import Part, Point, StressLimit
from screenapp.model.part_json import part_sha256, screening_key
from screenapp.model.progress import SILENT, Progress, Step
from screenapp.model.shape import Shape
from screenapp.model.validity import check, faults_of
from screenapp.screening.adapt import targets, wanted_sizes
from screenapp.screening.capacity import refuse_beyond_memory
from screenapp.screening.cuts import cuts
from screenapp.screening.hand_checks import hand_checks
from screenapp.screening.limits import judge_limits, overall
from screenapp.screening.line_forces import line_forces
from screenapp.screening.passes import Pass
from screenapp.screening.plain_quads import plain_losses
from screenapp.screening.probes import readings
from screenapp.screening.spots import sizes_at_points
from screenapp.screening.tracking import track
from screenapp.screening.trust import LEAST_PASSES, Sample, judge, judge_creeping
from screenapp.screening.wall_gauge import wall_gauges

MOST_PASSES = 7
FAST_PASSES = 2
"""A fast screening stops here; its numbers stay unsettled unless they already agree."""

OnPass = Callable[[Fields, PassSummary], None]


@dataclass
class Clock:
    """Seconds spent by stage."""

    spent: dict[str, float] = field(default_factory=dict)

    @contextmanager
    def stage(self, name: str) -> Iterator[None]:
        """Add the time of the block to a stage."""
        begin = time.perf_counter()
        try:
            yield
        finally:
            self.spent[name] = self.spent.get(name, 0.0) + time.perf_counter() - begin


def screen(
    part: Part,
    mesher: Mesher,
    progress: Progress = SILENT,
    on_pass: OnPass = lambda fields, summary: None,
    fast: bool = False,
) -> Findings:
    """Screen a part.

    Args:
        part: any part; it is validated first.
        mesher: makes the meshes (a warm worker process).
        progress: told of every stage; asked whether to stop.
        on_pass: called with the fields of each pass as soon as they are known.
        fast: stop after `FAST_PASSES` and do not compare with plain bilinear quads.

    Raises:
        InvalidPartError: the part cannot be screened; its faults say why.
        MeshingError, SolvingError: as they say.
        Cancelled: the user asked to stop.
    """
    clock = Clock()
    begin = time.perf_counter()
    with clock.stage("checking"):
        shape = check(part)
        spots = singular_spots(part, shape)
    most = FAST_PASSES if fast else MOST_PASSES
    passes: list[Pass] = []
    summaries: list[PassSummary] = []
    first_sizes: list[float] = []
    sizes = initial_sizes(shape, part.mesh)
    while True:
        number = len(passes) + 1
        unknowns = estimate_unknowns(int(estimate_elements(shape, sizes)), part.mesh.element)
        refuse_beyond_memory(unknowns, estimate_memory(unknowns))
        progress.report(Step("meshing", number, (number - 1.0) / most))
        with clock.stage("meshing"):
            mesh = mesher.mesh(shape, sizes, progress)
        progress.report(Step("solving", number, (number - 0.7) / most))
        with clock.stage("solving"):
            solution = solve(part, shape, mesh, progress)
        progress.report(Step("reading stresses", number, (number - 0.2) / most))
        with clock.stage("recovery"):
            fields = Fields(mesh, solution, recover(part, shape, mesh, solution))
            this = Pass(part, shape, fields, with_bed_ends(part, shape, mesh, solution, spots))
        passes.append(this)
        summaries.append(_summary(part, this))
        if number == 1 and this.spots:
            first_sizes = list(this.read(np.array([s.at for s in this.spots])).size)
        on_pass(fields, summaries[-1])
        progress.check()
        with clock.stage("judging"):
            cases = _cases(part, shape, passes, this.spots)
            read = readings(part, shape, passes)
            limits = judge_limits(part, cases, shape, passes)
        if number >= most or (number >= LEAST_PASSES and _done(part, cases, read, limits)):
            break
        with clock.stage("adapting"):
            wanted = wanted_sizes(
                part, this, this.spots, first_sizes, targets(part, shape, this.spots, cases, read)
            )
            largest = part.mesh.size or SHARE_OF_PART * shape.size
            smallest = min(float(wanted.min()), largest)
            sizes = adapted_sizes(shape, mesh, wanted, smallest, largest, part.mesh.across)
    plain: tuple[PlainLoss, ...] = ()
    if not fast:
        progress.report(Step("comparing with plain quads", number, (most - 0.1) / most))
        with clock.stage("comparing"):
            plain = plain_losses(part, shape, passes[-1], cases, progress)
    clock.spent["total"] = time.perf_counter() - begin
    return _findings(part, shape, passes, summaries, cases, read, limits, plain, clock)


def _done(
    part: Part,
    cases: Sequence[CaseFindings],
    read: Sequence[Reading],
    limits: Sequence[LimitFindings],
) -> bool:
    """Whether every number is known: settled, or rising and never to be settled."""
    stress = {limit.id for limit in part.limits if isinstance(limit, StressLimit)}
    others = [f.utilisation for f in limits if f.limit not in stress]  # of those, the peaks
    numbers = [n for n in others if np.isfinite(n.high)]  # what could not be read never settles
    numbers += [p.estimate for c in cases for p in c.peaks]
    numbers += [c.displacement_max for c in cases]
    numbers += [force.largest for c in cases for force in c.line_forces]
    numbers += [p.structural for c in cases for p in c.peaks if p.structural is not None]
    return all(n.trust != "unsettled" for n in numbers) and all(
        r.trust != "unsettled" for r in read
    )


def _summary(part: Part, this: Pass) -> PassSummary:
    f = this.fields
    error = np.sqrt((f.stress.energy_error**2).sum(axis=1)).max(initial=0.0)
    peak = max(this.measure_max("von_mises", k) for k in range(len(loadings(part))))
    return PassSummary(
        f.mesh.n_elements, f.solution.unknowns, float(error), peak, float(this.sizes.min())
    )


def _cases(
    part: Part, shape: Shape, passes: Sequence[Pass], spots: Sequence[SingularSpot]
) -> tuple[CaseFindings, ...]:
    found: list[CaseFindings] = []
    last = passes[-1].fields
    for k, (case, peaks) in enumerate(
        zip(loadings(part), track(part, shape, passes, spots), strict=True)
    ):
        moved, at = _displacement(part, passes, k, sizes_at_points(case.id, passes))
        total = resultant(last.mesh.nodes, nodal_forces(part, shape, last.mesh, case))
        found.append(
            CaseFindings(
                case.id,
                case.name,
                peaks,
                moved,
                at,
                (float(total[0]), float(total[1]), float(total[2])),
                last.solution.reactions[k],
                last.solution.balance[k],
                load_resultants(part, shape, case),
                line_forces(part, shape, passes, k),
            )
        )
    return tuple(found)


def _displacement(
    part: Part, passes: Sequence[Pass], k: int, creeping: Sequence[float] | None
) -> tuple[Estimate, Point]:
    """The largest displacement with its band, and where it is.

    `creeping` has the element sizes where a force or a support acts at a point, if one does.
    """
    samples: list[Sample] = []
    at = (0.0, 0.0)
    for number, this in enumerate(passes):
        f = this.fields
        moved = np.hypot(*f.solution.displacements[k].T)
        i = int(np.argmax(moved))
        at = (float(f.mesh.nodes[i, 0]), float(f.mesh.nodes[i, 1]))
        size = creeping[number] if creeping is not None else float(this.sizes.mean())
        samples.append(Sample(float(moved[i]), size))
    value = samples[-1].value
    if value == 0.0:
        return Estimate(0.0, 0.0, 0.0, "settled"), at
    judged = judge if creeping is None else judge_creeping
    return judged(samples, part.mesh.tolerance, value), at


def _findings(
    part: Part,
    shape: Shape,
    passes: Sequence[Pass],
    summaries: Sequence[PassSummary],
    cases: tuple[CaseFindings, ...],
    read: tuple[Reading, ...],
    limits: tuple[LimitFindings, ...],
    plain: tuple[PlainLoss, ...],
    clock: Clock,
) -> Findings:
    last, summary = passes[-1].fields, summaries[-1]
    walls = wall_gauges(part, shape, last.mesh)
    verdict, headline, reasons = overall(limits)
    area = shape.area
    cautions = causes_of(fault for fault in faults_of(part) if not fault.blocks)
    if part.mesh.element == "quad4":
        said = loss_text(plain, {case.id: case.name for case in loadings(part)})
        cautions.append(
            f"{said[:1].lower()}{said[1:]}"
            if said
            else "plain bilinear quads are too stiff in bending; nine-node quads are not"
        )
    cautions += [
        f"at {peak.place} the structural stress was accepted, as no finite value exists"
        for limit in part.limits
        if isinstance(limit, StressLimit) and limit.at_rising == "structural"
        for case in cases
        for peak in case.peaks
        if peak.quantity == limit.measure and peak.structural is not None
    ]
    if last.mesh.fallback:
        cautions.append(last.mesh.fallback)
    return Findings(
        part_sha256=part_sha256(part),
        key=screening_key(part),
        verdict=verdict,
        headline=headline,
        reasons=reasons,
        mass_kg=mass_of(part, shape),
        area=area,
        cases=cases,
        readings=read,
        cuts=cuts(part, shape, passes),
        hand_checks=hand_checks(part, shape, passes, cases),
        limits=limits,
        mesh=MeshFindings(
            part.mesh.element,
            summary.elements,
            summary.unknowns,
            tuple(summaries),
            summary.error,
            last.mesh.worst_jacobian,
            walls[0].layers if walls else elements_across(last.mesh, shape),
            last.solution.residual,
            last.mesh.fallback,
            walls,
            plain,
        ),
        timing=dict(clock.spent),
        cautions=tuple(dict.fromkeys(cautions)),
        fields=tuple(this.fields for this in passes),
    )
