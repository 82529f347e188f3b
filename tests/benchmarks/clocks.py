"""Processor time of this process and of the mesher's worker: fair on a machine with other work."""

from __future__ import annotations

import os
import time
from collections.abc import Callable
from pathlib import Path

from screenapp.meshing.service import Mesher


def processor_seconds(work: Callable[[], object], repeats: int = 1) -> float:
    """Least processor time of some repeats in this process [s]."""
    spent = []
    for _ in range(repeats):
        begin = time.process_time()
        work()
        spent.append(time.process_time() - begin)
    return min(spent)


def worker_seconds(mesher: Mesher) -> float:
    """Processor time that the mesher's worker has used so far [s] (Linux only)."""
    fields = Path(f"/proc/{mesher.process_id}/stat").read_text().rpartition(")")[2].split()
    return (int(fields[11]) + int(fields[12])) / os.sysconf("SC_CLK_TCK")
