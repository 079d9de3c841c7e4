"""The canvas: a pyqtgraph view box with one item that paints the whole drawing."""

from __future__ import annotations

from typing import Any

import pyqtgraph as pg
from PySide6.QtCore import QRectF, Qt, QTimer, Signal
from PySide6.QtGui import QKeyEvent, QPainter
from PySide6.QtWidgets import QStyleOptionGraphicsItem, QWidget

from tauline.figure.diagram import diagram
from tauline.figure.drawing import Drawing, Window
from tauline.figure.style import SCREEN_LIGHT, Style
from tauline.resolve.relations import owner_of, related
from tauline_app.canvas.hit import thing_at
from tauline_app.canvas.measure import ScreenMeasure
from tauline_app.canvas.sheet import Sheet
from tauline_app.session import Session
from tauline_app.theme import qcolour

SETTLING = 120
"""Milliseconds after the last change of the view at which a motion counts as over."""
ZOOM_STEP = 1.25
PAN_STEP = 0.1


class DiagramItem(pg.GraphicsObject):  # type: ignore[misc]
    """Paints a sheet in pixels, whatever the transform of the scene."""

    def __init__(self) -> None:
        super().__init__()
        self.sheet: Sheet | None = None
        self._bounds = QRectF()

    def show(self, sheet: Sheet, bounds: QRectF) -> None:
        """Take another sheet, which fills ``bounds`` of the view box."""
        self.prepareGeometryChange()
        self.sheet, self._bounds = sheet, bounds
        self.update()

    def boundingRect(self) -> QRectF:  # noqa: N802 - Qt's name
        """What of the scene it covers."""
        return self._bounds

    def paint(
        self,
        painter: QPainter,
        option: QStyleOptionGraphicsItem,  # noqa: ARG002
        widget: QWidget | None = None,  # noqa: ARG002
    ) -> None:
        """Paint the sheet: pens and text keep their size, so the transform is put aside."""
        if self.sheet is not None:
            painter.resetTransform()
            self.sheet.paint(painter)


class PointerBox(pg.ViewBox):  # type: ignore[misc]
    """A view box with equal scales that tells where it is clicked."""

    clicked = Signal(float, float, bool)
    double_clicked = Signal(float, float)

    def __init__(self) -> None:
        super().__init__(lockAspect=1.0, enableMenu=False, defaultPadding=0.0, border=None)
        self.setMouseMode(pg.ViewBox.PanMode)
        self.disableAutoRange()

    def mouseClickEvent(self, event: Any) -> None:  # noqa: N802, ANN401 - pyqtgraph's
        """Tell of a click of the left button."""
        if event.button() != Qt.MouseButton.LeftButton:
            return
        event.accept()
        at = self.mapSceneToView(event.scenePos())
        if event.double():
            self.double_clicked.emit(at.x(), at.y())
            return
        adds = event.modifiers() & (
            Qt.KeyboardModifier.ShiftModifier | Qt.KeyboardModifier.ControlModifier
        )
        self.clicked.emit(at.x(), at.y(), bool(adds))


class Canvas(pg.GraphicsView):  # type: ignore[misc]
    """Shows the session's diagram and lets it be panned, zoomed and selected in."""

    pointed_at = Signal(object)
    """A place ``(x, t)`` of the diagram under the pointer; None when it has left."""

    def __init__(self, session: Session, parent: QWidget | None = None) -> None:
        super().__init__(parent=parent, background=None)
        self._session = session
        self._style = SCREEN_LIGHT
        self._following = False
        # runs on after each change of the view; a change while it runs is part of a motion
        self._motion = QTimer(self)
        self._motion.setSingleShot(True)
        self._motion.setInterval(SETTLING)
        self._motion.timeout.connect(self._settle)
        self._unsettled = False
        self.drawing: Drawing | None = None
        self.box = PointerBox()
        self.item = DiagramItem()
        self.box.addItem(self.item, ignoreBounds=True)
        self.setCentralItem(self.box)
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setAccessibleName("Spacetime diagram")
        self.setMinimumSize(240, 200)
        self.setMouseTracking(True)
        self.box.sigRangeChanged.connect(self._range_changed)
        self.box.clicked.connect(self._clicked)
        self.box.double_clicked.connect(self._double_clicked)
        # a changed document comes with a changed view
        session.view_changed.connect(self.follow)
        session.selection_changed.connect(self.repaint_sheet)
        self.set_style(SCREEN_LIGHT)

    def set_style(self, style: Style) -> None:
        """Paint in another style."""
        self._style = style
        self.setBackground(qcolour(style.ground))
        self.drawing = None
        self.redraw()

    # --- from the session to the screen ------------------------------------------------------

    def follow(self) -> None:
        """Show the window of the session's view."""
        window = self._session.view.window
        self._following = True
        try:
            self.box.setRange(
                xRange=(window.x0, window.x1), yRange=(window.t0, window.t1), padding=0.0
            )
        finally:
            self._following = False
        self.redraw(moving=self._motion.isActive())
        self._motion.start()

    def _settle(self) -> None:
        """Once a motion is over, let the labels find free places again."""
        if self._unsettled:
            self.redraw()

    def redraw(self, *, moving: bool = False) -> None:
        """Make the drawing anew and paint it; while ``moving``, labels stay where they were."""
        shown = self.shown_window()
        if shown is None:
            return
        session = self._session
        view = session.view.diagram_view(session.resolved)
        scale = self.box.width() / shown.width
        self.drawing = diagram(
            session.resolved,
            type(view)(frame=view.frame, window=shown, axes=view.axes, layers=view.layers),
            scale,
            ScreenMeasure(self._style),
            self.drawing,
            moving=moving,
        )
        self._unsettled = moving
        self.repaint_sheet()

    def repaint_sheet(self) -> None:
        """Paint the drawing there is, dimmed by the selection."""
        if self.drawing is None:
            return
        session, w = self._session, self.drawing.window
        # what has a fault is not drawn, and dimming all the rest would point at nothing
        states = session.resolved.states
        drawn = any(states.get(owner_of(name)) == "resolved" for name in session.selection)
        near = related(session.resolved, session.selection) if drawn else None
        sheet = Sheet(self.drawing, self._style, near, session.selection)
        self.item.show(sheet, QRectF(w.x0, w.t0, w.width, w.height))

    def shown_window(self) -> Window | None:
        """The part of the diagram on screen; None while there is no screen."""
        if self.box.width() < 2 or self.box.height() < 2:
            return None
        (x0, x1), (t0, t1) = self.box.viewRange()
        return Window(x0, x1, t0, t1)

    def pixel_of(self, event_id: str) -> tuple[float, float] | None:
        """Where an event is on the canvas, in pixels; None if it is not in the drawing."""
        for marker in self.drawing.markers if self.drawing else ():
            if marker.source == event_id:
                at = self.box.mapViewToScene(pg.Point(*marker.at))
                return float(at.x()), float(at.y())
        return None

    # --- from the screen to the session ------------------------------------------------------

    def _range_changed(self) -> None:
        shown = self.shown_window()
        if shown is None or self._following:
            return
        self._session.move_window(shown)

    def _clicked(self, x: float, t: float, adds: bool) -> None:
        if self.drawing is None:
            return
        found = thing_at(self.drawing, (x, t))
        if adds and found:
            self._session.toggle(found)
        elif not adds:
            self._session.select((found,) if found else ())

    def _double_clicked(self, x: float, t: float) -> None:
        if self.drawing is not None and not thing_at(self.drawing, (x, t)):
            self._session.fit()

    def mouseMoveEvent(self, event: Any) -> None:  # noqa: N802, ANN401 - Qt's
        """Tell where the pointer is."""
        super().mouseMoveEvent(event)
        at = self.box.mapSceneToView(self.mapToScene(event.position().toPoint()))
        self.pointed_at.emit((at.x(), at.y()))

    def leaveEvent(self, event: Any) -> None:  # noqa: N802, ANN401 - Qt's
        """Tell that the pointer is elsewhere."""
        super().leaveEvent(event)
        self.pointed_at.emit(None)

    def resizeEvent(self, event: Any) -> None:  # noqa: N802, ANN401 - Qt's
        """Keep the window in sight when the widget changes size."""
        self._following = True
        try:
            super().resizeEvent(event)
        finally:
            self._following = False
        if hasattr(self, "item"):
            self.follow()

    def keyPressEvent(self, event: QKeyEvent) -> None:  # noqa: N802 - Qt's
        """Pan by the arrow keys, zoom by + and −, let go of the selection by Esc."""
        steps = {
            Qt.Key.Key_Left: (-1, 0),
            Qt.Key.Key_Right: (1, 0),
            Qt.Key.Key_Up: (0, 1),
            Qt.Key.Key_Down: (0, -1),
        }
        key = Qt.Key(event.key())
        shown = self.shown_window()
        if key in steps and shown is not None:
            dx, dt = (
                PAN_STEP * s * side
                for s, side in zip(steps[key], (shown.width, shown.height), strict=True)
            )
            self.box.translateBy(x=dx, y=dt)
        elif key in (Qt.Key.Key_Plus, Qt.Key.Key_Equal):
            self.zoom(ZOOM_STEP)
        elif key == Qt.Key.Key_Minus:
            self.zoom(1.0 / ZOOM_STEP)
        elif key == Qt.Key.Key_Home:
            self._session.home()
        elif key == Qt.Key.Key_Escape:
            self._session.select(())
        else:
            super().keyPressEvent(event)

    def zoom(self, factor: float) -> None:
        """Zoom in by a factor, about the middle."""
        self.box.scaleBy((1.0 / factor, 1.0 / factor))
