"""How large and how small anything drawn may be."""

FARTHEST = 1e6
"""No coordinate or length may be larger [mm]: a kilometre is no workpiece."""

SMALLEST = 1e-4
"""No size may be smaller [mm]: a tenth of a micrometre is below any drawing."""
