"""The mesher's process: killed, hung, crashed, cancelled - and usable again each time."""

from __future__ import annotations

import os
import signal
import subprocess
import sys
import textwrap
import threading
import time
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest

from screenapp.meshing.service import Mesher
from screenapp.meshing.sizing import initial_sizes
from screenapp.model.errors import Cancelled, MeshingError
from screenapp.model.part import CircleHole, MeshWishes, Part
from screenapp.model.progress import SILENT, Progress
from screenapp.model.shape import shape_of
from tests.meshing.random_shapes import rectangle

ROOT = Path(__file__).parents[2]
FAULTY = "tests.meshing.faulty_work:by_name"


@pytest.fixture
def faulty() -> Iterator[Mesher]:
    """A mesher whose worker does what it is told by name; the limit stops a hang."""
    with Mesher(time_limit=20.0, work=FAULTY) as mesher:
        yield mesher


def told(mesher: Mesher, name: str, progress: Progress = SILENT, argument: Any = 5) -> Any:
    """Run one of the faulty pieces of work."""
    return mesher.mesh(name, argument, progress)  # type: ignore[arg-type]


def cancelled_after(seconds: float) -> Progress:
    """A user who presses Cancel after a while."""
    deadline = time.monotonic() + seconds
    return Progress(cancelled=lambda: time.monotonic() > deadline)


def is_alive(process: int) -> bool:
    """Whether the process still runs (one that has ended and is not yet reaped does not)."""
    try:
        os.kill(process, 0)
        state = Path(f"/proc/{process}/stat").read_text().rsplit(")", 1)[1].split()[0]
    except (ProcessLookupError, FileNotFoundError):
        return False
    # The first thread ends before the others do: only then can the parent see it.
    threads = list(Path(f"/proc/{process}/task").glob("*"))
    return state != "Z" or len(threads) > 1


def gone(process: int, within: float = 10.0) -> bool:
    """Wait until the process has ended."""
    deadline = time.monotonic() + within
    while time.monotonic() < deadline:
        if not is_alive(process):
            return True
        time.sleep(0.02)
    return False


def test_meshes_a_plate_and_keeps_the_worker_warm() -> None:
    part = Part(outline=rectangle(60.0, 40.0), holes=(CircleHole("h1", (30.0, 20.0), 12.0),))
    shape = shape_of(part)
    with Mesher() as mesher:
        mesher.start()
        process = mesher.process_id
        first = mesher.mesh(shape, initial_sizes(shape, MeshWishes()))
        second = mesher.mesh(shape, initial_sizes(shape, MeshWishes()))
        assert mesher.process_id == process
    assert first.n_elements > 50
    assert (first.nodes == second.nodes).all()  # the same part gives the same mesh
    assert (first.quads == second.quads).all()
    assert process is not None
    assert gone(process)
    assert mesher.process_id is None


@pytest.mark.parametrize("name", ["hang", "hang_in_c"])
def test_cancel_kills_the_worker_and_the_next_call_starts_another(
    faulty: Mesher, name: str
) -> None:
    assert told(faulty, "echo") == 5
    first = faulty.process_id
    with pytest.raises(Cancelled):
        told(faulty, name, cancelled_after(0.1))
    assert first is not None
    assert gone(first)
    assert told(faulty, "echo") == 5
    assert faulty.process_id != first


def test_cancelled_before_it_began_starts_nothing() -> None:
    with Mesher(work=FAULTY) as mesher:
        with pytest.raises(Cancelled):
            told(mesher, "echo", Progress(cancelled=lambda: True))
        assert mesher.process_id is None


def test_a_hang_beyond_the_limit_is_an_error_with_its_mend() -> None:
    with Mesher(time_limit=0.2, work=FAULTY) as mesher:
        with pytest.raises(MeshingError) as caught:
            told(mesher, "hang")
        assert "did not finish within 0.2 s" in caught.value.cause
        assert "larger elements" in caught.value.mend
        assert told(mesher, "echo") == 5


def test_a_worker_killed_from_outside_at_work(faulty: Mesher) -> None:
    told(faulty, "echo")
    process = faulty.process_id
    assert process is not None
    timer = threading.Timer(0.2, os.kill, (process, signal.SIGKILL))
    timer.start()
    with pytest.raises(MeshingError, match="ended unexpectedly"):
        told(faulty, "hang")
    timer.join()
    assert told(faulty, "echo") == 5


def test_a_worker_killed_while_idle_is_replaced(faulty: Mesher) -> None:
    told(faulty, "echo")
    process = faulty.process_id
    assert process is not None
    os.kill(process, signal.SIGKILL)
    assert gone(process)
    assert told(faulty, "echo") == 5


@pytest.mark.parametrize(
    ("name", "words"),
    [
        ("crash", "ended unexpectedly"),
        ("leave", "status 7"),
        ("fail", "a number was divided by nought"),
        ("fail_unportably", "1 and 2"),
        ("no_such_work", "no_such_work"),
    ],
)
def test_what_goes_wrong_is_said_and_mended(faulty: Mesher, name: str, words: str) -> None:
    with pytest.raises(MeshingError) as caught:
        told(faulty, name)
    assert words in caught.value.cause
    assert caught.value.mend
    assert told(faulty, "echo") == 5


def test_the_mesher_s_own_error_comes_through_unchanged(faulty: Mesher) -> None:
    with pytest.raises(MeshingError) as caught:
        told(faulty, "refuse")
    assert caught.value.cause == "no acceptable mesh was found"
    assert caught.value.mend == "ask for smaller elements"


def test_work_that_cannot_be_loaded_is_an_error() -> None:
    with (
        Mesher(work="tests.meshing.no_such_module:work") as mesher,
        pytest.raises(MeshingError, match="could not load"),
    ):
        told(mesher, "echo")


def test_what_libraries_print_does_not_mix_with_the_answers(faulty: Mesher) -> None:
    assert told(faulty, "chatter") == "heard"
    assert told(faulty, "echo") == 5


def test_the_worker_knows_nothing_of_qt_nor_of_the_main_module(faulty: Mesher) -> None:
    import PySide6.QtCore  # noqa: F401 - the parent has it

    names, main = told(faulty, "modules")
    assert not [name for name in names if name.startswith(("PySide6", "pyqtgraph"))]
    assert main is None


def test_works_from_other_threads_one_at_a_time(faulty: Mesher) -> None:
    answers: dict[int, Any] = {}

    def ask(number: int) -> None:
        answers[number] = told(faulty, "echo", argument=number)

    threads = [threading.Thread(target=ask, args=(k,)) for k in range(6)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()
    assert answers == {k: k for k in range(6)}


def in_thread(work: Callable[[], Any], errors: list[BaseException]) -> threading.Thread:
    """Run in a thread, keeping what it raises."""

    def run() -> None:
        try:
            work()
        except BaseException as error:
            errors.append(error)

    thread = threading.Thread(target=run)
    thread.start()
    return thread


def test_closing_ends_a_mesh_in_the_making(faulty: Mesher) -> None:
    told(faulty, "echo")
    errors: list[BaseException] = []
    thread = in_thread(lambda: told(faulty, "hang"), errors)
    time.sleep(0.1)
    faulty.start()  # must not wait for the other thread
    faulty.close()
    thread.join(10.0)
    assert not thread.is_alive()
    assert [type(e) for e in errors] == [Cancelled]
    assert told(faulty, "echo") == 5


def test_waiting_for_another_thread_s_mesh_can_be_cancelled(faulty: Mesher) -> None:
    told(faulty, "echo")
    errors: list[BaseException] = []
    stop = threading.Event()
    thread = in_thread(lambda: told(faulty, "hang", Progress(cancelled=stop.is_set)), errors)
    time.sleep(0.1)
    with pytest.raises(Cancelled):
        told(faulty, "echo", cancelled_after(0.1))
    assert thread.is_alive()  # the other mesh is not harmed
    stop.set()
    thread.join(10.0)
    assert [type(e) for e in errors] == [Cancelled]


def test_a_killed_parent_leaves_no_orphan() -> None:
    script = textwrap.dedent(
        """
        import sys
        from screenapp.meshing.service import Mesher
        mesher = Mesher(work="tests.meshing.faulty_work:by_name")
        mesher.mesh("echo", 1)
        print(mesher.process_id, flush=True)
        mesher.mesh("hang_in_c", 1)
        """
    )
    parent = subprocess.Popen(
        [sys.executable, "-c", script], cwd=ROOT, stdout=subprocess.PIPE, text=True
    )
    assert parent.stdout is not None
    worker = int(parent.stdout.readline())
    assert is_alive(worker)
    time.sleep(0.2)  # into the hang
    parent.kill()
    parent.wait()
    parent.stdout.close()
    assert gone(worker)


def test_works_with_no_display_under_another_main_module(tmp_path: Path) -> None:
    """As under `python -m screenapp`: a main module without a guard must not run again."""
    program = tmp_path / "program.py"
    program.write_text(
        textwrap.dedent(
            """
            print("main ran", flush=True)
            from screenapp.meshing.service import Mesher
            from screenapp.meshing.sizing import uniform_sizes
            from screenapp.model.part import Part
            from screenapp.model.shape import shape_of
            from tests.meshing.random_shapes import rectangle
            shape = shape_of(Part(outline=rectangle(20.0, 10.0)))
            with Mesher() as mesher:
                print(mesher.mesh(shape, uniform_sizes(shape, 2.0)).n_elements > 10)
            """
        )
    )
    bare = {k: v for k, v in os.environ.items() if "DISPLAY" not in k and not k.startswith("QT_")}
    done = subprocess.run(
        [sys.executable, str(program)],
        env={**bare, "PYTHONPATH": str(ROOT)},
        capture_output=True,
        text=True,
        timeout=60,
        check=True,
    )
    assert done.stdout.split("\n") == ["main ran", "True", ""]
