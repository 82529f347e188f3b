"""What the head of the sheet says of a verdict, so that the paragraphs need not say it again."""

from __future__ import annotations

from screenapp.model.findings import Findings

MOST_IN_HEAD = 2
"""Reasons that the head gives beside its headline."""


def reasons_in_head(findings: Findings) -> tuple[str, ...]:
    """The reasons that stand in the head below the headline."""
    rest = [r for r in findings.reasons if r.rstrip(".") not in findings.headline]
    return tuple(rest[:MOST_IN_HEAD])


def head_says(findings: Findings, text: str) -> bool:
    """Whether the head says a reason, or a reason that begins so."""
    wanted = text.strip().rstrip(".").lower()
    said = (findings.headline, *reasons_in_head(findings))
    return bool(wanted) and any(wanted in one.lower() for one in said)
