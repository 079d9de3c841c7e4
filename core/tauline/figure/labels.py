"""Placing labels where they cover nothing: deterministic, and steady while a view is dragged.

Works in points on the page (x right, y up, from the window's lower left corner). Every label
brings candidate places in order of preference; it takes the first that is free, else the one
that covers least.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import msgspec
import numpy as np
from numpy.typing import NDArray

from tauline.figure.cover import Cover
from tauline.figure.drawing import Role, Run

Array = NDArray[np.float64]
Key = tuple[str, str, str]
"""Source (or row), role and text of a label: what it is recognised by in the next placement."""

LEADER_FROM = 20.0
"""A label farther than this from its point, in points, gets a leader line."""
LEADER_GAP = 4.0
"""Points between that line and the point."""
AT_ONCE = 12
"""Candidates tried before all the others."""
ACROSS_LABEL = 1.0
"""What it costs a label to be led to across another."""
WRONG_SIDE = 0.5
"""What it costs a label to leave the side its row keeps to; less than covering anything."""


class Request(msgspec.Struct, frozen=True, kw_only=True):
    """A label to be placed.

    ``boxes`` are the lower left corners ``(C, 2)`` of its candidate places, the best first;
    ``anchors`` the points they belong to, one for all ``(2,)`` or one each ``(C, 2)``.
    ``optional`` ones are left out where no place is free. ``leads`` says that a line leads from
    a far place to the anchor. Requests of one ``row``, such as the numbers of an axis, follow
    one another and keep to one of two ``sides`` (0 or 1 for each candidate) if they can.
    """

    source: str
    role: Role
    hue: int
    runs: tuple[Run, ...]
    size: tuple[float, float]
    boxes: Array
    anchors: Array
    optional: bool = False
    leads: bool = False
    row: str = ""
    sides: tuple[int, ...] = ()

    @property
    def key(self) -> Key:
        """What it is recognised by."""
        return self.source or self.row, str(self.role), "".join(run.text for run in self.runs)


class Placed(msgspec.Struct, frozen=True, kw_only=True):
    """Where a label has gone: its lower left corner, its anchor, which candidate it took."""

    request: Request
    corner: Array
    anchor: Array
    choice: int
    cost: float

    @property
    def overlaps(self) -> bool:
        """Whether it covers something."""
        return self.cost > ACROSS_LABEL


def place_labels(
    requests: Sequence[Request], cover: Cover, previous: Mapping[Key, int] | None = None
) -> list[Placed]:
    """Place labels on a page in the order given, the most important first.

    ``previous`` holds the choices of the placement before: a label keeps its place while that is
    free.
    """
    kept = previous or {}
    placed: list[Placed] = []
    row, side = "", 0
    for request in requests:
        if request.row and request.row != row:
            row = request.row
            side = _better_side([other for other in requests if other.row == row], cover)
        choice, cost = _best(request, cover, kept.get(request.key, -1), side)
        if request.optional and cost > 0.0:
            continue
        anchor = request.anchors if request.anchors.ndim == 1 else request.anchors[choice]
        item = Placed(
            request=request,
            corner=request.boxes[choice],
            anchor=anchor,
            choice=choice,
            cost=cost,
        )
        placed.append(item)
        cover.take(item.corner, np.asarray(request.size), leader_of(item))
    return placed


def keep_labels(requests: Sequence[Request], previous: Mapping[Key, int]) -> list[Placed]:
    """Put labels where they were, without asking what they cover: for the frames of a motion.

    One that had no place is left out if it is optional, else it takes the first.
    """
    placed = []
    for request in requests:
        choice = previous.get(request.key, -1)
        if not 0 <= choice < len(request.boxes):
            if request.optional:
                continue
            choice = 0
        anchor = request.anchors if request.anchors.ndim == 1 else request.anchors[choice]
        placed.append(
            Placed(
                request=request,
                corner=request.boxes[choice],
                anchor=anchor,
                choice=choice,
                cost=0.0,
            )
        )
    return placed


def leader_of(item: Placed) -> Array | None:
    """The line ``(2, 2)`` from the point a label names to where it stands, if that is far."""
    if not item.request.leads:
        return None
    ends, far = _leaders(item.request, slice(item.choice, item.choice + 1))
    return ends.reshape(2, 2) if far[0] else None


def _best(request: Request, cover: Cover, kept: int, side: int) -> tuple[int, float]:
    """The candidate to take and what it covers."""
    wrong = np.asarray(request.sides) != side if request.row else None
    if 0 <= kept < len(request.boxes) and not (wrong is not None and wrong[kept]):
        cost = float(_cost(request, cover, slice(kept, kept + 1))[0])
        if cost == 0.0:
            return kept, cost
    # most labels find a place among the nearest candidates
    costs = _cost(request, cover, slice(0, AT_ONCE))
    if np.all(costs > 0.0) and len(request.boxes) > AT_ONCE:
        costs = np.concatenate([costs, _cost(request, cover, slice(AT_ONCE, None))])
    ranked = costs if wrong is None else costs + WRONG_SIDE * wrong
    choice = int(np.argmin(ranked))
    return choice, float(costs[choice])


def _cost(request: Request, cover: Cover, part: slice) -> Array:
    costs = cover.cost(request.boxes[part], np.asarray(request.size))
    if request.leads:
        ends, far = _leaders(request, part)
        costs += ACROSS_LABEL * (far & cover.crossed(ends))
    return costs


def _better_side(row: Sequence[Request], cover: Cover) -> int:
    """The side on which more requests of a row find a free place; the first if as many."""
    sizes = np.repeat([request.size for request in row], [len(r.boxes) for r in row], axis=0)
    costs = cover.cost(np.vstack([request.boxes for request in row]), sizes)
    sides = np.concatenate([request.sides for request in row])
    numbers = np.repeat(np.arange(len(row)), [len(r.boxes) for r in row])
    first, other = (len(np.unique(numbers[(costs == 0.0) & (sides == s)])) for s in (0, 1))
    return int(other > first)


def _leaders(request: Request, part: slice) -> tuple[Array, NDArray[np.bool_]]:
    """Leader lines ``(C, 4)`` of some candidates, and whether these are far enough for one."""
    boxes = request.boxes[part]
    nearest = np.clip(request.anchors, boxes, boxes + np.asarray(request.size))
    gap = nearest - request.anchors
    distance = np.hypot(*gap.T)
    starts = request.anchors + gap * (LEADER_GAP / np.maximum(distance, LEADER_GAP))[:, np.newaxis]
    return np.hstack([starts, nearest]), distance >= LEADER_FROM
