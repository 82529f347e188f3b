"""The records that lenses are made of: where the numbers come from and what is painted of them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.model.estimate_text import EstimateKind
from screenapp.model.findings import CaseFindings, Fields, Findings, Trust
from screenapp.model.history_figure import HistoryFigure
from screenapp.model.part import Part, Point
from screenapp.window.traced import Traced

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]


@dataclass(frozen=True)
class Card:
    """A number to be pointed at: where [mm, undeformed], its words, and its history if that is to
    be shown; `number` is what it stands for."""

    at: Point
    head: str
    detail: str
    trust: Trust
    history: HistoryFigure | None = None
    number: Traced | None = None


@dataclass(frozen=True, eq=False)
class Zone:
    """Elements whose numbers are not to be trusted, and why."""

    elements: Ints
    trust: Trust


@dataclass(frozen=True, eq=False)
class Crosses:
    """Where crosses may stand, and how the stress lies there.

    Attributes:
        at: middles of the elements as drawn [mm], (n_elements, 2).
        stresses: σ1 >= σ2 there [MPa], (n_elements, 2).
        directions: unit vectors of σ1 and σ2, (n_elements, 2, 2).
    """

    at: Floats
    stresses: Floats
    directions: Floats


@dataclass(frozen=True, eq=False)
class Painting:
    """What a lens shows.

    Attributes:
        points: places of the nodes as drawn [mm], (n_nodes, 2).
        values: scalars, (n_nodes,) or (n_elements, 9), stored units; None paints no field.
        title: what the values are.
        kind: their kind, which gives the unit; None for a plain share.
        ends: the range that colours are shared out over where some values keep rising; None for
            all of the values.
        deformation: the factor drawn; 0 where the part is drawn as it is.
        mesh: strength of the mesh lines, 0 to 1.
        zones, cards: as named.
        probes: place and text of each probe's value.
        caption: a sentence or two; "" for none.
        marks: every peak with its trust, where that is what is shown.
        legend: what each trust means here, in words, with its count.
        governing: index of the case that each value is of, shaped as they are, where all cases are
            shown at once; else None.
        crosses: principal directions, where they are asked for.
    """

    points: Floats
    values: Floats | None = None
    title: str = ""
    kind: EstimateKind | None = None
    deformation: float = 0.0
    mesh: float = 0.0
    zones: tuple[Zone, ...] = ()
    cards: tuple[Card, ...] = ()
    probes: tuple[tuple[Point, str], ...] = ()
    caption: str = ""
    ends: tuple[float, float] | None = None
    marks: tuple[tuple[Point, Trust], ...] = ()
    legend: tuple[tuple[Trust, str], ...] = ()
    governing: Ints | None = None
    crosses: Crosses | None = None


@dataclass(frozen=True, eq=False)
class Source:
    """The arrays that are painted and what is known about them.

    Attributes:
        fields: the arrays.
        case: index of the case in them.
        part: the part as it now is.
        findings: None for a pass that is not judged yet.
        traced: the number whose history is asked for.
    """

    fields: Fields
    case: int
    part: Part
    findings: Findings | None = None
    traced: Traced | None = None

    @property
    def case_findings(self) -> CaseFindings | None:
        """What was found in the case."""
        return self.findings.cases[self.case] if self.findings is not None else None
