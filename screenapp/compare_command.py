"""`screenapp compare BEFORE AFTER`: what changed, and what it did to each utilisation."""

from __future__ import annotations

import json
from pathlib import Path
from typing import TYPE_CHECKING

from screenapp.console import plain_text, tell
from screenapp.model.comparison import compare
from screenapp.model.errors import ScreenappError
from screenapp.model.findings import Findings, Verdict
from screenapp.model.part import Part
from screenapp.model.part_json import part_sha256, read_part
from screenapp.model.result_json import findings_from_record
from screenapp.model.schema_check import schema_faults
from screenapp.report.comparison_table import comparison_table

if TYPE_CHECKING:
    from screenapp.meshing.service import Mesher

RECORD_ENDING = ".result.json"


def run_comparison(before: Path, after: Path) -> Verdict:
    """Compare two parts or records, print the table, and return the verdict of the second.

    A part file is screened anew; a result record is taken as it is, with the part that stands
    beside it.

    Raises:
        ScreenappError: a file cannot be read or screened, or a record has lost its part.
    """
    from screenapp.meshing.service import Mesher

    with Mesher() as mesher:
        first, second = (_screened(path, mesher) for path in (before, after))
    found = compare(first, second)
    units = second[0].display_units
    tell(
        comparison_table(found, units),
        lambda _: comparison_table(found, units, plain_text),
    )
    return second[1].verdict


def _screened(path: Path, mesher: Mesher) -> tuple[Part, Findings]:
    if path.name.endswith(RECORD_ENDING):
        return _recorded(path)
    from screenapp.model.progress import Progress
    from screenapp.progress_bar import ProgressBar
    from screenapp.screening.screen import screen

    part = read_part(path)
    with ProgressBar(path.name) as bar:
        return part, screen(part, mesher, Progress(report=bar.show))


def _recorded(path: Path) -> tuple[Part, Findings]:
    """A record with its part, which must be the one that was screened."""
    try:
        record = json.loads(path.read_text(encoding="utf-8"))
    except OSError as error:
        raise ScreenappError(
            f"{path} cannot be read: {error.strerror or error}", "give the path of a result record"
        ) from error
    except ValueError as error:
        raise ScreenappError(
            f"{path} is no result record: {error}", "screen the part again with --out"
        ) from error
    faults = schema_faults(record, "result.schema.json") if isinstance(record, dict) else ()
    if not isinstance(record, dict) or faults:
        said = f": {faults[0].field}: {faults[0].cause}" if faults else ""
        raise ScreenappError(
            f"{path} is no result record that this program knows{said}",
            "screen the part again with --out",
        )
    findings = findings_from_record(record)
    beside = path.with_name(path.name.removesuffix(RECORD_ENDING) + ".part.json")
    part = read_part(beside)
    if part_sha256(part) != findings.part_sha256:
        raise ScreenappError(
            f"{beside} is not the part that {path.name} was made of",
            "compare part files, or screen the part again with --out",
        )
    return part, findings
