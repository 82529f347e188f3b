"""The value of one component of a reading, with its band."""

from __future__ import annotations

from screenapp.model.findings import Estimate, Reading


def read_value(reading: Reading, component: str) -> Estimate | None:
    """A component as lenses name it ("u" is the size of the displacement); None if not read."""
    if component != "u":
        return reading.values.get(component)
    return size_of(reading) if {"u_x", "u_y"} <= reading.values.keys() else None


def size_of(reading: Reading) -> Estimate:
    """Size of the displacement, with the band that the bands of its components leave.

    The true components lie in their bands, so the true size lies between the smallest and the
    largest size of any vector in that box.
    """
    x, y = reading.values["u_x"], reading.values["u_y"]
    value = (x.value**2 + y.value**2) ** 0.5
    low = (_least(x) ** 2 + _least(y) ** 2) ** 0.5
    high = (_most(x) ** 2 + _most(y) ** 2) ** 0.5
    rank = ("settled", "unsettled", "rising")
    trust = max((x.trust, y.trust), key=rank.index)
    return Estimate(value, low, high, trust)


def _least(e: Estimate) -> float:
    return 0.0 if e.low <= 0.0 <= e.high else min(abs(e.low), abs(e.high))


def _most(e: Estimate) -> float:
    return max(abs(e.low), abs(e.high))
