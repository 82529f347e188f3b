"""What the loads of each case amount to, for the sheet and the board."""

from __future__ import annotations

import math
from dataclasses import dataclass, field

from screenapp.mechanics.resultants import load_resultants, total_of
from screenapp.model.combinations import loadings
from screenapp.model.errors import ScreenappError
from screenapp.model.load_faults import LARGEST, components
from screenapp.model.part import Case, Part
from screenapp.model.shape import Shape
from screenapp.model.solution import LoadResultant

_TOGETHER = "together "


def together_id(case: str) -> str:
    """What the board is told to light for all loads of a case; no id of a part has a space."""
    return f"{_TOGETHER}{case}"


@dataclass(frozen=True)
class Amounts:
    """By case (or combination), and by load in it.

    A load that cannot be worked out is left out, and so is the total of its case.
    """

    loads: dict[str, dict[str, LoadResultant]] = field(default_factory=dict)
    totals: dict[str, LoadResultant] = field(default_factory=dict)

    def of(self, id_: str, first: str = "") -> LoadResultant | None:
        """Of a load, or of all of a case; of a load that several have, in the case `first`."""
        if id_.startswith(_TOGETHER):
            return self.totals.get(id_.removeprefix(_TOGETHER))
        cases = [first, *(case for case in self.loads if case != first)]
        found = (self.loads.get(case, {}).get(id_) for case in cases)
        return next((each for each in found if each is not None), None)


def amounts_of(part: Part, shape: Shape | None) -> Amounts:
    """Of every case and combination; nothing while the boundary is at fault."""
    amounts = Amounts()
    if shape is None:
        return amounts
    for case in loadings(part):
        own: dict[str, LoadResultant] = {}
        for load in case.loads:
            if not all(math.isfinite(v) and abs(v) <= LARGEST for v in components(load).values()):
                continue
            try:
                (found,) = load_resultants(part, shape, Case(case.id, case.name, (load,)))
            except ScreenappError:
                continue  # the paragraph tells what is wrong with it
            if all(map(math.isfinite, (found.x, found.y, found.moment))):
                own[load.id] = found
        amounts.loads[case.id] = own
        if len(own) == len(case.loads):
            amounts.totals[case.id] = total_of(case.id, own.values())
    return amounts
