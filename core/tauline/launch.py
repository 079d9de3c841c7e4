"""Starting the window, or saying what is missing for it."""

from __future__ import annotations

import ctypes
import importlib.util
import os
import sys
from collections.abc import Mapping
from importlib.metadata import entry_points
from pathlib import Path

from tauline.errors import TaulineError

WINDOW_GROUP = "tauline.window"

SYSTEM_LIBRARIES = {
    "libGL.so.1": "libgl1",
    "libEGL.so.1": "libegl1",
    "libdbus-1.so.3": "libdbus-1-3",
    "libfontconfig.so.1": "libfontconfig1",
    "libglib-2.0.so.0": "libglib2.0-0",
    "libxkbcommon.so.0": "libxkbcommon0",
    "libxkbcommon-x11.so.0": "libxkbcommon-x11-0",
    "libxcb-cursor.so.0": "libxcb-cursor0",
    "libxcb-icccm.so.4": "libxcb-icccm4",
    "libxcb-keysyms.so.1": "libxcb-keysyms1",
    "libxcb-shape.so.0": "libxcb-shape0",
    "libxcb-xkb.so.1": "libxcb-xkb1",
    "libwayland-cursor.so.0": "libwayland-cursor0",
}
"""Libraries a bare Debian or Ubuntu lacks, and the packages that bring them."""


def open_window(path: Path | None) -> int:
    """Open the window on a scenario file (or an empty sheet) and return its exit status.

    Raises TaulineError with what to install when something it needs is missing.
    """
    lacking = [name for name in ("PySide6", "pyqtgraph") if importlib.util.find_spec(name) is None]
    if lacking:
        raise TaulineError(
            f"the window needs {' and '.join(lacking)}",
            'install it with: pip install "tauline[app]"',
        )
    if sys.platform.startswith("linux"):
        _check_linux(os.environ)
    (entry,) = entry_points(group=WINDOW_GROUP)
    try:
        run = entry.load()
    except ImportError as error:
        raise TaulineError(
            f"the window cannot start: {error}", "a system library is missing or too old"
        ) from error
    return int(run(str(path) if path is not None else None))


def missing_packages() -> tuple[str, ...]:
    """Debian packages whose libraries cannot be loaded here."""
    return tuple(package for library, package in SYSTEM_LIBRARIES.items() if not _loads(library))


def _check_linux(environment: Mapping[str, str]) -> None:
    missing = missing_packages()
    if missing:
        raise TaulineError(
            "the window needs system libraries that are not installed",
            "on Debian or Ubuntu: apt-get install " + " ".join(missing),
        )
    shown_by = ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM")
    if not any(environment.get(name) for name in shown_by):
        raise TaulineError(
            "there is no screen to open a window on",
            "neither DISPLAY nor WAYLAND_DISPLAY is set; 'tauline figure' needs no screen",
        )


def _loads(library: str) -> bool:
    try:
        ctypes.CDLL(library)
    except OSError:
        return False
    return True
