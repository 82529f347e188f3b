"""What every edit shares: new ids, refusals, and formulas that give way to a new number."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable
from dataclasses import dataclass, replace

from screenapp.model.errors import Fault, ScreenappError
from screenapp.model.extents import FARTHEST
from screenapp.model.features import Found, everything, find
from screenapp.model.limit_faults import limit_faults
from screenapp.model.material_faults import material_faults
from screenapp.model.part import Loop, LoopHole, Part, Point, Zone
from screenapp.model.size_faults import id_faults, size_faults
from screenapp.model.value_faults import (
    mesh_faults,
    reading_faults,
    wall_faults,
)

Check = Callable[[Part], Iterable[Fault]]


@dataclass(frozen=True)
class Outcome:
    """A part after an edit that may take more away than was asked.

    `lost` names what else went, e.g. "load l2 on edge e3"; empty if nothing.
    """

    part: Part
    lost: tuple[str, ...] = ()


class EditError(ScreenappError):
    """An edit was refused; the part is as it was."""


def new_id(part: Part, prefix: str) -> str:
    """An id that the part does not use yet: the prefix and the number after the largest one.

    Prefixes: c corner, e edge, h hole, z zone, s support, k case, l load, g limit, p probe.

    Example:
        >>> new_id(Part(), "h")
        'h1'
    """
    return new_ids(part, prefix, 1)[0]


def new_ids(part: Part, prefix: str, count: int) -> list[str]:
    """As `new_id`, for several at once."""
    numbers = [
        int(rest)
        for found in everything(part)
        if (id_ := found.record.id).startswith(prefix)
        and (rest := id_[len(prefix) :]).isdecimal()
        and len(rest) < 10
    ]
    first = max(numbers, default=0) + 1
    return [f"{prefix}{first + i}" for i in range(count)]


def must_find(part: Part, id_: str, *kinds: str) -> Found:
    """What `id_` stands for, which must be of one of the kinds.

    Raises:
        EditError: nothing bears the id, or it is something else.
    """
    found = find(part, id_)
    if found is None:
        raise EditError(f"nothing in the part is called “{id_}”", "choose something that is there")
    if kinds and found.kind not in kinds:
        raise EditError(f"{id_} is a {found.kind}, not a {' or '.join(kinds)}", "choose another")
    return found


def must_be_point(p: Point, name: str) -> Point:
    """The point with both numbers finite and not beyond what a part may have.

    Raises:
        EditError: otherwise.
    """
    x, y = float(p[0]), float(p[1])
    if not (math.isfinite(x) and math.isfinite(y)):
        raise EditError(f"{name} would not be at a finite place", "give finite numbers in mm")
    if max(abs(x), abs(y)) > FARTHEST:
        raise EditError(
            f"{name} would be at ({x:.4g}, {y:.4g}) mm",
            f"stay within {FARTHEST:g} mm of the origin",
        )
    return x, y


def settle(before: Part, after: Part, *more: Check) -> Part:
    """The edited part, if the edit brought no nonsense; formulas of changed fields are dropped.

    `more` are checks beyond those of ids, sizes and values; what was wrong before is let be.

    Raises:
        EditError: the edit made a record that is wrong by itself.
    """
    checks: tuple[Check, ...] = (
        id_faults,
        size_faults,
        wall_faults,
        material_faults,
        limit_faults,
        lambda part: mesh_faults(part.mesh),
        reading_faults,
        *more,
    )
    known = {fault.cause for check in checks for fault in check(before)}
    new = [
        fault
        for check in checks
        for fault in check(after)
        if fault.blocks and fault.cause not in known
    ]
    if new:
        raise EditError(new[0].cause, new[0].mend, tuple(new))
    return without_stale_formulas(before, after)


def without_stale_formulas(before: Part, after: Part) -> Part:
    """`after` without the formulas whose field the edit changed or removed."""
    if not after.formulas:
        return after
    kept = tuple(
        f
        for f in after.formulas
        if (value := value_at(after, f.field)) is not None and value == value_at(before, f.field)
    )
    return after if kept == after.formulas else replace(after, formulas=kept)


def value_at(part: Part, field: str) -> float | None:
    """The number at a dotted path such as "outline.corners.c3.at.0", None if there is none.

    Ids and names may hold dots themselves: a path leads on by the id that it begins with.
    """
    node: object = part
    rest = field
    while rest:
        if isinstance(node, Zone) and not rest.startswith("thickness"):
            node = node.form
        if isinstance(node, LoopHole):
            node = node.loop
        if isinstance(node, tuple) and node and not isinstance(node[0], float):
            names = [(str(getattr(x, "id", "") or getattr(x, "name", "")), x) for x in node]
            hit = [(n, x) for n, x in names if n and (rest == n or rest.startswith(n + "."))]
            if not hit and not any(name for name, _ in names):  # told by their places
                word, _, rest = rest.partition(".")
                node = node[int(word)] if word.isdecimal() and int(word) < len(node) else None
                continue
            if not hit:
                return None
            name, node = max(hit, key=lambda pair: len(pair[0]))
            rest = rest[len(name) + 1 :]
            continue
        word, _, rest = rest.partition(".")
        if node is part and word == "readings":  # the file lists probes and cuts together
            node = (*part.readings, *part.cuts)
        elif isinstance(node, tuple):
            node = node[int(word)] if word.isdecimal() and int(word) < len(node) else None
        else:
            node = getattr(node, word, None)
        if node is None:
            return None
    return float(node) if isinstance(node, int | float) else None


def with_loop(part: Part, owner: str, loop: Loop) -> Part:
    """The part with the outline (`owner` "") or the loop of a hole or zone replaced."""
    if not owner:
        return replace(part, outline=loop)
    if any(z.id == owner for z in part.zones):
        return replace(
            part,
            zones=tuple(
                replace(z, form=LoopHole(z.id, loop)) if z.id == owner else z for z in part.zones
            ),
        )
    return replace(
        part,
        holes=tuple(
            LoopHole(h.id, loop) if h.id == owner and isinstance(h, LoopHole) else h
            for h in part.holes
        ),
    )


def loop_of(part: Part, owner: str) -> Loop:
    """The outline (`owner` "") or the loop of a hole or zone.

    Raises:
        EditError: there is none.
    """
    if not owner and part.outline is not None:
        return part.outline
    for form in (*part.holes, *(z.form for z in part.zones)):
        if form.id == owner and isinstance(form, LoopHole):
            return form.loop
    raise EditError("there is no such loop", "draw an outline first")
