"""What a worker process can be told to do instead of meshing; runs in the child only."""

from __future__ import annotations

import ctypes
import os
import sys
import time
from typing import Any

from screenapp.model.errors import MeshingError


def by_name(name: str, argument: Any) -> Any:
    """Do what the name says: lets one worker first fail and then work."""
    return globals()[name](argument)


def echo(argument: Any) -> Any:
    """Give the argument back."""
    return argument


def hang(argument: Any) -> None:
    """Never answer."""
    while True:
        time.sleep(60.0)


def hang_in_c(argument: Any) -> None:
    """Never answer, with the interpreter's signal handling shut out as in a C library."""
    libc = ctypes.CDLL(None)
    while True:
        libc.sleep(60)


def crash(argument: Any) -> None:
    """End as by a fault in a C library."""
    os.abort()


def leave(argument: Any) -> None:
    """End without a word."""
    os._exit(7)


def fail(argument: Any) -> None:
    """An exception that no one expected."""
    raise ZeroDivisionError("a number was divided by nought")


def refuse(argument: Any) -> None:
    """The mesher's own error."""
    raise MeshingError("no acceptable mesh was found", "ask for smaller elements")


class Unportable(Exception):
    """An error that cannot be sent: it takes two arguments and hands on one."""

    def __init__(self, a: int, b: int) -> None:
        super().__init__(f"{a} and {b}")


def fail_unportably(argument: Any) -> None:
    """Raise what pickle cannot rebuild."""
    raise Unportable(1, 2)


def chatter(argument: Any) -> str:
    """Print much to standard output, from Python and from below."""
    print("words " * 10_000)
    os.write(1, b"more words " * 10_000)
    return "heard"


def modules(argument: Any) -> tuple[list[str], str | None]:
    """All modules loaded, and the file of the main one."""
    return sorted(sys.modules), getattr(sys.modules["__main__"], "__file__", None)
