"""The command line: open the window, screen, check, convert.

Exit status: 0 holds, 1 does not hold, 2 undecided, 3 bad input, 4 internal fault.  Errors go to
standard error, one line for the cause and one for the mend.
"""

from __future__ import annotations

import argparse
import sys
import traceback
from collections.abc import Sequence
from pathlib import Path

from screenapp import __version__
from screenapp.model.errors import Cancelled, Fault, PartFileError, ScreenappError
from screenapp.model.findings import Verdict

HOLDS, DOES_NOT_HOLD, UNDECIDED, BAD_INPUT, INTERNAL_FAULT = range(5)

STATUS: dict[Verdict, int] = {
    "holds": HOLDS,
    "does not hold": DOES_NOT_HOLD,
    "undecided": UNDECIDED,
}

CAUTION = "A screening, not an approval: local codes and a licensed engineer decide."

COMMANDS = ("screen", "check")


def main(words: Sequence[str] | None = None) -> int:
    """Run the command line and return the exit status."""
    words = list(sys.argv[1:] if words is None else words)
    try:
        if words and words[0] in COMMANDS:
            arguments = _command_parser().parse_args(words)
            run = {"screen": _screen, "check": _check}[arguments.command]
            return run(arguments)
        return _open_window(_window_parser().parse_args(words))
    except ScreenappError as error:
        _say_error(error)
        return BAD_INPUT
    except (Cancelled, KeyboardInterrupt):
        print("cancelled", file=sys.stderr)
        return UNDECIDED
    except Exception as fault:  # the last line of defence: say it, keep the trace, fail
        traceback.print_exc()
        print(f"internal fault: {fault}", file=sys.stderr)
        print("please report it with the lines above and the part file", file=sys.stderr)
        return INTERNAL_FAULT


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
        "window; the commands are: screen FILE..., check FILE... (each with --help).",
        epilog=CAUTION,
    )
    parser.add_argument("file", nargs="?", type=Path, help="part file to open in the window")
    parser.add_argument("--version", action="version", version=f"screenapp {__version__}")
    return parser


def _command_parser() -> argparse.ArgumentParser:
    parser = _Parser(prog="screenapp", epilog=CAUTION)
    commands = parser.add_subparsers(dest="command", required=True)
    screen = commands.add_parser(
        "screen",
        help="screen parts with no window and print the verdicts",
        description="Exit status: 0 holds, 1 does not hold, 2 undecided, 3 bad input, 4 fault.",
        epilog=CAUTION,
    )
    screen.add_argument("files", nargs="+", type=Path, metavar="FILE")
    screen.add_argument("--json", action="store_true", help="print the result record instead")
    screen.add_argument("--out", type=Path, metavar="DIR", help="write the record into DIR")
    screen.add_argument("--fast", action="store_true", help="few passes: a first look")
    check = commands.add_parser("check", help="say line and field of every fault in part files")
    check.add_argument("files", nargs="+", type=Path, metavar="FILE")
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
            faults = faults_of(read_part(path))
        except PartFileError as error:
            if not error.faults:
                _say_error(error)
            faults = error.faults or (Fault(error.cause, error.mend),)
        for fault in faults:
            print(_fault_line(path, fault))
        if any(fault.blocks for fault in faults):
            status = BAD_INPUT
        elif not faults:
            print(f"{path}: no fault")
    return status


def _fault_line(path: Path, fault: Fault) -> str:
    place = f"{path}:{fault.line}" if fault.line is not None else str(path)
    kind = "" if fault.blocks else "caution: "
    field = f" [{fault.field}]" if fault.field else ""
    return f"{place}: {kind}{fault.cause}{field}; {fault.mend}"


def _screen(arguments: argparse.Namespace) -> int:
    from screenapp.meshing.service import Mesher
    from screenapp.model.part_json import read_part
    from screenapp.model.progress import Progress
    from screenapp.model.result_json import findings_to_record, record_to_text
    from screenapp.progress_bar import ProgressBar
    from screenapp.report.record import write_record
    from screenapp.report.verdict_table import verdict_table
    from screenapp.screening.screen import screen

    status = HOLDS
    with Mesher() as mesher:
        mesher.start()
        for path in arguments.files:
            try:
                part = read_part(path)
                with ProgressBar(path.name) as bar:
                    progress = Progress(report=bar.show)
                    findings = screen(part, mesher, progress, fast=arguments.fast)
            except ScreenappError as error:
                _say_error(error, path)
                status = _worse(status, BAD_INPUT)
                continue
            if arguments.json:
                print(record_to_text(findings_to_record(findings, part)), end="")
            else:
                print(verdict_table(part, findings))
                print(CAUTION)
            if arguments.out is not None:
                for written in write_record(part, findings, arguments.out, path):
                    print(f"wrote {written}", file=sys.stderr)
            status = _worse(status, STATUS[findings.verdict])
    return status


def _worse(a: int, b: int) -> int:
    """The status of several files: bad input over does not hold over undecided over holds."""
    order = [HOLDS, UNDECIDED, DOES_NOT_HOLD, BAD_INPUT, INTERNAL_FAULT]
    return max(a, b, key=order.index)


def _say_error(error: ScreenappError, path: Path | None = None) -> None:
    start = f"{path}: " if path is not None else ""
    print(f"{start}{error.cause}", file=sys.stderr)
    print(f"{start}{error.mend}", file=sys.stderr)
    for fault in error.faults[1:]:
        print(f"{start}{fault}", file=sys.stderr)
