"""What the supports give in a case, as rows of the sheet; of a group of bolts each of them."""

from __future__ import annotations

import math

from screenapp.model.features import find, place_name
from screenapp.model.findings import CaseFindings
from screenapp.model.line_force_text import line_force_text
from screenapp.model.part import Part
from screenapp.model.solution import Reaction
from screenapp.window.sheet.direction import direction_text
from screenapp.window.sheet.pieces import Words
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.rows import RowOf

MOST_BOLTS = 12
"""Of a larger group the most loaded ones are told."""

ROUNDING = 1e-7
"""A reaction below this share of the force that a millimetre of the most stressed wall carries is
rounding."""


def reaction_rows(part: Part, case: CaseFindings, quiet: bool) -> list[RowOf]:
    """A row for each support and each of its bolts; `quiet` where they are out of date."""
    q = Quantities(part.display_units)
    rows = []
    largest = max((abs(peak.estimate.value) for peak in case.peaks), default=0.0)
    nothing = ROUNDING * largest * part.wall.thickness  # times a millimetre: a force [N]
    for reaction in case.reactions:
        found = find(part, reaction.support)
        on = getattr(found.record, "on", "") if found else ""
        where = place_name(part, on) if on else reaction.support
        words = Words(
            f"{_gives(reaction.x, reaction.y, nothing, q)} in {case.name}",
            quiet=quiet,
        )
        rows.append(RowOf(reaction.support, (where,), (words,), also=(on,)))
        rows += [
            RowOf(
                f"{force.support} length",
                (),
                (Words(f"it {line_force_text(force, part.display_units)}", quiet=True),),
                also=(on,),
                selects=False,
            )
            for force in case.line_forces
            if force.support == reaction.support
        ]
        rows += _bolt_rows(reaction, nothing, case.name, q)
    return rows


def _bolt_rows(reaction: Reaction, nothing: float, case: str, q: Quantities) -> list[RowOf]:
    sized = sorted(reaction.bolts, key=lambda b: -math.hypot(b.x, b.y))
    rows = []
    for bolt in sized[:MOST_BOLTS]:
        text = f"its bolt {_gives(bolt.x, bolt.y, nothing, q)} in {case}"
        rows.append(
            RowOf(
                f"{reaction.support} {bolt.on}",
                (f"hole {bolt.on}",),
                (Words(text, quiet=True),),
                also=(bolt.on,),
                selects=False,
            )
        )
    if len(sized) > MOST_BOLTS:
        text = f"{len(sized) - MOST_BOLTS} more bolts carry no more than that"
        rows.append(
            RowOf(f"{reaction.support} rest", (), (Words(text, quiet=True),), selects=False)
        )
    return rows


def _gives(x: float, y: float, nothing: float, q: Quantities) -> str:
    size = math.hypot(x, y)
    if size < nothing:
        return "carries nothing"
    return f"gives {q.show(three(size), 'force')} {way_text(x, y)}"


def way_text(x: float, y: float) -> str:
    """The direction of a force in words or degrees; "" for none."""
    size = math.hypot(x, y)
    if size == 0.0:
        return ""
    # a component below a thousandth is nothing to a reader
    flat = [0.0 if abs(v) < 1e-3 * size else v for v in (x, y)]
    text = direction_text(*flat)
    return text if not text.endswith("°") else f"at {float(text[:-1]):.0f}°"


def three(value: float) -> float:
    """A number to three figures."""
    return float(f"{value:.3g}")
