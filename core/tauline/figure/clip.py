"""Cutting lines and polygons to a window, so that nothing far away reaches a painter."""

from __future__ import annotations

import numpy as np

from tauline.figure.drawing import Points, Window


def clip_polyline(points: Points, window: Window) -> list[Points]:
    """Return the stretches of a polyline ``(N, 2)`` inside a window.

    Segments with an end that is not finite are left out. Liang & Barsky, ACM Trans. Graph. 3
    (1984) 1, for all segments at once.
    """
    if len(points) < 2:
        return []
    enter, leave = _inside(points[:-1], points[1:], window)
    stretches: list[list[Points]] = []
    for k in np.flatnonzero(enter < leave):
        step = points[k + 1] - points[k]
        first, last = points[k] + enter[k] * step, points[k] + leave[k] * step
        joined = stretches and enter[k] == 0.0 and np.array_equal(stretches[-1][-1], points[k])
        if joined:
            stretches[-1].append(last)
        else:
            stretches.append([first, last])
        if leave[k] == 1.0:
            stretches[-1][-1] = points[k + 1]
    return [np.array(stretch) for stretch in stretches]


def clip_line(at: Points, direction: Points, window: Window) -> tuple[float, float] | None:
    """Return the parameters between which ``at + s direction`` is inside a window."""
    reach = _reach(at, window) / float(np.max(np.abs(direction)))
    ends = np.array([at - reach * direction, at + reach * direction])
    enter, leave = _inside(ends[:1], ends[1:], window)
    if not enter[0] < leave[0]:
        return None
    return float(reach * (2.0 * enter[0] - 1.0)), float(reach * (2.0 * leave[0] - 1.0))


def clip_ray(at: Points, direction: Points, window: Window) -> Points | None:
    """Return the two ends of the part of a ray from ``at`` inside a window."""
    span = clip_line(at, direction, window)
    if span is None or span[1] <= 0.0:
        return None
    return np.array([at + max(span[0], 0.0) * direction, at + span[1] * direction])


def clip_polygon(points: Points, window: Window) -> Points:
    """Return the part of a polygon ``(N, 2)`` inside a window; empty for none.

    I. E. Sutherland & G. W. Hodgman, Commun. ACM 17 (1974) 32.
    """
    for axis, bound, sign in (
        (0, window.x0, 1.0),
        (0, window.x1, -1.0),
        (1, window.t0, 1.0),
        (1, window.t1, -1.0),
    ):
        if len(points) == 0:
            return points
        depth = sign * (points[:, axis] - bound)
        kept: list[Points] = []
        for k in range(len(points)):
            here, there = depth[k - 1], depth[k]
            if (here < 0.0) != (there < 0.0):
                share = here / (here - there)
                crossing = points[k - 1] + share * (points[k] - points[k - 1])
                crossing[axis] = bound
                kept.append(crossing)
            if there >= 0.0:
                kept.append(points[k])
        points = np.array(kept).reshape(-1, 2)
    return points


def _reach(at: Points, window: Window) -> float:
    corners = np.array([(window.x0, window.t0), (window.x1, window.t1)])
    return float(2.0 * np.max(np.abs(corners - at)) + window.width + window.height)


def _inside(first: Points, last: Points, window: Window) -> tuple[Points, Points]:
    """Shares of each segment at which it enters and leaves the window."""
    step = last - first
    enter, leave = np.zeros(len(first)), np.ones(len(first))
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        for axis, low, high in ((0, window.x0, window.x1), (1, window.t0, window.t1)):
            one = (low - first[:, axis]) / step[:, axis]
            other = (high - first[:, axis]) / step[:, axis]
            flat = step[:, axis] == 0.0
            inside = (first[:, axis] >= low) & (first[:, axis] <= high)
            near = np.where(flat, np.where(inside, -np.inf, np.inf), np.minimum(one, other))
            far = np.where(flat, np.where(inside, np.inf, -np.inf), np.maximum(one, other))
            enter, leave = np.maximum(enter, near), np.minimum(leave, far)
    bad = ~np.all(np.isfinite(first) & np.isfinite(last), axis=1)
    enter[bad], leave[bad] = 1.0, 0.0
    return enter, leave
