"""The one object that panels listen to: the document with its history, selection and view."""

from __future__ import annotations

from collections.abc import Iterable
from pathlib import Path

import msgspec
from PySide6.QtCore import QObject, Signal

from tauline.figure.drawing import Window
from tauline.figure.view import fit_window
from tauline.readouts.select import find
from tauline.resolve import FrameResult, Resolved, resolve
from tauline.scenario.history import History
from tauline.scenario.read import Loaded
from tauline.scenario.scenario import Scenario
from tauline.scenario.source import Source
from tauline_app.viewing import ViewState, kept_over, opening_view, seen_from

EMPTY = Scenario(title="")


class Session(QObject):
    """A document being worked on.

    Everything shown follows from ``resolved``, ``selection`` and ``view``; every change goes
    through a method here, which tells the panels once.
    """

    document_changed = Signal()
    selection_changed = Signal()
    view_changed = Signal()

    def __init__(self, parent: QObject | None = None) -> None:
        super().__init__(parent)
        self._start(EMPTY, None)

    def _start(self, scenario: Scenario, source: Source | None) -> None:
        self.history = History.of(scenario)
        self.source = source
        self._saved = scenario
        self.resolved: Resolved = resolve(scenario)
        self.selection: tuple[str, ...] = ()
        self.view: ViewState = opening_view(self.resolved)

    # --- the document ------------------------------------------------------------------------

    @property
    def scenario(self) -> Scenario:
        """The document as it is now."""
        return self.history.current

    @property
    def path(self) -> Path | None:
        """File of the document; None if it has none yet."""
        return self.source.path if self.source is not None else None

    @property
    def is_modified(self) -> bool:
        """Whether there are changes that are not in the file."""
        return self.scenario is not self._saved and self.scenario != self._saved

    def load(self, loaded: Loaded) -> None:
        """Start on another document."""
        self._start(loaded.scenario, loaded.source)
        self.document_changed.emit()
        self.selection_changed.emit()
        self.view_changed.emit()

    def apply(self, scenario: Scenario, name: str, merge_key: str | None = None) -> None:
        """Take a changed document as one step of the history."""
        self.history = self.history.push(scenario, name, merge_key)
        self._follow()

    def undo(self) -> None:
        """Go back one step."""
        self.history = self.history.undo()
        self._follow()

    def redo(self) -> None:
        """Go forward again."""
        self.history = self.history.redo()
        self._follow()

    def saved(self, source: Source) -> None:
        """Remember that the document is in a file now."""
        self.source = source
        self._saved = self.scenario
        self.document_changed.emit()

    def _follow(self) -> None:
        self.resolved = resolve(self.scenario, self.resolved)
        kept = tuple(name for name in self.selection if self._exists(name))
        gone = kept != self.selection
        self.selection = kept
        self.view = kept_over(self.view, self.resolved)
        self.document_changed.emit()
        if gone:
            self.selection_changed.emit()
        self.view_changed.emit()

    def _exists(self, some_id: str) -> bool:
        return some_id in self.resolved.states or find(self.resolved, some_id) is not None

    # --- selection ---------------------------------------------------------------------------

    def select(self, ids: Iterable[str]) -> None:
        """Select these ids, in this order; those that name nothing are passed over."""
        chosen = tuple(name for name in dict.fromkeys(ids) if self._exists(name))
        if chosen != self.selection:
            self.selection = chosen
            self.selection_changed.emit()

    def toggle(self, some_id: str) -> None:
        """Add an id to the selection, or take it out."""
        if some_id in self.selection:
            self.select(name for name in self.selection if name != some_id)
        else:
            self.select((*self.selection, some_id))

    # --- view --------------------------------------------------------------------------------

    def set_view(self, view: ViewState) -> None:
        """Look in another way."""
        if view != self.view:
            self.view = view
            self.view_changed.emit()

    def look_from(self, frame: FrameResult) -> None:
        """Look from another frame, about the pivot."""
        self.set_view(seen_from(self.view, self.resolved, frame))

    def move_window(self, window: Window) -> None:
        """Show another part of the diagram."""
        self.set_view(msgspec.structs.replace(self.view, window=window))

    def fit(self) -> None:
        """Show everything."""
        self.move_window(fit_window(self.resolved, self.view.frame))

    def home(self) -> None:
        """Go back to the view the document opens with."""
        self.set_view(opening_view(self.resolved))
