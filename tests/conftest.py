"""For all tests: no display is needed, and the user's own cache is left alone."""

from __future__ import annotations

import os
from collections.abc import Iterator

import pytest

os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")


@pytest.fixture(autouse=True, scope="session")
def own_cache(tmp_path_factory: pytest.TempPathFactory) -> Iterator[None]:
    """Keep findings in a folder of this test run."""
    with pytest.MonkeyPatch.context() as patch:
        patch.setenv("SCREENAPP_CACHE", str(tmp_path_factory.mktemp("cache")))
        yield
