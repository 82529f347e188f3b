"""From a drawing file to a part file and back, as the `convert` command does it."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path

from screenapp.exchange.bringing_in import bring_in
from screenapp.exchange.choosing import TOLERANCE, Wishes, unit_factor
from screenapp.exchange.drawing import DrawingError, Role
from screenapp.exchange.dxf_reading import read_drawing
from screenapp.exchange.dxf_writing import write_dxf
from screenapp.model.errors import Fault, InvalidPartError
from screenapp.model.part import Part
from screenapp.model.part_json import SUFFIX, read_part, write_part
from screenapp.model.progress import SILENT, Progress
from screenapp.model.units import parse_quantity
from screenapp.model.validity import faults_of

DRAWING = ".dxf"


@dataclass(frozen=True)
class Options:
    """What the command line asks for, as it was typed.

    Attributes:
        layers: layers that the shape is made of; empty takes all that are shown and not dashed.
        zones: layers whose closed lines are zones.
        unit: unit of length of the drawing; None takes what the file says.
        tolerance: a length like "0.01 mm".
        outline: which of several outlines.
    """

    layers: tuple[str, ...] = ()
    zones: tuple[str, ...] = ()
    unit: str | None = None
    tolerance: str = ""
    outline: int | None = None


def convert(
    source: Path,
    target: Path,
    options: Options,
    say: Callable[[str], None],
    progress: Progress = SILENT,
) -> None:
    """Make `target` of `source`; their endings say which way.  `say` gets the report's sentences.

    Raises:
        ScreenappError: endings that do not fit, bad input, or no sound part in it.
    """
    ways = _is_drawing(source), _is_drawing(target)
    parts = source.name.lower().endswith(SUFFIX), target.name.lower().endswith(SUFFIX)
    if ways[0] and parts[1]:
        write_part(part_of_file(source, options, say, progress), target)
    elif parts[0] and ways[1]:
        if options != Options(unit=options.unit):
            raise DrawingError(
                "layers, zones, tolerance and outline are for reading a drawing",
                "give only --unit when a part is written as a drawing",
            )
        write_dxf(read_part(source), target, options.unit)
    else:
        raise DrawingError(
            f"{source.name} cannot be converted to {target.name}",
            f"give a drawing (*{DRAWING}) and a part (*{SUFFIX}), in either order",
        )


def part_of_file(
    source: Path, options: Options, say: Callable[[str], None], progress: Progress = SILENT
) -> Part:
    """The sound part that a drawing file shows.

    Raises:
        ScreenappError: it cannot be read, or its shape has faults that block.
    """
    tolerance = TOLERANCE
    if options.tolerance:
        tolerance = parse_quantity(options.tolerance, "length")
        if not (math.isfinite(tolerance) and tolerance > 0.0):
            raise DrawingError("the tolerance is not above zero", "give one like 0.01 mm")
    if options.unit is not None:
        unit_factor(options.unit)  # a wrong unit is told before a long reading
    drawing = read_drawing(source, progress)
    roles: dict[str, Role] = {}
    if options.layers:
        wanted = set(options.layers)
        roles = {layer.name: "left out" for layer in drawing.layers if layer.name not in wanted}
        roles |= dict.fromkeys(options.layers, "shape")
    roles |= dict.fromkeys(options.zones, "zone")
    brought = bring_in(drawing, Wishes(roles, options.unit, tolerance, options.outline), progress)
    for remark in brought.remarks:
        say(remark.text)
    if brought.part is None:
        raise brought.error or DrawingError(f"{source.name} shows no part", "look at its layers")
    faults = shape_faults(brought.part)
    if faults:
        raise InvalidPartError.of(faults)
    return brought.part


def shape_faults(part: Part) -> tuple[Fault, ...]:
    """What is wrong with the lines of a part, whatever else it still lacks."""
    lines = ("outline", "holes", "zones")
    return tuple(f for f in faults_of(part) if f.blocks and f.field.split(".")[0] in lines)


def _is_drawing(path: Path) -> bool:
    return path.suffix.lower() == DRAWING
