"""The table of statics: units, what is nothing but rounding, single loads."""

from __future__ import annotations

import pytest

from screenapp.model.findings import CaseFindings, Estimate
from screenapp.model.solution import Balance, LoadResultant, Reaction
from screenapp.report.balance_rows import balance_heads, balance_rows


def case(*loads: LoadResultant) -> CaseFindings:
    return CaseFindings(
        case="k1",
        name="Hoist",
        peaks=(),
        displacement_max=Estimate(0.1, 0.1, 0.1, "settled"),
        displacement_at=(0.0, 0.0),
        applied=(0.0, -2600.0, -613_600.0),
        reactions=(Reaction("s1", -1.4921e-11, 2600.0, 613_600.0),),
        balance=Balance(0.0, 0.0),
        loads=loads,
    )


def test_rounding_beside_the_largest_is_written_as_nought() -> None:
    assert balance_rows(case(), "mm-N-MPa") == [
        ("loads together", ("0", "−2600", "−613.6")),
        ("support s1 gives", ("0", "2600", "613.6")),
    ]


def test_heads_and_figures_are_in_the_units_shown() -> None:
    assert balance_heads("in-lbf-ksi") == ("x lbf", "y lbf", "moment about the origin lbf·in")
    _whose, (x, y, moment) = balance_rows(case(), "in-lbf-ksi")[1]
    assert x == "0"
    assert float(y) == pytest.approx(2600 / 4.4482216152605, rel=1e-4)
    assert float(moment) == pytest.approx(613_600 / (4.4482216152605 * 25.4), rel=1e-4)


def test_loads_have_rows_where_there_are_several_or_one_is_none() -> None:
    pull = LoadResultant("l1", 0.0, -2600.0, -613_600.0, (236.0, 22.0))
    heat = LoadResultant("l2", 0.0, 0.0, 0.0, None)
    assert len(balance_rows(case(pull), "mm-N-MPa")) == 2
    named = [whose for whose, _figures in balance_rows(case(pull, heat), "mm-N-MPa")]
    assert named[1:3] == ["of which load l1", "of which load l2, no force"]
    alone = [whose for whose, _figures in balance_rows(case(heat), "mm-N-MPa")]
    assert alone[1] == "of which load l2, no force"
