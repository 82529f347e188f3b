"""The verdict of one part as plain text for a terminal."""

from __future__ import annotations

from collections.abc import Callable

from screenapp.model.estimate_text import estimate_text
from screenapp.model.findings import Findings
from screenapp.model.gauge_text import wall_text
from screenapp.model.part import Part
from screenapp.report.one_line import one_line
from screenapp.report.text_columns import lined_up


def verdict_table(
    part: Part, findings: Findings, spell: Callable[[str], str] = lambda text: text
) -> str:
    """Title, verdict, limits, peaks, readings and the mesh, a line each.

    `spell` may put other letters for those that the terminal lacks; columns are lined up after it.
    """
    cases = {case.case: case.name for case in findings.cases}
    units = part.display_units
    lines = [one_line(part.title), one_line(findings.headline)]
    lines += [
        f"  {one_line(reason)}" for reason in findings.reasons if reason not in findings.headline
    ]
    rows = [("limit", "case", "use", "trust", "verdict", "where")]
    rows += [
        (
            limit.name,
            cases.get(limit.case, limit.case),
            estimate_text(limit.utilisation, "factor", units),
            limit.utilisation.trust,
            limit.verdict,
            limit.place,
        )
        for limit in findings.limits
    ]
    lines += ["", *lined_up(rows, spell)]
    peaks = [("von Mises peak", "case", "value", "trust")]
    for case in findings.cases:
        peaks += [
            (p.place, case.name, estimate_text(p.estimate, "stress", units), p.estimate.trust)
            for p in case.peaks
            if p.quantity == "von_mises"
        ]
    lines += ["", *lined_up(peaks, spell)]
    if findings.readings:
        read = [("reading", "case", "von Mises", "trust", "where")]
        read += [
            (
                r.name,
                cases.get(r.case, r.case),
                estimate_text(r.values["von_mises"], "stress", units),
                r.trust,
                r.place,
            )
            for r in findings.readings
        ]
        lines += ["", *lined_up(read, spell)]
    mesh = findings.mesh
    balance = max(max(c.balance.force, c.balance.moment) for c in findings.cases)
    lines += [
        "",
        f"mass {findings.mass_kg:.4g} kg; {len(mesh.passes)} passes, {mesh.elements} elements, "
        f"{mesh.unknowns} unknowns; energy error {100 * mesh.error_estimate:.2g} %; loads and "
        f"reactions balance to {balance:.0e}; {findings.timing['total']:.2f} s",
    ]
    if mesh.walls:
        lines.append(wall_text(mesh.walls[0], units))
    lines += [f"caution: {one_line(caution)}" for caution in findings.cautions]
    return "\n".join(spell(line) for line in lines)
