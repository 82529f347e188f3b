"""How time and memory grow with the unknowns: one size in each process, so that memory is its own.

Run as `python -m tests.benchmarks.growth QUADS` it prints one line of JSON.
"""

from __future__ import annotations

import json
import math
import subprocess
import sys
from dataclasses import asdict, dataclass
from functools import partial
from pathlib import Path

import numpy as np

from screenapp.mechanics.assembly import System, assemble
from screenapp.mechanics.constraints import held_directions, reduce
from screenapp.mechanics.dissection import elimination_order
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.linear_solve import superlu
from screenapp.mechanics.recovery import recover
from screenapp.mechanics.solve import solve
from screenapp.meshing.service import Mesher
from screenapp.meshing.sizing import uniform_sizes
from screenapp.model.part import Part
from screenapp.model.shape import Shape, shape_of
from tests.benchmarks.clocks import processor_seconds, worker_seconds
from tests.evidence.band_parts import random_part
from tests.mechanics.structured import STEEL


@dataclass(frozen=True)
class Cost:
    """Processor time by stage [s] and memory at the peak [MB] of one mesh of a lug."""

    unknowns: int
    meshing: float
    assembly: float
    factorisation: float
    recovery: float
    memory: float


STAGES = ("meshing", "assembly", "factorisation", "recovery", "memory")


def cost(quads: int) -> Cost:
    """Mesh, assemble, factor and recover once, with about so many quads of one size."""
    part = random_part(2)
    shape = shape_of(part)
    with Mesher() as mesher:
        sizes = uniform_sizes(shape, math.sqrt(shape.area / quads))
        mesher.mesh(shape, uniform_sizes(shape, shape.size / 20.0))  # warms the worker
        before = worker_seconds(mesher)
        mesh = mesher.mesh(shape, sizes)
        meshing = worker_seconds(mesher) - before
    elastic = constitutive_matrix(STEEL, "plane stress")
    _forget_peak()
    idle = _peak_memory()
    assembly = processor_seconds(lambda: assemble(mesh, "quad9", elastic, 1.0))
    factorisation = _factorisation(assemble(mesh, "quad9", elastic, 1.0), part, shape)
    solution = solve(part, shape, mesh)
    recovery = processor_seconds(partial(recover, part, shape, mesh, solution))
    return Cost(
        solution.unknowns, meshing, assembly, factorisation, recovery, _peak_memory() - idle
    )


def _factorisation(system: System, part: Part, shape: Shape) -> float:
    """Processor time of ordering and factoring [s]."""
    mesh = system.mesh
    basis = reduce(held_directions(part, shape, mesh), mesh, system.index).basis
    matrix = (basis.T @ system.stiffness @ basis).tocsc()
    node = basis.indices[basis.indptr[:-1]] // 2
    carried = mesh.nodes[system.carried]
    return processor_seconds(
        lambda: superlu(matrix, elimination_order(system.element_nodes, carried, node))
    )


def cost_in_own_process(quads: int) -> Cost:
    """The same, its memory not mixed with what ran before."""
    done = subprocess.run(
        [sys.executable, "-m", "tests.benchmarks.growth", str(quads)],
        capture_output=True,
        text=True,
        check=True,
    )
    return Cost(**json.loads(done.stdout))


def exponent(costs: list[Cost], stage: str) -> float:
    """Slope of the logarithm of a stage over the logarithm of the unknowns."""
    x = np.log([c.unknowns for c in costs])
    return float(np.polyfit(x, np.log([getattr(c, stage) for c in costs]), 1)[0])


def _forget_peak() -> None:
    """Let the peak of memory be counted from now on (Linux; else a parent's peak counts too)."""
    Path("/proc/self/clear_refs").write_text("5")


def _peak_memory() -> float:
    """Largest memory of this process since `_forget_peak` [MB]."""
    lines = Path("/proc/self/status").read_text().splitlines()
    return next(float(line.split()[1]) / 1024.0 for line in lines if line.startswith("VmHWM"))


if __name__ == "__main__":
    print(json.dumps(asdict(cost(int(sys.argv[1])))))
