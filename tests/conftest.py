"""For all tests: no display is needed, the user's own cache is left alone, random examples are the
same in every run (new ones with SCREENAPP_STEPS), and no widget dies while it is painted.
"""

from __future__ import annotations

import os
from collections.abc import Generator, Iterator

import pytest
from hypothesis import settings
from PySide6.QtWidgets import QApplication, QWidget

os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")

settings.register_profile("steady", derandomize="SCREENAPP_STEPS" not in os.environ)
settings.load_profile("steady")

KEPT = pytest.StashKey[list[QWidget]]()


@pytest.fixture(autouse=True, scope="session")
def own_cache(tmp_path_factory: pytest.TempPathFactory) -> Iterator[None]:
    """Keep findings, and materials of one's own, in folders of this test run."""
    with pytest.MonkeyPatch.context() as patch:
        patch.setenv("SCREENAPP_CACHE", str(tmp_path_factory.mktemp("cache")))
        patch.setenv("SCREENAPP_CONFIG", str(tmp_path_factory.mktemp("config")))
        yield


@pytest.hookimpl(wrapper=True, trylast=True)
def pytest_runtest_call(item: pytest.Item) -> Generator[None, object, object]:
    """Keep the open widgets from the end of the test to the end of its teardown.

    A board and its items refer to one another, so when a test returns, its board is garbage that
    the collector may take at any moment: also in the midst of painting it, as pytest-qt lets
    events be processed before it closes the widgets. That ends the process. The program itself
    keeps its window as long as it is open.
    """
    try:
        return (yield)
    finally:
        app = QApplication.instance()
        if isinstance(app, QApplication):
            item.stash[KEPT] = app.topLevelWidgets()


@pytest.hookimpl(wrapper=True, tryfirst=True)
def pytest_runtest_teardown(item: pytest.Item) -> Generator[None, object, object]:
    """Let the widgets go."""
    try:
        return (yield)
    finally:
        if KEPT in item.stash:
            del item.stash[KEPT]
