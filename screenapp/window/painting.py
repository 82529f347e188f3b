"""What each lens paints: from a view and the findings to plain arrays, words and zones.

`paint` is a function of its arguments alone; `window/board/lens_painter.py` puts its answer on the
board.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from screenapp.model.estimate_text import EstimateKind, estimate_text, value_text
from screenapp.model.findings import (
    CaseFindings,
    Estimate,
    Fields,
    Findings,
    LimitFindings,
    Peak,
    Reading,
    Trust,
)
from screenapp.model.part import Part, Point, StressLimit
from screenapp.window import fields as scalars
from screenapp.window.document import Lens, View

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

MOST_CARDS = 4
"""Cards shown at once; more would hide the part."""

WAITING: dict[Lens, str] = {
    "Shape": "",
    "Mesh": "Screen the part to see its mesh",
    "Utilisation": "Screen the part to see how much of its limits is used",
    "Stress": "Screen the part to see its stress",
    "Displacement": "Screen the part to see how it moves",
    "Trust": "Screen the part to see how far its numbers can be trusted",
}


@dataclass(frozen=True)
class Card:
    """A number to be pointed at: where [mm, undeformed], and its words."""

    at: Point
    head: str
    detail: str
    trust: Trust


@dataclass(frozen=True, eq=False)
class Zone:
    """Elements whose numbers are not to be trusted, and why."""

    elements: Ints
    trust: Trust


@dataclass(frozen=True, eq=False)
class Painting:
    """What a lens shows.

    Attributes:
        points: places of the nodes as drawn [mm], (n_nodes, 2).
        values: scalars, (n_nodes,) or (n_elements, 9), stored units; None paints no field.
        title: what the values are.
        kind: their kind, which gives the unit; None for a plain share.
        deformation: the factor drawn; 0 where the part is drawn as it is.
        mesh: strength of the mesh lines, 0 to 1.
        zones, cards: as named.
        probes: place and text of each probe's value.
        caption: a sentence or two; "" for none.
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


@dataclass(frozen=True, eq=False)
class Source:
    """The arrays that are painted and what is known about them.

    Attributes:
        fields: the arrays.
        case: index of the case in them.
        part: the part as it now is.
        findings: None for a pass that is not judged yet.
    """

    fields: Fields
    case: int
    part: Part
    findings: Findings | None = None

    @property
    def case_findings(self) -> CaseFindings | None:
        """What was found in the case."""
        return self.findings.cases[self.case] if self.findings is not None else None


def paint(view: View, source: Source) -> Painting | None:
    """What the lens of `view` paints of `source`; None for the lens that paints nothing."""
    painters = {
        "Mesh": _mesh,
        "Utilisation": _utilisation,
        "Stress": _stress,
        "Displacement": _displacement,
        "Trust": _trust,
    }
    painter = painters.get(view.lens)
    return painter(view, source) if painter is not None else None


def _mesh(_view: View, source: Source) -> Painting:
    mesh = source.fields.mesh
    unknowns = source.fields.solution.unknowns
    caption = f"{grouped(mesh.n_elements)} elements, {grouped(unknowns)} unknowns"
    if mesh.fallback:
        caption += f". {mesh.fallback}"
    return Painting(mesh.nodes, mesh=0.5, caption=caption)


def _stress(view: View, source: Source) -> Painting:
    name = scalars.STRESS_NAMES[view.stress]
    values = scalars.stress_of(source.fields, source.case, view.stress, source.part)
    peaks = _peaks(source, view.stress)
    cards = tuple(_peak_card(peak, source.part) for peak in peaks[:1])
    caption = ""
    if source.findings is not None and not peaks and view.stress not in ("von_mises", "sigma_1"):
        caption = "Largest values of this component are not judged: put a probe where you need one"
    return Painting(
        source.fields.mesh.nodes,
        values,
        name,
        "stress",
        mesh=0.3,
        zones=_zones(source),
        cards=cards,
        probes=_probe_values(source, view.stress, "stress"),
        caption=caption,
    )


def _utilisation(_view: View, source: Source) -> Painting:
    values = scalars.utilisation_of(source.fields, source.case, source.part)
    if isinstance(values, scalars.NoField):
        return Painting(source.fields.mesh.nodes, mesh=0.3, caption=values.why)
    return Painting(
        source.fields.mesh.nodes,
        values,
        "Utilisation",
        "factor",
        mesh=0.3,
        zones=_zones(source),
        cards=_use_cards(source),
        probes=_probe_values(source, "von_mises", "stress"),
    )


def _displacement(view: View, source: Source) -> Painting:
    fields, case = source.fields, source.case
    factor = view.deformation
    if factor is None:
        factor = scalars.deformation_factor(fields, case)
    cards: tuple[Card, ...] = ()
    found = source.case_findings
    if found is not None and view.displacement == "u":
        estimate = found.displacement_max
        text = estimate_text(estimate, "displacement", source.part.display_units)
        cards = (Card(found.displacement_at, text, _trailing("largest", estimate), estimate.trust),)
    caption = f"Deformation drawn {_times(factor)}" if factor else "Drawn undeformed"
    return Painting(
        scalars.drawn_points(fields, case, factor),
        scalars.displacement_of(fields, case, view.displacement),
        scalars.DISPLACEMENT_NAMES[view.displacement].capitalize(),
        "displacement",
        deformation=factor,
        mesh=0.2,
        cards=cards,
        probes=_probe_values(source, view.displacement, "displacement"),
        caption=caption,
    )


def _trust(_view: View, source: Source) -> Painting:
    fields = source.fields
    tolerance = source.part.mesh.tolerance
    found = source.case_findings
    peaks = found.peaks if found is not None else ()
    counts = {t: sum(p.estimate.trust == t for p in peaks) for t in ("settled", "rising")}
    unsettled = len(peaks) - counts["settled"] - counts["rising"]
    caption = (
        f"Peaks: {counts['settled']} settled, {counts['rising']} rising, {unsettled} not settled"
        if found is not None
        else ""
    )
    doubtful = [p for p in _apart(peaks) if p.estimate.trust != "settled"]
    shown = doubtful or _peaks(source, "von_mises")[:1]
    return Painting(
        fields.mesh.nodes,
        scalars.error_share_of(fields, source.case, tolerance),
        "Mesh error / allowed",
        None,
        mesh=0.15,
        zones=_zones(source),
        cards=tuple(_peak_card(p, source.part) for p in shown[:MOST_CARDS]),
        probes=_probe_values(source, "von_mises", "stress"),
        caption=caption,
    )


# --- numbers in words -----------------------------------------------------------------------


def _peaks(source: Source, quantity: str) -> list[Peak]:
    found = source.case_findings
    return [p for p in found.peaks if p.quantity == quantity] if found is not None else []


def _apart(peaks: tuple[Peak, ...]) -> list[Peak]:
    """One peak for each place: the same corner is a peak of several quantities."""
    kept: dict[str, Peak] = {}
    for peak in peaks:
        kept.setdefault(peak.place or str(peak.at), peak)
    return list(kept.values())


def _peak_card(peak: Peak, part: Part) -> Card:
    head = estimate_text(peak.estimate, "stress", part.display_units)
    return Card(peak.at, head, _trailing(peak.place, peak.estimate), peak.estimate.trust)


def _use_cards(source: Source) -> tuple[Card, ...]:
    """The stress limit that is used most in the case."""
    found = source.case_findings
    if found is None or source.findings is None:
        return ()
    limits = {x.id: x for x in source.part.limits if isinstance(x, StressLimit)}
    uses = [x for x in source.findings.limits if x.case == found.case and x.limit in limits]
    if not uses:
        return ()
    most = max(uses, key=lambda x: x.utilisation.value)
    return (_use_card(source, most, limits[most.limit]),)


def _use_card(source: Source, use: LimitFindings, limit: StressLimit) -> Card:
    units = source.part.display_units
    share = value_text(use.utilisation, "factor", units)
    near = [p for p in _peaks(source, limit.measure) if math.dist(p.at, use.at) < 1e-6]
    if near:
        head = estimate_text(near[0].estimate, "stress", units)
        detail = _trailing(" · ".join(filter(None, (use.place, f"use {share}"))), use.utilisation)
    else:
        head = f"use {estimate_text(use.utilisation, 'factor', units)}"
        detail = _trailing(use.place, use.utilisation)
    return Card(use.at, head, detail, use.utilisation.trust)


def _trailing(words: str, estimate: Estimate) -> str:
    """The words, with "settled" behind them where the number itself does not say its trust."""
    tail = ("settled",) if estimate.trust == "settled" else ()
    return " · ".join(filter(None, (words, *tail)))


def _probe_values(
    source: Source, quantity: str, kind: EstimateKind
) -> tuple[tuple[Point, str], ...]:
    """Value of each probe that still stands where it was read."""
    found = source.case_findings
    if found is None or source.findings is None:
        return ()
    places = {probe.id: probe.at for probe in source.part.readings}
    texts: list[tuple[Point, str]] = []
    for reading in source.findings.readings:
        if reading.case != found.case or places.get(reading.probe) != reading.at:
            continue
        estimate = _read(reading, quantity)
        if estimate is not None:
            texts.append((reading.at, estimate_text(estimate, kind, source.part.display_units)))
    return tuple(texts)


def _read(reading: Reading, quantity: str) -> Estimate | None:
    if quantity != "u":
        return reading.values.get(quantity)
    parts = [reading.values.get(name) for name in ("u_x", "u_y")]
    known = [p for p in parts if p is not None]
    if len(known) < 2:
        return None
    size = math.hypot(*(p.value for p in known))
    # the length of a vector is off by at most the length of what its components are off by
    half = math.hypot(*(max(p.high - p.value, p.value - p.low) for p in known))
    least = next((p for p in known if p.trust != "settled"), known[0])
    return Estimate(size, max(0.0, size - half), size + half, least.trust)


def _zones(source: Source) -> tuple[Zone, ...]:
    """Round every rising or unsettled peak of the case."""
    found = source.case_findings
    if found is None:
        return ()
    zones: list[Zone] = []
    for trust in ("unsettled", "rising"):
        peaks = [p for p in _apart(found.peaks) if p.estimate.trust == trust]
        if peaks:
            elements = [scalars.zone_round(source.fields, p.at) for p in peaks]
            zones.append(Zone(np.unique(np.concatenate(elements)), trust))
    return tuple(zones)


def grouped(number: int) -> str:
    """A whole number with its thousands set apart by narrow gaps."""
    return f"{number:,}".replace(",", "\u202f")


def _times(factor: float) -> str:
    return f"{factor:,.4g} times".replace(",", "\u202f") if factor != 1.0 else "to scale"
