"""The result record: findings as `resources/schema/result.schema.json` describes them.

JSON has no infinity: an end of a band that has no bound is null in the record.
"""

from __future__ import annotations

from pathlib import Path
from typing import Any

from screenapp import __version__
from screenapp.model.atomic_write import write_atomically
from screenapp.model.cut_json import cut_tree
from screenapp.model.findings import (
    READING_QUANTITIES,
    CaseFindings,
    Findings,
    LimitFindings,
    MeshFindings,
    Peak,
    Reading,
    WallGauge,
)
from screenapp.model.hand_check_json import hand_check_tree
from screenapp.model.json_writer import json_text
from screenapp.model.part import Part
from screenapp.model.result_reading import FORMAT, VERSION, findings_from_record
from screenapp.model.result_values import estimate_tree, finite, point_tree
from screenapp.model.solution import Reaction

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
        "mass_kg": finite(findings.mass_kg),
        "area_mm2": finite(findings.area),
        "cases": [_case(case) for case in findings.cases],
        "readings": [_reading(reading) for reading in findings.readings],
        "cuts": [cut_tree(cut) for cut in findings.cuts],
        "hand_checks": [hand_check_tree(check) for check in findings.hand_checks],
        "limits": [_limit(limit) for limit in findings.limits],
        "buckling": [],
        "mesh": _mesh(findings.mesh),
        "timing": {stage: finite(seconds) for stage, seconds in findings.timing.items()},
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


def _reaction(reaction: Reaction) -> Tree:
    tree: Tree = {
        "support": reaction.support,
        "x": float(reaction.x),
        "y": float(reaction.y),
        "moment": float(reaction.moment),
    }
    if reaction.bolts:
        tree["bolts"] = [{"on": b.on, "x": float(b.x), "y": float(b.y)} for b in reaction.bolts]
    return tree


def _case(case: CaseFindings) -> Tree:
    return {
        "id": case.case,
        "name": case.name,
        "peaks": [_peak(peak) for peak in case.peaks],
        "applied": dict(zip(("x", "y", "moment"), map(float, case.applied), strict=True)),
        "loads": [
            {
                "load": r.load,
                "x": float(r.x),
                "y": float(r.y),
                "moment": float(r.moment),
                "at": None if r.at is None else point_tree(r.at),
            }
            for r in case.loads
        ],
        **(
            {
                "line_forces": [
                    {
                        "support": f.support,
                        **estimate_tree(f.largest),
                        "at": point_tree(f.at),
                        "normal": float(f.normal),
                        "along": float(f.along),
                        **({} if f.throat is None else {"throat": float(f.throat)}),
                    }
                    for f in case.line_forces
                ]
            }
            if case.line_forces
            else {}
        ),
        "reactions": [_reaction(r) for r in case.reactions],
        "balance": {
            "force": finite(case.balance.force),
            "moment": finite(case.balance.moment),
        },
        "displacement_max": {
            **estimate_tree(case.displacement_max),
            "at": point_tree(case.displacement_at),
        },
    }


def _peak(peak: Peak) -> Tree:
    return {
        "quantity": peak.quantity,
        **estimate_tree(peak.estimate),
        "at": point_tree(peak.at),
        "feature": peak.feature,
        "place": peak.place,
        "why": peak.why,
        "mend": peak.mend,
        "history": [finite(value) for value in peak.history],
        "structural": None if peak.structural is None else estimate_tree(peak.structural),
        **_trace(peak),
        "zone": peak.zone,
    }


def _reading(reading: Reading) -> Tree:
    estimates = {name: reading.values[name] for name in READING_QUANTITIES}
    return {
        "probe": reading.probe,
        "name": reading.name,
        "case": reading.case,
        "at": point_tree(reading.at),
        "feature": reading.feature,
        "place": reading.place,
        "values": {name: finite(e.value) for name, e in estimates.items()},
        "band": {name: [finite(e.low), finite(e.high)] for name, e in estimates.items()},
        "trusts": {name: e.trust for name, e in estimates.items()},
        "trust": reading.trust,
        "why": reading.why,
        "history": [finite(value) for value in reading.history],
        **_trace(reading),
    }


def _trace(number: Peak | Reading) -> Tree:
    """What goes with a history."""
    return {
        "sizes": [finite(size) for size in number.sizes],
        "rate": None if number.rate is None else finite(number.rate),
        "allowed": None if number.allowed is None else finite(number.allowed),
    }


def _limit(limit: LimitFindings) -> Tree:
    return {
        "limit": limit.limit,
        "name": limit.name,
        "case": limit.case,
        **estimate_tree(limit.utilisation, "utilisation"),
        "verdict": limit.verdict,
        "at": point_tree(limit.at),
        "place": limit.place,
        "reason": limit.reason,
        "assumed": limit.assumed,
        "rule": limit.rule,
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
                "error": finite(p.error),
                "peak": finite(p.peak),
                "smallest": finite(p.smallest),
            }
            for p in mesh.passes
        ],
        "error_estimate": finite(mesh.error_estimate),
        "worst_jacobian": float(mesh.worst_jacobian),
        "across": int(mesh.across),
        "residual": finite(mesh.residual),
        "note": mesh.note,
        "walls": [_wall(wall) for wall in mesh.walls],
        "plain": [
            {
                "case": loss.case,
                "energy": finite(loss.energy),
                "displacement": finite(loss.displacement),
                "peak": None if loss.peak is None else finite(loss.peak),
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
        "ends": [point_tree(end) for end in wall.ends],
        "layers": int(wall.layers),
        "aspect": float(wall.aspect),
        "stiffness": float(wall.stiffness),
    }
