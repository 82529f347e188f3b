"""Colours, text sizes and spacing of the window: a paper and a slate theme.

Supports are teal, loads ochre, what the user draws is ink; all are told apart by shape as well.
"""

from __future__ import annotations

from dataclasses import dataclass

GRID = 4
"""Every margin and gap is a multiple of this [px]."""

TEXT_SMALL, TEXT_BODY, TEXT_HEAD = 11, 13, 18
"""The three text sizes [px]."""


@dataclass(frozen=True)
class Palette:
    """Named colours as #rrggbb."""

    name: str
    paper: str  # the board
    sheet: str  # the check sheet
    chrome: str  # strips and the readings table
    ink: str  # outline, main text
    quiet: str  # secondary text
    faint: str  # grid lines, mesh lines, separators
    accent: str  # editable values, selection, main button
    on_accent: str  # text on the accent
    support: str
    load: str
    good: str
    bad: str
    bad_ground: str
    doubt: str
    doubt_ground: str
    good_ground: str


PAPER = Palette(
    name="paper",
    paper="#fbfaf6",
    sheet="#fefefb",
    chrome="#f4f3ee",
    ink="#1c222b",
    quiet="#5c6470",
    faint="#d9d7cf",
    accent="#1d5c8f",
    on_accent="#ffffff",
    support="#0f766e",
    load="#92570a",
    good="#2f7d4f",
    bad="#b3360f",
    bad_ground="#fdece4",
    doubt="#8a6100",
    doubt_ground="#fbf3dc",
    good_ground="#e7f4ea",
)

SLATE = Palette(
    name="slate",
    paper="#1b2027",
    sheet="#20262e",
    chrome="#171b21",
    ink="#eceff3",
    quiet="#a3adb9",
    faint="#39424d",
    accent="#6fb1e6",
    on_accent="#0f1720",
    support="#4fc7ba",
    load="#e0a64c",
    good="#6ac48c",
    bad="#ff8a63",
    bad_ground="#3a241d",
    doubt="#e6bf57",
    doubt_ground="#352d18",
    good_ground="#1f3327",
)
