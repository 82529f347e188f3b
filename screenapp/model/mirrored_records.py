"""Supports and loads of a half, mirrored with it: what stands on the other half.

An edge that runs on across the mirror line is one edge of the whole.  What is the same on both of
its halves stands on all of it; else each half has its own, on part of the edge.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field, replace
from typing import Any

from screenapp.model.edge_parts import edge_length
from screenapp.model.edit_rules import new_id
from screenapp.model.part import (
    BodyLoad,
    BoltSupport,
    ForceLoad,
    Load,
    MisfitLoad,
    MomentLoad,
    Part,
    Point,
    PointLoad,
    PrescribedSupport,
    PressureLoad,
    RollerSupport,
    ShearLoad,
    Support,
    TemperatureLoad,
)
from screenapp.model.shape import Shape

Vector = Callable[[float, float], Point]


@dataclass
class Images:
    """Which place is the image of which.

    Attributes:
        of: by id; an edge that runs on, and a corner that stays on the line, is its own.
        joined: edges that run on across the line; True where the image is their first half.
        turned: edges whose image is drawn the other way.
        zones: image of each zone.
    """

    of: dict[str, str] = field(default_factory=dict)
    joined: dict[str, bool] = field(default_factory=dict)
    turned: set[str] = field(default_factory=set)
    zones: dict[str, str] = field(default_factory=dict)

    def place(self, on: str) -> str | None:
        """The image of a place; a member of a pattern goes with the whole."""
        whole, dot, rest = on.partition(".")
        image = self.of.get(on) or (self.of.get(whole) if dot else None)
        return None if image is None else image if on in self.of else f"{image}.{rest}"


def with_images(
    part: Part,
    shape: Shape,
    images: Images,
    vector: Vector,
    turned: Callable[[float], float],
    upright: bool,
) -> tuple[Part, tuple[str, ...]]:
    """The whole part with the images of its supports and loads, and what could not be mirrored.

    Args:
        part: the whole, its supports and loads as they stood on the half.
        shape: of the whole, without cuts where loads begin and end.
        vector, turned: mirror a vector, and a direction [deg].
        upright: whether the line is level or upright, so that x and y stay x and y.
    """
    made = _Made(part, shape, images, vector, turned, upright)
    for support in part.supports:
        made.support(support)
    for case in part.cases:
        made.case(case.id, case.loads)
    return made.part, tuple(made.lost)


class _Made:
    def __init__(
        self,
        part: Part,
        shape: Shape,
        images: Images,
        vector: Vector,
        turned: Callable[[float], float],
        upright: bool,
    ) -> None:
        self.part = part
        self.lost: list[str] = []
        self._shape = shape
        self._images = images
        self._vector = vector
        self._turned = turned
        self._upright = upright
        self._copies: dict[str, str] = {}

    def support(self, support: Support) -> None:
        """Add its image."""
        found = list(self._pair(support, self._support_image(support)))
        if self._support_image(support) is None:
            self.lost.append(f"the mirror image of support {support.id}")
        kept = [s for s in self.part.supports if s.id != support.id]
        at = [s.id for s in self.part.supports].index(support.id)
        supports = [*kept[:at], found[0], *kept[at:]]
        self.part = replace(self.part, supports=tuple(supports))
        for image in found[1:]:
            new = replace(image, id=new_id(self.part, "s"))
            self._copies[support.id] = new.id
            self.part = replace(self.part, supports=(*self.part.supports, new))

    def case(self, case: str, loads: tuple[Load, ...]) -> None:
        """Add the images of a case's loads."""
        for load in loads:
            found = list(self._loads(load))
            for k, each in enumerate(found):
                new = each if k == 0 else replace(each, id=new_id(self.part, "l"))
                self.part = self._put(case, load.id if k == 0 else None, new)

    def _put(self, case: str, old: str | None, load: Load) -> Part:
        cases = []
        for each in self.part.cases:
            if each.id == case:
                listed = [load if x.id == old else x for x in each.loads]
                each = replace(each, loads=(*listed, load) if old is None else tuple(listed))
            cases.append(each)
        return replace(self.part, cases=tuple(cases))

    def _loads(self, load: Load) -> Iterator[Load]:
        """The load as it stands on the whole, then its image if that is another one."""
        if isinstance(load, MisfitLoad):
            yield load
            if load.support in self._copies:
                x, y = self._vector(load.x, load.y)
                yield replace(load, support=self._copies[load.support], x=x, y=y)
        elif isinstance(load, BodyLoad):
            yield load
            if isinstance(load, TemperatureLoad) and load.zone in self._images.zones:
                x, y = self._vector(load.x, load.y)
                yield replace(load, zone=self._images.zones[load.zone], x=x, y=y)
        else:
            yield from self._pair(load, self._load_image(load))

    def _load_image(self, load: Load) -> Load:
        if isinstance(load, ShearLoad):
            return replace(load, per_length=-load.per_length)
        if isinstance(load, MomentLoad):
            return replace(load, moment=-load.moment)
        if isinstance(load, PressureLoad):
            return load
        x, y = self._vector(load.x, load.y)
        changes: dict[str, Any] = {"x": x, "y": y}
        if getattr(load, "end_x", None) is not None or getattr(load, "end_y", None) is not None:
            last_x = load.x if load.end_x is None else load.end_x  # type: ignore[union-attr]
            last_y = load.y if load.end_y is None else load.end_y  # type: ignore[union-attr]
            changes["end_x"], changes["end_y"] = self._vector(last_x, last_y)
        return replace(load, **changes)

    def _support_image(self, support: Support) -> Support | None:
        if isinstance(support, RollerSupport) and support.angle is not None:
            return replace(support, angle=self._turned(support.angle) % 180.0)
        if isinstance(support, PrescribedSupport):
            if None in (support.x, support.y) and not self._upright:
                return None  # it would hold a slanted direction alone
            x, y = self._vector(support.x or 0.0, support.y or 0.0)
            return replace(
                support,
                x=None if support.x is None else x,
                y=None if support.y is None else y,
            )
        if isinstance(support, BoltSupport):
            also = (self._images.place(on) for on in support.also)
            return replace(support, also=tuple(on for on in also if on is not None))
        return support

    def _pair(self, record: Any, image: Any) -> Iterator[Any]:
        """The record on the whole, and its image where that is not the same thing."""
        on = self._images.place(record.on)
        if image is None or on is None:
            yield record
        elif record.on in self._images.joined:
            yield from self._on_joined(record, image)
        elif on == record.on:  # a corner on the line: what acts there acts from both sides
            if isinstance(record, PointLoad):
                yield replace(record, x=record.x + image.x, y=record.y + image.y)
            else:
                yield record
        else:
            yield record
            yield (
                self._reversed(replace(image, on=on), on)
                if record.on in (self._images.turned)
                else replace(image, on=on)
            )

    def _on_joined(self, record: Any, image: Any) -> Iterator[Any]:
        whole = edge_length(self._shape, record.on)
        half = 0.5 * whole
        first = self._images.joined[record.on]
        shift = half if first else 0.0
        if isinstance(record, PointLoad):
            along = (record.along or 0.0) + shift
            yield replace(record, along=along)
            yield replace(image, along=whole - along)
            return
        if not hasattr(record, "end"):
            yield record
            return
        varies = any(getattr(record, f"end_{k}", None) is not None for k in ("pressure", "x", "y"))
        if (record.start, record.end) == (None, None) and not varies and record == image:
            both = isinstance(record, ForceLoad)
            yield replace(record, x=2.0 * record.x, y=2.0 * record.y) if both else record
            return
        start = (record.start or 0.0) + shift
        end = (half if record.end is None else record.end) + shift
        yield replace(record, start=start, end=end)
        yield _swapped(replace(image, start=whole - end, end=whole - start))

    def _reversed(self, image: Any, edge: str) -> Any:
        """An image on an edge that is drawn the other way: lengths count from its other end."""
        whole = edge_length(self._shape, edge)
        if isinstance(image, PointLoad):
            return image if image.along is None else replace(image, along=whole - image.along)
        if not hasattr(image, "end"):
            return image
        start = None if image.end is None else whole - image.end
        end = None if image.start is None else whole - image.start
        return _swapped(replace(image, start=start, end=end))


def _swapped(load: Any) -> Any:
    """A varying load with its values at both ends exchanged."""
    if getattr(load, "end_pressure", None) is not None:
        return replace(load, pressure=load.end_pressure, end_pressure=load.pressure)
    if getattr(load, "end_x", None) is not None or getattr(load, "end_y", None) is not None:
        return replace(load, x=load.end_x, y=load.end_y, end_x=load.x, end_y=load.y)
    return load
