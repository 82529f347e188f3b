"""Kept findings come back whole, and a bad entry is never more than a missing one."""

from __future__ import annotations

import dataclasses
import os
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings

from screenapp.model import findings_cache
from screenapp.model.findings import Findings, MeshFindings
from screenapp.model.findings_cache import cache_folder, load, store
from screenapp.model.part import Part
from screenapp.model.record_packing import outline_of, pack, unpack
from tests.model.random_findings import fields_of_one_quad, findings

KEY = "ab" * 32


@pytest.fixture
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """An empty cache of this test's own."""
    monkeypatch.setenv("SCREENAPP_CACHE", str(tmp_path / "cache"))
    return cache_folder()


def _findings(key: str = KEY, passes: int = 2) -> Findings:
    mesh = MeshFindings("quad9", 1, 12, (), 0.1, 1.0, 3, 1e-13)
    fields = tuple(fields_of_one_quad(1.0 + i, modes=i == 0) for i in range(passes))
    return Findings(
        "0" * 64, key, "holds", "Holds", (), 1.0, 4.0, (), (), (), mesh, {"total": 0.1}, (), fields
    )


def _same(a: Any, b: Any) -> bool:
    """Equality that looks into arrays, with their types."""
    if isinstance(a, np.ndarray):
        return isinstance(b, np.ndarray) and a.dtype == b.dtype and np.array_equal(a, b)
    if type(a) is not type(b):
        return False
    if dataclasses.is_dataclass(a):
        return all(_same(getattr(a, f.name), getattr(b, f.name)) for f in dataclasses.fields(a))
    if isinstance(a, tuple):
        return len(a) == len(b) and all(map(_same, a, b))
    return bool(a == b)


def test_findings_come_back_with_every_array(folder: Path) -> None:
    assert load(KEY) is None
    assert store(_findings(), Part())
    again = load(KEY)
    assert again is not None
    assert len(again.fields) == 2
    assert _same(again, _findings())
    assert not _same(again, _findings(passes=1))
    assert os.listdir(folder) == [f"{KEY}.npz"]


@settings(max_examples=40, deadline=None, suppress_health_check=list(HealthCheck))
@given(findings)
def test_any_findings_come_back(found: Findings) -> None:
    arrays: dict[str, Any] = {}
    assert _same(unpack(Findings, pack(found, arrays), arrays), found)


def test_numpy_numbers_come_back_as_plain_ones(folder: Path) -> None:
    found = replace(_findings(), area=np.float64(4.5), mass_kg=1)
    store(found, Part())
    again = load(KEY)
    assert again is not None
    assert (type(again.area), type(again.mass_kg)) == (float, float)
    assert (again.area, again.mass_kg) == (4.5, 1.0)


def test_a_later_screening_replaces_the_earlier_one(folder: Path) -> None:
    store(_findings(), Part())
    store(replace(_findings(), headline="Later"), Part())
    again = load(KEY)
    assert again is not None
    assert again.headline == "Later"


def test_a_corrupt_entry_is_ignored_and_removed(folder: Path) -> None:
    store(_findings(), Part())
    path = folder / f"{KEY}.npz"
    whole = path.read_bytes()
    middle = len(whole) // 2
    garbled = [
        b"",
        b"garbage",
        whole[:middle],
        whole[:-30],
        whole[:middle] + b"\xff" * 50 + whole[middle + 50 :],
        whole.replace(b'"holds"', b'"hXXXX"'),
    ]
    for content in garbled:
        path.write_bytes(content)
        assert load(KEY) is None
        assert not path.exists()


def test_a_flipped_byte_anywhere_is_harmless(
    folder: Path, caplog: pytest.LogCaptureFixture
) -> None:
    """The entry then comes back whole (the byte meant nothing) or not at all."""
    caplog.set_level("CRITICAL")
    store(_findings(passes=1), Part())
    path = folder / f"{KEY}.npz"
    whole = path.read_bytes()
    for at in range(0, len(whole), 17):
        path.write_bytes(whole[:at] + bytes([whole[at] ^ 0xFF]) + whole[at + 1 :])
        again = load(KEY)
        assert again is None or _same(again, _findings(passes=1))


def test_an_entry_of_another_version_is_removed(
    folder: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    store(_findings(), Part())
    monkeypatch.setattr(findings_cache, "_FORMAT", "another")
    assert load(KEY) is None
    assert os.listdir(folder) == []


def test_an_entry_under_a_wrong_name_is_removed(folder: Path) -> None:
    store(_findings(), Part())
    (folder / f"{KEY}.npz").rename(folder / f"{'cd' * 32}.npz")
    assert load("cd" * 32) is None
    assert os.listdir(folder) == []


def test_the_format_changes_with_the_fields_of_any_record() -> None:
    @dataclasses.dataclass(frozen=True)
    class Inner:
        a: float

    @dataclasses.dataclass(frozen=True)
    class Other:
        a: int

    def outer(inner: Any) -> Any:
        return dataclasses.make_dataclass("Outer", [("x", tuple[inner, ...])])

    assert outline_of(outer(Inner)) != outline_of(outer(Other))
    assert "StressField(" in findings_cache._FORMAT


def test_the_oldest_entries_go_when_there_are_too_many(
    folder: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(findings_cache, "MOST_ENTRIES", 3)
    keys = [f"{i:064x}" for i in range(4)]
    for age, key in enumerate(keys[:3]):
        store(_findings(key), Part())
        os.utime(folder / f"{key}.npz", (1000 + age, 1000 + age))
    assert load(keys[0]) is not None  # reading makes it the newest
    store(_findings(keys[3]), Part())
    assert sorted(p.stem for p in folder.glob("*.npz")) == [keys[0], keys[2], keys[3]]


def test_the_oldest_entries_go_when_they_are_too_large(
    folder: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    store(_findings("a"), Part())
    os.utime(folder / "a.npz", (1000, 1000))
    size = (folder / "a.npz").stat().st_size
    monkeypatch.setattr(findings_cache, "MOST_BYTES", int(2.5 * size))
    store(_findings("b"), Part())
    assert {p.stem for p in folder.glob("*.npz")} == {"a", "b"}
    store(_findings("c"), Part())
    assert {p.stem for p in folder.glob("*.npz")} == {"b", "c"}
    monkeypatch.setattr(findings_cache, "MOST_BYTES", 1)
    store(_findings("d"), Part())
    assert [p.stem for p in folder.glob("*.npz")] == ["d"]  # the newest one always stays


def test_a_cache_that_cannot_be_written_stops_nothing(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    (tmp_path / "file").write_bytes(b"")
    monkeypatch.setenv("SCREENAPP_CACHE", str(tmp_path / "file"))
    assert not store(_findings(), Part())
    assert load(KEY) is None


@pytest.mark.parametrize("key", ["", "../up", "a/b", "a.b", "x" * 200])
def test_a_key_that_is_no_key_is_refused(folder: Path, key: str) -> None:
    with pytest.raises(ValueError, match="key of findings"):
        load(key)


def test_without_the_variable_the_cache_is_the_users(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.delenv("SCREENAPP_CACHE")
    assert "screenapp" in cache_folder().parts
