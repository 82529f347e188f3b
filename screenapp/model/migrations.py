"""What each version of the part file changed, as a chain of small steps.

Version 1 listed its readings as `probes`, which could only be points and had no `kind`.
Version 2 lists `readings`, each with a `kind`, so that cuts can stand beside points.
Version 3 lets the value of a dimension be an expression, and lets it say what it measures.
"""

from __future__ import annotations

from collections.abc import Callable

from screenapp.model.json_reader import JsonObject
from screenapp.model.part_tree import VERSION


def from_1_to_2(tree: JsonObject) -> None:
    """Rename `probes` to `readings` and give each its kind."""
    if "probes" in tree and "readings" not in tree:
        tree["readings"] = tree.pop("probes")
        tree.lines["readings"] = tree.lines.pop("probes", 0)
    readings = tree.get("readings")
    for reading in readings if isinstance(readings, list) else ():
        if isinstance(reading, dict):
            reading.setdefault("kind", "probe")


def from_2_to_3(_tree: JsonObject) -> None:
    """Everything that version 2 could say means the same."""


STEPS: dict[int, Callable[[JsonObject], None]] = {1: from_1_to_2, 2: from_2_to_3}
"""The step that leads from each older version to the next one."""


def migrate(tree: JsonObject) -> None:
    """Bring a tree of a known older version to the present one, in place.

    Only the tree in memory changes; the file keeps its version until it is saved.
    """
    for version in range(tree["version"], VERSION):
        STEPS[version](tree)
        tree["version"] = version + 1
