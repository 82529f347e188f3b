"""The command line: exit statuses, records, what goes to which stream, errors with their place."""

from __future__ import annotations

import io
import json
import os
import pty
import signal
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from screenapp import cli
from screenapp.cli import main
from screenapp.console import plain_json, plain_text, tell
from screenapp.model.schema_check import schema_faults
from screenapp.model.solution import Solution
from screenapp.progress_bar import ProgressBar

SAMPLES = Path(__file__).parents[1] / "samples"
ROOT = Path(__file__).parents[1]
Capture = pytest.CaptureFixture[str]
Tree = dict[str, Any]


def sample(name: str) -> Path:
    return SAMPLES / f"{name}.part.json"


def changed(folder: Path, change: Callable[[Tree], object], name: str = "changed") -> Path:
    """The hose clip with a change, as a file of its own, one value a line."""
    tree = json.loads(sample("hose-clip").read_text(encoding="utf-8"))
    change(tree)
    file = folder / f"{name}.part.json"
    file.write_text(json.dumps(tree, indent=1, ensure_ascii=False), encoding="utf-8")
    return file


def run(*words: str | Path, **more: Any) -> subprocess.CompletedProcess[bytes]:
    """The program in a process of its own."""
    return subprocess.run(
        [sys.executable, "-m", "screenapp", *map(str, words)],
        capture_output=True,
        check=False,
        cwd=ROOT,
        **more,
    )


def line_with(file: Path, text: str) -> int:
    """Number of the first line that holds a text."""
    lines = file.read_text(encoding="utf-8").splitlines()
    return next(i for i, line in enumerate(lines, 1) if text in line)


# --- statuses and records -------------------------------------------------------------------


@pytest.mark.parametrize(("name", "status"), [("lifting-lug", 0), ("pump-bracket", 1)])
def test_screen_answers_with_its_status_and_writes_the_record(
    name: str, status: int, tmp_path: Path, capsys: Capture
) -> None:
    assert main(["screen", str(sample(name)), "--json", "--out", str(tmp_path)]) == status
    record = json.loads(capsys.readouterr().out)
    assert record["verdict"] == ("holds" if status == 0 else "does not hold")
    assert schema_faults(record, "result.schema.json") == ()
    written = {path.name for path in tmp_path.iterdir()}
    endings = ("html", "result.json", "part.json", "peaks.csv", "readings.csv", "vtu", "png")
    endings += ("pdf", "cuts.csv")
    assert written == {f"{name}.{ending}" for ending in endings}
    # the record on the screen and the one in the folder are the same
    assert json.loads((tmp_path / f"{name}.result.json").read_text()) == record


def test_no_limit_is_undecided(tmp_path: Path, capsys: Capture) -> None:
    file = changed(tmp_path, lambda tree: tree.update(limits=[]))
    assert main(["screen", str(file), "--fast"]) == 2
    assert "no limit is set" in capsys.readouterr().out


def test_fast_stops_after_two_passes_and_settles_nothing(capsys: Capture) -> None:
    assert main(["screen", str(sample("hose-clip")), "--fast", "--json"]) == 2
    record = json.loads(capsys.readouterr().out)
    assert len(record["mesh"]["passes"]) == 2
    trusts = {p["trust"] for case in record["cases"] for p in case["peaks"]}
    assert "settled" not in trusts


def test_a_fault_of_the_program_is_status_four_and_leaves_other_files_their_turn(
    capsys: Capture, monkeypatch: pytest.MonkeyPatch
) -> None:
    from screenapp.screening import screen as module

    calls: list[int] = []
    sound = module.solve

    def broken(*words: Any) -> Solution:
        calls.append(1)
        if len(calls) == 1:
            raise ZeroDivisionError("an error of ours")
        return sound(*words)

    monkeypatch.setattr(module, "solve", broken)
    both = [str(sample("hose-clip")), str(sample("lifting-lug"))]
    assert main(["screen", *both, "--fast"]) == 4
    out, err = capsys.readouterr()
    assert "Lifting lug" in out
    assert f"internal fault at {both[0]}: an error of ours" in err
    assert "Traceback" in err


def test_the_worst_of_several_files_counts(tmp_path: Path, capsys: Capture) -> None:
    missing = tmp_path / "none.part.json"
    holds, fails = str(sample("hose-clip")), str(sample("pump-bracket"))
    assert main(["screen", holds, fails]) == 1
    assert main(["screen", str(missing), "--fast", holds]) == 3
    out, err = capsys.readouterr()
    assert "Hose clip" in out
    assert str(missing) in err
    assert [cli._worse(0, 2), cli._worse(2, 1), cli._worse(1, 3), cli._worse(3, 4)] == [2, 1, 3, 4]


def test_json_of_several_files_is_one_array_of_those_that_could_be_screened(
    tmp_path: Path, capsys: Capture
) -> None:
    files = [str(sample("hose-clip")), str(tmp_path / "none.part.json"), str(sample("lifting-lug"))]
    assert main(["screen", *files, "--fast", "--json"]) == 3
    records = json.loads(capsys.readouterr().out)
    assert [r["title"] for r in records] == ["Hose clip, moulded", "Lifting lug for the winch bed"]


def test_wrong_words_are_bad_input_in_two_lines(capsys: Capture) -> None:
    for words in (["screen"], ["screen", "--fsat", "x"], ["check"], ["x", "y"]):
        with pytest.raises(SystemExit) as left:
            main(words)
        assert left.value.code == 3
        assert len(capsys.readouterr().err.splitlines()) == 2


def test_help_and_version_are_status_zero(capsys: Capture) -> None:
    for words in (["--help"], ["--version"], ["screen", "--help"], ["check", "--help"]):
        with pytest.raises(SystemExit) as left:
            main(words)
        assert left.value.code == 0
    assert "screenapp" in capsys.readouterr().out


# --- --out ----------------------------------------------------------------------------------


def test_an_out_that_cannot_be_written_is_said_before_any_work(
    tmp_path: Path, capsys: Capture
) -> None:
    blocked = tmp_path / "file"
    blocked.write_text("in the way")
    begin = time.perf_counter()
    assert main(["screen", str(sample("hose-clip")), "--out", str(blocked / "out")]) == 3
    assert time.perf_counter() - begin < 2.0
    out, err = capsys.readouterr()
    assert out == ""
    cause, mend = err.splitlines()
    assert str(blocked / "out") in cause
    assert "--out" in mend


def test_a_disk_that_fills_up_is_bad_input_and_keeps_the_verdict_on_the_screen(
    tmp_path: Path, capsys: Capture, monkeypatch: pytest.MonkeyPatch
) -> None:
    from screenapp.report import record

    def full(*_: object) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(record, "write_atomically", full)
    assert main(["screen", str(sample("hose-clip")), "--fast", "--out", str(tmp_path / "o")]) == 3
    out, err = capsys.readouterr()
    assert "Hose clip" in out
    assert "No space left on device" in err


def test_records_of_one_name_are_refused(tmp_path: Path, capsys: Capture) -> None:
    (tmp_path / "a").mkdir()
    one = changed(tmp_path, lambda tree: None, "same")
    two = changed(tmp_path / "a", lambda tree: None, "same")
    assert main(["screen", str(one), str(two), "--out", str(tmp_path / "out")]) == 3
    assert "same name" in capsys.readouterr().err


def test_another_part_of_the_same_name_is_never_replaced(tmp_path: Path, capsys: Capture) -> None:
    out = tmp_path / "out"
    out.mkdir()
    part = changed(tmp_path, lambda tree: None, "clip")
    foreign = changed(out, lambda tree: tree.update(title="Somebody's own"), "clip")
    before = foreign.read_bytes()
    assert main(["screen", str(part), "--out", str(out), "--fast"]) == 3
    assert foreign.read_bytes() == before
    assert str(foreign) in capsys.readouterr().err


def test_a_record_may_stand_beside_its_part_and_be_written_again(tmp_path: Path) -> None:
    part = changed(tmp_path, lambda tree: None, "clip")
    before = part.read_bytes()
    for _ in range(2):
        assert main(["screen", str(part), "--out", str(tmp_path), "--fast"]) == 2
        assert part.read_bytes() == before


# --- bad files ------------------------------------------------------------------------------


def test_a_file_cut_in_half_is_bad_input_and_said(tmp_path: Path, capsys: Capture) -> None:
    whole = sample("lifting-lug").read_text(encoding="utf-8")
    broken = tmp_path / "cut.part.json"
    broken.write_text(whole[: len(whole) // 2], encoding="utf-8")
    assert main(["screen", str(broken)]) == 3
    assert len(capsys.readouterr().err.splitlines()) >= 2
    assert main(["check", str(broken)]) == 3
    assert "cut.part.json:" in capsys.readouterr().out


BAD_BYTES = {
    "empty": b"",
    "an array": b"[]",
    "not UTF-8": b'{"format": "screenapp part",\n "title": "w\xfcnch"}',
    "UTF-16": '{"format": "screenapp part"}'.encode("utf-16"),
    "binary": bytes(range(256)) * 8,
    "of another kind": b'{"format": "something else", "version": 1}',
    "newer": b'{"format": "screenapp part", "version": 99}',
    "deeply nested": b"[" * 5000,
}


@pytest.mark.parametrize("content", BAD_BYTES.values(), ids=BAD_BYTES.keys())
def test_what_is_no_part_file_is_refused_with_cause_and_mend(
    content: bytes, tmp_path: Path, capsys: Capture
) -> None:
    file = tmp_path / "odd.part.json"
    file.write_bytes(content)
    assert main(["check", str(file)]) == 3
    assert f"{file}:" in capsys.readouterr().out
    assert main(["screen", str(file)]) == 3
    out, err = capsys.readouterr()
    assert out == ""
    assert "Traceback" not in err
    assert len(err.splitlines()) >= 2
    assert err.startswith(("odd.part.json", str(file)))
    assert file.read_bytes() == content, "the file is left as it was"


def test_a_folder_and_a_missing_file_are_said_on_standard_error(
    tmp_path: Path, capsys: Capture
) -> None:
    for path in (tmp_path, tmp_path / "none.part.json"):
        for command in ("check", "screen"):
            assert main([command, str(path)]) == 3
            out, err = capsys.readouterr()
            assert out == ""
            assert str(path) in err
            assert len(err.splitlines()) == 2


@pytest.mark.skipif(os.name != "posix" or os.geteuid() == 0, reason="root may read everything")
def test_a_file_that_may_not_be_read(tmp_path: Path, capsys: Capture) -> None:
    file = changed(tmp_path, lambda tree: None)
    file.chmod(0)
    assert main(["check", str(file)]) == 3
    assert "Permission denied" in capsys.readouterr().err


# --- check ----------------------------------------------------------------------------------


def test_check_of_a_sound_part(capsys: Capture) -> None:
    for name in ("hose-clip", "lifting-lug", "pump-bracket"):
        assert main(["check", str(sample(name))]) == 0


def test_check_names_line_and_field_of_every_fault(tmp_path: Path, capsys: Capture) -> None:
    def spoil(tree: Tree) -> None:
        tree["wall"]["thickness"] = -3
        tree["supports"][0]["on"] = "nowhere"
        tree["cases"][0]["loads"][0]["on"] = "elsewhere"
        tree["limits"][0]["factor"] = 0
        tree["materials"][0]["poissons_ratio"] = 0.7
        tree["readings"].append({"id": "p99", "kind": "probe", "name": "far", "at": [9e3, 0]})

    file = changed(tmp_path, spoil)
    assert main(["check", str(file)]) == 3
    out = capsys.readouterr().out
    tree = json.loads(file.read_text(encoding="utf-8"))
    case, load = tree["cases"][0]["id"], tree["cases"][0]["loads"][0]["id"]
    for field, text in {
        "wall.thickness": '"thickness"',
        f"supports.{tree['supports'][0]['id']}.on": "nowhere",
        f"cases.{case}.loads.{load}.on": "elsewhere",
        f"limits.{tree['limits'][0]['id']}.factor": '"factor"',
        f"materials.{tree['materials'][0]['name']}.poissons_ratio": '"poissons_ratio"',
        "readings.p99.at": "9000",
    }.items():
        line = next(row for row in out.splitlines() if f"[{field}]" in row)
        number = int(line.removeprefix(f"{file}:").split(":")[0])
        # an array's own line is that of its key
        assert abs(number - line_with(file, text)) <= 1, line
        assert "; " in line, "cause and mend"


def test_check_says_every_fault_of_form_at_once(tmp_path: Path, capsys: Capture) -> None:
    def spoil(tree: Tree) -> None:
        del tree["wall"]["thickness"]
        tree["mesh"]["element"] = "tri3"
        tree["limits"][0]["factor"] = "abc"
        tree["colour"] = "red"
        tree["cases"][0]["loads"][0]["x"] = float("nan")

    file = changed(tmp_path, spoil)
    assert main(["check", str(file)]) == 3
    out = capsys.readouterr().out
    for words in ('no "thickness"', "[mesh.element]", ".factor]", "[colour]", "NaN"):
        assert words in out
    lines = [int(row.removeprefix(f"{file}:").split(":")[0]) for row in out.splitlines()]
    assert lines == sorted(lines)
    assert line_with(file, "tri3") in lines


# --- streams --------------------------------------------------------------------------------


def test_json_stands_alone_on_standard_output_and_progress_needs_a_terminal() -> None:
    done = run("screen", sample("hose-clip"), "--fast", "--json")
    assert done.returncode == 2
    assert json.loads(done.stdout)["title"] == "Hose clip, moulded"
    assert done.stderr == b""


@pytest.mark.skipif(os.name != "posix", reason="needs a pseudo-terminal")
def test_progress_is_drawn_on_a_terminal_and_wiped() -> None:
    ours, theirs = pty.openpty()
    process = subprocess.Popen(
        [sys.executable, "-m", "screenapp", "screen", str(sample("hose-clip")), "--fast"],
        stdout=subprocess.DEVNULL,
        stderr=theirs,
        cwd=ROOT,
    )
    os.close(theirs)
    shown = b""
    try:
        while chunk := os.read(ours, 4096):
            shown += chunk
    except OSError:  # the other end is closed
        pass
    os.close(ours)
    assert process.wait(60) == 2
    text = shown.decode()
    assert "pass 1, meshing" in text
    assert "pass 2, solving" in text
    assert text.endswith("\r\x1b[K")


def test_the_bar_is_plain_where_the_terminal_is() -> None:
    class Terminal(io.TextIOWrapper):
        def isatty(self) -> bool:
            return True

    from screenapp.model.progress import Step

    for encoding, sign in (("ascii", b"#"), ("utf-8", "█".encode())):
        raw = io.BytesIO()
        stream = Terminal(raw, encoding=encoding)
        with ProgressBar("part", stream) as bar:
            bar.show(Step("solving", 1, 0.5))
        assert sign in raw.getvalue()


def test_a_terminal_without_our_letters_gets_plain_ones_still_lined_up() -> None:
    environment = {**os.environ, "PYTHONIOENCODING": "ascii"}
    done = run("screen", sample("hose-clip"), "--fast", env=environment)
    assert done.returncode == 2
    text = done.stdout.decode("ascii")
    head = next(row for row in text.splitlines() if row.startswith("  von Mises peak"))
    start = head.index("case")
    rows = text[text.index("  von Mises peak") :].split("\n\n")[0].splitlines()
    assert len(rows) > 2
    assert all(row[start - 2 : start] == "  " and row[start] != " " for row in rows)
    done = run("screen", sample("hose-clip"), "--fast", "--json", env=environment)
    assert json.loads(done.stdout.decode("ascii"))["title"] == "Hose clip, moulded"


def test_plain_text_and_json() -> None:
    assert plain_text("σ ≥ 3 ± 1 at 45°, “Träger” 支") == 'sigma  >= 3 +/- 1 at 45 deg, "Trager" ?'
    odd = {"a": "≥ ü 🙂 \\ \n", "ö": 1}
    text = plain_json(json.dumps(odd, ensure_ascii=False))
    assert text.isascii()
    assert json.loads(text) == odd


@pytest.mark.skipif(os.name != "posix", reason="pipes as on POSIX")
def test_a_reader_that_leaves_does_not_stop_the_work(tmp_path: Path) -> None:
    read, write = os.pipe()
    os.close(read)
    words = ["screen", str(sample("hose-clip")), "--fast", "--out", str(tmp_path)]
    done = subprocess.run(
        [sys.executable, "-m", "screenapp", *words],
        stdout=write,
        stderr=subprocess.PIPE,
        check=False,
        cwd=ROOT,
    )
    os.close(write)
    assert done.returncode == 2
    assert b"Traceback" not in done.stderr
    assert (tmp_path / "hose-clip.html").exists()


def test_tell_writes_as_it_is_where_it_can() -> None:
    raw = io.BytesIO()
    stream = io.TextIOWrapper(raw, encoding="utf-8")
    tell("45° ± 1", stream=stream)
    assert raw.getvalue().decode() == "45° ± 1\n"


# --- stopping -------------------------------------------------------------------------------


def children(process: int) -> set[int]:
    """Ids of the processes that a process has started."""
    found = set()
    for status in Path("/proc").glob("[0-9]*/stat"):
        try:
            fields = status.read_text().rpartition(")")[2].split()
        except OSError:
            continue
        if int(fields[1]) == process:
            found.add(int(status.parent.name))
    return found


def alive(process: int) -> bool:
    try:
        return Path(f"/proc/{process}/stat").read_text().rpartition(")")[2].split()[0] != "Z"
    except OSError:
        return False


def _mind_interrupts() -> None:
    """What a shell starts in the background ignores them, and so does what that starts."""
    signal.signal(signal.SIGINT, signal.SIG_DFL)


@pytest.mark.skipif(not Path("/proc/self/stat").exists(), reason="looks into /proc")
@pytest.mark.parametrize("sign", [signal.SIGINT, signal.SIGTERM, signal.SIGKILL])
def test_a_stopped_program_leaves_no_worker_behind(sign: signal.Signals, tmp_path: Path) -> None:
    files = [str(sample("lifting-lug"))] * 20
    process = subprocess.Popen(
        [sys.executable, "-m", "screenapp", "screen", *files],
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        cwd=ROOT,
        preexec_fn=_mind_interrupts,
    )
    assert process.stdout is not None
    assert process.stdout.readline().startswith(b"Lifting lug")  # in the midst of its work
    workers = children(process.pid)
    assert workers, "the mesher has a process of its own"
    process.send_signal(sign)
    _, err = process.communicate(timeout=10)
    if sign is signal.SIGINT:
        assert process.returncode == 2
        assert err == b"cancelled\n"
    deadline = time.monotonic() + 5.0
    while any(alive(w) for w in workers) and time.monotonic() < deadline:
        time.sleep(0.05)
    assert not any(alive(w) for w in workers)
