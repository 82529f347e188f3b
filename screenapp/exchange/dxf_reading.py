"""Reads a drawing: walks the model space, takes blocks apart, and sorts what it finds by layer."""

from __future__ import annotations

import gc
from collections import Counter
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from ezdxf.document import Drawing as Document
from ezdxf.entities import DXFGraphic, Insert
from ezdxf.lldxf.const import acad_release

from screenapp.exchange.drawing import Drawing, DrawingError, DrawnCurve, Layer
from screenapp.exchange.dxf_entities import IGNORED, THREE_D, Unusable, curves_of
from screenapp.exchange.dxf_file import READ_SHARE, open_dxf
from screenapp.model.errors import Cancelled
from screenapp.model.progress import SILENT, Progress, Step

MOST = 500_000
"""More curves are refused: no flat part has them."""

OFTEN = 512

UNITS = {
    1: "in",
    2: "ft",
    3: "mile",
    4: "mm",
    5: "cm",
    6: "m",
    7: "km",
    8: "microinch",
    9: "thou",
    10: "yd",
    11: "angstrom",
    12: "nm",
    13: "µm",
    14: "dm",
    15: "dam",
    16: "hm",
}
"""The values of $INSUNITS (DXF reference) that a workpiece may be drawn in."""


def read_drawing(path: Path, progress: Progress = SILENT) -> Drawing:
    """Everything in a DXF file that can be part of a flat shape.

    Raises:
        DrawingError: it cannot be read, holds no line, or far too many.
        Cancelled: the user wanted to stop.
    """
    with without_collection():
        return _read(path, progress)


@contextmanager
def without_collection() -> Iterator[None]:
    """No search for unused cycles meanwhile: millions of new objects would be gone over and over,
    and the window would stand still each time."""
    was_on = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if was_on:
            gc.enable()


def _read(path: Path, progress: Progress) -> Drawing:
    document, repaired = open_dxf(path, progress)
    walk = _Walk(document, path.name, progress)
    try:
        walk.run()
    except (Cancelled, DrawingError):
        raise
    except Exception as error:  # entities of a mended file may lack whatever they should have
        raise DrawingError(
            f"{path.name} holds an entity that cannot be understood ({error})",
            "export the drawing again",
        ) from error
    if not walk.curves:
        raise _nothing(document, path.name, walk.ignored)
    return Drawing(
        name=path.name,
        dialect=acad_release.get(document.loaded_dxfversion or "", "R12"),
        unit=_unit(document),
        system=_system(document),
        curves=tuple(walk.curves),
        layers=_layers(document, walk.curves),
        ignored=tuple(sorted(walk.ignored.items())),
        repaired=repaired,
    )


class _Walk:
    """Goes through the model space."""

    def __init__(self, document: Document, name: str, progress: Progress) -> None:
        self.curves: list[DrawnCurve] = []
        self.ignored: Counter[str] = Counter()
        self._document = document
        self._name = name
        self._progress = progress
        self._seen = 0
        self._dashed: dict[str, bool] = {}

    def run(self) -> None:
        """Collect the curves."""
        space = self._document.modelspace()
        total = max(1, len(space))
        for number, entity in enumerate(space):
            if number % OFTEN == 0:
                done = READ_SHARE + (1.0 - READ_SHARE) * number / total
                self._progress.report(Step("taking the drawing apart", 0, done))
            self._take(entity, str(entity.dxf.layer), ())

    def _take(self, entity: DXFGraphic, layer: str, within: tuple[str, ...]) -> None:
        self._seen += 1
        if self._seen % OFTEN == 0:
            self._progress.check()
            if len(self.curves) > MOST or self._seen > 4 * MOST:
                raise DrawingError(
                    f"{self._name} holds more than {MOST:,} lines with its blocks taken apart",
                    "export the flat pattern of the one part only",
                )
        if entity.dxf.get("invisible", 0):
            self.ignored["invisible lines"] += 1
        elif isinstance(entity, Insert):
            self._take_block(entity, layer, within)
        elif self._is_dashed(entity):
            self.ignored["dashed lines"] += 1
        else:
            self._take_curves(entity, layer)

    def _take_curves(self, entity: DXFGraphic, layer: str) -> None:
        try:
            found = curves_of(entity)
        except Unusable:
            self.ignored["lines without extent"] += 1
            return
        if found is None:
            kind = entity.dxftype()
            self.ignored["3D faces" if kind == "POLYLINE" else IGNORED.get(kind, "others")] += 1
        else:
            self.curves += [DrawnCurve(curve, layer, flat) for curve, flat in found]

    def _take_block(self, insert: Insert, layer: str, within: tuple[str, ...]) -> None:
        block = insert.block()
        name = str(insert.dxf.name).lower()
        if block is None or insert.is_xref():
            self.ignored["missing blocks"] += 1
            return
        if name in within:
            self.ignored["endless blocks"] += 1
            return
        for one in _each(insert):
            for entity in self._members(one):
                own = str(entity.dxf.layer)
                self._take(entity, layer if own == "0" else own, (*within, name))

    def _members(self, insert: Insert) -> Iterator[DXFGraphic]:
        def passed_over(entity: DXFGraphic, _reason: str) -> None:
            self.ignored[IGNORED.get(entity.dxftype(), "others")] += 1

        try:
            yield from insert.virtual_entities(skipped_entity_callback=passed_over)
        except RecursionError as error:
            raise DrawingError(
                f"{self._name}: the block “{insert.dxf.name}” holds itself",
                "break the ring of blocks, or explode them, and export the drawing again",
            ) from error

    def _is_dashed(self, entity: DXFGraphic) -> bool:
        """Whether an entity has a broken line type of its own, not that of its layer."""
        name = str(entity.dxf.get("linetype", "BYLAYER")).upper()
        if name in ("BYLAYER", "BYBLOCK", "CONTINUOUS"):
            return False
        if name not in self._dashed:
            self._dashed[name] = _is_broken_line(self._document, name)
        return self._dashed[name]


def _each(insert: Insert) -> Iterator[Insert]:
    """The single ones of an array of blocks."""
    if insert.mcount > 1:
        yield from insert.multi_insert()
    else:
        yield insert


def _is_broken_line(document: Document, name: str) -> bool:
    if name.upper() == "CONTINUOUS" or name not in document.linetypes:
        return False
    pattern = document.linetypes.get(name).pattern_tags
    return any(tag.code == 49 for tag in pattern.tags)  # lengths of dashes and gaps


def _layers(document: Document, curves: list[DrawnCurve]) -> tuple[Layer, ...]:
    counts = Counter(c.layer for c in curves)
    made = []
    for name in sorted(counts, key=lambda text: (text.lower(), text)):
        shown, dashed = True, False
        if name in document.layers:
            entry = document.layers.get(name)
            shown = entry.is_on() and not entry.is_frozen()
            dashed = _is_broken_line(document, str(entry.dxf.get("linetype", "CONTINUOUS")))
        shown = shown and name.lower() != "defpoints"  # never printed
        made.append(Layer(name, counts[name], shown, dashed))
    return tuple(made)


def _unit(document: Document) -> str | None:
    return UNITS.get(int(document.header.get("$INSUNITS", 0) or 0))


def _system(document: Document) -> str:
    if "$MEASUREMENT" not in document.header:
        return ""
    return "metric" if int(document.header.get("$MEASUREMENT", 0) or 0) == 1 else "inch"


def _nothing(document: Document, name: str, ignored: Counter[str]) -> DrawingError:
    """The error for a drawing without a line."""
    if any(ignored[word] for word in THREE_D):
        return DrawingError(
            f"{name} holds 3D bodies or faces and no flat lines",
            "export the flat pattern (a view or sketch of the unfolded part) instead",
        )
    elsewhere = sum(len(document.layout(n)) for n in document.layout_names() if n != "Model")
    if elsewhere > 1:  # a paper sheet always holds its own view
        return DrawingError(
            f"{name} holds lines on its paper sheets only, none in model space",
            "export the flat pattern in model space",
        )
    if ignored:
        listed = ", ".join(f"{n} {word}" for word, n in sorted(ignored.items()))
        return DrawingError(
            f"{name} holds no line of a shape, only {listed}",
            "export the lines of the flat pattern",
        )
    return DrawingError(f"{name} holds no line", "export the lines of the flat pattern")
