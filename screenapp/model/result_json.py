"""The result record: findings as `resources/schema/result.schema.json` describes them.

JSON has no infinity: an end of a band that has no bound is null in the record.
"""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

from screenapp import __version__
from screenapp.model.atomic_write import write_atomically
from screenapp.model.findings import (
    READING_QUANTITIES,
    CaseFindings,
    Estimate,
    Findings,
    LimitFindings,
    MeshFindings,
    Peak,
    Reading,
    WallGauge,
)
from screenapp.model.json_writer import json_text
from screenapp.model.part import Part, Point
from screenapp.model.result_reading import FORMAT, VERSION, findings_from_record

__all__ = ["findings_from_record", "findings_to_record", "record_to_text", "write_record_json"]

Tree = dict[str, Any]


def findings_to_record(findings: Findings, part: Part) -> Tree:
    """The record of a screening of `part`, ready for `record_to_text` or `json.dumps`."""
    return {
        "format": FORMAT,
        "version": VERSION,
        "program_version": __version__,
        "title": part.title,
        "part_sha256": findings.part_sha256,
        "key": findings.key,
        "verdict": findings.verdict,
        "headline": findings.headline,
        "reasons": list(findings.reasons),
        "cautions": list(findings.cautions),
        "mass_kg": _finite(findings.mass_kg),
        "area_mm2": _finite(findings.area),
        "cases": [_case(case) for case in findings.cases],
        "readings": [_reading(reading) for reading in findings.readings],
        "limits": [_limit(limit) for limit in findings.limits],
        "buckling": [],
        "mesh": _mesh(findings.mesh),
        "timing": {stage: _finite(seconds) for stage, seconds in findings.timing.items()},
    }


def record_to_text(record: Tree) -> str:
    """The record's JSON text, ending in a line break."""
    return json_text(record)


def write_record_json(record: Tree, path: Path) -> None:
    """Write the record's JSON whole or not at all.

    Raises:
        OSError: the place cannot be written.
    """
    write_atomically(path, record_to_text(record).encode("utf-8"))


def _finite(value: float) -> float | None:
    return float(value) if math.isfinite(value) else None


def _estimate(estimate: Estimate, value_key: str = "value") -> Tree:
    return {
        value_key: _finite(estimate.value),
        "low": _finite(estimate.low),
        "high": _finite(estimate.high),
        "trust": estimate.trust,
    }


def _point(at: Point) -> list[float]:
    return [float(at[0]), float(at[1])]


def _case(case: CaseFindings) -> Tree:
    return {
        "id": case.case,
        "name": case.name,
        "peaks": [_peak(peak) for peak in case.peaks],
        "applied": dict(zip(("x", "y", "moment"), map(float, case.applied), strict=True)),
        "reactions": [
            {"support": r.support, "x": float(r.x), "y": float(r.y), "moment": float(r.moment)}
            for r in case.reactions
        ],
        "balance": {
            "force": _finite(case.balance.force),
            "moment": _finite(case.balance.moment),
        },
        "displacement_max": {
            **_estimate(case.displacement_max),
            "at": _point(case.displacement_at),
        },
    }


def _peak(peak: Peak) -> Tree:
    return {
        "quantity": peak.quantity,
        **_estimate(peak.estimate),
        "at": _point(peak.at),
        "feature": peak.feature,
        "place": peak.place,
        "why": peak.why,
        "mend": peak.mend,
        "history": [_finite(value) for value in peak.history],
        "structural": None if peak.structural is None else _estimate(peak.structural),
        **_trace(peak),
    }


def _reading(reading: Reading) -> Tree:
    estimates = {name: reading.values[name] for name in READING_QUANTITIES}
    return {
        "probe": reading.probe,
        "name": reading.name,
        "case": reading.case,
        "at": _point(reading.at),
        "feature": reading.feature,
        "place": reading.place,
        "values": {name: _finite(e.value) for name, e in estimates.items()},
        "band": {name: [_finite(e.low), _finite(e.high)] for name, e in estimates.items()},
        "trusts": {name: e.trust for name, e in estimates.items()},
        "trust": reading.trust,
        "why": reading.why,
        "history": [_finite(value) for value in reading.history],
        **_trace(reading),
    }


def _trace(number: Peak | Reading) -> Tree:
    """What goes with a history."""
    return {
        "sizes": [_finite(size) for size in number.sizes],
        "rate": None if number.rate is None else _finite(number.rate),
        "allowed": None if number.allowed is None else _finite(number.allowed),
    }


def _limit(limit: LimitFindings) -> Tree:
    return {
        "limit": limit.limit,
        "name": limit.name,
        "case": limit.case,
        **_estimate(limit.utilisation, "utilisation"),
        "verdict": limit.verdict,
        "at": _point(limit.at),
        "place": limit.place,
        "reason": limit.reason,
    }


def _mesh(mesh: MeshFindings) -> Tree:
    return {
        "element": mesh.element,
        "elements": int(mesh.elements),
        "unknowns": int(mesh.unknowns),
        "passes": [
            {
                "elements": int(p.elements),
                "unknowns": int(p.unknowns),
                "error": _finite(p.error),
                "peak": _finite(p.peak),
                "smallest": _finite(p.smallest),
            }
            for p in mesh.passes
        ],
        "error_estimate": _finite(mesh.error_estimate),
        "worst_jacobian": float(mesh.worst_jacobian),
        "across": int(mesh.across),
        "residual": _finite(mesh.residual),
        "note": mesh.note,
        "walls": [_wall(wall) for wall in mesh.walls],
        "plain": [
            {
                "case": loss.case,
                "energy": _finite(loss.energy),
                "displacement": _finite(loss.displacement),
                "peak": None if loss.peak is None else _finite(loss.peak),
                "place": loss.place,
            }
            for loss in mesh.plain
        ],
    }


def _wall(wall: WallGauge) -> Tree:
    return {
        "between": list(wall.between),
        "place": wall.place,
        "width": float(wall.width),
        "ends": [_point(end) for end in wall.ends],
        "layers": int(wall.layers),
        "aspect": float(wall.aspect),
        "stiffness": float(wall.stiffness),
    }
