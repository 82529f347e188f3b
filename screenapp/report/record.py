"""The record of a screening: one folder with a page, the result record, tables and fields."""

from __future__ import annotations

from datetime import datetime
from pathlib import Path

from screenapp.model.atomic_write import write_atomically
from screenapp.model.findings import Findings
from screenapp.model.part import Part
from screenapp.model.part_json import part_to_text
from screenapp.model.progress import SILENT, Progress, Step
from screenapp.model.regions import shape_with_zones
from screenapp.model.result_json import findings_to_record, record_to_text
from screenapp.report.page import record_page
from screenapp.report.pdf import record_pdf
from screenapp.report.picture import record_pictures
from screenapp.report.tables import cuts_csv, peaks_csv, readings_csv
from screenapp.report.vtu import write_vtu

PART_ENDING = ".part.json"


def record_stem(source: Path) -> str:
    """Name of the record's files: the part file's name without its ending."""
    name = source.name
    return name[: -len(PART_ENDING)] if name.endswith(PART_ENDING) else source.stem


def unowned_part(folder: Path, source: Path) -> Path | None:
    """The part file that a record of `source` in `folder` would replace though it belongs to no
    record; None if there is none."""
    stem = record_stem(source)
    copy = folder / f"{stem}{PART_ENDING}"
    of_record = (folder / f"{stem}.result.json").exists()
    return copy if copy.exists() and not of_record and copy.resolve() != source.resolve() else None


def write_record(
    part: Part,
    findings: Findings,
    folder: Path,
    source: Path,
    progress: Progress = SILENT,
) -> list[Path]:
    """Write everything about a screening into `folder` and return the files written.

    Files: NAME.html (to read), NAME.pdf (the same to print and file), NAME.result.json (the
    result record), NAME.part.json (the part as screened), NAME.peaks.csv, NAME.readings.csv,
    NAME.cuts.csv, NAME.vtu (the fields of the last pass), NAME.png (the part with the field its
    verdict rests on).

    Raises:
        OSError: the folder cannot be made or written to.
        Cancelled: `progress` was asked to stop; what was written by then stays.
    """
    folder.mkdir(parents=True, exist_ok=True)
    stem = record_stem(source)
    when = datetime.now().astimezone()
    pictures = record_pictures(part, shape_with_zones(part), findings, progress)
    page = record_page(part, findings, when, pictures)
    _step(progress, 0.7)
    contents = {
        "html": page.encode(),
        "pdf": record_pdf(part, findings.part_sha256, page, when),
        "result.json": record_to_text(findings_to_record(findings, part)).encode(),
        "part.json": part_to_text(part).encode(),
        "peaks.csv": peaks_csv(findings).encode(),
        "readings.csv": readings_csv(findings).encode(),
        "cuts.csv": cuts_csv(findings).encode(),
    }
    if pictures:
        contents["png"] = pictures[0].png
    _step(progress, 0.9)
    written: list[Path] = []
    for ending, content in contents.items():
        path = folder / f"{stem}.{ending}"
        if path.resolve() == source.resolve():
            continue  # the record may stand beside its part
        write_atomically(path, content)
        written.append(path)
    if findings.last is not None:
        path = folder / f"{stem}.vtu"
        write_vtu(part, findings.last, path)
        written.append(path)
    return written


def _step(progress: Progress, done: float) -> None:
    progress.check()
    progress.report(Step("record", 0, done))
