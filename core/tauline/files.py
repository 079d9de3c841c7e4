"""Writing a file so that it is never left half written."""

from __future__ import annotations

import contextlib
import os
import stat
import tempfile
from pathlib import Path


def replace_file(path: Path, data: bytes) -> None:
    """Write a file in one step, or leave what was there.

    It keeps its permissions, and a symbolic link goes on pointing to it. OSError says why it
    cannot be done.
    """
    target = Path(os.path.realpath(path))
    if target.is_dir():
        raise IsADirectoryError(0, "this is a folder")
    if target.exists() and not os.access(target, os.W_OK):
        raise PermissionError(0, "it is protected against writing")
    handle, name = tempfile.mkstemp(prefix=f".{target.name}.", suffix=".new", dir=target.parent)
    try:
        with os.fdopen(handle, "wb") as file:
            file.write(data)
            file.flush()
            os.fsync(file.fileno())
        Path(name).chmod(_mode(target))
        Path(name).replace(target)
    except BaseException:
        with contextlib.suppress(OSError):
            Path(name).unlink()
        raise
    _sync_folder(target.parent)


def _mode(target: Path) -> int:
    """Permissions of the file, or those a new one gets."""
    if target.exists():
        return stat.S_IMODE(target.stat().st_mode)
    mask = os.umask(0)
    os.umask(mask)
    return 0o666 & ~mask


def _sync_folder(folder: Path) -> None:
    """Make the new name last through a power cut, where the system knows how."""
    with contextlib.suppress(OSError):
        handle = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)
