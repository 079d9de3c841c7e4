"""A file that is there already is replaced only when asked for twice."""

from __future__ import annotations

from pathlib import Path


class OverwriteGuard:
    """Remembers which file may be replaced; the scenario's own file never is."""

    def __init__(self, document: Path | None) -> None:
        self._document = document
        self._agreed: Path | None = None

    def agree(self, path: Path) -> None:
        """Let a file be replaced: the user was asked where it was chosen."""
        self._agreed = path

    def objection(self, path: Path) -> str:
        """Why a file should not be written; "" where it may, as when asked a second time."""
        if self._document is not None and _is_same(path, self._document):
            return "This is the file of the scenario; choose another name."
        if path.exists() and not path.is_dir() and path != self._agreed:
            self._agreed = path
            return f"{path.name} is there already; Save again replaces it."
        return ""


def _is_same(one: Path, other: Path) -> bool:
    try:
        return one.resolve() == other.resolve()
    except OSError:
        return False
