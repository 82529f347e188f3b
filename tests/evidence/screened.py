"""The user's path for a check: part file, screening, result record as JSON, and what it says."""

from __future__ import annotations

import json
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from screenapp.meshing.service import Mesher
from screenapp.model.findings import Findings
from screenapp.model.part import Corner, Edge, Loop, Part, Point
from screenapp.model.part_json import read_part, write_part
from screenapp.model.result_json import findings_to_record, record_to_text
from screenapp.screening.screen import screen


@dataclass(frozen=True)
class Number:
    """A number of the record with its band and trust; `high` is None where it rises."""

    value: float
    low: float
    high: float | None
    trust: str

    def holds(self, truth: float) -> bool:
        """Whether the band holds a value."""
        return self.high is not None and self.low <= truth <= self.high


@dataclass(frozen=True)
class Record:
    """A result record as another program would read it."""

    tree: dict[str, Any]

    def reading(self, name: str, quantity: str) -> Number:
        """A quantity of the only reading with that name."""
        (found,) = (r for r in self.tree["readings"] if r["name"] == name)
        low, high = found["band"][quantity]
        return Number(found["values"][quantity], low, high, found["trusts"][quantity])

    def peaks(self, on: str) -> list[dict[str, Any]]:
        """The peaks of the first case on a feature or at a place in words, largest first."""
        return [p for p in self.tree["cases"][0]["peaks"] if on in (p["feature"], p["place"])]

    def peak(self, on: str, quantity: str = "von_mises") -> Number:
        """The largest peak of a quantity on a feature (or at a place) in the first case."""
        found = next(p for p in self.peaks(on) if p["quantity"] == quantity)
        return Number(found["value"], found["low"], found["high"], found["trust"])

    @property
    def unknowns(self) -> int:
        """Unknowns of the last mesh."""
        return int(self.tree["mesh"]["unknowns"])

    @property
    def passes(self) -> list[dict[str, Any]]:
        """The passes, first one first."""
        found: list[dict[str, Any]] = self.tree["mesh"]["passes"]
        return found


Screened = Callable[[Part], Record]


def findings_from_file(part: Part, mesher: Mesher, folder: Path) -> Findings:
    """Save a part, read it back and screen it."""
    place = folder / "check.part.json"
    write_part(part, place)
    return screen(read_part(place), mesher)


def screen_from_file(part: Part, mesher: Mesher, folder: Path) -> Record:
    """Save a part, read it back, screen it, write its record and read that."""
    findings = findings_from_file(part, mesher, folder)
    return Record(json.loads(record_to_text(findings_to_record(findings, part))))


def chain(points: list[Point], through: dict[int, Point] | None = None) -> Loop:
    """A loop with corners c1, c2 ... and edges e1, e2 ...; `through` bends edges (from 0)."""
    bends = through or {}
    return Loop(
        tuple(Corner(f"c{i}", at) for i, at in enumerate(points, 1)),
        tuple(Edge(f"e{i + 1}", bends.get(i)) for i in range(len(points))),
    )
