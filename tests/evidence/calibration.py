"""How far the bands hold: random parts screened as a user would, against far finer solutions.

    python -m tests.evidence.calibration [--parts 60] [--first 1000] [--jobs 2] [--keep-readme]

screens parts that no rule was fitted to (the fit used seeds 0 to 59), compares every number with
the one of a mesh three times finer everywhere (`far_finer`), prints the table and puts it into
README.md between its markers.  About three seconds a part on one core.
"""

from __future__ import annotations

import argparse
import sys
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from multiprocessing import get_context

import numpy as np

from screenapp.meshing.service import Mesher
from screenapp.screening.screen import screen
from tests.evidence.band_parts import random_part
from tests.evidence.far_finer import Outcome, compare
from tests.evidence.write_readme_table import README, with_table

FIRST, PARTS = 1000, 60
KINDS = {
    "stress peaks": ("peak",),
    "readings on the boundary": ("boundary",),
    "readings inside": ("interior",),
    "displacements": ("displacement",),
    "all": ("peak", "boundary", "interior", "displacement"),
}


@dataclass(frozen=True)
class Row:
    """Coverage and width of one kind of number; shares in per cent, widths in per cent.

    Attributes:
        kind: in words.
        count, settled, rising, unsettled: how many numbers.
        inside: share of the settled numbers whose band holds the truth.
        median, most: full width of the settled bands, the median and that of nine in ten.
        worst: the worst miss, in half bands (up to 1 is inside).
    """

    kind: str
    count: int
    settled: int
    rising: int
    unsettled: int
    inside: float
    median: float
    most: float
    worst: float


def screened(seed: int) -> list[Outcome]:
    """Every number of one random part beside that of the far finer solution."""
    with Mesher() as mesher:
        part = random_part(seed)
        return compare(part, screen(part, mesher), mesher)


def summary(outcomes: Sequence[Outcome]) -> list[Row]:
    """A row for each kind of number that there is."""
    rows = []
    for words, kinds in KINDS.items():
        own = [o for o in outcomes if o.kind in kinds]
        settled = [o for o in own if o.trust == "settled"]
        if not settled:
            continue
        misses = np.array([o.miss for o in settled])
        widths = 100.0 * np.array([o.width for o in settled])
        rows.append(
            Row(
                words,
                len(own),
                len(settled),
                sum(o.trust == "rising" for o in own),
                sum(o.trust == "unsettled" for o in own),
                100.0 * float(np.mean(misses <= 1.0)),
                float(np.median(widths)),
                float(np.percentile(widths, 90.0)),
                float(misses.max()),
            )
        )
    return rows


def settled_without_value(outcomes: Iterable[Outcome]) -> list[Outcome]:
    """Peaks called settled where the stress has no finite value by construction: must be none."""
    return [o for o in outcomes if o.kind == "peak" and o.singular and o.trust == "settled"]


def markdown(outcomes: Sequence[Outcome], seeds: Sequence[int]) -> str:
    """The table with what stands over and under it."""
    cases = len({(o.part, o.what.split()[0]) for o in outcomes})
    lines = [
        f"{len(seeds)} parts (seeds {seeds[0]} to {seeds[-1]}), {cases} load cases:",
        "",
        "| numbers | how many | settled | inside their band | median width | nine in ten under | "
        "worst miss | rising | unsettled |",
        "|---|---|---|---|---|---|---|---|---|",
    ]
    lines += [
        f"| {r.kind} | {r.count} | {r.settled} | {r.inside:.1f} % | {r.median:.2f} % | "
        f"{r.most:.2f} % | {r.worst:.2f} | {r.rising} | {r.unsettled} |"
        for r in summary(outcomes)
    ]
    singular = [o for o in outcomes if o.kind == "peak" and o.singular]
    trusts = [o.trust for o in singular]
    lines += [
        "",
        f"Peaks at places where the stress has no finite value by construction: {len(singular)}, "
        f"of which rising {trusts.count('rising')}, unsettled {trusts.count('unsettled')}, "
        f"called settled {trusts.count('settled')}.",
    ]
    return "\n".join(lines)


def misses(outcomes: Iterable[Outcome]) -> list[str]:
    """The settled numbers outside their band, worst first, a line each."""
    out = [o for o in outcomes if o.trust == "settled" and o.miss > 1.0]
    return [
        f"{o.miss:5.2f} half bands: {o.part}, {o.what}: {o.value:.5g} ± {o.half:.2g}, "
        f"finer {o.truth:.5g}"
        for o in sorted(out, key=lambda o: -o.miss)
    ]


def main(arguments: Sequence[str] | None = None) -> int:
    """Screen, print, write; 1 if a target is missed or the README cannot be written."""
    parser = argparse.ArgumentParser(prog="python -m tests.evidence.calibration")
    parser.add_argument("--parts", type=int, default=PARTS, help="how many random parts")
    parser.add_argument("--first", type=int, default=FIRST, help="seed of the first one")
    parser.add_argument("--jobs", type=int, default=2, help="how many at a time")
    parser.add_argument("--keep-readme", action="store_true", help="print only")
    asked = parser.parse_args(arguments)
    seeds = range(asked.first, asked.first + asked.parts)
    outcomes: list[Outcome] = []
    with get_context("spawn").Pool(asked.jobs) as pool:
        for done, found in enumerate(pool.imap(screened, seeds), start=1):
            outcomes += found
            print(f"\r{done} of {len(seeds)} parts", end="", file=sys.stderr, flush=True)
    print(file=sys.stderr)
    table = markdown(outcomes, seeds)
    print(table)
    print("\n".join(misses(outcomes)))
    if not asked.keep_readme:
        try:
            text = with_table(README.read_text(encoding="utf-8"), table, "calibration")
        except (OSError, ValueError) as error:
            print(error, file=sys.stderr)
            return 1
        README.write_text(text, encoding="utf-8")
    every = summary(outcomes)[-1]
    met = every.inside >= 95.0 and every.median < 2.0 and not settled_without_value(outcomes)
    return 0 if met else 1


if __name__ == "__main__":
    sys.exit(main())
