"""Writing a file so that it is never left half written."""

from __future__ import annotations

import os
import stat
import tempfile
from pathlib import Path


def replace_file(path: Path, data: bytes) -> None:
    """Write a file as a whole, or leave what was there; keeps its mode, follows a symlink.

    OSError as the system gives it.
    """
    target = path.resolve()
    mode = stat.S_IMODE(target.stat().st_mode) if target.exists() else 0o666 & ~_umask()
    if target.exists() and not os.access(target, os.W_OK):
        # replacing would get round a read-only mark that somebody set on purpose
        raise PermissionError(13, "Permission denied", str(path))
    handle, name = tempfile.mkstemp(prefix=f".{target.name}.", dir=target.parent)
    try:
        with os.fdopen(handle, "wb") as file:
            file.write(data)
            file.flush()
            os.fsync(file.fileno())
        Path(name).chmod(mode)
        Path(name).replace(target)
    except BaseException:
        Path(name).unlink(missing_ok=True)
        raise


def _umask() -> int:
    mask = os.umask(0)
    os.umask(mask)
    return mask
