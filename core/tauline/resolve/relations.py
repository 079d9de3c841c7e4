"""What hangs together in a resolved scenario."""

from __future__ import annotations

from collections.abc import Iterable

from tauline.resolve.results import Resolved


def owner_of(some_id: str) -> str:
    """Return the author's object an id belongs to: ``answer`` for ``answer.received``."""
    return some_id.partition(".")[0]


def depends_on(resolved: Resolved, object_id: str) -> frozenset[str]:
    """Ids of the objects that one refers to directly."""
    names: set[str] = set()
    for what in ("object", "path"):
        outcome = resolved.memo.get((what, object_id))
        if outcome is not None:
            names.update(name for (_, name), _ in outcome.nodes)
    return frozenset(names - {object_id})


def dependents_of(resolved: Resolved, object_id: str) -> frozenset[str]:
    """Ids of the objects that refer directly to one."""
    return frozenset(
        node[1]
        for node, outcome in resolved.memo.items()
        if node[1] != object_id and any(read[1] == object_id for read, _ in outcome.nodes)
    )


def related(resolved: Resolved, ids: Iterable[str]) -> frozenset[str]:
    """Ids to keep in sight when some are selected.

    The selected ones, what they refer to and what refers to them, and the events on a selected
    worldline or the worldlines through a selected event. Ids of events that an object makes
    (``answer.received``) come along with the object.
    """
    selected = tuple(ids)
    near: set[str] = set(selected)
    for some_id in selected:
        owner = owner_of(some_id)
        near |= {owner} | depends_on(resolved, owner) | dependents_of(resolved, owner)
        event = resolved.events.get(some_id)
        if event is not None:
            near.update(placement.worldline for placement in event.on)
    for event in resolved.events.values():
        if event.owner in near or any(placement.worldline in selected for placement in event.on):
            near.add(event.id)
    return frozenset(near)
