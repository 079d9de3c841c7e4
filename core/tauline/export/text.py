"""Writing text files."""

from __future__ import annotations

from pathlib import Path

from tauline.errors import ExportError
from tauline.files import replace_file


def write_text(path: Path, text: str) -> None:
    """Write a text as UTF-8, with its own line ends; ExportError where that cannot be done."""
    try:
        replace_file(path, text.encode())
    except OSError as error:
        reason = error.strerror or str(error)
        raise ExportError(f"{path} cannot be written: {reason}") from error
