"""The versions of a document that undo and redo walk through."""

from __future__ import annotations

import msgspec

from tauline.scenario.scenario import Scenario


class Entry(msgspec.Struct, frozen=True):
    """A version, and the name of the edit that made it.

    Edits one after the other with the same ``merge_key`` are one entry: those of a drag, or of
    one stay in a text field.
    """

    name: str
    scenario: Scenario
    merge_key: str | None = None


class History(msgspec.Struct, frozen=True):
    """Versions in order, and which of them is the current one."""

    entries: tuple[Entry, ...]
    position: int = 0

    @classmethod
    def of(cls, scenario: Scenario) -> History:
        """Begin with a document as it was opened."""
        return cls((Entry("Open", scenario),))

    @property
    def current(self) -> Scenario:
        """The document as it is."""
        return self.entries[self.position].scenario

    @property
    def undo_name(self) -> str:
        """Name of the edit that undo takes back; "" if there is none."""
        return self.entries[self.position].name if self.position else ""

    @property
    def redo_name(self) -> str:
        """Name of the edit that redo makes again; "" if there is none."""
        later = self.entries[self.position + 1 :]
        return later[0].name if later else ""

    def push(self, scenario: Scenario, name: str, merge_key: str | None = None) -> History:
        """Go on to a new version; what had been undone is gone."""
        if scenario is self.current:
            return self
        kept = self.entries[: self.position + 1]
        same_edit = merge_key is not None and kept[-1].merge_key == merge_key
        if same_edit and self.position:
            kept = kept[:-1]
        return History((*kept, Entry(name, scenario, merge_key)), len(kept))

    def undo(self) -> History:
        """Go back one version; the first one stays."""
        return msgspec.structs.replace(self, position=max(0, self.position - 1))

    def redo(self) -> History:
        """Go forward one version; the last one stays."""
        last = len(self.entries) - 1
        return msgspec.structs.replace(self, position=min(last, self.position + 1))

    def is_clean(self, saved: Scenario) -> bool:
        """Whether the document is as it was saved."""
        return self.current is saved or self.current == saved
