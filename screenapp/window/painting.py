"""What each lens paints: from a view and the findings to plain arrays, words and zones.

`paint` is a function of its arguments alone; `window/board/lens_painter.py` puts its answer on the
board.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from screenapp.model.estimate_text import estimate_text
from screenapp.model.findings import Peak, Trust
from screenapp.window import fields as scalars
from screenapp.window.cards import (
    apart,
    peak_card,
    peaks_of,
    probe_values,
    trailing,
    use_cards,
    with_history,
)
from screenapp.window.document import Lens, View
from screenapp.window.doubtful_zones import trusted_ends, zones_of
from screenapp.window.envelope import paint_envelope
from screenapp.window.governing import ENVELOPED
from screenapp.window.painted import Card, Painting, Source
from screenapp.window.principal_crosses import crosses_of

MOST_CARDS = 4
"""Cards shown at once; more would hide the part."""

_MEANINGS: dict[Trust, str] = {
    "rising": "rising: no finite value",
    "unsettled": "not settled yet",
    "settled": "settled to ± {:g} %",
}

CROSSED: tuple[Lens, ...] = ("Utilisation", "Stress")
"""Lenses that can show principal directions."""

CROSSES_MEAN = "Crosses: full lines are tension, broken ones between bars compression"

WAITING: dict[Lens, str] = {
    "Shape": "",
    "Mesh": "Screen the part to see its mesh",
    "Utilisation": "Screen the part to see how much of its limits is used",
    "Stress": "Screen the part to see its stress",
    "Displacement": "Screen the part to see how it moves",
    "Trust": "Screen the part to see how far its numbers can be trusted",
}


def paint(view: View, source: Source) -> Painting | None:
    """What the lens of `view` paints of `source`; None for the lens that paints nothing."""
    painters = {
        "Mesh": _mesh,
        "Utilisation": _utilisation,
        "Stress": _stress,
        "Displacement": _displacement,
        "Trust": _trust,
    }
    if view.envelope and view.lens in ENVELOPED and len(source.fields.solution.displacements) > 1:
        painting: Painting | None = paint_envelope(view, source)
    else:
        painter = painters.get(view.lens)
        painting = painter(view, source) if painter is not None else None
    if painting is None or not view.crosses or view.lens not in CROSSED:
        return painting
    crosses = crosses_of(source.fields, source.case, painting.points, painting.governing)
    caption = f"{painting.caption}. {CROSSES_MEAN}" if painting.caption else CROSSES_MEAN
    return replace(painting, crosses=crosses, caption=caption)


def _mesh(_view: View, source: Source) -> Painting:
    mesh = source.fields.mesh
    unknowns = source.fields.solution.unknowns
    caption = f"{grouped(mesh.n_elements)} elements, {grouped(unknowns)} unknowns"
    if mesh.fallback:
        caption += f". {mesh.fallback}"
    return Painting(mesh.nodes, mesh=0.5, caption=caption)


def _stress(view: View, source: Source) -> Painting:
    name = scalars.STRESS_NAMES[view.stress]
    zones = zones_of([source])
    values = scalars.stress_of(source.fields, source.case, view.stress, source.part)
    peaks = peaks_of(source, view.stress)
    cards = with_history(source, tuple(peak_card(peak, source) for peak in peaks[:1]))
    caption = ""
    judged = ("von_mises", "tresca", "sigma_1")
    if source.findings is not None and not peaks and view.stress not in judged:
        caption = "Largest values of this component are not judged: put a probe where you need one"
    return Painting(
        source.fields.mesh.nodes,
        values,
        name,
        "stress",
        mesh=0.3,
        zones=zones,
        cards=cards,
        probes=probe_values(source, view.stress, "stress"),
        caption=caption,
        ends=trusted_ends(source, zones, peaks, values),
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
        zones=zones_of([source]),
        cards=with_history(source, use_cards(source)),
        probes=probe_values(source, "von_mises", "stress"),
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
        cards = (Card(found.displacement_at, text, trailing("largest", estimate), estimate.trust),)
    caption = f"Deformation drawn {_times(factor)}" if factor else "Drawn undeformed"
    return Painting(
        scalars.drawn_points(fields, case, factor),
        scalars.displacement_of(fields, case, view.displacement),
        scalars.DISPLACEMENT_NAMES[view.displacement].capitalize(),
        "displacement",
        deformation=factor,
        mesh=0.2,
        cards=cards,
        probes=probe_values(source, view.displacement, "displacement"),
        caption=caption,
    )


def _trust(_view: View, source: Source) -> Painting:
    fields = source.fields
    tolerance = source.part.mesh.tolerance
    found = source.case_findings
    peaks = found.peaks if found is not None else ()
    places = apart(peaks)
    doubtful = [p for p in places if p.estimate.trust != "settled"]
    shown = doubtful or peaks_of(source, "von_mises")[:1]
    return Painting(
        fields.mesh.nodes,
        scalars.error_share_of(fields, source.case, tolerance),
        "Mesh error / allowed",
        None,
        mesh=0.15,
        zones=zones_of([source]),
        cards=with_history(
            source, tuple(peak_card(p, source) for p in shown[:MOST_CARDS]), first=True
        ),
        probes=probe_values(source, "von_mises", "stress"),
        caption="" if found is not None else "Peaks are judged after the last pass",
        marks=tuple((p.at, p.estimate.trust) for p in places),
        legend=_legend(places, tolerance) if found is not None else (),
    )


def _legend(places: Sequence[Peak], tolerance: float) -> tuple[tuple[Trust, str], ...]:
    """What hatches and marks mean, with the number of places of each."""
    counts = {t: sum(p.estimate.trust == t for p in places) for t in _MEANINGS}
    return tuple(
        (trust, f"{counts[trust]} {words.format(100.0 * tolerance)}")
        for trust, words in _MEANINGS.items()
    )


def grouped(number: int) -> str:
    """A whole number with its thousands set apart by narrow gaps."""
    return f"{number:,}".replace(",", "\u202f")


def _times(factor: float) -> str:
    return f"{factor:,.4g} times".replace(",", "\u202f") if factor != 1.0 else "to scale"
