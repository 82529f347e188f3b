"""How large a model this machine can take: refused before any work, not by a crash."""

from __future__ import annotations

import os

from screenapp.model.errors import MeshingError

_SHARE = 0.6
"""Share of the free memory that a screening may take."""


def free_memory() -> float:
    """Memory that is free now [bytes]; 4 GB where the system does not tell."""
    try:
        with open("/proc/meminfo", encoding="ascii") as lines:
            for line in lines:
                if line.startswith("MemAvailable:"):
                    return float(line.split()[1]) * 1024.0
    except OSError:
        pass
    try:
        return float(os.sysconf("SC_AVPHYS_PAGES")) * os.sysconf("SC_PAGE_SIZE")
    except (AttributeError, ValueError, OSError):
        return 4e9


def refuse_beyond_memory(unknowns: int, needed: float) -> None:
    """Raise MeshingError if `needed` bytes for that many unknowns are more than may be taken."""
    allowed = _SHARE * free_memory()
    if needed > allowed:
        raise MeshingError(
            f"the next mesh would have about {unknowns:,} unknowns and need "
            f"{needed / 1e9:.1f} GB of memory, of which {allowed / 1e9:.1f} GB may be used",
            "ask for a wider tolerance or larger elements in the Mesh paragraph",
        )
