"""How much too stiff plain bilinear quads are where a wall bends in its plane.

A bilinear quad cannot bend: its sides stay straight, so a bent wall costs it a shear strain that
the true wall does not have, and the strain across cannot follow the strain along.  For one
rectangle of 2b x 2h, bent about the axis across 2h (R. D. Cook, D. S. Malkus, M. E. Plesha,
Concepts and Applications of Finite Element Analysis, from memory), the ratio of its stiffness to
the true one is

    R₁ = (1/(1 - ν) + (b/h)²/2) / (1 + ν) = 1/(1 - ν²) + (b/h)² / (2 (1 + ν)).

A wall of n equal layers (derived here).  Under the curvature κ the nodes of the true solution
u = -κ x y, v = κ (x² + ν y²)/2 give layer k, with its middle at y_k and y' counted from there,

    εx = -κ (y_k + y'),   εy = ν κ y_k,   γ = -κ x'.

The parts with y_k are the true ones and have the true energy; those with y' and x' are the single
rectangle's.  Of the wall's second moment the layers' own share is n (1/n)³ = 1/n², so

    Rₙ = 1 + (R₁ - 1) / n².

No other displacements of the nodes have less energy: the lines across stay straight because each
is a plane of symmetry, and minimising over the strains across gives εy = ν κ y_k again.  So Rₙ is
exact for pure bending of a straight, even wall in equal rectangles, in plane stress; in plane
strain ν/(1 - ν) stands for ν.

With a = 2b along the wall and the width w = 2 h n the spurious shear is (a/w)² / (2 (1 + ν)): it
depends on the length of the elements along the wall alone, so more layers of the same length do
not take it away.
"""

from __future__ import annotations

from screenapp.model.part import WallState


def bending_overstiffness(
    poisson: float, aspect: float, layers: int = 1, state: WallState = "plane stress"
) -> float:
    """Stiffness of a wall of bilinear rectangles in pure bending over the true one (1 is true).

    Args:
        poisson: Poisson's ratio of the material.
        aspect: length of a rectangle along the wall over its size across, b/h.
        layers: rectangles across the wall, at least 1.
        state: plane stress or plane strain.

    Example:
        >>> round(bending_overstiffness(0.3, 1.0), 4)
        1.4835
        >>> round(bending_overstiffness(0.3, 1.0, 4), 4)
        1.0302
    """
    if layers < 1 or not aspect > 0.0:
        raise ValueError(f"{layers} layers of aspect {aspect} are no wall")
    v = poisson / (1.0 - poisson) if state == "plane strain" else poisson
    single = 1.0 / (1.0 - v * v) + 0.5 * aspect * aspect / (1.0 + v)
    return 1.0 + (single - 1.0) / layers**2
