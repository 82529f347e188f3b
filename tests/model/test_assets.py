"""Data files are found in a checkout and in an installed wheel."""

from __future__ import annotations

import subprocess
import sys
import zipfile
from pathlib import Path

import pytest

from screenapp.model.assets import PACKAGE, resource, resources_folder
from screenapp.model.errors import ScreenappError

NEEDED = ["schema/part.schema.json", "schema/result.schema.json", "materials.json"]


@pytest.mark.parametrize("name", NEEDED)
def test_data_files_are_found_here(name: str) -> None:
    assert resource(name).is_file()


def test_both_layouts_are_found(tmp_path: Path) -> None:
    checkout, installed = tmp_path / "checkout", tmp_path / "site-packages"
    (checkout / "screenapp").mkdir(parents=True)
    (checkout / "resources" / "schema").mkdir(parents=True)
    (installed / "screenapp" / "resources" / "schema").mkdir(parents=True)
    (installed / "resources").mkdir()  # somebody else's
    assert resources_folder(checkout / "screenapp") == checkout / "resources"
    assert resources_folder(installed / "screenapp") == installed / "screenapp" / "resources"


def test_a_broken_installation_says_so(tmp_path: Path) -> None:
    with pytest.raises(ScreenappError, match="install screenapp again"):
        resources_folder(tmp_path / "screenapp")
    with pytest.raises(ScreenappError, match="nothing is missing"):
        resource("nothing")


@pytest.mark.slow
def test_the_wheel_carries_the_data_files_and_finds_them(tmp_path: Path) -> None:
    build = [sys.executable, "-m", "pip", "wheel", "--no-deps", "--quiet", "-w", str(tmp_path)]
    subprocess.run([*build, str(PACKAGE.parent)], check=True)
    (wheel,) = tmp_path.glob("screenapp-*.whl")
    inside = tmp_path / "installed"
    with zipfile.ZipFile(wheel) as archive:
        archive.extractall(inside)
    # A process of its own, away from this checkout, sees the unpacked wheel only.
    code = (
        "from screenapp.model.assets import resource\n"
        "from screenapp.model.materials import library\n"
        f"print(*(resource(name) for name in {NEEDED!r}), sep='\\n')\n"
        "print(len(library()))\n"
    )
    found = subprocess.run(
        [sys.executable, "-c", f"import sys; sys.path.insert(0, {str(inside)!r})\n{code}"],
        cwd=tmp_path,
        check=True,
        capture_output=True,
        text=True,
    ).stdout.split("\n")
    assert found[:3] == [str(inside / "screenapp" / "resources" / name) for name in NEEDED]
    assert int(found[3]) >= 15
