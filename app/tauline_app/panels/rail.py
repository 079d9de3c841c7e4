"""The velocity rail: a ruler linear in rapidity whose zero is the viewing frame."""

from __future__ import annotations

import msgspec
from PySide6.QtCore import QEasingCurve, QPointF, QRectF, Qt, QVariantAnimation
from PySide6.QtGui import (
    QColor,
    QFontMetricsF,
    QKeyEvent,
    QMouseEvent,
    QPainter,
    QPaintEvent,
    QPalette,
    QPen,
    QPolygonF,
)
from PySide6.QtWidgets import QSizePolicy, QToolTip, QWidget

from tauline.figure.drawing import Role
from tauline.figure.rail import Flag, flags, free_frame, ruler_marks
from tauline.figure.style import SCREEN_LIGHT, Style
from tauline.resolve import FrameResult
from tauline_app.session import Session
from tauline_app.theme import hue_colour
from tauline_app.viewing import ViewState, seen_from

WIDEST_SCALE, NARROWEST_SCALE = 150.0, 60.0
"""Pixels to one unit of rapidity, as the width of the rail allows."""
ROWS = 3
ROW_HEIGHT = 19
RULER_HEIGHT = 24
MARGIN = 8
LABEL_WIDTHS = (130.0, 56.0, 0.0)
"""Greatest widths of a flag's name, tried in this order where flags crowd."""
STEP = 0.05
MILLISECONDS = 350
FARTHEST = 12.0
"""Greatest rapidity the rail is dragged to."""


class PlacedFlag(msgspec.Struct, frozen=True):
    """A flag with the box of its label."""

    flag: Flag
    box: QRectF
    foot: float
    text: str


class Rail(QWidget):
    """Slides under a fixed mark; drag it, click a flag, or use the arrow keys."""

    def __init__(self, session: Session, parent: QWidget | None = None) -> None:
        super().__init__(parent)
        self._session = session
        self._style = SCREEN_LIGHT
        self._grip: tuple[float, ViewState] | None = None
        self._moved = False
        self._animation = QVariantAnimation(self)
        self._animation.setDuration(MILLISECONDS)
        self._animation.setEasingCurve(QEasingCurve.Type.InOutCubic)
        self._animation.valueChanged.connect(self._animate)
        self._animation.finished.connect(self._arrive)
        self._from: ViewState = session.view
        self._goal: FrameResult = session.view.frame
        self.setMinimumHeight(ROWS * ROW_HEIGHT + RULER_HEIGHT + 2 * MARGIN)
        self.setSizePolicy(QSizePolicy.Policy.Expanding, QSizePolicy.Policy.Fixed)
        self.setFocusPolicy(Qt.FocusPolicy.StrongFocus)
        self.setMouseTracking(True)
        self.setCursor(Qt.CursorShape.OpenHandCursor)
        self.setAccessibleName("Velocity rail")
        self.setAccessibleDescription(
            "Drag to look from another velocity, click a flag to look from its frame"
        )
        self.setToolTip("Drag: another velocity. Click a flag: its frame. ← → step, Home: base.")
        session.view_changed.connect(self.update)
        session.document_changed.connect(self.update)
        session.selection_changed.connect(self.update)

    def set_style(self, style: Style) -> None:
        """Paint in another style."""
        self._style = style
        self.update()

    # --- looking from elsewhere ---------------------------------------------------------------

    def look_from(self, frame: FrameResult, animated: bool = True) -> None:
        """Boost to a frame, sliding along rapidity."""
        self._animation.stop()
        self._from, self._goal = self._session.view, frame
        distance = abs(frame.rapidity - self._from.frame.rapidity)
        if not animated or distance == 0.0 or distance > FARTHEST:
            self._arrive()
            return
        self._animation.setStartValue(0.0)
        self._animation.setEndValue(1.0)
        self._animation.start()

    @property
    def is_moving(self) -> bool:
        """Whether the rail slides by itself just now."""
        return self._animation.state() == QVariantAnimation.State.Running

    def _animate(self, share: float) -> None:
        if self._animation.state() != QVariantAnimation.State.Running:
            return
        start, end = self._from.frame.rapidity, self._goal.rapidity
        self._show(self._from, start + share * (end - start))

    def _arrive(self) -> None:
        session = self._session
        session.set_view(seen_from(self._from, session.resolved, self._goal))

    def _show(self, start: ViewState, rapidity: float) -> None:
        """Look from a rapidity; always boosted from where the move began."""
        session = self._session
        frame = free_frame(session.resolved, rapidity)
        session.set_view(seen_from(start, session.resolved, frame))

    def frame_of(self, flag: Flag) -> FrameResult:
        """The frame a flag leads to."""
        resolved = self._session.resolved
        if flag.target:
            return resolved.frame(flag.target)
        return free_frame(resolved, flag.rapidity)

    # --- mouse and keys -----------------------------------------------------------------------

    def mousePressEvent(self, event: QMouseEvent) -> None:  # noqa: N802 - Qt's
        """Take hold of the ruler."""
        if event.button() == Qt.MouseButton.LeftButton:
            self._animation.stop()
            self._grip = (event.position().x(), self._session.view)
            self._moved = False
            self.setCursor(Qt.CursorShape.ClosedHandCursor)

    def mouseMoveEvent(self, event: QMouseEvent) -> None:  # noqa: N802 - Qt's
        """Drag the ruler, or show what a flag is."""
        if self._grip is None:
            found = self.flag_at(event.position())
            self.setCursor(
                Qt.CursorShape.PointingHandCursor if found else Qt.CursorShape.OpenHandCursor
            )
            if found is not None:
                QToolTip.showText(event.globalPosition().toPoint(), found.flag.label, self)
            return
        start_x, start = self._grip
        shift = event.position().x() - start_x
        if abs(shift) > 3.0:
            self._moved = True
        if self._moved:
            # the ruler follows the hand, so what comes under the mark was on the other side
            rapidity = start.frame.rapidity - shift / self.pixels_per_rapidity
            self._show(start, max(-FARTHEST, min(FARTHEST, rapidity)))

    def mouseReleaseEvent(self, event: QMouseEvent) -> None:  # noqa: N802 - Qt's
        """Let go; a press that did not move is a click."""
        if self._grip is None:
            return
        self._grip = None
        self.setCursor(Qt.CursorShape.OpenHandCursor)
        if not self._moved:
            found = self.flag_at(event.position())
            if found is not None:
                self.look_from(self.frame_of(found.flag))

    def keyPressEvent(self, event: QKeyEvent) -> None:  # noqa: N802 - Qt's
        """Step by the arrow keys; Home goes to the base frame."""
        direction = {Qt.Key.Key_Left: -1.0, Qt.Key.Key_Right: 1.0}.get(Qt.Key(event.key()))
        if direction is not None:
            rapidity = self._session.view.frame.rapidity + direction * STEP
            self._show(self._session.view, max(-FARTHEST, min(FARTHEST, rapidity)))
        elif event.key() == Qt.Key.Key_Home:
            self.look_from(self._session.resolved.base)
        else:
            super().keyPressEvent(event)

    # --- painting -----------------------------------------------------------------------------

    def x_of(self, rapidity: float) -> float:
        """Where a rapidity (relative to the base frame) is on the rail, in pixels."""
        relative = rapidity - self._session.view.frame.rapidity
        return 0.5 * self.width() + relative * self.pixels_per_rapidity

    @property
    def pixels_per_rapidity(self) -> float:
        """Scale of the ruler: all its marks are in sight where there is room for them."""
        room = (0.5 * self.width() - 40.0) / ruler_marks()[-1].rapidity
        return min(max(room, NARROWEST_SCALE), WIDEST_SCALE)

    def flag_at(self, place: QPointF) -> PlacedFlag | None:
        """The flag under a place."""
        return next((item for item in self.placed_flags() if item.box.contains(place)), None)

    def placed_flags(self) -> list[PlacedFlag]:
        """All flags in sight, stacked so that none covers another."""
        metrics = QFontMetricsF(self.font())
        session = self._session
        scrubbed = {
            placement.worldline: placement.proper_time
            for name in session.selection
            if name in session.resolved.events
            for placement in session.resolved.events[name].on
            if session.resolved.worldlines[placement.worldline].line.corners
            or not _coasts(session, placement.worldline)
        }
        placed: list[PlacedFlag] = []
        rows = [-1e9] * ROWS
        middle = 0.5 * self.width() - 0.5
        for flag in sorted(flags(session.resolved, scrubbed), key=lambda item: item.rapidity):
            foot = self.x_of(flag.rapidity)
            if not -200 < foot < self.width() + 200:
                continue
            for widest in LABEL_WIDTHS:
                text = metrics.elidedText(flag.label, Qt.TextElideMode.ElideRight, widest)
                text = text if len(text) > 1 or text == flag.label else ""
                width = metrics.horizontalAdvance(text) + 12.0
                # to the left of the mark the names hang to the left, so that they stand clear of it
                beside = foot - 2.0 if foot >= middle else foot - width + 2.0
                left = min(max(beside, 2.0), max(self.width() - width - 2.0, 2.0))
                row = next((k for k in range(ROWS) if rows[k] <= left), None)
                if row is not None:
                    break
            else:
                row = min(range(ROWS), key=lambda k: rows[k])
                left = rows[row]
            rows[row] = left + width + 3.0
            top = MARGIN + (ROWS - 1 - row) * ROW_HEIGHT
            box = QRectF(left, top, width, ROW_HEIGHT - 3.0)
            placed.append(PlacedFlag(flag, box, foot, text))
        return placed

    def paintEvent(self, event: QPaintEvent) -> None:  # noqa: N802, ARG002 - Qt's
        """Paint the flags above the ruler."""
        painter = QPainter(self)
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.fillRect(self.rect(), self.palette().color(QPalette.ColorRole.Base))
        ink = self.palette().color(QPalette.ColorRole.Text)
        ruler = float(MARGIN + ROWS * ROW_HEIGHT)
        self._paint_mark(painter, ruler)
        self._paint_ruler(painter, ink, ruler)
        viewed = self._session.view.frame
        placed = self.placed_flags()
        # all staffs first: none runs through a name
        for item in placed:
            painter.setPen(QPen(hue_colour(self._style, item.flag.hue, Role.LINE_LABEL), 1.4))
            painter.drawLine(QPointF(item.foot, item.box.top()), QPointF(item.foot, ruler))
        for item in placed:
            colour = hue_colour(self._style, item.flag.hue, Role.LINE_LABEL)
            painter.setPen(QPen(colour, 1.4))
            current = abs(item.flag.rapidity - viewed.rapidity) < 1e-12
            painter.setBrush(colour if current else self.palette().color(QPalette.ColorRole.Base))
            painter.drawRoundedRect(item.box, 2.5, 2.5)
            painter.setPen(self.palette().color(QPalette.ColorRole.Base) if current else colour)
            painter.drawText(item.box, Qt.AlignmentFlag.AlignCenter, item.text)
        if self.hasFocus():
            painter.setBrush(Qt.BrushStyle.NoBrush)
            painter.setPen(QPen(self.palette().color(QPalette.ColorRole.Highlight), 1.5))
            painter.drawRect(QRectF(self.rect()).adjusted(1, 1, -1, -1))
        painter.end()

    def _paint_ruler(self, painter: QPainter, ink: QColor, top: float) -> None:
        """The ruler stands still: its zero is the viewing frame, at the mark."""
        middle = 0.5 * self.width()
        painter.setPen(QPen(ink, 1.0))
        painter.drawLine(QPointF(0.0, top), QPointF(self.width(), top))
        small = self.font()
        small.setPixelSize(round(self._style.small_size))
        painter.setFont(small)
        metrics = QFontMetricsF(small)
        baseline = top + 6.0 + metrics.ascent()
        painter.drawText(QPointF(4.0, baseline), "β")
        marks = ruler_marks()
        halves = {mark.text: 0.5 * metrics.horizontalAdvance(mark.text) for mark in marks}
        # the zero, then from the ends inwards; both sides of a pair or neither
        inner = halves["0"] + 2.0
        outer = middle - metrics.horizontalAdvance("β") - 10.0
        for mark in sorted(marks, key=lambda mark: -abs(mark.rapidity)):
            away = mark.rapidity * self.pixels_per_rapidity
            painter.drawLine(QPointF(middle + away, top), QPointF(middle + away, top + 5.0))
            half = halves[mark.text]
            widest = max(half, halves.get(f"−{mark.text}", 0.0))
            if away == 0.0 or (inner <= abs(away) - widest and abs(away) + widest <= outer):
                painter.drawText(QPointF(middle + away - half, baseline), mark.text)
                if away > 0.0:
                    outer = away - widest - 2.0
        painter.setFont(self.font())

    def _paint_mark(self, painter: QPainter, bottom: float) -> None:
        """The fixed mark of the viewing frame, which the flags slide under."""
        middle = 0.5 * self.width()
        colour = self.palette().color(QPalette.ColorRole.Highlight)
        painter.setPen(QPen(colour, 1.0))
        painter.drawLine(QPointF(middle, 0.0), QPointF(middle, bottom + 5.0))
        painter.setBrush(colour)
        painter.setPen(Qt.PenStyle.NoPen)
        painter.drawPolygon(
            QPolygonF(
                [
                    QPointF(middle, 7.0),
                    QPointF(middle - 5.0, 0.0),
                    QPointF(middle + 5.0, 0.0),
                ]
            )
        )


def _coasts(session: Session, line_id: str) -> bool:
    """Whether a worldline has one rest frame for good."""
    legs = [f for f in session.resolved.leg_frames.values() if f.leg_of == line_id]
    return (
        len(legs) == 1
        and legs[0].id.endswith(".leg-1")
        and not session.resolved.worldlines[line_id].line.corners
    )
