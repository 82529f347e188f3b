"""How much of a limit is used, and what that says: shared by the judgements of all limits."""

from __future__ import annotations

from screenapp.model.findings import Estimate, Verdict


def scaled(estimate: Estimate, factor: float) -> Estimate:
    """An estimate with its band times a positive factor."""
    return Estimate(
        estimate.value * factor, estimate.low * factor, estimate.high * factor, estimate.trust
    )


def exact(value: float) -> Estimate:
    """A number that follows from what was given alone, so that it has no band."""
    return Estimate(value, value, value, "settled")


def upright(estimate: Estimate) -> Estimate:
    """The size of a number that may be negative."""
    if estimate.value < 0.0:
        low, high = -estimate.high, -estimate.low
    else:
        low, high = estimate.low, estimate.high
    return Estimate(abs(estimate.value), max(low, 0.0), high, estimate.trust)


def verdict_on(used: Estimate) -> Verdict:
    """*Holds* if it is settled and its whole band under 1, *does not hold* if all of it is over."""
    if used.trust == "settled" and used.high < 1.0:
        return "holds"
    if used.trust == "settled" and used.low > 1.0:
        return "does not hold"
    return "undecided"
