"""The figures of an orthotropic sheet as a sentence, each to be typed anew."""

from __future__ import annotations

from screenapp.model.part import Material
from screenapp.window.sheet.changes import MaterialChange
from screenapp.window.sheet.pieces import Piece, Value
from screenapp.window.sheet.quantities import Quantities

STRENGTHS = (
    ("tension_1", "Tensile strength along 1"),
    ("compression_1", "Compressive strength along 1"),
    ("tension_2", "Tensile strength along 2"),
    ("compression_2", "Compressive strength along 2"),
    ("shear_strength", "Shear strength"),
)


def sheet_figures(m: Material, change: MaterialChange, q: Quantities) -> tuple[Piece | str, ...]:
    """Elastic constants and strengths in the material's axes."""

    def given(field: str, value: float | None, kind: str, name: str) -> Value:
        path = f"materials.{m.name}.{field}" if kind != "modulus" else ""
        set_ = change.setter(field)
        if value is None:
            return q.optional_value(field, value, kind, name, set_, field=path)
        return q.value(field, value, kind, name, set_, field=path)

    strengths = {
        field: q.optional_value(
            field,
            getattr(m, field),
            "stress",
            name,
            change.setter(field),
            field=f"materials.{m.name}.{field}",
        )
        for field, name in STRENGTHS
    }
    return (
        *(
            "E1 ",
            given("youngs_modulus", m.youngs_modulus, "modulus", "Modulus E1"),
        ),
        *(", E2 ", given("youngs_modulus_2", m.youngs_modulus_2, "modulus", "Modulus E2")),
        *(", ν12 ", given("poissons_ratio", m.poissons_ratio, "number", "Poisson's ratio ν12")),
        *(", G12 ", given("shear_modulus", m.shear_modulus, "modulus", "Shear modulus G12")),
        *(", density ", given("density", m.density, "density", "Density")),
        *(". Strength along 1 ", strengths["tension_1"], " in tension, "),
        *(strengths["compression_1"], " in compression; along 2 ", strengths["tension_2"], " and "),
        *(strengths["compression_2"], "; in shear ", strengths["shear_strength"], "."),
    )
