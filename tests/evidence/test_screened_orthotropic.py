"""Orthotropic sheets along the user's path: a hole in a wide plate, and tension off the axes."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from screenapp.model.part import (
    Case,
    CircleHole,
    FixedSupport,
    LineLoad,
    Material,
    MeshWishes,
    Part,
    Probe,
    RollerSupport,
    StressLimit,
    Wall,
)
from tests.evidence.screened import Screened, chain
from tests.evidence.table import record

LEKHNITSKII = "Lekhnitskii, Anisotropic Plates (from memory)"

GLASS = Material(
    "glass",
    39_000.0,
    0.28,
    1900.0,
    youngs_modulus_2=8_600.0,
    shear_modulus=3_800.0,
    tension_1=1080.0,
    compression_1=620.0,
    tension_2=39.0,
    compression_2=128.0,
    shear_strength=89.0,
)


def along_1(material: Material) -> float:
    """Kt = 1 + sqrt(2 (sqrt(E1/E2) - ν12) + E1/G12) for tension along 1, infinite plate."""
    assert material.youngs_modulus_2 is not None
    assert material.shear_modulus is not None
    e1, e2 = material.youngs_modulus, material.youngs_modulus_2
    root = 2.0 * (math.sqrt(e1 / e2) - material.poissons_ratio) + e1 / material.shear_modulus
    return 1.0 + math.sqrt(root)


def turned_round(material: Material) -> Material:
    """The same sheet with its axes exchanged."""
    assert material.youngs_modulus_2 is not None
    nu21 = material.poissons_ratio * material.youngs_modulus_2 / material.youngs_modulus
    return replace(
        material,
        youngs_modulus=material.youngs_modulus_2,
        youngs_modulus_2=material.youngs_modulus,
        poissons_ratio=nu21,
    )


def plate(axis: float) -> Part:
    """A hole of 20 mm in a square plate of 500 mm, 100 MPa gross along x."""
    size = 500.0
    return Part(
        outline=chain([(0.0, 0.0), (size, 0.0), (size, size), (0.0, size)]),
        holes=(CircleHole("h1", (0.5 * size, 0.5 * size), 20.0),),
        wall=Wall(2.0, "glass", axis=axis),
        materials=(GLASS,),
        supports=(FixedSupport("s1", "c1"), RollerSupport("s2", "c2", 90.0)),
        cases=(
            Case(
                "k1",
                "pulled",
                (LineLoad("l1", "e2", 200.0, 0.0), LineLoad("l2", "e4", -200.0, 0.0)),
            ),
        ),
        mesh=MeshWishes(tolerance=0.005),
    )


@pytest.mark.parametrize(("axis", "sheet"), [(0.0, GLASS), (90.0, turned_round(GLASS))])
def test_hole_in_a_wide_plate_pulled_along_an_axis(
    axis: float, sheet: Material, screened: Screened
) -> None:
    """W/d = 25, while the formula's plate has no end: of an isotropic plate that adds about 0.2 %
    to the 3 (Howland's strips, drawn on; from memory), and it never takes anything away."""
    peak = screened(plate(axis)).peak("h1")
    reference, found = along_1(sheet), peak.value / 100.0
    error = 100.0 * (found / reference - 1.0)
    record(
        f"hole in an orthotropic plate pulled along {1 if axis == 0.0 else 2}, W/d = 25, screened",
        LEKHNITSKII,
        round(reference, 3),
        found,
        error,
        "1 % (finite width counted in)",
    )
    assert abs(error) < 1.0
    assert error > -0.25
    assert peak.trust == "settled"


def hoop(sheet: Material, axis: float, theta: float) -> float:
    """Hoop stress at the hole over the far tension along x, at θ from x [rad].

    σθ / σ = (Eθ/E1) {[-cos²φ + (k + n) sin²φ] k cos²θ + [(1 + n) cos²φ - k sin²φ] sin²θ
    - n (1 + k + n) sin φ cos φ sin θ cos θ}, θ and the pull's φ counted from the 1-axis, k =
    sqrt(E1/E2), n = sqrt(2 (k - ν12) + E1/G12) (Lekhnitskii, from memory).
    """
    assert sheet.youngs_modulus_2 is not None
    assert sheet.shear_modulus is not None
    e1, e2, g, nu = (
        sheet.youngs_modulus,
        sheet.youngs_modulus_2,
        sheet.shear_modulus,
        sheet.poissons_ratio,
    )
    k = math.sqrt(e1 / e2)
    n = math.sqrt(2.0 * (k - nu) + e1 / g)
    phi, t = -math.radians(axis), theta - math.radians(axis)
    s, c = math.sin(t), math.cos(t)
    share = 1.0 / (s**4 + (e1 / g - 2.0 * nu) * s * s * c * c + e1 / e2 * c**4)  # Eθ/E1
    sp, cp = math.sin(phi), math.cos(phi)
    return share * (
        (-(cp**2) + (k + n) * sp**2) * k * c * c
        + ((1.0 + n) * cp**2 - k * sp**2) * s * s
        - n * (1.0 + k + n) * sp * cp * s * c
    )


def test_hole_in_a_wide_plate_pulled_off_its_axes(screened: Screened) -> None:
    """The 1-axis at 30° to the pull: the largest hoop stress of the closed form."""
    peak = screened(plate(30.0)).peak("h1")
    reference = max(hoop(GLASS, 30.0, math.radians(0.05 * k)) for k in range(7200))
    assert hoop(GLASS, 0.0, 0.5 * math.pi) == pytest.approx(along_1(GLASS))
    found = peak.value / 100.0
    error = 100.0 * (found / reference - 1.0)
    record(
        "hole in an orthotropic plate pulled at 30° to 1, W/d = 25, screened",
        LEKHNITSKII,
        round(reference, 3),
        found,
        error,
        "1 % (finite width counted in)",
    )
    assert abs(error) < 1.0
    assert peak.trust == "settled"


@pytest.mark.parametrize("axis", [30.0, -60.0])
def test_a_strip_pulled_off_its_axes(axis: float, screened: Screened) -> None:
    """1/Ex = c⁴/E1 + s²c² (1/G12 - 2 ν12/E1) + s⁴/E2, and Tsai–Hill and the largest stress in the
    axes by hand (R. M. Jones, Mechanics of Composite Materials, from memory)."""
    width, length, pull = 30.0, 120.0, 20.0
    part = Part(
        outline=chain([(0.0, 0.0), (length, 0.0), (length, width), (0.0, width)]),
        wall=Wall(2.0, "glass", axis=axis),
        materials=(GLASS,),
        supports=(FixedSupport("s1", "c1"), RollerSupport("s2", "c2", 90.0)),
        cases=(
            Case(
                "k1",
                "pulled",
                (
                    LineLoad("l1", "e2", 2.0 * pull, 0.0),
                    LineLoad("l2", "e4", -2.0 * pull, 0.0),
                ),
            ),
        ),
        limits=(
            StressLimit("q1", "tsai_hill", factor=1.0),
            StressLimit("q2", "largest_stress", factor=1.5),
        ),
        readings=(Probe("p1", "end", (length, 0.0)),),
    )
    found = screened(part)
    c, s = math.cos(math.radians(axis)), math.sin(math.radians(axis))
    slope = c**4 / 39_000.0 + s * s * c * c * (1 / 3_800.0 - 0.56 / 39_000.0) + s**4 / 8_600.0
    moved = found.reading("end", "u_x").value
    error = 100.0 * (moved / (length * pull * slope) - 1.0)
    record(
        f"orthotropic strip pulled at {-axis:g}° to its 1-axis, screened",
        "transformed compliance, R. M. Jones (from memory)",
        length * pull * slope,
        moved,
        error,
        "1e-6",
    )
    assert abs(error) < 1e-4
    one, two, shear = pull * c * c, pull * s * s, pull * s * c
    hill = math.sqrt(
        (one / 1080.0) ** 2 - one * two / 1080.0**2 + (two / 39.0) ** 2 + (shear / 89.0) ** 2
    )
    largest = 1.5 * max(one / 1080.0, two / 39.0, abs(shear) / 89.0)
    uses = {limit["limit"]: limit for limit in found.tree["limits"]}
    for name, by_hand in (("q1", hill), ("q2", largest)):
        use = uses[name]
        assert use["utilisation"] == pytest.approx(by_hand, rel=1e-6)
        assert use["trust"] == "settled"
        assert use["low"] <= by_hand <= use["high"]
        assert use["verdict"] == ("holds" if by_hand < 1.0 else "does not hold")
