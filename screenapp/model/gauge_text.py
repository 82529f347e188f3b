"""What plain bilinear quads would make of the walls and of the numbers of a part, in words."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from screenapp.model.estimate_text import significant
from screenapp.model.findings import PlainLoss, WallGauge
from screenapp.model.part import DisplayUnits
from screenapp.model.units import format_quantity

NAUGHT = 5e-4
"""A loss below this share is written as none."""


def stiffness_text(wall: WallGauge) -> str:
    """How many times too stiff, e.g. "1.05 ×"."""
    return f"{significant(wall.stiffness)} ×"


def wall_text(wall: WallGauge, units: DisplayUnits) -> str:
    """A wall with its gauge in one sentence.

    Example:
        >>> ends = ((0.0, 0.0), (0.0, 12.0))
        >>> gauge = WallGauge(("e1", "h3"), "edge e1 and hole h3", 12.0, ends, 1, 2.0, 2.637)
        >>> wall_text(gauge, "mm-N-MPa")[:59]
        'Wall between edge e1 and hole h3: 12 mm, 1 element across; '
    """
    count = f"{wall.layers} element{'' if wall.layers == 1 else 's'} across"
    return (
        f"Wall between {wall.place}: {format_quantity(wall.width, 'length', units)}, {count}; "
        f"plain bilinear quads of that size are {significant(wall.stiffness)} times as stiff as "
        "it is in bending"
    )


def loss_text(losses: Sequence[PlainLoss], names: Mapping[str, str]) -> str:
    """What plain quads on the same mesh show, for the case where it matters most; "" if unknown.

    Args:
        losses: for each case.
        names: of the cases by id; with one case its name is left out.

    Example:
        >>> loss_text((PlainLoss("k1", 0.02, 0.016, 0.23, "hole h2"),), {"k1": "Pull"})
        'Plain bilinear quads on this mesh: displacement 1.6 % low, stress at hole h2 23 % low'
    """
    if not losses:
        return ""
    worst = max(losses, key=lambda loss: max(abs(loss.peak or 0.0), abs(loss.displacement)))
    texts = [f"displacement {share_text(worst.displacement)}"]
    if worst.peak is not None:
        texts.append(f"stress at {worst.place} {share_text(worst.peak)}")
    under = f" under “{names.get(worst.case, worst.case)}”" if len(losses) > 1 else ""
    return f"Plain bilinear quads on this mesh{under}: {', '.join(texts)}"


def share_text(lost: float) -> str:
    """A share that is lost, e.g. "23 % low"; "12 % high" where it is gained."""
    if abs(lost) < NAUGHT:
        return "the same"
    return f"{significant(100.0 * abs(lost), 2)} % {'low' if lost > 0.0 else 'high'}"
