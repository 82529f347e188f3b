"""Full collections are held off while many records are made, and come back."""

from __future__ import annotations

import gc
from collections.abc import Iterator

import pytest

from screenapp.model.collecting import look_again, many_records


@pytest.fixture
def full() -> Iterator[list[int]]:
    """How often a full collection began."""
    seen: list[int] = []

    def note(phase: str, info: dict[str, int]) -> None:
        if phase == "start" and info["generation"] == 2:
            seen.append(1)

    gc.callbacks.append(note)
    yield seen
    gc.callbacks.remove(note)
    look_again()


def records() -> list[list[int]]:
    return [[i] for i in range(600_000)]


def test_no_full_collection_while_records_are_made(full: list[int]) -> None:
    made = records()
    assert full, "a full collection was to be expected"
    del made
    full.clear()
    with many_records():
        made = records()
    assert not full
    assert gc.get_freeze_count() >= len(made)


def fail() -> None:
    raise ValueError("as a reader might")


def test_what_was_set_comes_back_after_the_outermost() -> None:
    before = gc.get_threshold()
    with many_records():
        with many_records():
            pass
        assert gc.get_threshold() != before
    assert gc.get_threshold() == before
    with pytest.raises(ValueError, match="reader"), many_records():
        fail()
    assert gc.get_threshold() == before
    look_again()
    assert gc.get_freeze_count() == 0
