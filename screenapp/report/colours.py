"""From values to colours: cividis for stress and displacement, white to blue and then abruptly
orange to dark red for utilisation, a quiet grey for the estimated error.

Tables hold premultiplied 0xAARRGGBB words, as QImage's `Format_ARGB32_Premultiplied` wants them.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache

import numpy as np
from numpy.typing import NDArray

Words = NDArray[np.uint32]

ENTRIES = 512
"""Entries of a table; of utilisation, entries up to 1.0 (a power of two, so that 1.0 is exact)."""

MOST_USE = 2.0
"""Utilisations above this share the last colour, so that a rising peak does not squeeze the bar."""

LEAST_USE_SHOWN = 4 / 3
"""The bar of utilisation reaches at least this far, so that 1.0 stands in the same place."""

_OVER = ("#ea5a0c", "#c62f06", "#8f1006", "#5e0008")  # orange to dark red


@dataclass(frozen=True, eq=False)
class Scale:
    """A range of values and its colours.

    Attributes:
        low, high: the values at both ends; values outside take the end colours.
        table: colours, (n,) words.
        exact_one: the table is that of utilisation: 1.0 is the last blue, whatever is above it by
            the least amount is orange.
    """

    low: float
    high: float
    table: Words
    exact_one: bool = False

    def words(self, values: NDArray[np.float32] | NDArray[np.float64]) -> Words:
        """Colour of each value, transparent where it is NaN."""
        last = len(self.table) - 1
        if self.exact_one:
            place = np.ceil(values * np.float32(ENTRIES))
        else:
            span = self.high - self.low
            place = (values - np.float32(self.low)) * np.float32(last / span if span > 0 else 0.0)
            place += np.float32(0.5)
        np.fmax(place, 0, out=place)  # NaN becomes 0 here and is blanked below
        np.fmin(place, last, out=place)
        colours = self.table[place.astype(np.int32)]
        colours[np.isnan(values)] = 0
        return colours

    def word(self, value: float) -> int:
        """Colour of one value as 0xAARRGGBB."""
        return int(self.words(np.array([value], dtype=np.float32))[0])


def cividis(low: float, high: float) -> Scale:
    """The scale of stress and displacement."""
    return Scale(low, high, _from_map("cividis"))


def utilisation(largest: float) -> Scale:
    """The scale of utilisation from 0 to the largest value, within 4/3 and 2."""
    high = float(np.clip(largest, LEAST_USE_SHOWN, MOST_USE))
    over = int(np.ceil(high * ENTRIES)) - ENTRIES
    below = _from_map("cet_CET_L12", ENTRIES + 1)
    stops = np.array([_rgb(c) for c in _OVER], dtype=float)
    at = np.linspace(0.0, len(stops) - 1.0, over)
    above = np.stack([np.interp(at, np.arange(len(stops)), stops[:, k]) for k in range(3)], axis=1)
    return Scale(0.0, over / ENTRIES + 1.0, np.concatenate([below, _words(above)]), True)


def error_share(high: float, ground: str, ink: str) -> Scale:
    """A quiet scale from the paper's colour towards grey, for the estimated error."""
    a, b = np.array(_rgb(ground), dtype=float), np.array(_rgb(ink), dtype=float)
    share = np.linspace(0.04, 0.5, ENTRIES)[:, None]
    return Scale(0.0, high, _words(a + (b - a) * share))


def veil(colour: str, strength: float) -> Words:
    """256 words of one colour, its opacity rising to `strength` (0 to 1) at the last."""
    alpha = np.linspace(0.0, strength, 256)
    rgb = np.array(_rgb(colour), dtype=float)
    premultiplied = np.rint(alpha[:, None] * rgb).astype(np.uint32)
    opacity = np.rint(alpha * 255).astype(np.uint32)
    return np.asarray(opacity << 24 | _packed(premultiplied), dtype=np.uint32)


@cache
def _from_map(name: str, entries: int = ENTRIES) -> Words:
    from matplotlib import colormaps  # not at the top: the window starts without it

    if name not in colormaps:
        import colorcet  # noqa: F401  (registers its maps with matplotlib)
    known = np.linspace(0.0, 1.0, colormaps[name].N)
    colours = 255.0 * colormaps[name](known)
    at = np.linspace(0.0, 1.0, entries)
    return _words(np.stack([np.interp(at, known, colours[:, k]) for k in range(3)], axis=1))


def _words(rgb: NDArray[np.float64]) -> Words:
    packed = _packed(np.rint(rgb).astype(np.uint32))
    return np.asarray(np.uint32(0xFF000000) | packed, dtype=np.uint32)


def _packed(rgb: Words) -> Words:
    return np.asarray(rgb[:, 0] << 16 | rgb[:, 1] << 8 | rgb[:, 2], dtype=np.uint32)


def _rgb(colour: str) -> tuple[int, int, int]:
    return int(colour[1:3], 16), int(colour[3:5], 16), int(colour[5:7], 16)
