"""The envelope over all cases and combinations: at each place the value of the case that governs
there, and in words which case that is."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

import numpy as np

from screenapp.model.combinations import loadings
from screenapp.model.estimate_text import EstimateKind, estimate_text
from screenapp.model.findings import Peak
from screenapp.model.part import Point, StressLimit
from screenapp.window import fields as scalars
from screenapp.window.cards import peak_card, peaks_of, trailing, use_cards
from screenapp.window.document import View
from screenapp.window.doubtful_zones import trusted_ends, zones_of
from screenapp.window.governing import component_of, envelope, governing_reading
from screenapp.window.painted import Card, Floats, Ints, Painting, Source
from screenapp.window.read_values import read_value


def paint_envelope(view: View, source: Source) -> Painting:
    """What one of `ENVELOPED` shows of all cases."""
    count = len(source.fields.solution.displacements)
    sources = [replace(source, case=case) for case in range(count)]
    painters: dict[str, Callable[[View, list[Source]], Painting]] = {
        "Utilisation": _utilisation,
        "Stress": _stress,
        "Displacement": _displacement,
    }
    painting = painters[view.lens](view, sources)
    if painting.values is None:
        return painting
    kind: EstimateKind = "displacement" if view.lens == "Displacement" else "stress"
    return replace(painting, probes=_probe_values(source, component_of(view), kind))


def _probe_values(
    source: Source, component: str, kind: EstimateKind
) -> tuple[tuple[Point, str], ...]:
    """The value of each probe in the case that governs there, with its name."""
    if source.findings is None:
        return ()
    names = {case.case: case.name for case in source.findings.cases}
    texts: list[tuple[Point, str]] = []
    for probe in source.part.readings:
        readings = [r for r in source.findings.readings if r.probe == probe.id and r.at == probe.at]
        reading = governing_reading(readings, component)
        estimate = None if reading is None else read_value(reading, component)
        if reading is not None and estimate is not None:
            value = estimate_text(estimate, kind, source.part.display_units)
            texts.append((reading.at, f"{value}\nunder “{names[reading.case]}”"))
    return tuple(texts)


def case_name(source: Source) -> str:
    """The name of the case that a source speaks of."""
    if source.case_findings is not None:
        return source.case_findings.name
    names = [case.name or case.id for case in loadings(source.part)]
    return names[source.case] if source.case < len(names) else f"case {source.case + 1}"


def _stress(view: View, sources: list[Source]) -> Painting:
    first = sources[0]
    every = [scalars.stress_of(s.fields, s.case, view.stress, s.part) for s in sources]
    values, cases = envelope(np.stack(every), view.stress)
    peaks = [(peak, s) for s in sources for peak in peaks_of(s, view.stress)]
    cards: tuple[Card, ...] = ()
    if peaks:
        peak, of = max(peaks, key=lambda row: row[0].estimate.value)
        cards = (_under(peak_card(peak, of), of),)
    only: list[Peak] = [peak for peak, _ in peaks]
    zones = zones_of(sources)
    return Painting(
        first.fields.mesh.nodes,
        values,
        scalars.STRESS_NAMES[view.stress],
        "stress",
        mesh=0.3,
        zones=zones,
        cards=cards,
        caption=_caption(cases, sources),
        ends=trusted_ends(first, zones, only, values),
        governing=cases,
    )


def _utilisation(_view: View, sources: list[Source]) -> Painting:
    first = sources[0]
    every: list[Floats] = []
    for source in sources:
        values = scalars.utilisation_of(source.fields, source.case, source.part)
        if isinstance(values, scalars.NoField):
            return Painting(first.fields.mesh.nodes, mesh=0.3, caption=values.why)
        every.append(values)
    shown, cases = envelope(np.stack(every), "use")
    return Painting(
        first.fields.mesh.nodes,
        shown,
        "Utilisation",
        "factor",
        mesh=0.3,
        zones=zones_of(sources),
        cards=_most_used(sources),
        caption=_caption(cases, sources),
        governing=cases,
    )


def _most_used(sources: list[Source]) -> tuple[Card, ...]:
    """The card of the stress limit that is used most in any case."""
    findings = sources[0].findings
    if findings is None:
        return ()
    on_stress = {limit.id for limit in sources[0].part.limits if isinstance(limit, StressLimit)}
    uses = [use for use in findings.limits if use.limit in on_stress]
    if not uses:
        return ()
    most = max(uses, key=lambda use: use.utilisation.value)
    of = next(s for s in sources if s.case_findings and s.case_findings.case == most.case)
    return tuple(_under(card, of) for card in use_cards(of))


def _displacement(view: View, sources: list[Source]) -> Painting:
    first = sources[0]
    every = [scalars.displacement_of(s.fields, s.case, view.displacement) for s in sources]
    values, cases = envelope(np.stack(every), view.displacement)
    cards: tuple[Card, ...] = ()
    found = [(s.case_findings, s) for s in sources if s.case_findings is not None]
    if found and view.displacement == "u":
        most, of = max(found, key=lambda row: row[0].displacement_max.value)
        text = estimate_text(most.displacement_max, "displacement", first.part.display_units)
        card = Card(
            most.displacement_at,
            text,
            trailing("largest", most.displacement_max),
            most.displacement_max.trust,
        )
        cards = (_under(card, of),)
    return Painting(
        first.fields.mesh.nodes,
        values,
        scalars.DISPLACEMENT_NAMES[view.displacement].capitalize(),
        "displacement",
        mesh=0.2,
        cards=cards,
        caption=f"{_caption(cases, sources)}. Drawn undeformed",
        governing=cases,
    )


def _under(card: Card, source: Source) -> Card:
    """The card with the name of its case."""
    named = f"under “{case_name(source)}”"
    return replace(card, detail=f"{card.detail} · {named}" if card.detail else named)


def _caption(cases: Ints, sources: list[Source]) -> str:
    """How many cases there are, and which of them governs at how many places."""
    shares = np.rint(100.0 * np.bincount(cases.ravel(), minlength=len(sources)) / cases.size)
    order = [i for i in np.argsort(-shares, kind="stable")[:2] if shares[i] > 0.0]
    told = [f"“{case_name(sources[i])}” at {shares[i]:.0f} %" for i in order]
    return f"Of {len(sources)} cases the worst: {' and '.join(told)} of the nodes"
