"""The words for a field of the part file: "x of corner c4", "diameter of hole h1"."""

from __future__ import annotations

_HOLDERS = {
    "corners": "corner",
    "edges": "edge",
    "holes": "hole",
    "supports": "support",
    "loads": "load",
    "limits": "limit",
    "readings": "probe",
    "materials": "material",
    "dimensions": "dimension",
    "zones": "zone",
}
_AXES = {"0": "x", "1": "y"}
_POINTS = {"at": "", "centre": " of the centre", "through": " of the arc point"}


def field_words(field: str) -> str:
    """What stands at a dotted path, in words.

    Example:
        >>> field_words("outline.corners.c4.at.0")
        'x of corner c4'
        >>> field_words("wall.thickness")
        'thickness of the wall'
        >>> field_words("dimensions.half.value")
        'dimension half'
    """
    words = field.split(".")
    if words[-1] in _AXES and len(words) > 1 and words[-2] in _POINTS:
        what = _AXES[words[-1]] + _POINTS[words[-2]]
        words = words[:-2]
    else:
        what = words.pop().replace("_", " ")
    for at in range(len(words) - 1, -1, -1):
        if words[at] in _HOLDERS and at + 1 < len(words):
            name = ".".join(words[at + 1 :])  # the name of a material may hold dots
            thing = f"{_HOLDERS[words[at]]} {name}"
            return thing if words[at] == "dimensions" else f"{what} of {thing}"
    return f"{what} of the {words[-1]}" if words else what
