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
    """What a screening with zones leaves out; nothing here blocks.

    A zone on one side only has its middle plane half the difference of the thicknesses off the
    wall's.  Where a wall of thickness t under a membrane force N takes the whole moment N e of that
    step, its bending stress is 6 N e / t², which is 6 e / t times its membrane stress (bending of a
    rectangular section).
    """
    silent: list[str] = []
    for number, zone in enumerate(part.zones):
        wall, own = part.wall.thickness, part.wall_of(number).thickness
        if own == wall or zone.sides == "both":
            continue
        if zone.sides is None:
            silent.append(zone.id)
            continue
        aside, thinner = abs(own - wall) / 2.0, min(own, wall)
        yield Fault(
            f"zone {zone.id} is {'thicker' if own > wall else 'thinner'} on one side only: its "
            f"middle plane stands {aside:.3g} mm off the wall's, so that a pull or push across its "
            f"edge bends the wall as well, which is left out; where the {thinner:.3g} mm take that "
            f"alone, the bending adds {6.0 * aside / thinner:.3g} times the membrane stress",
            "check the bending by hand, or shape both sides alike",
            f"zones.{zone.id}.sides",
            (zone.id,),
            blocks=False,
        )
    if silent:
        yield Fault(
            f"the middle plane of {'zone' if len(silent) == 1 else 'zones'} {', '.join(silent)} is "
            "taken to be the wall's: where thickness is added on one side only, the wall bends as "
            "well, which is left out",
            "say in paragraph 2 on which sides it is, or check the bending by hand",
            f"zones.{silent[0]}.sides",
            tuple(silent),
            blocks=False,
        )
