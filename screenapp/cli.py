"""The command line: open the window, screen, check, convert.

Exit status: 0 holds, 1 does not hold, 2 undecided, 3 bad input, 4 internal fault.  Errors go to
standard error, one line for the cause and one for the mend.
"""

from __future__ import annotations

import argparse
import sys
import tempfile
import traceback
from collections.abc import Sequence
from pathlib import Path
from typing import TYPE_CHECKING

from screenapp import __version__
from screenapp.console import plain_json, plain_text, tell
from screenapp.model.errors import Cancelled, Fault, PartFileError, ScreenappError
from screenapp.model.findings import Verdict

if TYPE_CHECKING:
    from screenapp.meshing.service import Mesher

HOLDS, DOES_NOT_HOLD, UNDECIDED, BAD_INPUT, INTERNAL_FAULT = range(5)

STATUS: dict[Verdict, int] = {
    "holds": HOLDS,
    "does not hold": DOES_NOT_HOLD,
    "undecided": UNDECIDED,
}

CAUTION = "A screening, not an approval: local codes and a licensed engineer decide."

COMMANDS = ("screen", "check", "convert", "compare")


def main(words: Sequence[str] | None = None) -> int:
    """Run the command line and return the exit status."""
    words = list(sys.argv[1:] if words is None else words)
    try:
        if words and words[0] in COMMANDS:
            parser, run = {
                "screen": (_screen_parser, _screen),
                "check": (_check_parser, _check),
                "convert": (_convert_parser, _convert),
                "compare": (_compare_parser, _compare),
            }[words[0]]
            return run(parser().parse_intermixed_args(words[1:]))
        return _open_window(_window_parser().parse_args(words))
    except ScreenappError as error:
        _say_error(error)
        return BAD_INPUT
    except (Cancelled, KeyboardInterrupt):
        print("cancelled", file=sys.stderr)
        return UNDECIDED
    except Exception as fault:
        return _say_fault(fault)


class _Parser(argparse.ArgumentParser):
    """Says a wrong word in two lines and leaves with the status for bad input."""

    def error(self, message: str) -> None:  # type: ignore[override]
        print(message, file=sys.stderr)
        print(f"see: {self.prog} --help", file=sys.stderr)
        raise SystemExit(BAD_INPUT)


def _window_parser() -> argparse.ArgumentParser:
    parser = _Parser(
        prog="screenapp",
        description="Screens flat thin-walled parts for strength.  With no command it opens the "
        "window; the commands are: screen FILE..., check FILE..., convert IN OUT, "
        "compare BEFORE AFTER (each with --help).",
        epilog=CAUTION,
    )
    parser.add_argument("file", nargs="?", type=Path, help="part file (or DXF drawing) to open")
    parser.add_argument("--version", action="version", version=f"screenapp {__version__}")
    return parser


def _screen_parser() -> argparse.ArgumentParser:
    parser = _Parser(
        prog="screenapp screen",
        description="Screens parts with no window and prints the verdicts.  "
        "Exit status: 0 holds, 1 does not hold, 2 undecided, 3 bad input, 4 fault.",
        epilog=CAUTION,
    )
    parser.add_argument("files", nargs="+", type=Path, metavar="FILE")
    parser.add_argument(
        "--json",
        action="store_true",
        help="print the result record instead; for several files, an array of their records",
    )
    parser.add_argument("--out", type=Path, metavar="DIR", help="write the record into DIR")
    parser.add_argument("--fast", action="store_true", help="few passes: a first look")
    return parser


def _check_parser() -> argparse.ArgumentParser:
    parser = _Parser(
        prog="screenapp check",
        description="Says line and field of every fault in part files.  "
        "Exit status: 0 no fault, 3 faults.",
    )
    parser.add_argument("files", nargs="+", type=Path, metavar="FILE")
    return parser


def _convert_parser() -> argparse.ArgumentParser:
    parser = _Parser(
        prog="screenapp convert",
        description="Makes a part file of a DXF drawing, or a drawing of a part; the endings say "
        "which way (*.dxf, *.part.json).  What was fitted, closed, taken once or left out is told "
        "on standard error.  Exit status: 0 done, 3 bad input.",
    )
    parser.add_argument("source", type=Path, metavar="IN")
    parser.add_argument("target", type=Path, metavar="OUT")
    parser.add_argument(
        "--layer",
        action="append",
        default=[],
        metavar="NAME",
        help="make the shape of this layer (may be repeated); else of all that are shown and "
        "drawn in full lines",
    )
    parser.add_argument(
        "--zone",
        action="append",
        default=[],
        metavar="NAME",
        help="make zones of the closed lines on this layer (may be repeated)",
    )
    parser.add_argument("--unit", help="unit of length of the drawing, e.g. mm or in")
    parser.add_argument(
        "--tolerance",
        default="",
        metavar="LENGTH",
        help="gaps up to this are closed, splines fitted within it (0.01 mm)",
    )
    parser.add_argument("--outline", type=int, metavar="N", help="which of several outlines")
    return parser


def _compare_parser() -> argparse.ArgumentParser:
    parser = _Parser(
        prog="screenapp compare",
        description="Says what differs between two parts, and what that did to each utilisation.  "
        "Part files are screened; result records (*.result.json) are taken as they are, with the "
        "part beside them.  Exit status: that of the second one's verdict.",
        epilog=CAUTION,
    )
    parser.add_argument("before", type=Path, metavar="BEFORE")
    parser.add_argument("after", type=Path, metavar="AFTER")
    return parser


def _open_window(arguments: argparse.Namespace) -> int:
    from screenapp.app import run  # Qt is loaded only when a window is wanted

    return run(arguments.file)


def _check(arguments: argparse.Namespace) -> int:
    from screenapp.model.part_json import read_part
    from screenapp.model.validity import faults_of

    status = HOLDS
    for path in arguments.files:
        try:
            faults = _located(faults_of(read_part(path)), path)
        except PartFileError as error:
            if not error.faults:  # there is nothing to look into
                _say_error(error, path)
                status = BAD_INPUT
                continue
            faults = error.faults
        for fault in faults:
            tell(_fault_line(path, fault))
        if any(fault.blocks for fault in faults):
            status = BAD_INPUT
        elif not faults:
            tell(f"{path}: no fault")
    return status


def _located(faults: tuple[Fault, ...], path: Path) -> tuple[Fault, ...]:
    """Faults of a part with their lines in the file it was read from."""
    from screenapp.model.fault_lines import with_lines

    if all(fault.line is not None for fault in faults):
        return faults
    try:
        return with_lines(faults, path.read_text(encoding="utf-8"))
    except (OSError, UnicodeDecodeError):
        return faults


def _convert(arguments: argparse.Namespace) -> int:
    from screenapp.exchange.convert import Options, convert
    from screenapp.model.progress import Progress
    from screenapp.progress_bar import ProgressBar

    options = Options(
        tuple(arguments.layer),
        tuple(arguments.zone),
        arguments.unit,
        arguments.tolerance,
        arguments.outline,
    )
    said: list[str] = []
    try:
        with ProgressBar(arguments.source.name) as bar:
            progress = Progress(report=bar.show)
            convert(arguments.source, arguments.target, options, said.append, progress)
    finally:
        for sentence in said:
            tell(sentence, stream=sys.stderr)
    print(f"wrote {arguments.target}", file=sys.stderr)
    return HOLDS


def _compare(arguments: argparse.Namespace) -> int:
    from screenapp.compare_command import run_comparison

    verdict = run_comparison(arguments.before, arguments.after)
    tell(CAUTION)
    return STATUS[verdict]


def _fault_line(path: Path, fault: Fault) -> str:
    kind = "" if fault.blocks else "caution: "
    field = f" [{fault.field}]" if fault.field else ""
    return f"{_place(path, fault)}: {kind}{fault.cause}{field}; {fault.mend}"


def _place(path: Path, fault: Fault) -> str:
    return f"{path}:{fault.line}" if fault.line is not None else str(path)


def _screen(arguments: argparse.Namespace) -> int:
    from screenapp.meshing.service import Mesher

    if arguments.out is not None:
        _prepare(arguments.out, arguments.files)
    status = HOLDS
    records: list[str] = []
    with Mesher() as mesher:
        mesher.start()
        for path in arguments.files:
            try:
                own = _screen_file(path, arguments, mesher, records)
            except ScreenappError as error:
                _say_error(error, path)
                own = BAD_INPUT
            except Exception as fault:  # the other files still have their turn
                own = _say_fault(fault, path)
            status = _worse(status, own)
    if arguments.json and len(arguments.files) > 1:
        tell("[\n" + ",\n".join(records) + "\n]", plain_json)
    elif records:
        tell(records[0], plain_json)
    return status


def _screen_file(
    path: Path, arguments: argparse.Namespace, mesher: Mesher, records: list[str]
) -> int:
    """Screen one file and print its table, or add its result record to `records`; its status."""
    from screenapp.model.part_json import read_part
    from screenapp.model.progress import Progress
    from screenapp.model.result_json import findings_to_record, record_to_text
    from screenapp.progress_bar import ProgressBar
    from screenapp.report.verdict_table import verdict_table
    from screenapp.screening.screen import screen

    part = read_part(path)
    with ProgressBar(path.name) as bar:
        findings = screen(part, mesher, Progress(report=bar.show), fast=arguments.fast)
    if arguments.json:
        records.append(record_to_text(findings_to_record(findings, part)).rstrip("\n"))
    else:
        tell(
            verdict_table(part, findings),
            lambda _: verdict_table(part, findings, plain_text),
        )
        tell(CAUTION)
    if arguments.out is not None:
        from screenapp.report.record import write_record  # it draws: slow to load

        try:
            for written in write_record(part, findings, arguments.out, path):
                print(f"wrote {written}", file=sys.stderr)
        except OSError as error:
            raise ScreenappError(
                f"the record cannot be written to {arguments.out}: {error.strerror or error}",
                "give another folder, or make room there",
            ) from error
    return STATUS[findings.verdict]


def _prepare(folder: Path, files: Sequence[Path]) -> None:
    """Make the folder of the records, before any work.

    Raises:
        ScreenappError: it cannot be written to, two records would have the same name, or a record
            would take the place of another part file.
    """
    from screenapp.report.record import record_stem, unowned_part

    try:
        folder.mkdir(parents=True, exist_ok=True)
        with tempfile.TemporaryFile(dir=folder):
            pass
    except OSError as error:
        raise ScreenappError(
            f"the records cannot be written to {folder}: {error.strerror or error}",
            "give another folder with --out",
        ) from error
    first: dict[str, Path] = {}
    for path in files:
        stem = record_stem(path)
        if stem in first:
            raise ScreenappError(
                f"the records of {first[stem]} and {path} would have the same name in {folder}",
                "screen them one by one, each with its own --out",
            )
        first[stem] = path
        copy = unowned_part(folder, path)
        if copy is not None:
            raise ScreenappError(
                f"{copy} is there already and belongs to no record: it would be replaced by {path}",
                "give another folder with --out, or move the file away",
            )


def _worse(a: int, b: int) -> int:
    """The status of several files: bad input over does not hold over undecided over holds."""
    order = [HOLDS, UNDECIDED, DOES_NOT_HOLD, BAD_INPUT, INTERNAL_FAULT]
    return max(a, b, key=order.index)


def _say_error(error: ScreenappError, path: Path | None = None) -> None:
    """The cause on one line and the mend on the next, then every further fault."""
    faults = error.faults if path is None else _located(error.faults, path)
    start = place = ""
    if path is not None:
        start = place = f"{path}: "
        if faults and not isinstance(error, PartFileError):
            place = f"{_place(path, faults[0])}: "
        elif error.cause.startswith((str(path), path.name)):
            place = ""  # it says itself which file it is
    print(f"{place}{error.cause}", file=sys.stderr)
    print(f"{start}{error.mend}", file=sys.stderr)
    for fault in faults[1:]:
        at = f"{_place(path, fault)}: " if path is not None else ""
        print(f"{at}{fault}", file=sys.stderr)


def _say_fault(fault: Exception, path: Path | None = None) -> int:
    """The last line of defence: say it, keep the trace, fail."""
    traceback.print_exception(fault)
    print(f"internal fault{f' at {path}' if path else ''}: {fault}", file=sys.stderr)
    print("please report it with the lines above and the part file", file=sys.stderr)
    return INTERNAL_FAULT
