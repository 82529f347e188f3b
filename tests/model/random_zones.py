"""Random zones on a plate with a hole, half of them on round numbers, so that edges and corners
meet; some are at fault."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from screenapp.model.part import CircleHole, LoopHole, Material, Part, SlotHole, Zone
from tests.model.plates import loop, plate


def zoned_plate(seed: int) -> Part:
    """The plate of 100 x 50 mm with one to four zones of several thicknesses and materials."""
    rng = np.random.default_rng(seed)
    zones: list[Zone] = []
    materials = plate().materials
    for k in range(int(rng.integers(1, 5))):
        id_ = f"z{k + 1}"
        x, y = float(rng.uniform(-10.0, 110.0)), float(rng.uniform(-10.0, 60.0))
        if rng.random() < 0.5:
            x, y = 10.0 * round(x / 10.0), 10.0 * round(y / 10.0)
        size = 5.0 * float(rng.integers(2, 9))
        form: CircleHole | SlotHole | LoopHole
        kind = rng.integers(3)
        if kind == 0:
            form = CircleHole(id_, (x, y), size)
        elif kind == 1:
            form = SlotHole(id_, (x, y), 2.0 * size, size, 15.0 * float(rng.integers(12)))
        else:
            corners = [(x, y), (x + size, y), (x + size, y + size), (x, y + size)]
            form = LoopHole(id_, loop(corners, prefix=id_))
        name = f"material {k}"
        modulus, poisson = float(rng.uniform(1e4, 3e5)), float(rng.uniform(0.0, 0.45))
        materials = (*materials, Material(name, modulus, poisson, 2700.0, 200.0, 300.0))
        thickness = float(rng.uniform(1.0, 9.0))
        zones.append(Zone(form, thickness, name if rng.random() < 0.5 else None))
    return replace(plate(), zones=tuple(zones), materials=materials)
