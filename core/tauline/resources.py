"""Where the shipped scenarios and resources are."""

from __future__ import annotations

from pathlib import Path

_PACKAGE = Path(__file__).resolve().parent


def scenarios_folder() -> Path:
    """Folder of the scenarios that come with the program."""
    return _shipped("scenarios")


def resource(name: str) -> Path:
    """Path of a resource file, by its name below the resources folder."""
    return _shipped("resources") / name


def _shipped(name: str) -> Path:
    """Return a folder that ships: in the package of a wheel, at the root of a checkout."""
    inside = _PACKAGE / "_shipped" / name
    return inside if inside.is_dir() else _PACKAGE.parents[1] / name
