"""Named dimensions in the sheet: a row for each, changed in place; what is given by it follows."""

from __future__ import annotations

from collections.abc import Callable

from screenapp.model import edit_dimensions as dimensions
from screenapp.model.errors import ScreenappError
from screenapp.model.field_names import field_words
from screenapp.model.part import Dimension, Measures, Part
from screenapp.window.document import Document
from screenapp.window.sheet.pieces import Choice, Link, Piece, Value, Words
from screenapp.window.sheet.quantities import SIGN, Quantities
from screenapp.window.sheet.rows import RowOf

MEASURES: dict[Measures, str] = {
    "length": "a length",
    "angle": "an angle",
    "number": "a plain number",
}
FIRST: dict[Measures, float] = {"length": 10.0, "angle": 30.0, "number": 1.0}
"""What a new dimension begins with."""

NO_BOUND = "any"


def dimension_rows(document: Document, q: Quantities) -> list[RowOf]:
    """A row for each dimension: its name, value, bounds, and what it measures."""
    return [_row(document, d, q) for d in document.part.dimensions]


def add_link(document: Document) -> Link:
    """Adds a dimension, of the kind that is chosen."""
    return Link(
        "add dimension",
        "+ dimension",
        lambda key: _add(document, key),
        "Name a value; then type its name, or an expression in it, wherever a number stands",
        choices=lambda: tuple(Choice(key, text) for key, text in MEASURES.items()),
    )


def row_id(name: str) -> str:
    """The id of a dimension's row; no thing of the part can have it, for it holds a space."""
    return f"dimension {name}"


def _add(document: Document, key: str) -> None:
    measures: Measures = next(m for m in MEASURES if m == key)
    taken = {d.name for d in document.part.dimensions}
    name = next(n for i in range(1, len(taken) + 2) if (n := f"d{i}") not in taken)
    part = dimensions.add_dimension(document.part, name, FIRST[measures], measures)
    document.apply(f"dimension {name}", part)


def _row(document: Document, dimension: Dimension, q: Quantities) -> RowOf:
    name, kind = dimension.name, dimension.measures
    change = _Change(document, name)
    formula = q.formula(dimensions.value_field(name), kind)
    value = Value(
        "value",
        (SIGN if formula else "") + q.show(dimension.value, kind),
        f"Value of {name}",
        lambda text: change.value(text, kind),
        hint="Type a value, or an expression in other dimensions",
        typed=formula or q.typed(dimension.value, kind),
        formula=formula,
    )
    low, high = (
        q.optional_value(key, bound, kind, f"{word} bound of {name}", change.bound(key), NO_BOUND)
        for key, word, bound in (
            ("lower", "Lower", dimension.lower),
            ("upper", "Upper", dimension.upper),
        )
    )
    measures = Value(
        "measures",
        MEASURES[kind],
        f"What {name} measures",
        change.measures,
        lambda: tuple(Choice(key, text) for key, text in MEASURES.items()),
    )
    pieces: tuple[Piece | str, ...] = (value, ", from ", low, " to ", high, ", ", measures, ". ")
    return RowOf(
        row_id(name),
        (Value("name", name, "Name of the dimension", change.rename, hint="Type another name"),),
        (*pieces, Words(_uses(document.part, name), quiet=True)),
        change.remove,
        f"Remove dimension {name}; its value stays where it is used",
        selects=False,
    )


def _uses(part: Part, name: str) -> str:
    """Where a dimension is used, in a few words."""
    uses = dimensions.uses_of(part, name)
    if not uses:
        return "Not used."
    if len(uses) <= 2:
        return f"Gives {' and '.join(field_words(f.field) for f in uses)}."
    return f"Gives {len(uses)} values."


class _Change:
    """Changes one dimension; each change is one undoable step."""

    def __init__(self, document: Document, name: str) -> None:
        self._document = document
        self._name = name

    def value(self, text: str, kind: str) -> None:
        """Another value or expression."""
        typed = Quantities.of(self._document).read_expression(text, kind)
        new = typed.value if typed.formula is None else typed.formula
        part = dimensions.set_dimension(self._document.part, self._name, new)
        self._document.apply(f"dimension {self._name}", part)

    def rename(self, name: str) -> None:
        """Another name, also wherever it is used."""
        part = dimensions.rename_dimension(self._document.part, self._name, name.strip())
        self._document.apply(f"rename dimension {self._name}", part)

    def bound(self, which: str) -> Callable[[float | None], None]:
        """A function that sets a bound."""

        def put(value: float | None) -> None:
            part = self._document.part
            now = dimensions.dimension_called(part, self._name)
            low = value if which == "lower" else now.lower
            high = value if which == "upper" else now.upper
            changed = dimensions.set_bounds(part, self._name, low, high)
            self._document.apply(f"bounds of {self._name}", changed)

        return put

    def measures(self, key: str) -> None:
        """It measures something else."""
        measures: Measures = next(m for m in MEASURES if m == key)
        part = dimensions.set_measures(self._document.part, self._name, measures)
        self._document.apply(f"what {self._name} measures", part)

    def remove(self) -> None:
        """Take it away; its value stays in its place."""
        document = self._document
        uses = dimensions.uses_of(document.part, self._name)
        try:
            part = dimensions.remove_dimension(document.part, self._name)
        except ScreenappError as error:
            document.said.emit(f"{error.cause}: {error.mend}.")
            return
        document.apply(f"remove dimension {self._name}", part)
        if uses:
            n = len(uses)
            places = "the place" if n == 1 else f"the {n} places"
            document.said.emit(f"The value of {self._name} now stands in {places} that used it.")
