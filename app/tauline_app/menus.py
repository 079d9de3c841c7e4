"""The menu bar: every action with its key."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from functools import partial
from typing import TYPE_CHECKING

import msgspec
from PySide6.QtGui import QAction, QActionGroup, QKeySequence
from PySide6.QtWidgets import QApplication, QLineEdit, QMenu, QMessageBox

from tauline import __version__
from tauline.resources import scenarios_folder
from tauline.scenario.objects import Layer
from tauline_app.actions.edits import redo, undo
from tauline_app.canvas.canvas import ZOOM_STEP
from tauline_app.theme import Scheme
from tauline_app.viewing import frame_names, named_view

if TYPE_CHECKING:
    from tauline_app.main_window import MainWindow

LAYERS: dict[Layer, str] = {
    "grid": "Grid",
    "hyperbolas": "Calibration hyperbolas",
    "clock_ticks": "Clock ticks",
    "labels": "Labels",
    "signals": "Signals",
    "light_cones": "Light cones",
}
KEYS = """<table cellpadding="3">
<tr><td><b>Wheel</b></td><td>zoom at the pointer</td></tr>
<tr><td><b>Drag</b></td><td>move the diagram</td></tr>
<tr><td><b>Click</b></td><td>select; with Shift or Ctrl, one more; Esc lets go</td></tr>
<tr><td><b>Arrow keys, + −</b></td><td>move and zoom</td></tr>
<tr><td><b>F, Home</b></td><td>show everything; back to the opening view</td></tr>
<tr><td><b>Velocity rail</b></td><td>drag it, click a flag, or ← → and Home (base frame)</td></tr>
<tr><td><b>Ctrl+C</b></td><td>copy readouts or the event table, with all digits</td></tr>
</table>"""


class Menus:
    """Builds the menus of a window and keeps them true."""

    def __init__(self, window: MainWindow) -> None:
        self._window = window
        self._session = window.session
        bar = window.menuBar()
        self._file_menu(bar.addMenu("&File"))
        self._edit_menu(bar.addMenu("&Edit"))
        self._view_menu(bar.addMenu("&View"))
        self._help_menu(bar.addMenu("&Help"))
        self._session.document_changed.connect(self._follow)
        self._follow()

    def _action(
        self,
        menu: QMenu,
        text: str,
        run: Callable[[], object],
        keys: Sequence[QKeySequence | QKeySequence.StandardKey | str] = (),
    ) -> QAction:
        # the menu's own, so that clearing a menu takes it away
        action = QAction(text, menu)
        sequences = [QKeySequence(key) for key in keys]
        action.setShortcuts([sequence for sequence in sequences if not sequence.isEmpty()])
        action.triggered.connect(lambda: run())
        menu.addAction(action)
        return action

    def _file_menu(self, menu: QMenu) -> None:
        window, keys = self._window, QKeySequence.StandardKey
        self._action(menu, "&Open…", window.ask_open, [keys.Open])
        self.recent = menu.addMenu("Open &recent")
        self.recent.aboutToShow.connect(self._list_recent)
        self.examples = menu.addMenu("Open an &example")
        for path in sorted(scenarios_folder().glob("*.toml")):
            name = path.stem.replace("-", " ").capitalize()
            self._action(self.examples, name, partial(window.open_path, path))
        menu.addSeparator()
        self._action(menu, "&Save", window.save, [keys.Save])
        self._action(menu, "Save &as…", window.ask_save, ["Ctrl+Shift+S"])
        menu.addSeparator()
        self._action(menu, "Export &figure…", window.export_figure, ["Ctrl+E"])
        self._action(menu, "Export event &table…", window.export_table, ["Ctrl+Shift+E"])
        menu.addSeparator()
        self._action(menu, "&Quit", window.close, ["Ctrl+Q"])

    def _edit_menu(self, menu: QMenu) -> None:
        session, keys = self._session, QKeySequence.StandardKey
        self.undo = self._action(menu, "&Undo", partial(undo, session), [keys.Undo])
        self.redo = self._action(menu, "&Redo", partial(redo, session), ["Ctrl+Shift+Z", "Ctrl+Y"])
        menu.addSeparator()
        self._action(menu, "Copy &readouts", self._window.readouts.copy, ["Ctrl+Shift+C"])
        self._action(menu, "Copy event &table", self._window.events.copy, ["Ctrl+Alt+C"])
        menu.addSeparator()
        self._action(menu, "Select &nothing", partial(session.select, ()), ["Ctrl+Shift+A"])

    def _view_menu(self, menu: QMenu) -> None:
        window, session = self._window, self._session
        self._action(menu, "&Fit", self._unless_typing(session.fit), ["F"])
        self._action(menu, "&Opening view", session.home, ["Alt+Home"])
        self._action(menu, "Zoom &in", partial(window.canvas.zoom, ZOOM_STEP), ["Ctrl++", "Ctrl+="])
        self._action(menu, "Zoom ou&t", partial(window.canvas.zoom, 1 / ZOOM_STEP), ["Ctrl+-"])
        menu.addSeparator()
        self.views = menu.addMenu("&Views of the scenario")
        self.views.aboutToShow.connect(self._list_views)
        self.frames = menu.addMenu("&Look from")
        self.frames.aboutToShow.connect(self._list_frames)
        self.axes = menu.addMenu("&Axes of")
        self.axes.aboutToShow.connect(self._list_axes)
        layers = menu.addMenu("La&yers")
        layers.aboutToShow.connect(partial(self._list_layers, layers))
        menu.addSeparator()
        schemes = menu.addMenu("&Colours")
        group = QActionGroup(window)
        for scheme in Scheme:
            action = self._action(
                schemes, str(scheme).capitalize(), partial(window.set_scheme, scheme)
            )
            action.setCheckable(True)
            action.setChecked(scheme is window.settings.scheme)
            group.addAction(action)
        panels = menu.addMenu("&Panels")
        for dock in window.docks.values():
            panels.addAction(dock.toggleViewAction())

    def _help_menu(self, menu: QMenu) -> None:
        self._action(menu, "&Keys and mouse", partial(self._say, "Keys and mouse", KEYS), ["F1"])
        about = f"<b>Tauline {__version__}</b><br>A spacetime-diagram workbench."
        self._action(menu, "&About Tauline", partial(self._say, "About Tauline", about))

    def _say(self, title: str, text: str) -> None:
        box = QMessageBox(self._window)
        box.setWindowTitle(title)
        box.setText(text)
        box.setModal(False)
        box.open()

    @staticmethod
    def _unless_typing(run: Callable[[], None]) -> Callable[[], None]:
        """A letter typed into a field is text, not a command."""

        def guarded() -> None:
            if not isinstance(QApplication.focusWidget(), QLineEdit):
                run()

        return guarded

    def _list_recent(self) -> None:
        self.recent.clear()
        for path in self._window.settings.recent:
            self._action(self.recent, path.name, partial(self._window.open_path, path)).setToolTip(
                str(path)
            )
        if self.recent.isEmpty():
            self.recent.addAction("none yet").setEnabled(False)

    def _list_views(self) -> None:
        session = self._session
        self.views.clear()
        for view in session.resolved.views.values():
            self._action(
                self.views,
                view.label or view.id,
                partial(session.set_view, named_view(session.resolved, view.id)),
            )
        if self.views.isEmpty():
            self.views.addAction("none").setEnabled(False)

    def _list_frames(self) -> None:
        resolved, rail = self._session.resolved, self._window.view_bar.rail
        self.frames.clear()
        for frame_id, name in frame_names(resolved).items():
            self._action(self.frames, name, partial(rail.look_from, resolved.frame(frame_id)))

    def _list_axes(self) -> None:
        resolved, view = self._session.resolved, self._session.view
        self.axes.clear()
        for frame_id, name in frame_names(resolved).items():
            action = self._action(self.axes, name, partial(self._toggle_axes, frame_id))
            action.setCheckable(True)
            action.setChecked(frame_id in view.axes)

    def _toggle_axes(self, frame_id: str) -> None:
        view = self._session.view
        if frame_id in view.axes:
            axes = tuple(name for name in view.axes if name != frame_id)
        else:
            axes = (*view.axes, frame_id)
        self._session.set_view(msgspec.structs.replace(view, axes=axes))

    def _list_layers(self, menu: QMenu) -> None:
        menu.clear()
        for layer, name in LAYERS.items():
            action = self._action(menu, name, partial(self._toggle_layer, layer))
            action.setCheckable(True)
            action.setChecked(layer in self._session.view.layers)

    def _toggle_layer(self, layer: Layer) -> None:
        view = self._session.view
        self._session.set_view(msgspec.structs.replace(view, layers=view.layers ^ {layer}))

    def _follow(self) -> None:
        history = self._session.history
        for action, word, name in (
            (self.undo, "&Undo", history.undo_name),
            (self.redo, "&Redo", history.redo_name),
        ):
            action.setText(f"{word} {name}".strip())
            action.setEnabled(bool(name))
