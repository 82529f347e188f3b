"""The record of a screening: one folder with a page, the result record, tables and fields."""

from __future__ import annotations

from datetime import datetime
from pathlib import Path

from screenapp.model.atomic_write import write_atomically
from screenapp.model.findings import Findings
from screenapp.model.part import Part
from screenapp.model.part_json import part_to_text
from screenapp.model.regions import shape_with_zones
from screenapp.model.result_json import findings_to_record, record_to_text
from screenapp.report.page import record_page
from screenapp.report.picture import part_picture
from screenapp.report.tables import peaks_csv, readings_csv
from screenapp.report.vtu import write_vtu

PART_ENDING = ".part.json"


def record_stem(source: Path) -> str:
    """Name of the record's files: the part file's name without its ending."""
    name = source.name
    return name[: -len(PART_ENDING)] if name.endswith(PART_ENDING) else source.stem


def write_record(part: Part, findings: Findings, folder: Path, source: Path) -> list[Path]:
    """Write everything about a screening into `folder` and return the files written.

    Files: NAME.html (to read and print), NAME.result.json (the result record), NAME.part.json (the
    part as screened), NAME.peaks.csv, NAME.readings.csv, NAME.vtu (the fields of the last pass),
    NAME.png (the part with the field its verdict rests on).

    Raises:
        OSError: the folder cannot be made or written to.
    """
    folder.mkdir(parents=True, exist_ok=True)
    stem = record_stem(source)
    texts = {
        "html": record_page(part, findings, datetime.now().astimezone()),
        "result.json": record_to_text(findings_to_record(findings, part)),
        "part.json": part_to_text(part),
        "peaks.csv": peaks_csv(findings),
        "readings.csv": readings_csv(findings),
    }
    written: list[Path] = []
    for ending, text in texts.items():
        path = folder / f"{stem}.{ending}"
        if path.resolve() == source.resolve():
            continue  # the record may stand beside its part
        write_atomically(path, text.encode())
        written.append(path)
    if findings.last is not None:
        path = folder / f"{stem}.vtu"
        write_vtu(part, findings.last, path)
        written.append(path)
        path = folder / f"{stem}.png"
        write_atomically(path, part_picture(part, shape_with_zones(part), findings))
        written.append(path)
    return written
