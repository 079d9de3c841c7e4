"""What the window remembers from one start to the next: recent files, colours, layout."""

from __future__ import annotations

from pathlib import Path

from PySide6.QtCore import QByteArray, QSettings

from tauline_app.theme import Scheme

MOST_RECENT = 10


class Settings:
    """Kept where the operating system keeps settings of programs."""

    def __init__(self) -> None:
        self._store = QSettings()

    @property
    def recent(self) -> list[Path]:
        """Files opened lately that are still there, the last one first."""
        stored = self._store.value("recent", [])
        names = [stored] if isinstance(stored, str) else stored
        if not isinstance(names, list):
            return []
        return [path for path in map(Path, names) if path.is_file()]

    def opened(self, path: Path) -> None:
        """Put a file at the top of the recent ones."""
        full = path.resolve()
        others = [other for other in self.recent if other != full]
        self._store.setValue("recent", [str(item) for item in (full, *others)][:MOST_RECENT])

    @property
    def scheme(self) -> Scheme:
        """Light, dark, or as the system has it."""
        try:
            return Scheme(str(self._store.value("scheme", Scheme.SYSTEM)))
        except ValueError:
            return Scheme.SYSTEM

    @scheme.setter
    def scheme(self, scheme: Scheme) -> None:
        self._store.setValue("scheme", str(scheme))

    def layout(self, name: str) -> QByteArray | None:
        """A stored layout of the window."""
        stored = self._store.value(name)
        return stored if isinstance(stored, QByteArray) and not stored.isEmpty() else None

    def keep_layout(self, name: str, layout: QByteArray) -> None:
        """Store a layout of the window."""
        self._store.setValue(name, layout)
