"""The way back from a result record to findings, without the arrays."""

from __future__ import annotations

import math
from typing import Any

from screenapp.model.cut_json import cut_of
from screenapp.model.errors import ScreenappError
from screenapp.model.findings import (
    READING_QUANTITIES,
    CaseFindings,
    Estimate,
    Findings,
    LimitFindings,
    LineForce,
    MeshFindings,
    PassSummary,
    Peak,
    PlainLoss,
    Reading,
    WallGauge,
)
from screenapp.model.hand_check_json import hand_check_of
from screenapp.model.result_values import estimate_of, number_of, point_of
from screenapp.model.solution import Balance, BoltForce, LoadResultant, Reaction

FORMAT = "screenapp result"
VERSION = 1

Tree = dict[str, Any]


def findings_from_record(record: Tree) -> Findings:
    """The findings of a record that the schema has passed, without the arrays.

    Raises:
        ScreenappError: it is not a result record of a version that this program knows.
    """
    if record.get("format") != FORMAT or record.get("version") != VERSION:
        raise ScreenappError(
            f"this is not a {FORMAT} of version {VERSION}", "screen the part again"
        )
    return Findings(
        part_sha256=record["part_sha256"],
        key=record["key"],
        verdict=record["verdict"],
        headline=record["headline"],
        reasons=tuple(record["reasons"]),
        mass_kg=number_of(record["mass_kg"]),
        area=number_of(record["area_mm2"]),
        cases=tuple(_case_of(case) for case in record["cases"]),
        readings=tuple(_reading_of(reading) for reading in record["readings"]),
        cuts=tuple(cut_of(cut) for cut in record.get("cuts", ())),
        hand_checks=tuple(hand_check_of(c) for c in record.get("hand_checks", ())),
        limits=tuple(_limit_of(limit) for limit in record["limits"]),
        mesh=_mesh_of(record["mesh"]),
        timing={stage: number_of(seconds) for stage, seconds in record["timing"].items()},
        cautions=tuple(record["cautions"]),
    )


def _history_of(values: list[float | None]) -> tuple[float, ...]:
    return tuple(number_of(value) for value in values)


def _case_of(tree: Tree) -> CaseFindings:
    applied, balance = tree["applied"], tree["balance"]
    return CaseFindings(
        case=tree["id"],
        name=tree["name"],
        peaks=tuple(_peak_of(peak) for peak in tree["peaks"]),
        displacement_max=estimate_of(tree["displacement_max"]),
        displacement_at=point_of(tree["displacement_max"]["at"]),
        applied=(float(applied["x"]), float(applied["y"]), float(applied["moment"])),
        reactions=tuple(
            Reaction(
                r["support"],
                float(r["x"]),
                float(r["y"]),
                float(r["moment"]),
                tuple(BoltForce(b["on"], float(b["x"]), float(b["y"])) for b in r.get("bolts", ())),
            )
            for r in tree["reactions"]
        ),
        balance=Balance(number_of(balance["force"]), number_of(balance["moment"])),
        loads=tuple(
            LoadResultant(
                r["load"],
                float(r["x"]),
                float(r["y"]),
                float(r["moment"]),
                None if r["at"] is None else point_of(r["at"]),
            )
            for r in tree.get("loads", ())
        ),
        line_forces=tuple(
            LineForce(
                f["support"],
                estimate_of(f),
                point_of(f["at"]),
                float(f["normal"]),
                float(f["along"]),
                f.get("throat"),
            )
            for f in tree.get("line_forces", ())
        ),
    )


def _peak_of(tree: Tree) -> Peak:
    return Peak(
        tree["quantity"],
        estimate_of(tree),
        point_of(tree["at"]),
        tree["feature"],
        tree["place"],
        tree["why"],
        tree["mend"],
        _history_of(tree["history"]),
        estimate_of(tree["structural"]) if tree.get("structural") is not None else None,
        *_trace_of(tree),
        zone=tree.get("zone", ""),
    )


def _trace_of(tree: Tree) -> tuple[tuple[float, ...], float | None, float | None]:
    """Sizes, rate and allowed half band, which older records do not have."""
    return _history_of(tree.get("sizes", [])), tree.get("rate"), tree.get("allowed")


def _reading_of(tree: Tree) -> Reading:
    sizes, rate, allowed = _trace_of(tree)
    values = {
        name: Estimate(
            number_of(tree["values"][name]),
            number_of(tree["band"][name][0], -math.inf),
            number_of(tree["band"][name][1], math.inf),
            tree["trusts"][name],
        )
        for name in READING_QUANTITIES
    }
    return Reading(
        probe=tree["probe"],
        name=tree["name"],
        case=tree["case"],
        at=point_of(tree["at"]),
        values=values,
        trust=tree["trust"],
        feature=tree["feature"],
        place=tree["place"],
        why=tree["why"],
        history=_history_of(tree["history"]),
        sizes=sizes,
        rate=rate,
        allowed=allowed,
    )


def _limit_of(tree: Tree) -> LimitFindings:
    return LimitFindings(
        tree["limit"],
        tree["name"],
        tree["case"],
        estimate_of(tree, "utilisation"),
        tree["verdict"],
        point_of(tree["at"]),
        tree["place"],
        tree["reason"],
        tree.get("assumed", ""),
        tree.get("rule", ""),
    )


def _mesh_of(tree: Tree) -> MeshFindings:
    return MeshFindings(
        element=tree["element"],
        elements=tree["elements"],
        unknowns=tree["unknowns"],
        passes=tuple(
            PassSummary(
                p["elements"],
                p["unknowns"],
                number_of(p["error"]),
                number_of(p["peak"]),
                number_of(p["smallest"]),
            )
            for p in tree["passes"]
        ),
        error_estimate=number_of(tree["error_estimate"]),
        worst_jacobian=float(tree["worst_jacobian"]),
        across=tree["across"],
        residual=number_of(tree["residual"]),
        note=tree["note"],
        walls=tuple(_wall_of(wall) for wall in tree.get("walls", [])),
        plain=tuple(_loss_of(loss) for loss in tree.get("plain", [])),
    )


def _wall_of(tree: Tree) -> WallGauge:
    one, two = tree["between"]
    begin, end = tree["ends"]
    return WallGauge(
        (one, two),
        tree["place"],
        float(tree["width"]),
        (point_of(begin), point_of(end)),
        tree["layers"],
        float(tree["aspect"]),
        float(tree["stiffness"]),
    )


def _loss_of(tree: Tree) -> PlainLoss:
    return PlainLoss(
        tree["case"],
        number_of(tree["energy"]),
        number_of(tree["displacement"]),
        None if tree["peak"] is None else float(tree["peak"]),
        tree["place"],
    )
