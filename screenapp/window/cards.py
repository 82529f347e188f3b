"""Numbers that are pointed at on the board, in words: each with its band, place and trust."""

from __future__ import annotations

import math
from dataclasses import replace

from screenapp.model.estimate_text import EstimateKind, estimate_text, value_text
from screenapp.model.findings import Estimate, LimitFindings, Peak
from screenapp.model.part import Point, StressLimit
from screenapp.window.painted import Card, Source
from screenapp.window.read_values import read_value
from screenapp.window.traced import Traced, figure_of, traced_number


def peaks_of(source: Source, quantity: str) -> list[Peak]:
    """The peaks of one quantity in the case, largest first."""
    found = source.case_findings
    return [p for p in found.peaks if p.quantity == quantity] if found is not None else []


def apart(peaks: tuple[Peak, ...]) -> list[Peak]:
    """One peak for each place: the same corner is a peak of several quantities."""
    kept: dict[str, Peak] = {}
    for peak in peaks:
        kept.setdefault(peak.place or str(peak.at), peak)
    return list(kept.values())


def peak_card(peak: Peak, source: Source) -> Card:
    """The card of one peak."""
    head = estimate_text(peak.estimate, "stress", source.part.display_units)
    number = Traced.peak(_case_id(source), peak)
    return Card(
        peak.at, head, trailing(peak.place, peak.estimate), peak.estimate.trust, number=number
    )


def with_history(source: Source, cards: tuple[Card, ...], first: bool = False) -> tuple[Card, ...]:
    """The cards, the one of the chosen number with its history; it comes as one more card if it
    is not among them.  With `first` and nothing chosen the first card has its history."""
    traced = source.traced
    if traced is None or traced.case != _case_id(source):
        if not first or not cards or cards[0].number is None:
            return cards
        traced = cards[0].number
    number = traced_number(source.findings, traced)
    figure = figure_of(number, source.part.display_units)
    if number is None or figure is None:
        return cards
    if isinstance(number, Peak):
        card = peak_card(number, source)
    else:
        estimate = number.values["von_mises"]
        head = estimate_text(estimate, "stress", source.part.display_units)
        detail = trailing(number.name, estimate)
        card = Card(number.at, head, detail, estimate.trust, number=traced)
    kept = [c for c in cards if c.number is None or c.at != card.at]
    same = [c for c in cards if c.at == card.at]
    chosen = replace(same[0] if same and isinstance(number, Peak) else card, history=figure)
    return (chosen, *(c for c in kept if c.at != card.at))


def _case_id(source: Source) -> str:
    found = source.case_findings
    return found.case if found is not None else ""


def use_cards(source: Source) -> tuple[Card, ...]:
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
    near = [p for p in peaks_of(source, limit.measure) if math.dist(p.at, use.at) < 1e-6]
    number = Traced.peak(use.case, near[0]) if near else None
    if near:
        head = estimate_text(near[0].estimate, "stress", units)
        detail = trailing(" · ".join(filter(None, (use.place, f"use {share}"))), use.utilisation)
    else:
        head = f"use {estimate_text(use.utilisation, 'factor', units)}"
        detail = trailing(use.place, use.utilisation)
    return Card(use.at, head, detail, use.utilisation.trust, number=number)


def trailing(words: str, estimate: Estimate) -> str:
    """The words, with "settled" behind them where the number itself does not say its trust."""
    tail = ("settled",) if estimate.trust == "settled" else ()
    return " · ".join(filter(None, (words, *tail)))


def probe_values(
    source: Source, quantity: str, kind: EstimateKind
) -> tuple[tuple[Point, str], ...]:
    """Value of each probe that still stands where it was read, but for one that has a card."""
    found = source.case_findings
    if found is None or source.findings is None:
        return ()
    places = {probe.id: probe.at for probe in source.part.readings}
    texts: list[tuple[Point, str]] = []
    for reading in source.findings.readings:
        if reading.case != found.case or places.get(reading.probe) != reading.at:
            continue
        estimate = read_value(reading, quantity)
        chosen = source.traced is not None and source.traced.probe == reading.probe
        if estimate is not None and not (chosen and quantity == "von_mises"):
            texts.append((reading.at, estimate_text(estimate, kind, source.part.display_units)))
    return tuple(texts)
