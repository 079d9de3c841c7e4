"""A drawing made ready for the painter: pens, lines, polygons and texts in pixels.

Lines of one look are drawn in one call, with solid pens, flat ends and opaque colours: on a
raster screen that is several times faster than one item, or one path, for each.
"""

from __future__ import annotations

from collections.abc import Collection
from itertools import pairwise

import numpy as np
from PySide6.QtCore import QLineF, QPointF, Qt
from PySide6.QtGui import QBrush, QColor, QFont, QPainter, QPen, QPolygonF

from tauline.figure.arrows import arrow_head
from tauline.figure.drawing import Drawing, Points, Role
from tauline.figure.measure import DESCENT, SUB_DROP
from tauline.figure.style import Style, blend
from tauline_app.canvas.measure import run_font, run_width
from tauline_app.theme import qcolour

DIMMED = 0.66
"""Share of the ground in what is unrelated to the selection."""
EMPHASIS = 1.4
"""How much wider a selected line is, in pixels."""

EMPHASISED = frozenset((Role.WORLDLINE, Role.SIGNAL, Role.SIMULTANEITY))

Look = tuple[str, int, bool, bool]
"""Role, hue, dimmed, selected."""


class Sheet:
    """What a drawing looks like in pixels, origin at the upper left.

    ``related`` holds the ids that stay in full ink (None: all), ``selected`` those emphasised.
    """

    def __init__(
        self,
        drawing: Drawing,
        style: Style,
        related: Collection[str] | None,
        selected: Collection[str],
    ) -> None:
        self._drawing = drawing
        self._style = style
        self._related = related
        self._selected = selected
        self._height = drawing.window.height * drawing.scale
        self._colours: dict[tuple[Role, int, bool], QColor] = {}
        self._lines: dict[Look, list[QLineF]] = {}
        self._polygons: list[tuple[QBrush, QPolygonF]] = []
        self._heads: list[tuple[QBrush, QPolygonF]] = []
        self._texts: list[tuple[QFont, QColor, QPointF, str]] = []
        self._fills()
        self._strokes()
        self._labels()

    def paint(self, painter: QPainter) -> None:
        """Paint everything, back to front."""
        painter.setRenderHint(QPainter.RenderHint.Antialiasing)
        painter.setPen(Qt.PenStyle.NoPen)
        for brush, polygon in self._polygons:
            painter.setBrush(brush)
            painter.drawPolygon(polygon)
        painter.setBrush(Qt.BrushStyle.NoBrush)
        for look, lines in self._lines.items():
            painter.setPen(self._pen(look))
            painter.drawLines(lines)
        painter.setPen(Qt.PenStyle.NoPen)
        for brush, polygon in self._heads:
            painter.setBrush(brush)
            painter.drawPolygon(polygon)
        self._paint_markers(painter)
        for font, colour, at, text in self._texts:
            painter.setFont(font)
            painter.setPen(colour)
            painter.drawText(at, text)

    def pixels(self, points: Points) -> Points:
        """Turn places ``(…, 2)`` of the diagram into pixels."""
        w = self._drawing.window
        scaled = (np.asarray(points) - (w.x0, w.t0)) * self._drawing.scale
        return np.stack([scaled[..., 0], self._height - scaled[..., 1]], axis=-1)

    def _is_dimmed(self, source: str) -> bool:
        return self._related is not None and bool(source) and source not in self._related

    def _colour(self, role: Role, hue: int, dimmed: bool) -> QColor:
        look = (role, hue, dimmed)
        if look not in self._colours:
            colour = self._style.colour(role, hue)
            mixed = blend(colour, self._style.ground, DIMMED) if dimmed else colour
            self._colours[look] = qcolour(mixed)
        return self._colours[look]

    def _pen(self, look: Look) -> QPen:
        role, hue, dimmed, selected = Role(look[0]), look[1], look[2], look[3]
        width = self._style.width(role) + (EMPHASIS if selected else 0.0)
        pen = QPen(self._colour(role, hue, dimmed), width)
        pen.setCapStyle(
            Qt.PenCapStyle.SquareCap if role is Role.WORLDLINE else Qt.PenCapStyle.FlatCap
        )
        dash = self._style.dash(role, hue)
        if dash:
            pen.setDashPattern([length / width for length in dash])
        return pen

    def _fills(self) -> None:
        for fill in self._drawing.fills:
            colour = self._colour(fill.role, fill.hue, self._is_dimmed(fill.source))
            self._polygons.append((QBrush(colour), _polygon(self.pixels(fill.points))))

    def _strokes(self) -> None:
        strokes = self._drawing.strokes
        if not strokes:
            return
        everything = self.pixels(np.concatenate([stroke.points for stroke in strokes]))
        lengths = [len(stroke.points) for stroke in strokes]
        parts = np.split(everything, np.cumsum(lengths)[:-1])
        for stroke, points in zip(strokes, parts, strict=True):
            dimmed = self._is_dimmed(stroke.source)
            selected = stroke.role in EMPHASISED and stroke.source in self._selected
            look = (str(stroke.role), stroke.hue, dimmed, selected)
            ends = points.tolist()
            self._lines.setdefault(look, []).extend(
                QLineF(*here, *there) for here, there in pairwise(ends)
            )
            if stroke.arrow is not None:
                head = arrow_head(points, stroke.arrow, 1.5)
                if head is not None:
                    brush = QBrush(self._colour(stroke.role, stroke.hue, dimmed))
                    self._heads.append((brush, _polygon(head)))

    def _labels(self) -> None:
        labels = self._drawing.labels
        places = self.pixels(np.array([label.at for label in labels]).reshape(-1, 2))
        for label, at in zip(labels, places.tolist(), strict=True):
            size = self._style.size(label.role)
            x = at[0] + label.offset[0]
            baseline = at[1] - label.offset[1] - DESCENT * size
            colour = self._colour(label.role, label.hue, self._is_dimmed(label.source))
            for run in label.runs:
                drop = SUB_DROP * size if run.style == "sub" else 0.0
                place = QPointF(x, baseline + drop)
                self._texts.append((run_font(run.style, size), colour, place, run.text))
                x += run_width(run, size)

    def _paint_markers(self, painter: QPainter) -> None:
        ground = qcolour(self._style.ground)
        radius = 0.5 * self._style.event_diameter
        for marker in self._drawing.markers:
            at = self.pixels(np.asarray(marker.at))
            centre = QPointF(float(at[0]), float(at[1]))
            colour = self._colour(marker.role, marker.hue, self._is_dimmed(marker.source))
            if marker.role is Role.CORNER:
                spots = np.array([(1, 0), (0, 1), (-1, 0), (0, -1)]) * 1.25 * radius + at
                painter.setPen(QPen(colour, 1.3))
                painter.setBrush(ground)
                painter.drawPolygon(_polygon(spots))
                continue
            painter.setPen(Qt.PenStyle.NoPen)
            painter.setBrush(ground)
            painter.drawEllipse(centre, radius + self._style.casing, radius + self._style.casing)
            painter.setBrush(colour)
            painter.drawEllipse(centre, radius, radius)
            if marker.source in self._selected:
                painter.setBrush(Qt.BrushStyle.NoBrush)
                painter.setPen(QPen(colour, 1.6))
                painter.drawEllipse(centre, radius + 4.5, radius + 4.5)


def _polygon(points: Points) -> QPolygonF:
    return QPolygonF([QPointF(x, y) for x, y in points.tolist()])
