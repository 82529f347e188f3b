"""Measure the speed and put the tables between their markers in DEVELOPERS.md.

Run from the repository, with one thread for the linear algebra:
`OMP_NUM_THREADS=1 OPENBLAS_NUM_THREADS=1 python -m tests.benchmarks.write_table`
(about five minutes on an idle machine); names of blocks (`samples`, `economy`, `rivals`, `growth`)
measure those only and keep the others from `results.json`.
"""

from __future__ import annotations

import json
import os
import platform
import sys
from collections.abc import Callable
from pathlib import Path

from scipy.sparse.linalg import splu

from screenapp.mechanics.assembly import assemble
from screenapp.mechanics.elasticity import constitutive_matrix
from screenapp.mechanics.linear_solve import superlu
from screenapp.meshing.service import Mesher
from tests.benchmarks.clocks import processor_seconds
from tests.benchmarks.economy import EVEN, PARTS, adaptive, converged, even, needed
from tests.benchmarks.growth import STAGES, cost_in_own_process, exponent
from tests.benchmarks.sample_times import sample_times
from tests.benchmarks.test_assembly_speed import size_of, their_assembly
from tests.benchmarks.test_factorisation_speed import Held, meshed_lug, square_plate
from tests.evidence.write_readme_table import with_table
from tests.mechanics.structured import STEEL

RESULTS = Path(__file__).with_name("results.json")
DEVELOPERS = Path(__file__).parents[2] / "DEVELOPERS.md"
REPEATS = 5
MOST_EVEN = 100_000
QUADS = (3_500, 10_000, 30_000, 87_000)
SHOWN = ("meshing", "solving", "recovery", "judging", "adapting")


def machine() -> str:
    """The machine in words."""
    model = "processor not named"
    try:
        lines = Path("/proc/cpuinfo").read_text(encoding="utf-8").splitlines()
        model = next(line.split(":", 1)[1].strip() for line in lines if "model name" in line)
    except (OSError, StopIteration):
        pass
    return f"{os.cpu_count()} cores ({model}), Python {platform.python_version()}"


def table(head: tuple[str, ...], rows: list[tuple[str, ...]]) -> str:
    """A table in Markdown."""
    lines = ["| " + " | ".join(cells) + " |" for cells in (head, ("---",) * len(head), *rows)]
    return "\n".join(lines)


def samples() -> str:
    """From part file to verdict."""
    with Mesher() as mesher:
        rows = [
            (
                t.name,
                t.verdict,
                str(t.passes),
                f"{t.unknowns:,}",
                f"{t.own:.2f} + {t.worker:.2f}",
                f"{t.passed:.2f}",
                ", ".join(f"{stage} {100 * t.shares[stage]:.0f}" for stage in SHOWN),
            )
            for t in sample_times(mesher, REPEATS)
        ]
    head = ("sample, 2 %", "verdict", "passes", "unknowns")
    return table((*head, "program + worker [s]", "passed [s]", "split of what passed [%]"), rows)


def economy() -> str:
    """Unknowns for an accuracy of the peak."""
    rows = []
    with Mesher() as mesher:
        for name, make in PARTS.items():
            part = make()
            exact = converged(part, mesher)
            ours = adaptive(part, mesher)
            evens = {element: list(even(part, element, MOST_EVEN, mesher)) for element in EVEN}
            for accuracy in (0.01, 0.002):
                least = needed(ours, exact, accuracy)
                assert least is not None
                cells = [f"{least:,}"]
                for steps in evens.values():
                    count = needed(steps, exact, accuracy)
                    cells.append(
                        f"more than {steps[-1].unknowns:,} (> {steps[-1].unknowns / least:.0f}×)"
                        if count is None
                        else f"{count:,} ({count / least:.2g}×)"
                    )
                rows.append((f"{name}, {100 * accuracy:g} % of the peak", *cells))
    return table(("unknowns needed", "adaptive quad9", *(f"even {e}" for e in EVEN)), rows)


def rivals() -> str:
    """Assembly and factorisation beside general-purpose libraries, the same matrix."""
    size = size_of(172)
    elastic = constitutive_matrix(STEEL, "plane stress")
    ours = processor_seconds(lambda: assemble(size.mesh, "quad9", elastic, 1.0), REPEATS)
    rows = []
    for mapping in ("bilinear", "nine-node"):
        theirs = processor_seconds(their_assembly(size, mapping), 3)
        name = f"assembly, 180,000 unknowns; scikit-fem, {mapping} mapping"
        rows.append((name, f"{ours:.2f}", f"{theirs:.2f}", f"{theirs / ours:.1f}×"))
    for name, held in (("square plate", square_plate(172)), ("lug", meshed_lug(32_000))):
        ours = processor_seconds(held.dissected, 3)
        for setting, theirs in _settings(held).items():
            what = f"factorisation, {name}, {held.matrix.shape[0]:,} unknowns; {setting}"
            rows.append((what, f"{ours:.2f}", f"{theirs:.2f}", f"{theirs / ours:.1f}×"))
    return table(("work; beside it", "ours [s]", "beside it [s]", "ratio"), rows)


def _settings(held: Held) -> dict[str, float]:
    return {
        "scipy's default ordering": processor_seconds(lambda: splu(held.matrix), 3),
        "symmetric, minimum degree": processor_seconds(lambda: superlu(held.matrix), 3),
    }


def growth() -> str:
    """Cost over unknowns with its exponent."""
    costs = [cost_in_own_process(quads) for quads in QUADS]
    units = {"memory": "MB"}
    rows = [
        (
            f"{stage} [{units.get(stage, 's')}]",
            *(f"{getattr(c, stage):.3g}" for c in costs),
            f"{exponent(costs, stage):.2f}",
        )
        for stage in STAGES
    ]
    return table(("lug, unknowns", *(f"{c.unknowns:,}" for c in costs), "exponent"), rows)


BLOCKS: dict[str, Callable[[], str]] = {
    "samples": samples,
    "economy": economy,
    "rivals": rivals,
    "growth": growth,
}


def main(names: list[str]) -> int:
    """Measure some blocks (all without a name) and rewrite DEVELOPERS.md; 1 if that cannot be."""
    texts = json.loads(RESULTS.read_text(encoding="utf-8")) if RESULTS.exists() else {}
    for name in names or list(BLOCKS):
        texts[name] = BLOCKS[name]()
        print(texts[name], flush=True)
    texts["said"] = (
        f"Measured on {machine()}, one thread. Times are processor seconds, the least of "
        f"{REPEATS} runs (factorisation of 3, growth of 1); only *passed* is by the clock on the "
        "wall, with whatever else the machine did."
    )
    RESULTS.write_text(
        json.dumps(texts, indent=1, sort_keys=True, ensure_ascii=False) + "\n", encoding="utf-8"
    )
    text = "\n\n".join(texts[name] for name in ("said", *BLOCKS) if name in texts)
    try:
        whole = with_table(DEVELOPERS.read_text(encoding="utf-8"), text, "speed")
    except (OSError, ValueError) as error:
        print(error)
        return 1
    DEVELOPERS.write_text(whole, encoding="utf-8")
    return 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
