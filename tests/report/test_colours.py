"""Colours of fields: where 1.0 falls, what is transparent, what the colour-blind can tell apart."""

from __future__ import annotations

import itertools

import numpy as np
import pytest

from screenapp.report import colours


def rgb(word: int) -> np.ndarray:
    return np.array([word >> 16 & 255, word >> 8 & 255, word & 255], dtype=float)


def lightness(word: int) -> float:
    """CIE L* of an sRGB colour (IEC 61966-2-1 and CIE 15, from memory)."""
    c = rgb(word) / 255
    linear = np.where(c <= 0.04045, c / 12.92, ((c + 0.055) / 1.055) ** 2.4)
    y = float(linear @ (0.2126, 0.7152, 0.0722))
    return 116 * (y ** (1 / 3) if y > (6 / 29) ** 3 else y / (3 * (6 / 29) ** 2) + 4 / 29) - 16


@pytest.mark.parametrize("largest", [0.4, 1.0, 1.08, 1.7, 30.0])
def test_one_is_the_last_blue(largest: float) -> None:
    scale = colours.utilisation(largest)
    below, above = np.float32(1.0), np.nextafter(np.float32(1.0), np.float32(2.0))
    r, _, b = rgb(scale.word(float(below)))
    assert b > r + 60, "1.0 itself is blue"
    r, _, b = rgb(int(scale.words(np.array([above]))[0]))
    assert r > b + 100, "the next number above 1.0 is orange"


def test_utilisation_has_a_step_of_colour_at_one_only() -> None:
    table = colours.utilisation(1.5).table
    steps = [np.abs(rgb(int(a)) - rgb(int(b))).max() for a, b in itertools.pairwise(table)]
    assert int(np.argmax(steps)) == colours.ENTRIES
    assert sorted(steps)[-2] < 4, "everywhere else neighbours are alike"


def test_both_sides_of_one_differ_in_lightness_or_hue_for_the_colour_blind() -> None:
    """Red-green blindness keeps the blue-yellow opponent axis, which is about b - (r + g) / 2."""
    table = colours.utilisation(1.5).table
    blues = [rgb(int(w)) for w in table[colours.ENTRIES // 4 : colours.ENTRIES + 1]]
    reds = [rgb(int(w)) for w in table[colours.ENTRIES + 1 :]]
    axis = np.array([-0.5, -0.5, 1.0])
    assert min(c @ axis for c in blues) > max(c @ axis for c in reds) + 10


def test_blue_yellow_blindness_is_served_by_the_red_green_axis() -> None:
    table = colours.utilisation(1.5).table
    blues = [rgb(int(w)) for w in table[: colours.ENTRIES + 1]]
    reds = [rgb(int(w)) for w in table[colours.ENTRIES + 1 :]]
    assert max(c[0] - c[1] for c in blues) + 50 < min(c[0] - c[1] for c in reds)


def test_cividis_grows_lighter_all_the_way() -> None:
    table = colours.cividis(0.0, 1.0).table
    grades = [lightness(int(w)) for w in table[::16]]
    assert all(b > a for a, b in itertools.pairwise(grades))


def test_ends_and_blanks() -> None:
    scale = colours.cividis(-10.0, 30.0)
    words = scale.words(np.array([-99.0, -10.0, 30.0, 99.0, np.nan], dtype=np.float32))
    assert words[0] == words[1] == scale.table[0]
    assert words[2] == words[3] == scale.table[-1]
    assert words[4] == 0


def test_flat_field_has_one_colour() -> None:
    scale = colours.cividis(5.0, 5.0)
    assert len(set(scale.words(np.full(4, 5.0, dtype=np.float32)).tolist())) == 1


def test_veil_is_premultiplied() -> None:
    table = colours.veil("#ff8000", 0.5)
    assert table[0] == 0
    alpha, r, g, b = (int(table[255]) >> shift & 255 for shift in (24, 16, 8, 0))
    assert (alpha, r, g, b) == (128, 128, 64, 0)
