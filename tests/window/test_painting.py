"""What each lens paints, as arrays and words: no window is opened."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from numpy.testing import assert_allclose

from screenapp.model.findings import Trust
from screenapp.model.part import Part, StressLimit
from screenapp.window import fields as scalars
from screenapp.window.document import Lens, View
from screenapp.window.governing import ENVELOPED, envelope
from screenapp.window.painting import Painting, Source, paint
from tests.window import fabricate as made


def source(part: Part | None = None, case: int = 0, trust: Trust = "settled") -> Source:
    part = part if part is not None else made.plate()
    findings = made.findings(part, "key", made.ring(32, 8), trust)
    assert findings.last is not None
    return Source(findings.last, case, part, findings)


def painted(view: View, of: Source) -> Painting:
    painting = paint(view, of)
    assert painting is not None
    return painting


def test_shape_paints_nothing() -> None:
    assert paint(View("Shape"), source()) is None


def test_stress_at_the_hole_is_three_times_the_remote_one() -> None:
    """Kirsch 1898: σ at the crown of a hole is 3 times the remote tension."""
    painting = painted(View("Stress"), source())
    assert painting.values is not None
    crown = np.hypot(*(painting.points - (0.0, made.RADIUS)).T).argmin()
    assert painting.values[crown] == pytest.approx(3 * made.REMOTE, rel=1e-9)


def test_utilisation_is_stress_times_factor_over_proof_stress() -> None:
    stress = painted(View("Stress"), source()).values
    use = painted(View("Utilisation"), source()).values
    assert stress is not None
    assert use is not None
    assert_allclose(use, stress * 1.5 / 235.0, rtol=1e-12)


def test_compression_uses_nothing_of_a_tension_limit() -> None:
    part = replace(made.plate(), limits=(StressLimit("m1", "sigma_1", "proof_stress", 1.0),))
    values = scalars.utilisation_of(source(part).fields, 1, part)
    assert not isinstance(values, scalars.NoField)
    assert values.min() == 0.0


def test_worst_of_two_limits_is_painted() -> None:
    two = (StressLimit("m1", factor=1.5), StressLimit("m2", "sigma_1", "proof_stress", 3.0))
    part = replace(made.plate(), limits=two)
    of = source(part)
    values = painted(View("Utilisation"), of).values
    first = scalars.utilisation_of(of.fields, 0, replace(part, limits=two[:1]))
    second = scalars.utilisation_of(of.fields, 0, replace(part, limits=two[1:]))
    assert values is not None
    assert_allclose(values, np.maximum(np.asarray(first), np.asarray(second)))


@pytest.mark.parametrize(
    ("change", "words"),
    [
        ({"limits": ()}, "No limit on stress"),
        ({"materials": ()}, "no proof stress"),
        ({"limits": (StressLimit("m1", against="strength"),)}, "no strength"),
    ],
)
def test_utilisation_says_what_is_missing(change: dict[str, object], words: str) -> None:
    part = replace(made.plate(), **change)  # type: ignore[arg-type]
    painting = painted(View("Utilisation"), source(part))
    assert painting.values is None
    assert words in painting.caption


def test_plane_strain_lowers_von_mises_stress_under_equal_tension() -> None:
    part = made.plate()
    strain = replace(part, wall=replace(part.wall, state="plane strain"))
    of, ofs = source(part), source(strain)
    at = np.hypot(*(of.fields.mesh.nodes - (0.0, made.RADIUS)).T).argmin()
    flat = scalars.stress_of(of.fields, 0, "von_mises", part)[at]
    held = scalars.stress_of(ofs.fields, 0, "von_mises", strain)[at]
    # uniaxial σ with σz = νσ: σv = σ √(1 − ν + ν²)
    assert held == pytest.approx(flat * np.sqrt(1 - 0.3 + 0.09), rel=1e-9)


def test_deformation_is_drawn_at_about_a_twelfth_of_the_part() -> None:
    of = source()
    painting = painted(View("Displacement"), of)
    drawn = np.hypot(*(painting.points - of.fields.mesh.nodes).T).max()
    size = np.hypot(2 * made.HALF_LENGTH, 2 * made.HALF_WIDTH)
    assert 0.08 / 2.5 <= drawn / size <= 0.0801
    assert "times" in painting.caption


def test_deformation_follows_the_wish() -> None:
    of = source()
    painting = painted(View("Displacement", deformation=10.0), of)
    expected = of.fields.mesh.nodes + 10 * of.fields.solution.displacements[0]
    assert_allclose(painting.points, expected)
    still = painted(View("Displacement", deformation=0.0), of)
    assert_allclose(still.points, of.fields.mesh.nodes)


def test_cards_say_value_band_place_and_trust() -> None:
    (card,) = painted(View("Stress"), source()).cards
    assert (card.head, card.detail) == ("150.2 ± 0.6 MPa", "hole h1, 90° · settled")
    (card,) = painted(View("Utilisation"), source()).cards
    assert card.head == "150.2 ± 0.6 MPa"
    assert card.detail == "hole h1, 90° · use 0.959 ± 0.005 · settled"
    (card,) = painted(View("Stress"), source(trust="rising")).cards
    assert card.head == "≥ 310 MPa, rising"
    (card,) = painted(View("Stress"), source(trust="unsettled")).cards
    assert card.head == "150 MPa, not settled"


def test_component_without_a_judged_peak_gets_no_number() -> None:
    painting = painted(View("Stress", stress="tau_xy"), source())
    assert painting.cards == ()
    assert "not judged" in painting.caption


@pytest.mark.parametrize("trust", ["rising", "unsettled"])
def test_untrusted_peaks_have_a_zone_round_them(trust: Trust) -> None:
    of = source(trust=trust)
    for lens in ("Stress", "Utilisation", "Trust"):
        (zone,) = painted(View(lens), of).zones  # type: ignore[arg-type]
        assert zone.trust == trust
        centres = of.fields.mesh.nodes[of.fields.mesh.quads[zone.elements, 8]]
        assert np.hypot(*(centres - (0.0, made.RADIUS)).T).max() < 20.0
    assert painted(View("Stress"), source()).zones == ()


def test_pass_without_findings_has_no_numbers() -> None:
    of = source()
    bare = Source(of.fields, 0, of.part)
    for lens in ("Mesh", "Utilisation", "Stress", "Displacement", "Trust"):
        painting = painted(View(lens), bare)  # type: ignore[arg-type]
        assert painting.cards == ()
        assert painting.probes == ()
        assert painting.zones == ()


def test_probe_that_was_moved_shows_no_old_value() -> None:
    of = source()
    assert painted(View("Stress"), of).probes == (((20.0, 20.0), "61.3 ± 0.4 MPa"),)
    shifted = replace(of.part, readings=(replace(of.part.readings[0], at=(21.0, 20.0)),))
    assert painted(View("Stress"), replace(of, part=shifted)).probes == ()


def test_error_share_is_one_where_an_element_spends_what_it_may() -> None:
    of = source()
    # the made-up error is 1 % over n equal elements; half of a tolerance of 2 %
    values = painted(View("Trust"), of).values
    assert values is not None
    assert_allclose(values, 0.01 / 0.02)


def test_mesh_counts_elements_and_unknowns() -> None:
    of = source()
    caption = painted(View("Mesh"), of).caption
    assert caption.startswith(f"{of.fields.mesh.n_elements} elements")


# --- all cases at once ----------------------------------------------------------------------


def test_the_envelope_of_each_kind_of_component() -> None:
    values = np.array([[1.0, -5.0, 2.0], [3.0, 4.0, 2.0]])
    for component, wanted, cases in (
        ("von_mises", [3.0, 4.0, 2.0], [1, 1, 0]),
        ("sigma_2", [1.0, -5.0, 2.0], [0, 0, 0]),
        ("tau_xy", [3.0, -5.0, 2.0], [1, 0, 0]),
        ("u_x", [3.0, -5.0, 2.0], [1, 0, 0]),
    ):
        shown, of = envelope(values, component)
        assert_allclose(shown, wanted, err_msg=component)
        assert of.tolist() == cases, component


@pytest.mark.parametrize("lens", ENVELOPED)
def test_all_cases_show_the_worst_at_each_place(lens: Lens) -> None:
    of = source()
    whole = painted(View(lens, envelope=True, deformation=0.0), of)
    each = [
        painted(View(lens, case=k, deformation=0.0), replace(of, case=k)).values for k in (0, 1)
    ]
    assert whole.values is not None
    assert whole.governing is not None
    assert_allclose(whole.values, np.maximum(*each))  # type: ignore[arg-type]
    assert whole.governing.shape == whole.values.shape
    chosen = np.where(whole.governing == 0, *each)  # type: ignore[call-overload]
    assert_allclose(chosen, whole.values)
    assert whole.deformation == 0.0
    assert whole.points is of.fields.mesh.nodes


@pytest.mark.parametrize("lens", ENVELOPED)
def test_the_card_of_all_cases_names_the_one_that_governs(lens: Lens) -> None:
    of = source()
    assert of.findings is not None
    (card,) = painted(View(lens, envelope=True), of).cards
    tops = {
        "Utilisation": {
            c.name: max(
                (u.utilisation.value for u in of.findings.limits if u.case == c.case), default=0.0
            )
            for c in of.findings.cases
        },
        "Stress": {
            c.name: max(
                (p.estimate.value for p in c.peaks if p.quantity == "von_mises"), default=0.0
            )
            for c in of.findings.cases
        },
        "Displacement": {c.name: c.displacement_max.value for c in of.findings.cases},
    }[lens]
    worst = max(tops, key=lambda name: tops[name])
    assert f"“{worst}”" in card.detail
    caption = painted(View(lens, envelope=True), of).caption
    assert caption.startswith("Of 2 cases the worst: ")
    assert any(name in caption for name in tops)


def test_doubt_of_any_case_is_hatched_in_the_envelope() -> None:
    of = source(trust="rising")
    whole = painted(View("Stress", envelope=True), of)
    each = [painted(View("Stress"), replace(of, case=k)) for k in (0, 1)]
    marked = {int(e) for one in each for zone in one.zones for e in zone.elements}
    assert marked
    assert {int(e) for zone in whole.zones for e in zone.elements} == marked


def test_one_case_has_no_envelope() -> None:
    part = replace(made.plate(), cases=made.plate().cases[:1])
    arrays = made.fields(made.ring(32, 8), 1)
    of = Source(arrays, 0, part)
    assert painted(View("Stress", envelope=True), of).governing is None


def test_without_a_limit_the_envelope_says_so_too() -> None:
    painting = painted(View("Utilisation", envelope=True), source(replace(made.plate(), limits=())))
    assert painting.values is None
    assert "No limit" in painting.caption
