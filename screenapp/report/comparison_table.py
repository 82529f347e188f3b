"""A comparison of two screenings as plain text for a terminal."""

from __future__ import annotations

from collections.abc import Callable

from screenapp.model.comparison import Comparison, UseChange
from screenapp.model.estimate_text import MINUS, estimate_text
from screenapp.model.findings import LimitFindings
from screenapp.model.part import DisplayUnits
from screenapp.report.one_line import one_line
from screenapp.report.text_columns import lined_up

MOST_CHANGES = 60
"""No more changed fields are listed one by one."""


def comparison_table(
    comparison: Comparison,
    units: DisplayUnits,
    spell: Callable[[str], str] = lambda text: text,
) -> str:
    """Verdicts, then what changed, then every utilisation before and after."""
    (title, now), (was_verdict, verdict) = comparison.titles, comparison.verdicts
    lines = [one_line(title) if title == now else f"{one_line(title)} → {one_line(now)}"]
    lines.append(f"verdict: {was_verdict} → {verdict}")
    before, after = comparison.masses
    lines.append(f"mass: {before:.4g} kg → {after:.4g} kg")
    lines.append("")
    if comparison.changes:
        rows = [("changed", "before", "after")]
        rows += [
            (c.field, "–" if c.before is None else c.before, "–" if c.after is None else c.after)
            for c in comparison.changes[:MOST_CHANGES]
        ]
        lines += lined_up(rows, spell)
        left = len(comparison.changes) - MOST_CHANGES
        if left > 0:
            lines.append(f"  and {left} more")
    else:
        lines.append("  nothing in the part file differs")
    table = [("limit", "case", "use before", "use after", "difference", "verdict")]
    table += [
        (
            use.limit,
            use.case,
            _use(use.before, units),
            _use(use.after, units),
            _difference(use),
            _verdicts(use),
        )
        for use in comparison.uses
    ]
    lines += ["", *lined_up(table, spell)]
    return "\n".join(spell(line) for line in lines)


def _use(found: LimitFindings | None, units: DisplayUnits) -> str:
    return "–" if found is None else estimate_text(found.utilisation, "factor", units)


def _difference(use: UseChange) -> str:
    if use.difference is None:
        return "not known"
    sign = "+" if use.difference >= 0.0 else MINUS
    text = f"{sign}{abs(use.difference):.3g}"
    return text if use.clear else f"{text}, within the bands"


def _verdicts(use: UseChange) -> str:
    was = "–" if use.before is None else use.before.verdict
    now = "–" if use.after is None else use.after.verdict
    return was if was == now else f"{was} → {now}"
