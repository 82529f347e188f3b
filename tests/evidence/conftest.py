"""Writes what the evidence tests recorded when the session ends."""

from __future__ import annotations

from collections.abc import Iterator

import pytest

from tests.evidence import table


@pytest.fixture(autouse=True, scope="session")
def evidence_table() -> Iterator[None]:
    """Keep the rows, if the switch is on (see `tests.evidence.table`)."""
    yield
    table.write()
