"""Rows of the README's evidence table: each evidence test records what it found.

`record` only notes the row.  When the session ends and the environment variable
SCREENAPP_WRITE_EVIDENCE is `all`, `write` puts the rows of this session into
`tests/evidence/results.json` (sorted by check, figures rounded, so that the same results give
the same bytes), with `some` it merges them into those that are there;
`python -m tests.evidence.write_readme_table` puts them into README.md.
"""

from __future__ import annotations

import json
import os
from dataclasses import asdict, dataclass
from pathlib import Path

RESULTS = Path(__file__).with_name("results.json")
SWITCH = "SCREENAPP_WRITE_EVIDENCE"


@dataclass(frozen=True)
class Row:
    """One line of the table; every field is text as it is to be shown."""

    check: str
    source: str
    reference: str
    found: str
    error: str
    hold_to: str


_rows: dict[str, Row] = {}


def record(
    check: str,
    source: str,
    reference: float | str,
    found: float | str,
    error_percent: float | str,
    hold_to: str,
) -> Row:
    """Note a row for the table; a second row for the same check replaces the first.

    Numbers are shown with five significant figures, the error [%] with two.
    """
    row = Row(
        check,
        source,
        _figures(reference, 5),
        _figures(found, 5),
        error_percent if isinstance(error_percent, str) else _percent(error_percent),
        hold_to,
    )
    _rows[check] = row
    return row


def write(path: Path = RESULTS) -> None:
    """Write the noted rows, or merge them into the file, as the switch says."""
    how = os.environ.get(SWITCH)
    if how not in ("all", "some") or not _rows:
        return
    kept = {row.check: row for row in read(path)} if how == "some" else {}
    merged = kept | _rows
    rows = [asdict(merged[check]) for check in sorted(merged)]
    path.write_text(json.dumps(rows, indent=1, ensure_ascii=False) + "\n", encoding="utf-8")


def read(path: Path = RESULTS) -> list[Row]:
    """The rows in the file, none if there is no file."""
    if not path.exists():
        return []
    return [Row(**row) for row in json.loads(path.read_text(encoding="utf-8"))]


def markdown(rows: list[Row]) -> str:
    """The table in Markdown."""
    lines = [
        "| check | source | reference | found | error | held to |",
        "|---|---|---|---|---|---|",
    ]
    for row in rows:
        cells = [text.replace("|", "\\|") for text in asdict(row).values()]
        lines.append("| " + " | ".join(cells) + " |")
    return "\n".join(lines)


def _figures(value: float | str, figures: int) -> str:
    return value if isinstance(value, str) else f"{value:.{figures}g}"


def _percent(value: float) -> str:
    """An error in per cent; what is rounding only is shown as such, not by its random digits."""
    return "< 1e-7 %" if abs(value) < 1e-7 else f"{value:+.2g} %"
