"""The scale of each lens, and what the colour bar says of it."""

from __future__ import annotations

import numpy as np

from screenapp.model.errors import ScreenappError
from screenapp.model.estimate_text import unit_of
from screenapp.model.kinds import KindName
from screenapp.model.part import DisplayUnits
from screenapp.model.units import parse_quantity
from screenapp.report import colours
from screenapp.report.colours import Scale
from screenapp.window import theme
from screenapp.window.board.colour_bar import BarContent
from screenapp.window.document import Lens
from screenapp.window.painted import Painting

LEAST_SHARE_SHOWN = 1.5
"""The bar of the estimated error reaches at least this far, so that 1.0 is on it."""

MOST_SHARE_SHOWN = 3.0
"""... and at most this far: the few elements at a rising place would leave all others white."""

BEYOND = "rising beyond"
"""Said at the upper end of a bar that leaves rising values out."""

EDITABLE: dict[Lens, KindName] = {"Stress": "stress", "Displacement": "length"}
"""Lenses whose range can be typed, and what is typed."""


def scale_of(lens: Lens, painting: Painting, typed: tuple[float, float] | None) -> Scale:
    """The colours for what is painted, over the typed range if there is one."""
    assert painting.values is not None
    low, high = float(np.min(painting.values)), float(np.max(painting.values))
    if lens == "Utilisation":
        return colours.utilisation(high)
    if lens == "Trust":
        p = theme.current()
        high = min(max(high, LEAST_SHARE_SHOWN), MOST_SHARE_SHOWN)
        return colours.error_share(high, p.paper, p.ink)
    if painting.ends is not None:
        low, high = painting.ends
    if typed is not None:
        low, high = typed
    elif low >= 0.0:
        low = 0.0  # what is nowhere negative is shown from nothing
    if not low < high:  # the same everywhere: nothing to tell apart
        high = low + max(abs(low), 1.0) * 1e-6
    return colours.cividis(low, high)


def bar_content(
    lens: Lens, painting: Painting, scale: Scale, units: DisplayUnits, typed: bool
) -> BarContent:
    """What the bar shows for a lens."""
    assert painting.values is not None
    factor, unit = (1.0, "") if painting.kind is None else unit_of(painting.kind, units)
    marks: tuple[tuple[float, str], ...] = ()
    if lens in ("Utilisation", "Trust"):
        marks = ((1.0, "1.00"),)
    elif scale.low < 0.0 < scale.high:
        marks = ((0.0, "0"),)

    def read(text: str) -> float:
        try:
            return parse_quantity(text, EDITABLE[lens], units)
        except ScreenappError as fault:
            raise ValueError(f"{fault.cause}: {fault.mend}") from fault

    return BarContent(
        f"{painting.title}, {unit}" if unit else painting.title,
        scale,
        factor,
        lens in EDITABLE,
        typed,
        marks,
        float(np.max(painting.values)) > scale.high * (1 + 1e-9),
        read,
        "" if painting.ends is None or typed else BEYOND,
    )
