"""What is wrong with an object, where, and how to mend it."""

from __future__ import annotations

from enum import StrEnum

import msgspec


class Severity(StrEnum):
    """How much a diagnosis weighs."""

    ERROR = "error"
    """The object has a fault of its own."""
    CONSEQUENCE = "consequence"
    """The object is sound but refers to one that has a fault."""
    NOTE = "note"
    """Worth knowing; not a fault. A signal that never arrives is one."""


class Diagnosis(msgspec.Struct, frozen=True, kw_only=True):
    """One remark on one object of a scenario.

    ``object`` is the object's id, or a handle such as ``worldline[2]`` (the second worldline
    of the file) where the object has no usable id, or ``""`` for the file as a whole.
    ``key`` is the path of the value below the object, such as ``leg[2].until.time``; it may
    be empty.
    """

    object: str
    key: str = ""
    severity: Severity = Severity.ERROR
    message: str
    hint: str = ""

    def __str__(self) -> str:
        place = ": ".join(part for part in (self.object, self.key) if part)
        text = f"{place}: {self.message}" if place else self.message
        return f"{text} ({self.hint})" if self.hint else text
