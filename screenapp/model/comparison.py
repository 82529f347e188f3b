"""What differs between two parts, and what that did to each utilisation."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from screenapp.model.findings import Findings, LimitFindings, Verdict
from screenapp.model.part import Part
from screenapp.model.part_tree import tree_of_part, without_blanks


@dataclass(frozen=True)
class Change:
    """A field that differs; `before` or `after` is None where it is not there at all."""

    field: str
    before: str | None
    after: str | None


@dataclass(frozen=True)
class UseChange:
    """What a limit uses in a case, before and after; None where it is judged only once."""

    limit: str
    case: str
    before: LimitFindings | None
    after: LimitFindings | None

    @property
    def difference(self) -> float | None:
        """By how much the utilisation rose; None where one of the two is no settled number."""
        if self.before is None or self.after is None:
            return None
        one, other = self.before.utilisation, self.after.utilisation
        if one.trust != "settled" or other.trust != "settled":
            return None
        return other.value - one.value

    @property
    def clear(self) -> bool:
        """Whether the two bands lie apart, so that the change is more than a matter of mesh."""
        if self.before is None or self.after is None or self.difference is None:
            return False
        one, other = self.before.utilisation, self.after.utilisation
        return one.high < other.low or other.high < one.low


@dataclass(frozen=True)
class Comparison:
    """Two screenings side by side."""

    changes: tuple[Change, ...]
    uses: tuple[UseChange, ...]
    verdicts: tuple[Verdict, Verdict]
    masses: tuple[float, float]
    titles: tuple[str, str]


def compare(first: tuple[Part, Findings], second: tuple[Part, Findings]) -> Comparison:
    """Compare two screened parts, the first being what was before."""
    (part_a, found_a), (part_b, found_b) = first, second
    return Comparison(
        changes(part_a, part_b),
        _uses(found_a, found_b),
        (found_a.verdict, found_b.verdict),
        (found_a.mass_kg, found_b.mass_kg),
        (part_a.title, part_b.title),
    )


def changes(before: Part, after: Part) -> tuple[Change, ...]:
    """Every field of the part file that differs, in the order of the file.

    Things with an id are told apart by it, so that a corner put in between changes one entry and
    not all that follow.
    """
    one, other = _fields(before), _fields(after)
    order = list(dict.fromkeys((*one, *other)))
    return tuple(
        Change(field, one.get(field), other.get(field))
        for field in order
        if one.get(field) != other.get(field)
    )


def _fields(part: Part) -> dict[str, str]:
    """Dotted path and text of every value of the file."""
    flat: dict[str, str] = {}
    _flatten(without_blanks(tree_of_part(part)), "", flat)
    for formula in part.formulas:
        flat[formula.field] = formula.text
    flat.pop("version", None)
    return flat


def _flatten(value: Any, path: str, into: dict[str, str]) -> None:
    dot = f"{path}." if path else ""
    if isinstance(value, dict):
        for key, item in value.items():
            if key != "id":
                _flatten(item, f"{dot}{key}", into)
    elif isinstance(value, list):
        for number, item in enumerate(value):
            name = str(number)
            if isinstance(item, dict):
                name = str(item.get("id", item.get("name", item.get("case", number))))
            _flatten(item, f"{dot}{name}", into)
    else:
        into[path] = f"{value:.10g}" if isinstance(value, float) else str(value)


def _uses(before: Findings, after: Findings) -> tuple[UseChange, ...]:
    """Limits by id and case; the words are those of the later screening where it has them."""
    names = {c.case: c.name for f in (before, after) for c in f.cases}
    one = {(g.limit, g.case, g.rule): g for g in before.limits}
    other = {(g.limit, g.case, g.rule): g for g in after.limits}
    rows = []
    for key in dict.fromkeys((*one, *other)):
        was, now = one.get(key), other.get(key)
        named = now or was
        assert named is not None
        rows.append(UseChange(named.name, names.get(key[1], key[1]), was, now))
    return tuple(rows)
