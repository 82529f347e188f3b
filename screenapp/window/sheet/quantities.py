"""Numbers of the sheet as text and back, in the units that the part is shown in."""

from __future__ import annotations

import math
import re
from collections.abc import Callable
from dataclasses import dataclass

from screenapp.model.edit_dimensions import formula_at
from screenapp.model.errors import ScreenappError
from screenapp.model.kinds import KINDS, KindName
from screenapp.model.part import DisplayUnits
from screenapp.model.sized_vectors import given_vector, stored_size
from screenapp.model.typed_values import Typed, read_typed, shown_formula
from screenapp.model.units import format_number, format_quantity, parse_quantity
from screenapp.window.document import Document
from screenapp.window.sheet.direction import direction_of
from screenapp.window.sheet.pieces import Value

SIGN = "=\u2009"
"""Stands before a value that an expression gives."""

_BARE = re.compile(r"[\d\s.,+\-−eE/]+")


@dataclass(frozen=True)
class Quantities:
    """Shows and reads quantities.

    Beside the kinds of `model.kinds` it knows "modulus" (shown in GPa or ksi) and "count".  Of a
    document (see `of`) it also takes expressions in the named dimensions.
    """

    units: DisplayUnits
    document: Document | None = None

    @classmethod
    def of(cls, document: Document) -> Quantities:
        """The quantities of a document's part."""
        return cls(document.part.display_units, document)

    def show(self, value: float, kind: str) -> str:
        """A value with its unit."""
        if kind == "count":
            return str(round(value))
        if kind == "modulus":
            if self.units == "mm-N-MPa":
                return f"{format_number(value / 1000.0, 'stress')} GPa"
            kind = "stress"
        if kind == "mass" and self.units == "mm-N-MPa" and value < 1.0:
            return f"{format_number(value * 1000.0, 'number', digits=3)} g"
        return format_quantity(value, _known(kind), self.units)

    def bare(self, value: float, kind: str) -> str:
        """A value without its unit."""
        return format_number(value, _known(kind), self.units)

    def read(self, text: str, kind: str) -> float:
        """The stored value of what was typed.

        Raises:
            ScreenappError: it is no quantity of this kind.
        """
        if kind == "count":
            value = parse_quantity(text, "number", self.units)
            if value != round(value):
                raise ScreenappError(f"“{text}” is not a whole number", "type one such as 3")
            return value
        if kind == "modulus":
            if self.units == "mm-N-MPa" and _BARE.fullmatch(text):
                text = f"{text} GPa"
            kind = "stress"
        return self.read_expression(text, kind).value

    def read_expression(self, text: str, kind: str) -> Typed:
        """What was typed, with the expression if it is one."""
        if kind in ("count", "modulus"):
            return Typed(self.read(text, kind))
        dimensions = self.document.part.dimensions if self.document is not None else ()
        return read_typed(text, _known(kind), self.units, dimensions)

    def formula(self, field: str, kind: str) -> str:
        """The expression at a field of the part as it is typed; "" if there is none."""
        if self.document is None or not field or kind in ("count", "modulus"):
            return ""
        part = self.document.part
        text = formula_at(part, field)
        if text is None:
            return ""
        return shown_formula(text, _known(kind), self.units, part.dimensions)

    def _put(self, text: str, kind: str, set_: Callable[[float], None], field: str) -> None:
        """Set what was typed, and keep the expression if it is one."""
        typed = self.read_expression(text, kind)
        if self.document is None or not field:
            set_(typed.value)
            return
        with self.document.keeping({field: typed.formula}):
            set_(typed.value)

    def typed(self, value: float, kind: str) -> str:
        """The text to begin typing with: all figures, so that accepting it changes nothing."""
        if kind in ("count", "modulus"):
            return self.show(value, kind)
        number = format_number(value, _known(kind), self.units, None)
        label = KINDS[_known(kind)].shown(self.units)[0]
        return number + label if label in ("", "°") else f"{number} {label}"

    def value(
        self,
        key: str,
        value: float,
        kind: str,
        name: str,
        set_: Callable[[float], None],
        hint: str = "",
        field: str = "",
    ) -> Value:
        """A number of a sentence that can be typed anew; `set_` takes the stored value.

        `field` is its dotted path in the part file, where an expression is kept.
        """
        formula = self.formula(field, kind)
        return Value(
            key,
            (SIGN if formula else "") + self.show(value, kind),
            name,
            lambda text: self._put(text, kind, set_, field),
            hint=hint or self._hint(kind),
            typed=formula or self.typed(value, kind),
            formula=formula,
        )

    def size_value(
        self,
        at: tuple[float, float],
        kind: str,
        name: str,
        resize: Callable[[float], None],
        put: Callable[[float, float], None],
        field: str,
    ) -> Value:
        """The size of a vector, which takes an expression and keeps it in both components.

        Args:
            at: the vector.
            resize: sets a plain size, the direction stays.
            put: sets both components.
            field: dotted path of the record that has `x` and `y`.
        """

        def commit(text: str) -> None:
            typed = self.read_expression(text, kind)
            if typed.formula is None or self.document is None:
                resize(typed.value)
                return
            part = self.document.part
            x, y, texts = given_vector(part, field, typed.formula, direction_of(*at))
            with self.document.keeping(texts):
                put(x, y)

        formula = ""
        if self.document is not None:
            part = self.document.part
            stored = stored_size(part, field, at)
            if stored is not None:
                formula = shown_formula(stored, _known(kind), self.units, part.dimensions)
        size = math.hypot(*at)
        parts = f"x {self.show(at[0], kind)}, y {self.show(at[1], kind)}"
        return Value(
            "size",
            (SIGN if formula else "") + self.show(size, kind),
            name,
            commit,
            hint=f"Now {parts}",
            typed=formula or self.typed(size, kind),
            formula=formula,
        )

    def optional_value(
        self,
        key: str,
        value: float | None,
        kind: str,
        name: str,
        set_: Callable[[float | None], None],
        none: str = "not given",
        field: str = "",
    ) -> Value:
        """As `value`, but it may be missing: an empty text or the word `none` leaves it out."""

        def commit(text: str) -> None:
            if not text.strip() or text.strip() == none:
                set_(None)
            else:
                self._put(text, kind, set_, field)

        formula = self.formula(field, kind)
        shown = none if value is None else (SIGN if formula else "") + self.show(value, kind)
        return Value(
            key,
            shown,
            name,
            commit,
            hint=f"{self._hint(kind)}; empty: {none}",
            typed=formula or ("" if value is None else self.typed(value, kind)),
            formula=formula,
        )

    def _hint(self, kind: str) -> str:
        if kind in ("count", "number"):
            return "Enter or click to type"
        if kind == "modulus":
            kind = "stress"
        return f"Type e.g. {KINDS[_known(kind)].example}, or an expression"


def _known(kind: str) -> KindName:
    names: dict[str, KindName] = {
        "displacement": "length",
        "line load": "line_load",
        "share": "ratio",
        "modulus": "stress",
    }
    if kind in names:
        return names[kind]
    for name in KINDS:
        if name == kind:
            return name
    raise KeyError(kind)


def grouped(n: int) -> str:
    """A whole number with its thousands set apart by thin spaces.

    Example:
        >>> grouped(6480)
        '6\\u202f480'
    """
    return f"{n:,}".replace(",", "\u202f")


def percent(share: float) -> str:
    """A share as a percentage with two figures."""
    return f"{100.0 * share:.2g} %" if math.isfinite(share) else "unknown"


def power(value: float) -> str:
    """A small number as a power of ten: 3·10⁻¹².

    Example:
        >>> power(3.2e-12), power(0.0)
        ('3·10⁻¹²', '0')
    """
    if value == 0.0 or not math.isfinite(value):
        return "0" if value == 0.0 else "no value"
    mantissa, exponent = f"{value:.0e}".split("e")
    raised = str(int(exponent)).translate(str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹"))
    return f"{mantissa}·10{raised}"
