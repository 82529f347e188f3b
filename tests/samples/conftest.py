"""Every sample screened once for all tests of this folder."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from functools import cache
from pathlib import Path

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.findings import Findings
from screenapp.model.part import Part
from screenapp.model.part_json import read_part
from screenapp.screening.screen import screen

FOLDER = Path(__file__).parents[2] / "samples"

Screened = Callable[[str], tuple[Part, Findings]]


@pytest.fixture(scope="session")
def sample_mesher() -> Iterator[Mesher]:
    """A warm mesher."""
    with Mesher() as warm:
        yield warm


@pytest.fixture(scope="session")
def screened_sample(sample_mesher: Mesher) -> Screened:
    """A sample and its findings, by name."""

    @cache
    def screened(name: str) -> tuple[Part, Findings]:
        part = read_part(FOLDER / f"{name}.part.json")
        return part, screen(part, sample_mesher)

    return screened
