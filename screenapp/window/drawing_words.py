"""The sentences of the panel that brings a drawing in."""

from __future__ import annotations

from collections.abc import Callable

from screenapp.exchange import report
from screenapp.exchange.bringing_in import Candidate
from screenapp.exchange.drawing import Drawing, Remark
from screenapp.model.errors import ScreenappError
from screenapp.model.part import DisplayUnits, Point
from screenapp.model.units import format_quantity
from screenapp.window.sheet.pieces import Choice, Link, Piece, Value, Words

UNITS = ("mm", "cm", "m", "in", "ft", "thou")

Commit = Callable[[str], None]


def unit_sentence(drawing: Drawing, unit: str | None, commit: Commit) -> tuple[Piece | str, ...]:
    """In which unit the drawing is, and who says so."""
    names = list(UNITS)
    if drawing.unit is not None and drawing.unit not in names:
        names.append(drawing.unit)

    def choices() -> tuple[Choice, ...]:
        remark = "as the file says"
        return tuple(Choice(n, n, remark if n == drawing.unit else "") for n in names)

    shown = unit or "choose a unit"
    value = Value("unit", shown, "Unit of the drawing", commit, choices)
    if unit is None:
        hint = f", only that it is {drawing.system}" if drawing.system else ""
        asks = Words(f"The file does not say in which unit it is drawn{hint}. ", colour="bad")
        return (asks, "It is drawn in ", value, ".")
    if unit == drawing.unit:
        return ("It is drawn in ", value, Words(", as the file says.", quiet=True))
    return ("It is drawn in ", value, ".")


def tolerance_sentence(
    tolerance: float, units: DisplayUnits, commit: Commit
) -> tuple[Piece | str, ...]:
    """What the tolerance does."""
    value = Value(
        "tolerance",
        format_quantity(tolerance, "length", units),
        "Tolerance",
        commit,
        hint="0.02 mm or 0.001 in",
    )
    return ("Gaps up to ", value, " are closed, and splines are fitted within it.")


def outline_sentence(
    candidates: tuple[Candidate, ...], wanted: int | None, commit: Commit
) -> tuple[Piece | str, ...]:
    """Which of several outlines the part is; nothing for a single one."""
    if len(candidates) < 2:
        return ()

    def words(number: int) -> str:
        candidate = candidates[number - 1]
        holes = "1 hole" if candidate.holes == 1 else f"{candidate.holes} holes"
        inside = ", inside a hole" if candidate.inside else ""
        return f"{report.extent(candidate.bounds)}, {holes}{inside}"

    def choices() -> tuple[Choice, ...]:
        shown = range(1, min(len(candidates), 40) + 1)
        return tuple(Choice(str(k), words(k)) for k in shown)

    chosen = words(wanted) if wanted is not None else "choose one"
    value = Value("outline", chosen, "Which outline", commit, choices)
    return (f"It shows {len(candidates)} outlines. The part is ", value, ".")


def remark_pieces(
    remark: Remark, show: Callable[[Point], None], turn: list[int]
) -> tuple[Piece | str, ...]:
    """A remark with a link that shows its places, one after another; `turn` counts them."""
    colour = {"open": "bad", "branch": "doubt", "gap": "doubt"}.get(remark.kind, "")
    words = Words(remark.text, colour=colour, quiet=not colour)
    if not remark.at:
        return (words,)

    def next_place(_key: str) -> None:
        show(remark.at[turn[0] % len(remark.at)])
        turn[0] += 1

    text = "Show it" if len(remark.at) == 1 else "Show one by one"
    return (words, " ", Link("show", text, next_place, "Bring the place near in the preview"))


def not_understood(error: Exception) -> ScreenappError:
    """What is told of an error that nobody foresaw."""
    text = str(error).strip().splitlines()
    detail = f": {text[0]}" if text else ""
    return ScreenappError(
        f"the drawing could not be understood ({type(error).__name__}{detail})",
        "export it again in another version of DXF, and report this if it comes back",
    )
