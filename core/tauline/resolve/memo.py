"""Pull-based evaluation that remembers what each result was made from.

A *node* is one thing to work out: an object of the scenario, or the path of a worldline before
its clock is set. Whatever a node asks for while it is worked out is written down with it. The
next resolution reuses the outcome if the object is the same and everything it asked for still
has the same outcome.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

import msgspec

from tauline.scenario.diagnosis import Diagnosis
from tauline.scenario.units import Quantity

Node = tuple[str, str]
"""What is asked for (``object`` or ``path``) and the id of the object."""


class Fault(Exception):  # noqa: N818 - not an error of the program
    """Raised while a node is worked out: the object has a fault at ``key``."""

    def __init__(self, key: str, message: str, hint: str = "") -> None:
        super().__init__(message)
        self.key = key
        self.message = message
        self.hint = hint


class Blocked(Exception):  # noqa: N818 - not an error of the program
    """Raised while a node is worked out: something it refers to (at ``key``) has a fault."""

    def __init__(self, key: str, culprit: str) -> None:
        super().__init__(culprit)
        self.key = key
        self.culprit = culprit


MAX_DEPTH = 60
"""How many nodes may be worked out one within the other."""


class Failure(msgspec.Struct, frozen=True):
    """The outcome of a node that could not be worked out."""

    key: str
    message: str
    hint: str
    blocked: bool


class Failed(Exception):  # noqa: N818 - not an error of the program
    """Raised while a node is worked out: it fails just as another part of it did."""

    def __init__(self, failure: Failure) -> None:
        super().__init__(failure.message)
        self.failure = failure


class Outcome(msgspec.Struct, frozen=True):
    """A node's result or failure, and what was read to get there.

    ``notes`` are remarks made on the way that are not faults.
    """

    subject: object
    nodes: tuple[tuple[Node, Outcome], ...]
    parameters: tuple[tuple[str, Quantity | None], ...]
    value: Any
    failure: Failure | None
    notes: tuple[Diagnosis, ...] = ()


class Reading:
    """What one node has asked for so far."""

    def __init__(self) -> None:
        self.nodes: list[tuple[Node, Outcome]] = []
        self.parameters: list[tuple[str, Quantity | None]] = []
        self.notes: list[Diagnosis] = []


class Memo:
    """Outcomes of one resolution, reusing those of the one before where they still hold."""

    def __init__(
        self,
        subjects: Mapping[str, object],
        parameters: Mapping[str, Quantity],
        build: Callable[[Node], Any],
        previous: Mapping[Node, Outcome],
    ) -> None:
        self.outcomes: dict[Node, Outcome] = {}
        self._subjects = subjects
        self._parameters = parameters
        self._build = build
        self._previous = previous
        self._active: dict[Node, Reading] = {}

    def outcome(self, node: Node) -> Outcome:
        """Return the node's outcome, working it out if need be, and write down that it was read.

        A node that is being worked out already closes a cycle: every node on it fails.
        """
        known = self.outcomes.get(node)
        if known is None:
            if node in self._active:
                ring = list(self._active)[list(self._active).index(node) :]
                raise Cycle(tuple(ring))
            if len(self._active) >= MAX_DEPTH:
                raise Deeper(node)
            known = self._reusable(node) or self._work_out(node)
            self.outcomes[node] = known
        if self._active:
            self._reading.nodes.append((node, known))
        return known

    def settle(self, node: Node) -> Outcome:
        """Return the outcome of a node, however long the chain of nodes it hangs on.

        Python's own stack holds but so many; a node found too deep is worked out by itself first.
        """
        waiting = [node]
        while waiting:
            try:
                self.outcome(waiting[-1])
            except Deeper as deeper:
                if deeper.node in waiting:
                    ring = tuple(waiting[waiting.index(deeper.node) :])
                    outcome = self._finish(deeper.node, Reading(), None, _ring_failure(ring))
                    self.outcomes[deeper.node] = outcome
                else:
                    waiting.append(deeper.node)
                continue
            waiting.pop()
        return self.outcomes[node]

    def parameter(self, name: str) -> Quantity | None:
        """Return a parameter's value (None where it has none), and write down that it was read."""
        value = self._parameters.get(name)
        self._reading.parameters.append((name, value))
        return value

    def note(self, diagnosis: Diagnosis) -> None:
        """Add a remark to the node being worked out."""
        self._reading.notes.append(diagnosis)

    @property
    def _reading(self) -> Reading:
        return next(reversed(self._active.values()))

    def _reusable(self, node: Node) -> Outcome | None:
        """Return the earlier outcome if nothing it was made from has changed."""
        old = self._previous.get(node)
        if old is None or old.subject is not self._subjects.get(node[1]):
            return None
        if old.failure is not None:
            # a failure may hang on what was not there to be read: an id, a parameter
            return None
        if any(self._parameters.get(name) != value for name, value in old.parameters):
            return None
        self._active[node] = Reading()
        try:
            same = all(
                read[1] in self._subjects and self.outcome(read) is outcome
                for read, outcome in old.nodes
            )
        except Cycle:
            raise StaleMemo from None
        finally:
            self._active.pop(node, None)
        return old if same else None

    def _work_out(self, node: Node) -> Outcome:
        reading = self._active[node] = Reading()
        value: Any = None
        failure: Failure | None = None
        try:
            value = self._build(node)
        except Fault as fault:
            failure = Failure(fault.key, fault.message, fault.hint, blocked=False)
        except Blocked as blocked:
            message = f"waits for '{blocked.culprit}', which has a fault"
            failure = Failure(blocked.key, message, "", blocked=True)
        except Failed as failed:
            failure = failed.failure
        except Cycle as cycle:
            if node not in cycle.ring:
                raise
            failure = _ring_failure(cycle.ring)
            if node != cycle.ring[0]:
                del self._active[node]
                self.outcomes[node] = self._finish(node, reading, None, failure)
                raise
        finally:
            self._active.pop(node, None)
        return self._finish(node, reading, value, failure)

    def _finish(
        self, node: Node, reading: Reading, value: object, failure: Failure | None
    ) -> Outcome:
        return Outcome(
            subject=self._subjects.get(node[1]),
            nodes=tuple(reading.nodes),
            parameters=tuple(reading.parameters),
            value=value,
            failure=failure,
            notes=tuple(reading.notes),
        )


def _ring_failure(ring: tuple[Node, ...]) -> Failure:
    names = " → ".join(dict.fromkeys(name for _, name in ring))
    return Failure(
        "",
        f"refers to itself: {names} → {ring[0][1]}",
        "place one of them by numbers, or by something outside this ring",
        blocked=False,
    )


class Deeper(Exception):  # noqa: N818 - not an error of the program
    """Raised where nodes hang on one another too deeply: work this one out first."""

    def __init__(self, node: Node) -> None:
        super().__init__(node)
        self.node = node


class StaleMemo(Exception):  # noqa: N818 - not an error of the program
    """A ring of references showed while old outcomes were compared: start without them."""


class Cycle(Exception):  # noqa: N818 - not an error of the program
    """Raised through every node of a ring of references, ``ring[0]`` being met twice."""

    def __init__(self, ring: tuple[Node, ...]) -> None:
        super().__init__(ring)
        self.ring = ring
