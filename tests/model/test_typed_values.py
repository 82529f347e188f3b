"""What is typed where a number stands: units, arithmetic, names, decimal commas, both displays."""

from __future__ import annotations

import pytest
from hypothesis import example, given, strategies as st

from screenapp.model.errors import ScreenappError
from screenapp.model.kinds import KindName
from screenapp.model.part import Dimension, DisplayUnits
from screenapp.model.typed_values import read_typed, shown_formula

NAMED = (
    Dimension("width", 80.0),
    Dimension("höhe", 12.7),
    Dimension("n", 4.0, measures="number"),
    Dimension("lean", 30.0, measures="angle"),
)


@pytest.mark.parametrize(
    ("text", "kind", "units", "value", "formula"),
    [
        ("12", "length", "mm-N-MPa", 12.0, None),
        ("0,5 in", "length", "mm-N-MPa", 12.7, None),
        ("2*12 mm", "length", "mm-N-MPa", 24.0, None),
        ("2*12 mm", "length", "in-lbf-ksi", 24.0, None),
        ("2*1,5", "length", "mm-N-MPa", 3.0, None),
        ("(3 + 4) cm", "length", "mm-N-MPa", 70.0, None),
        ("12-5", "length", "mm-N-MPa", 7.0, None),
        ("12 - 5", "length", "in-lbf-ksi", 7 * 25.4, None),
        ("0.5 in + 2 mm", "length", "mm-N-MPa", 14.7, None),
        ("width/2", "length", "in-lbf-ksi", 40.0, "width/2"),
        ("width/2 - 5", "length", "mm-N-MPa", 35.0, "width/2 - 5"),
        ("width/2 − 0.25 in", "length", "mm-N-MPa", 33.65, "width/2 - 6.35"),
        ("width/2 - 0.25", "length", "in-lbf-ksi", 33.65, "width/2 - 6.35"),
        ("2*höhe + 1", "length", "in-lbf-ksi", 50.8, "2*höhe + 25.4"),
        ("max(width, 2)", "length", "in-lbf-ksi", 80.0, "max(width, 50.8)"),
        ("max(width; 2,5)", "length", "mm-N-MPa", None, None),
        ("max(width; 2.5)", "length", "mm-N-MPa", 80.0, "max(width, 2.5)"),
        ("n*2", "length", "in-lbf-ksi", 203.2, "n*50.8"),
        ("10/n + 1", "length", "in-lbf-ksi", 88.9, "254/n + 25.4"),
        ("sin(lean)*width", "length", "in-lbf-ksi", 40.0, "sin(lean)*width"),
        ("width**2/width", "length", "in-lbf-ksi", 80.0, "width**2/width"),
        ("90° - lean", "angle", "in-lbf-ksi", 60.0, "90 - lean"),
        ("2*100", "force", "in-lbf-ksi", 200 * 4.4482216152605, None),
        ("n*1.5 kN", "force", "mm-N-MPa", 6000.0, "n*1500"),
    ],
)
def test_values(
    text: str, kind: KindName, units: DisplayUnits, value: float | None, formula: str | None
) -> None:
    if value is None:
        with pytest.raises(ScreenappError, match="two ways"):
            read_typed(text, kind, units, NAMED)
        return
    typed = read_typed(text, kind, units, NAMED)
    assert typed.value == pytest.approx(value, rel=1e-12)
    assert typed.formula == formula


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("", "nothing was given"),
        ("12 kN", "kN is a force, a length is wanted"),
        ("2*3 kN", "kN is a force"),
        ("widht/2", 'did you mean "width"'),
        ("width 2", "not a complete expression"),
        ("width^2", "write ** for a power"),
        ("12,500*2", "write 12.500 or 12500"),
        ("width/0", "divides by zero"),
        ("width(2)", "not a function"),
    ],
)
def test_errors(text: str, says: str) -> None:
    with pytest.raises(ScreenappError) as caught:
        read_typed(text, "length", "mm-N-MPa", NAMED)
    assert says in f"{caught.value.cause}: {caught.value.mend}"


def test_a_word_without_any_dimension_is_no_quantity() -> None:
    with pytest.raises(ScreenappError, match="has no number"):
        read_typed("wide", "length")


@pytest.mark.parametrize("units", ["mm-N-MPa", "in-lbf-ksi"])
@pytest.mark.parametrize(
    "formula",
    [
        "width/2 - 6.35",
        "höhe*2+25.4",
        "max(width, 50.8)",
        "254/n + 25.4",
        "-(width - 1e-3)/n",
        "n*2",
    ],
)
def test_a_shown_expression_reads_back_as_it_is_kept(units: DisplayUnits, formula: str) -> None:
    shown = shown_formula(formula, "length", units, NAMED)
    again = read_typed(shown, "length", units, NAMED)
    assert again.formula is not None
    assert read_typed(again.formula, "length", "mm-N-MPa", NAMED).value == pytest.approx(
        read_typed(formula, "length", "mm-N-MPa", NAMED).value, rel=1e-12
    )
    if units == "mm-N-MPa":
        assert shown == formula


@example("None")
@example("True + 2")
@given(st.text(max_size=40) | st.text("0123456789.,+-*/() §withmaxn°", max_size=30))
def test_any_text_gives_a_value_or_an_error_of_ours(text: str) -> None:
    for units in ("mm-N-MPa", "in-lbf-ksi"):
        try:
            read_typed(text, "length", units, NAMED)  # type: ignore[arg-type]
        except ScreenappError:
            continue
