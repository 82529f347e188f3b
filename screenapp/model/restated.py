"""Sentences of the model, which speak in mm, N and MPa, said again in the units that are shown."""

from __future__ import annotations

import re

from screenapp.model.kinds import KindName
from screenapp.model.part import DisplayUnits
from screenapp.model.units import format_quantity

_KINDS: dict[str, KindName] = {
    "mm²": "area",
    "mm": "length",
    "N/mm²": "stress",
    "MPa": "stress",
    "N/mm": "line_load",
    "N": "force",
}
_QUANTITY = re.compile(
    r"(?<![\w.,])([-−]?\d+(?:\.\d+)?(?:e[+-]?\d+)?)[ \u2009\u202f]"
    r"(mm²|N/mm²|N/mm|mm|MPa|N)(?![\w/·²³]| or )"
)


def restated(text: str, display_units: DisplayUnits) -> str:
    """The text with every quantity in stored units shown in the display units.

    Examples of what may be typed ("12 mm or 0.5 in") stay.

    Example:
        >>> restated("the round of corner c4 needs 12.7 mm of edge e3", "in-lbf-ksi")
        'the round of corner c4 needs 0.5 in of edge e3'
    """
    if display_units == "mm-N-MPa":
        return text

    def shown(found: re.Match[str]) -> str:
        value = float(found[1].replace("−", "-"))
        return format_quantity(value, _KINDS[found[2]], display_units)

    return _QUANTITY.sub(shown, text)
