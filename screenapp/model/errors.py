"""The few kinds of trouble the program reports, each with its place and its mend.

Every error that a user can meet carries three plain sentences' worth of text: what is wrong, where
it is, and what to do about it.  The command line prints the cause on one line and the mend on the
next; the window puts the cause in the sheet and marks the place on the board.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass


@dataclass(frozen=True)
class Fault:
    """One thing that is wrong with a part.

    Attributes:
        cause: what is wrong, one sentence without a full stop, e.g. "the round of corner c4 needs
            14.2 mm of edge e3, which is 10 mm long".
        mend: what to do about it, one imperative sentence, e.g. "make the round at most 7.0 mm".
        field: dotted path into the part file, e.g. "outline.corners.c4.round"; empty if none.
        ids: ids of the corners, edges, holes, supports, loads ... that the board should mark.
        at: a point [mm] to mark, or None.
        blocks: True if the part cannot be screened with it; False for a caution.
        line: line in the part file, where it is known.
        span: two points [mm] whose distance is what is wrong: across a thin ligament, the ends of
            a tiny edge; None if it is nothing of that kind.
    """

    cause: str
    mend: str
    field: str = ""
    ids: tuple[str, ...] = ()
    at: tuple[float, float] | None = None
    blocks: bool = True
    line: int | None = None
    span: tuple[tuple[float, float], tuple[float, float]] | None = None
    alike: str = ""

    def __str__(self) -> str:
        return f"{self.cause}: {self.mend}"


def joined(faults: Iterable[Fault]) -> list[tuple[Fault, ...]]:
    """Faults in their order, those that are alike together at the place of the first."""
    groups: dict[object, list[Fault]] = {}
    for i, fault in enumerate(faults):
        groups.setdefault(fault.alike or i, []).append(fault)
    return [tuple(group) for group in groups.values()]


def causes_of(faults: Iterable[Fault]) -> list[str]:
    """What is wrong, one sentence for each group of `joined`."""
    return [
        group[0].cause
        if len(group) == 1
        else f"{group[0].alike}: {', '.join(id_ for fault in group for id_ in fault.ids)}"
        for group in joined(faults)
    ]


class ScreenappError(Exception):
    """Base of all errors that are meant for the user: a cause, a mend, and where it is."""

    def __init__(self, cause: str, mend: str, faults: tuple[Fault, ...] = ()) -> None:
        super().__init__(f"{cause}\n{mend}")
        self.cause = cause
        self.mend = mend
        self.faults = faults

    def __reduce__(self) -> tuple[object, ...]:
        return type(self), (self.cause, self.mend, self.faults)


class PartFileError(ScreenappError):
    """A part file cannot be read: not JSON, not by the schema, cut short, or too new."""


class InvalidPartError(ScreenappError):
    """A part was read but cannot be screened; `faults` lists every reason."""

    @classmethod
    def of(cls, faults: tuple[Fault, ...]) -> InvalidPartError:
        """Make the error for a non-empty tuple of faults; the first one gives the wording."""
        first = faults[0]
        more = f" (and {len(faults) - 1} more)" if len(faults) > 1 else ""
        return cls(first.cause + more, first.mend, faults)


class MeshingError(ScreenappError):
    """No acceptable mesh could be made, or the meshing process ended unexpectedly."""


class SolvingError(ScreenappError):
    """The equations could not be solved to an acceptable residual."""


class Cancelled(Exception):
    """The user cancelled the work in hand; nothing is lost."""
