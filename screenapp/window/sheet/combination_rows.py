"""The rows for combinations in the fourth paragraph, and what is changed in them."""

from __future__ import annotations

from functools import partial

from screenapp.model import edit_combinations as edits
from screenapp.model.part import Combination
from screenapp.window.document import Document
from screenapp.window.sheet.changes import remove
from screenapp.window.sheet.pieces import Link, Piece, Value
from screenapp.window.sheet.quantities import Quantities
from screenapp.window.sheet.resultant_words import case_words
from screenapp.window.sheet.rows import RowOf


def combination_row(document: Document, combination: Combination) -> RowOf:
    """Name, then factor and case of every case: one that is left out has the factor 0."""
    part, id_ = document.part, combination.id
    q = Quantities.of(document)
    factors = {term.case: term.factor for term in combination.terms}
    pieces: list[Piece | str] = []
    for case in part.cases:
        if pieces:
            pieces.append(" + ")
        pieces += [
            q.value(
                f"factor {case.id}",
                factors.get(case.id, 0.0),
                "number",
                f"Factor of “{case.name}”",
                partial(_set_factor, document, id_, case.id),
                "0 leaves the case out",
            ),
            f" × {case.name}",
        ]
    name = Value(
        "name", combination.name, "Name of the combination", lambda t: _rename(document, id_, t)
    )
    return RowOf(
        id_,
        (name,),
        (*pieces, *case_words(document, id_)),
        lambda: remove(document, id_),
        f"Remove the combination {combination.name}",
    )


def add_link(document: Document) -> Link:
    """Adds a combination of all cases, and shows it on the board."""
    return Link(
        "add combination",
        "+ combination",
        lambda _key: add(document),
        "Add a combination: cases that act together, each with its factor",
    )


def add(document: Document) -> None:
    """Add a combination of all cases."""
    part = edits.add_combination(document.part)
    document.apply(f"combination {part.combinations[-1].name}", part)
    document.select(part.combinations[-1].id)


def _set_factor(document: Document, combination: str, case: str, factor: float) -> None:
    part = edits.set_factor(document.part, combination, case, factor)
    document.apply(f"factor in combination {combination}", part)


def _rename(document: Document, combination: str, name: str) -> None:
    part = edits.rename_combination(document.part, combination, name)
    document.apply(f"name of combination {name.strip()}", part)
