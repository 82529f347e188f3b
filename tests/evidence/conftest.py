"""For the evidence tests: one warm mesher, the user's path, and the table when the session ends."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest

from screenapp.meshing.service import Mesher
from screenapp.model.part import Part
from tests.evidence import table
from tests.evidence.screened import Record, Screened, screen_from_file


@pytest.fixture(autouse=True, scope="session")
def evidence_table() -> Iterator[None]:
    """Keep the rows, if the switch is on (see `tests.evidence.table`)."""
    yield
    table.write()


@pytest.fixture(scope="session")
def mesher() -> Iterator[Mesher]:
    """A warm worker for all checks."""
    with Mesher() as made:
        yield made


@pytest.fixture
def screened(mesher: Mesher, tmp_path: Path) -> Screened:
    """Takes a part along the user's path to its result record."""

    def run(part: Part) -> Record:
        return screen_from_file(part, mesher, tmp_path)

    return run
