"""Where the program's own data files lie: icons, schemas, materials, templates.

In a checkout they are in `resources/` beside the package; in an installed wheel the same folder is
inside the package, as `screenapp/resources/` (pyproject.toml maps it there).
"""

from __future__ import annotations

from pathlib import Path

from screenapp.model.errors import ScreenappError

PACKAGE = Path(__file__).resolve().parent.parent


def resources_folder(package: Path = PACKAGE) -> Path:
    """The folder of data files that belongs to the package at `package`.

    Raises:
        ScreenappError: neither place exists; the installation is broken.
    """
    for folder in (package / "resources", package.parent / "resources"):
        if (folder / "schema").is_dir():
            return folder
    raise ScreenappError(
        f"the program's data files are missing beside {package}", "install screenapp again"
    )


def resource(name: str) -> Path:
    """Path of one data file or folder, e.g. `resource("schema/part.schema.json")`.

    Raises:
        ScreenappError: there is no such file.
    """
    path = resources_folder() / name
    if not path.exists():
        raise ScreenappError(
            f"the program's data file {name} is missing from {resources_folder()}",
            "install screenapp again",
        )
    return path
