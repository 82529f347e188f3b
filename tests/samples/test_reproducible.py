"""The same part gives the same record, whatever the last bits of the arithmetic are.

One process adds up on one thread; the other on two, and with OpenBLAS's kernels for another
processor, which round otherwise (where there are none, the threads alone differ).
"""

from __future__ import annotations

import json
import math
import os
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest

SAMPLES = sorted((Path(__file__).parents[2] / "samples").glob("*.part.json"))

SAME = 1e-6
"""What rounding may leave of a difference, relative, or in mm, N and MPa where zero is meant."""


def record_of(sample: Path, cache: Path, **settings: str) -> Any:
    """What `screenapp screen --json` prints."""
    done = subprocess.run(
        [sys.executable, "-m", "screenapp", "screen", "--json", str(sample)],
        env={**os.environ, "SCREENAPP_CACHE": str(cache), **settings},
        cwd=Path(__file__).parents[2],
        capture_output=True,
        text=True,
    )
    assert done.returncode in (0, 1, 2), done.stderr
    return json.loads(done.stdout)


def differences(one: Any, other: Any, place: str = "") -> Iterator[str]:
    """Where two records say different things, times aside."""
    if isinstance(one, bool | str) or one is None or not isinstance(other, type(one) | float | int):
        if one != other:
            yield f"{place}: {one!r}, {other!r}"
    elif isinstance(one, dict):
        if one.keys() != other.keys():
            yield f"{place}: {sorted(one.keys() ^ other.keys())}"
        for key in one.keys() & other.keys() - {"timing"}:
            yield from differences(one[key], other[key], f"{place}/{key}")
    elif isinstance(one, list):
        if len(one) != len(other):
            yield f"{place}: {len(one)} and {len(other)} entries"
        for k, (a, b) in enumerate(zip(one, other, strict=False)):
            yield from differences(a, b, f"{place}/{k}")
    elif not math.isclose(one, other, rel_tol=SAME, abs_tol=SAME):
        yield f"{place}: {one!r}, {other!r}"


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda path: path.name.partition(".")[0])
def test_records_agree(sample: Path, tmp_path: Path) -> None:
    one = record_of(sample, tmp_path / "one", OMP_NUM_THREADS="1", OPENBLAS_NUM_THREADS="1")
    other = record_of(
        sample,
        tmp_path / "other",
        OMP_NUM_THREADS="2",
        OPENBLAS_NUM_THREADS="2",
        OPENBLAS_CORETYPE="Prescott",
    )
    assert one["mesh"]["passes"], "nothing was screened"
    found = list(differences(one, other))
    assert not found, found[:5]


def test_a_difference_is_seen() -> None:
    one = {"a": [1.0, 2.0], "b": "holds", "c": 3}
    assert not list(differences(one, {"a": [1.0 + 1e-9, 2.0], "b": "holds", "c": 3.0}))
    assert len(list(differences(one, {"a": [1.001, 2.0], "b": "undecided", "c": 4}))) == 3
    assert len(list(differences(one, {"a": [1.0], "b": "holds"}))) == 2
