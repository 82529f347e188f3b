"""The largest force per length that welds and beds of springs give, with its band."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from screenapp.mechanics.elastic_supports import bed_forces, beds
from screenapp.model.combinations import loadings
from screenapp.model.findings import Estimate, LineForce
from screenapp.model.misfits import movements
from screenapp.model.part import ElasticSupport, Part, WeldSupport
from screenapp.model.shape import Shape
from screenapp.screening.passes import Pass
from screenapp.screening.trust import Sample, judge


def line_forces(part: Part, shape: Shape, passes: Sequence[Pass], k: int) -> tuple[LineForce, ...]:
    """One for each weld and each bed of springs in case number `k`."""
    found: list[LineForce] = []
    off = movements(part, loadings(part))
    every = beds(part, shape)
    for owner, support in enumerate(part.supports):
        if not isinstance(support, ElasticSupport | WeldSupport):
            continue
        samples: list[Sample] = []
        best = (0.0, 0.0, 0.0, 0.0, 0.0)
        for this in passes:
            mesh, solution = this.fields.mesh, this.fields.solution
            best, size = (-1.0, 0.0, 0.0, 0.0, 0.0), float("inf")
            for bed in every:
                if bed.owner != owner:
                    continue
                _, _, across, forward = bed_forces(shape, mesh, solution, bed, off)
                sides = mesh.sides_on(bed.pieces)
                q = np.hypot(across[k], forward[k])
                side, place = np.unravel_index(int(np.argmax(q)), q.shape)
                x, y = mesh.nodes[mesh.side_nodes[sides[side], place]]
                if q[side, place] > best[0]:
                    force = float(across[k, side, place]), float(forward[k, side, place])
                    best = (float(q[side, place]), float(x), float(y), *force)
                    size = float(this.sizes[mesh.sides[sides[side], 0]])
            samples.append(Sample(max(best[0], 0.0), size))
        value, x, y, normal, along = best
        known = Estimate(0.0, 0.0, 0.0, "settled")
        if value > 0.0:
            known = judge(samples, part.mesh.tolerance, value)
        throat = support.throat if isinstance(support, WeldSupport) else None
        found.append(LineForce(support.id, known, (x, y), normal, along, throat))
    return tuple(found)
