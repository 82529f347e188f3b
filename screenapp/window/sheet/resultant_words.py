"""What loads amount to, in words for the sheet."""

from __future__ import annotations

from screenapp.model.part import Case
from screenapp.model.solution import LoadResultant
from screenapp.window.document import Document
from screenapp.window.load_amounts import together_id
from screenapp.window.sheet.pieces import Link, Words
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.rows import RowOf

KEY = "Fx, Fy, M: what loads amount to; M about the origin, counter-clockwise positive."
"""What the letters mean; stands once below all cases."""

HELD = "\u00a0"
"""A space at which no line is broken."""


def resultant_text(found: LoadResultant, q: Quantities) -> str:
    """Force along x and y, and moment about the origin (see `KEY`)."""
    if found.at is None:
        return "no force"
    if found.x == found.y == found.moment == 0.0:
        return "balances itself"
    values = (("Fx", found.x, "force"), ("Fy", found.y, "force"), ("M", found.moment, "moment"))
    texts = (f"{name} {q.show(value, kind)}" for name, value, kind in values)
    return ", ".join(text.replace(" ", HELD) for text in texts)


def load_words(document: Document, case: str, load: str) -> tuple[Words, ...]:
    """What a load amounts to, to follow its sentence; nothing where it is not known."""
    found = document.amounts.of(load, case)
    if found is None:
        return ()
    q = Quantities(document.part.display_units)
    return (Words(f" –{HELD}{resultant_text(found, q)}", quiet=True),)


def case_words(document: Document, case: str) -> tuple[Words, ...]:
    """What all loads of a case or combination amount to, to follow its sentence."""
    found = document.amounts.totals.get(case)
    if found is None or found.at is None:
        return ()
    q = Quantities(document.part.display_units)
    return (Words(f" –{HELD}{resultant_text(found, q)}", quiet=True),)


def together_rows(document: Document, case: Case) -> list[RowOf]:
    """What the loads of a case amount to together; nothing for a single load."""
    found = document.amounts.totals.get(case.id)
    if found is None or len(case.loads) < 2:
        return []
    id_ = together_id(case.id)
    shown = Link(
        "together",
        "together",
        lambda _key: document.select(id_),
        f"Show on the board what the loads of {case.name} amount to",
    )
    text = resultant_text(found, Quantities(document.part.display_units))
    return [RowOf(id_, (shown,), (Words(text, quiet=True),))]
