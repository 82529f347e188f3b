"""What is wrong with zones by their values: thickness, material, and the state of the wall."""

from __future__ import annotations

import math
from collections.abc import Iterator

from screenapp.model.errors import Fault
from screenapp.model.extents import FARTHEST, SMALLEST
from screenapp.model.part import Part


def zone_value_faults(part: Part) -> Iterator[Fault]:
    """Zones whose thickness or material cannot be worked with; every fault blocks."""
    for zone in part.zones:
        where, t = f"zones.{zone.id}", zone.thickness
        if t is not None and not (math.isfinite(t) and SMALLEST <= t <= FARTHEST):
            yield Fault(
                f"zone {zone.id} is {t:g} mm thick",
                "give a thickness above zero, or make it a hole",
                f"{where}.thickness",
                (zone.id,),
            )
        if zone.material is not None and all(m.name != zone.material for m in part.materials):
            known = ", ".join(m.name for m in part.materials) or "none"
            yield Fault(
                f"the material “{zone.material}” of zone {zone.id} is not among the part's "
                f"materials ({known})",
                "choose another material or add this one",
                f"{where}.material",
                (zone.id,),
            )
    if part.zones and part.wall.state == "plane strain":
        yield Fault(
            f"zone {part.zones[0].id} stands in a wall in plane strain, whose section is the same "
            "all through",
            "set the wall to plane stress, or remove the zones",
            "wall.state",
            tuple(z.id for z in part.zones),
        )


def zone_cautions(part: Part) -> Iterator[Fault]:
    """What a screening with zones leaves out; nothing here blocks."""
    own = [z.id for z in part.zones if z.thickness not in (None, part.wall.thickness)]
    if own:
        yield Fault(
            f"the middle plane of {'zone' if len(own) == 1 else 'zones'} {', '.join(own)} is taken "
            "to be the wall's: where thickness is added on one side only, the wall bends as well, "
            "which is left out",
            "add the thickness on both sides, or check the bending by hand",
            f"zones.{own[0]}.thickness",
            tuple(own),
            blocks=False,
        )
