"""Work for a mesher's process that hangs or meshes, as a file beside the test says."""

from __future__ import annotations

import os
import time
from pathlib import Path

from screenapp.meshing.making import make_mesh
from screenapp.meshing.size_field import SizeField
from screenapp.model.mesh import Mesh
from screenapp.model.shape import Shape

WORK = "tests.window.slow_mesher:mesh_or_hang"

VARIABLE = "SCREENAPP_TEST_HANG"
"""Names a file; while it is there the work hangs, with the word "hanging" written into it."""


def mesh_or_hang(shape: Shape, sizes: SizeField) -> Mesh:
    """Hang as a library call would that knows no cancel, or make the mesh."""
    sign = Path(os.environ[VARIABLE])
    if sign.exists():
        sign.write_text("hanging", encoding="utf-8")
        while True:
            time.sleep(60.0)
    return make_mesh(shape, sizes)
