"""Undo and redo."""

from __future__ import annotations

from hypothesis import given
from hypothesis import strategies as st

from tauline.scenario.history import History
from tauline.scenario.scenario import Scenario

OPENED = Scenario(title="opened")


def test_undo_gives_back_the_identical_object() -> None:
    first, second = Scenario(title="1"), Scenario(title="2")
    history = History.of(OPENED).push(first, "Set title").push(second, "Set title again")
    assert (history.undo_name, history.redo_name) == ("Set title again", "")
    back = history.undo()
    assert back.current is first
    assert (back.undo_name, back.redo_name) == ("Set title", "Set title again")
    assert back.redo().current is second
    assert back.undo().undo().undo().current is OPENED
    assert history.redo() == history


def test_a_gesture_is_one_entry() -> None:
    history = History.of(OPENED)
    for number in range(5):
        history = history.push(Scenario(title=str(number)), "Drag", "ship.velocity")
    assert history.current.title == "4"
    assert history.undo().current is OPENED
    other = history.push(Scenario(title="x"), "Drag", "ship.acceleration")
    assert other.undo().current.title == "4"


def test_a_gesture_after_undo_does_not_swallow_what_it_began_from() -> None:
    history = History.of(OPENED).push(Scenario(title="1"), "Drag", "key").undo()
    again = history.push(Scenario(title="2"), "Drag", "key")
    assert again.undo().current is OPENED
    assert again.redo_name == ""


def test_pushing_what_is_there_changes_nothing() -> None:
    history = History.of(OPENED)
    assert history.push(OPENED, "Nothing") is history


def test_clean() -> None:
    history = History.of(OPENED)
    changed = history.push(Scenario(title="1"), "Set title")
    assert history.is_clean(OPENED)
    assert not changed.is_clean(OPENED)
    assert changed.undo().is_clean(OPENED)
    assert changed.push(Scenario(title="opened"), "Set title").is_clean(OPENED)


@given(st.lists(st.sampled_from(["push", "undo", "redo"]), max_size=30))
def test_against_two_stacks(steps: list[str]) -> None:
    history = History.of(OPENED)
    done, undone = [OPENED], list[Scenario]()
    for number, step in enumerate(steps):
        if step == "push":
            done.append(Scenario(title=str(number)))
            undone.clear()
            history = history.push(done[-1], "Edit")
        elif step == "undo":
            history = history.undo()
            if len(done) > 1:
                undone.append(done.pop())
        else:
            history = history.redo()
            if undone:
                done.append(undone.pop())
        assert history.current is done[-1]
