"""Label placement: nothing covered where there is room, and steady during a drag."""

from __future__ import annotations

from itertools import combinations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray

from tauline.figure.candidates import BESIDE, along_line, around_point, beside
from tauline.figure.cover import Cover, segments_of
from tauline.figure.drawing import Role, Run
from tauline.figure.labels import LEADER_FROM, Placed, Request, leader_of, place_labels

Array = NDArray[np.float64]
PAGE = (400.0, 300.0)
NO_LINES, NO_DOTS = np.empty((0, 4)), np.empty((0, 3))
SIZE = (36.0, 8.0)


def named(name: str, at: tuple[float, float], size: tuple[float, float] = SIZE) -> Request:
    anchor = np.array(at)
    return Request(
        source=name,
        role=Role.EVENT_LABEL,
        hue=-1,
        runs=(Run(name),),
        size=size,
        boxes=around_point(anchor, size, 5.0),
        anchors=anchor,
        leads=True,
    )


def overlap(first: Placed, second: Placed) -> bool:
    low = np.maximum(first.corner, second.corner)
    high = np.minimum(
        first.corner + np.array(first.request.size), second.corner + np.array(second.request.size)
    )
    return bool(np.all(low < high))


def cuts(item: Placed, segment: Array) -> bool:
    """Whether a line passes through a label's box, by walking along it."""
    along = np.linspace(0.0, 1.0, 400)[:, np.newaxis]
    points = segment[:2] + along * (segment[2:] - segment[:2])
    high = item.corner + np.array(item.request.size)
    return bool(np.any(np.all((points > item.corner) & (points < high), axis=1)))


places = st.tuples(st.floats(20.0, 380.0), st.floats(20.0, 280.0))
lines = st.tuples(places, places).map(lambda ends: np.array([*ends[0], *ends[1]]))


@given(st.lists(places, min_size=1, max_size=12), st.lists(lines, max_size=8))
def test_what_is_called_free_is_free(
    anchors: list[tuple[float, float]], drawn: list[Array]
) -> None:
    segments = np.array(drawn).reshape(-1, 4)
    dots = np.array([(*at, 3.0) for at in anchors])
    requests = [named(str(k), at) for k, at in enumerate(anchors)]
    placed = place_labels(requests, Cover(segments, dots, PAGE))
    assert [item.request for item in placed] == requests
    free = [item for item in placed if item.cost == 0.0]
    for item in free:
        assert np.all(item.corner >= 0.0)
        assert np.all(item.corner + SIZE <= PAGE)
        assert not any(cuts(item, segment) for segment in segments)
        inside = (dots[:, :2] > item.corner) & (dots[:, :2] < item.corner + SIZE)
        assert not np.any(np.all(inside, axis=1))
    assert not any(overlap(one, other) for one, other in combinations(free, 2))


@given(st.lists(st.tuples(st.integers(0, 3), st.integers(0, 3)), unique=True, max_size=16))
def test_where_there_is_room_nothing_overlaps(cells: list[tuple[int, int]]) -> None:
    anchors = [(60.0 + 90.0 * column, 40.0 + 70.0 * row) for column, row in cells]
    dots = np.array([(*at, 3.0) for at in anchors]).reshape(-1, 3)
    placed = place_labels(
        [named(str(k), at) for k, at in enumerate(anchors)], Cover(NO_LINES, dots, PAGE)
    )
    assert all(item.cost == 0.0 for item in placed)


def test_many_names_of_one_place_all_find_room() -> None:
    placed = place_labels(
        [named(str(k), (200.0, 150.0)) for k in range(12)],
        Cover(NO_LINES, np.array([[200.0, 150.0, 3.0]]), PAGE),
    )
    assert not any(item.overlaps for item in placed)
    assert not any(overlap(one, other) for one, other in combinations(placed, 2))
    # the far ones are led to
    assert any(leader_of(item) is not None for item in placed)
    for count, item in enumerate(placed):
        leader = leader_of(item)
        nearest = np.clip((200.0, 150.0), item.corner, item.corner + np.array(SIZE))
        far = float(np.hypot(*(nearest - (200.0, 150.0)))) >= LEADER_FROM
        assert (leader is not None) == far
        if leader is not None and item.cost == 0.0:
            assert not any(cuts(other, leader.ravel()) for other in placed[:count])


def test_a_place_without_room_says_so() -> None:
    item = place_labels([named("a", (10.0, 5.0), (500.0, 8.0))], Cover(NO_LINES, NO_DOTS, PAGE))[0]
    assert item.cost > 0.0


def test_an_optional_label_is_left_out_where_there_is_no_room() -> None:
    wide = Request(
        source="",
        role=Role.AXIS_NUMBER,
        hue=-1,
        runs=(Run("1"),),
        size=(500.0, 8.0),
        boxes=np.array([[10.0, 10.0]]),
        anchors=np.array([10.0, 10.0]),
        optional=True,
    )
    assert place_labels([wide], Cover(NO_LINES, NO_DOTS, PAGE)) == []


def test_a_label_keeps_its_place_while_that_is_free() -> None:
    request = named("a", (200.0, 150.0))
    first = place_labels([request], Cover(NO_LINES, NO_DOTS, PAGE))[0]
    assert first.choice == 0
    in_the_way = segments_of([np.array([[205.0, 160.0], [240.0, 160.0]])])
    moved = place_labels([request], Cover(in_the_way, NO_DOTS, PAGE))[0]
    assert moved.choice != 0
    # the line goes away; the label stays where it is, unless nothing is known of before
    stays = place_labels([request], Cover(NO_LINES, NO_DOTS, PAGE), {request.key: moved.choice})
    assert stays[0].choice == moved.choice
    # and leaves when something comes there
    back = segments_of([np.array([moved.corner, moved.corner + SIZE])])
    leaves = place_labels([request], Cover(back, NO_DOTS, PAGE), {request.key: moved.choice})
    assert leaves[0].choice == 0


def number(k: int, at: tuple[float, float]) -> Request:
    anchor = np.array(at)
    return Request(
        source="",
        role=Role.AXIS_NUMBER,
        hue=-1,
        runs=(Run(str(k)),),
        size=(6.0, 7.0),
        boxes=beside(anchor, np.array([-1.0, 0.0]), (6.0, 7.0), 5.0),
        anchors=anchor,
        optional=True,
        row="t",
        sides=BESIDE,
    )


def test_the_numbers_of_an_axis_keep_to_one_side() -> None:
    row = [number(k, (200.0, 20.0 + 40.0 * k)) for k in range(7)]
    assert {
        item.corner[0] < 200.0 for item in place_labels(row, Cover(NO_LINES, NO_DOTS, PAGE))
    } == {True}
    # most of the left side is taken: all go to the right
    wall = segments_of([np.array([[x, 10.0], [x, 220.0]]) for x in (187.0, 192.0)])
    placed = place_labels(row, Cover(wall, NO_DOTS, PAGE))
    assert len(placed) == 7
    assert all(item.corner[0] > 200.0 for item in placed)


@pytest.mark.parametrize("aside", [(1.0, 0.0), (0.0, -1.0), (0.6, 0.8), (-0.8, 0.6)])
def test_beside_means_clear_of_the_point_on_the_named_side(aside: tuple[float, float]) -> None:
    at, half = np.array([50.0, 60.0]), np.array([15.0, 4.0])
    boxes = beside(at, np.array(aside), (30.0, 8.0), 5.0)
    for box, side in zip(boxes, BESIDE, strict=True):
        towards = np.array(aside) * (1.0 if side == 0 else -1.0)
        assert (box + half - at) @ towards > 0.0
        nearest = np.clip(at, box, box + 2.0 * half)
        assert np.hypot(*(nearest - at)) > 3.5


def test_names_of_lines_stand_beside_them() -> None:
    line = np.array([[0.0, 0.0], [100.0, 100.0], [100.0, 250.0]])
    boxes, anchors = along_line(line, SIZE, 4.0)
    assert boxes.shape == anchors.shape
    segments = segments_of([line])
    for corner, anchor in zip(boxes[:10], anchors[:10], strict=True):
        item = Placed(
            request=named("a", (0.0, 0.0)), corner=corner, anchor=anchor, choice=0, cost=0.0
        )
        assert not any(cuts(item, segment) for segment in segments)
