"""Makes the README's picture: the real window with a sample, screened.

    python -m tests.window.picture [SAMPLE] [--out FILE] [--size WxH] [--theme NAME] [--lens LENS]
        [--all-cases] [--crosses]

Run it again whenever the window changes.
"""

from __future__ import annotations

import argparse
import os
import time
from pathlib import Path

TOP = Path(__file__).parents[2]


def main() -> None:
    """Open, screen, grab, save."""
    parser = argparse.ArgumentParser()
    parser.add_argument("sample", nargs="?", default="pump-bracket")
    parser.add_argument("--out", type=Path, default=TOP / "resources/pictures/window.png")
    parser.add_argument("--size", default="1600x960")
    parser.add_argument("--theme", default="paper", choices=["paper", "slate"])
    parser.add_argument("--lens", default="Utilisation")
    parser.add_argument("--all-cases", action="store_true")
    parser.add_argument("--crosses", action="store_true")
    words = parser.parse_args()
    os.environ.setdefault("QT_QPA_PLATFORM", "offscreen")

    from PySide6.QtWidgets import QApplication

    from screenapp.meshing.service import Mesher
    from screenapp.screening.screen import screen
    from screenapp.window import theme
    from screenapp.window.main_window import MainWindow
    from screenapp.window.settings import Settings
    from screenapp.window.style import dress

    app = QApplication([])
    theme.choose(words.theme)
    dress(app)
    window = MainWindow(screen, Mesher, Settings())
    width, height = (int(part) for part in words.size.split("x"))
    window.resize(width, height)
    window.show()

    def settle(seconds: float) -> None:
        end = time.monotonic() + seconds
        while time.monotonic() < end:
            app.processEvents()
            time.sleep(0.01)

    settle(0.3)
    if words.sample != "none":
        window.files.open(TOP / "samples" / f"{words.sample}.part.json")
        settle(0.5)
        if not window.document.current:
            window.screen_part()
        end = time.monotonic() + 60.0
        while not window.document.current and time.monotonic() < end:
            settle(0.1)
        window.document.look(lens=words.lens, crosses=words.crosses)
        window.document.look(envelope=words.all_cases)
        window.board.fit()
        settle(1.0)
        window.painter.wait()
        settle(0.3)
    words.out.parent.mkdir(parents=True, exist_ok=True)
    window.grab().save(str(words.out))
    window.screener.shut_down()
    print(words.out)


if __name__ == "__main__":
    main()
