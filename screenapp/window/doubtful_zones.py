"""Where the numbers of a lens are not to be trusted, and the range of what remains."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from screenapp.model.findings import Peak, Trust
from screenapp.window import fields as scalars
from screenapp.window.cards import apart
from screenapp.window.painted import Floats, Source, Zone

_DOUBTFUL: tuple[Trust, ...] = ("unsettled", "rising")


def zones_of(sources: Sequence[Source]) -> tuple[Zone, ...]:
    """Round every rising or unsettled peak of the cases."""
    zones: list[Zone] = []
    for trust in _DOUBTFUL:
        elements = [
            scalars.zone_round(source.fields, peak.at)
            for source in sources
            if source.case_findings is not None
            for peak in apart(source.case_findings.peaks)
            if peak.estimate.trust == trust
        ]
        if elements:
            zones.append(Zone(np.unique(np.concatenate(elements)), trust))
    return tuple(zones)


def trusted_ends(
    source: Source, zones: Sequence[Zone], peaks: Sequence[Peak], values: Floats
) -> tuple[float, float] | None:
    """The range of what does not keep rising; None where nothing does.

    A rising value would take the colours from all the rest, and more so with each pass.  The upper
    end is the largest peak that is not rising, or else the largest value outside rising zones.
    """
    rising = [zone.elements for zone in zones if zone.trust == "rising"]
    if not rising:
        return None
    mesh = source.fields.mesh
    steady = np.ones(mesh.n_nodes, dtype=bool)
    steady[mesh.quads[np.concatenate(rising)]] = False
    steady = steady if values.ndim == 1 else steady[mesh.quads]
    if not steady.any():
        return None
    low, high = float(values[steady].min()), float(values[steady].max())
    known = [p for p in peaks if p.estimate.trust != "rising"]
    if known:
        high = max(peak.estimate.value for peak in known)
    return low, high
