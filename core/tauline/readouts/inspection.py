"""What a scenario holds and what is wrong with it, for automation."""

from __future__ import annotations

from typing import Any

from tauline.resolve.results import Resolved
from tauline.scenario.diagnosis import Diagnosis, Severity
from tauline.scenario.objects import kind_of
from tauline.scenario.source import Source


def inspection(resolved: Resolved, source: Source) -> dict[str, Any]:
    """List every object with its state, and every diagnosis with its place in the file.

    ``{"objects": [{"id", "kind", "label", "state"}], "diagnoses": [{"file", "line", "key",
    "object", "severity", "message", "hint"}]}``.
    """
    return {
        "objects": [
            {
                "id": thing.id,
                "kind": kind_of(thing),
                "label": thing.label,
                "state": resolved.states[thing.id],
            }
            for thing in resolved.scenario.objects
        ],
        "diagnoses": [_placed(diagnosis, source) for diagnosis in resolved.diagnoses],
    }


def diagnosis_line(diagnosis: Diagnosis, source: Source) -> str:
    """Write a diagnosis in one line: file, line, severity, object, key, message, hint.

    >>> diagnosis = Diagnosis(object="ship", key="velocity", message="too fast")
    >>> diagnosis_line(diagnosis, Source(path=None, text="", lines={}))
    'error: ship: velocity: too fast'
    """
    line = source.line_of(diagnosis.object, diagnosis.key)
    place = str(source.path) if source.path else ""
    if line is not None:
        place += f":{line}"
    head = f"{place}: " if place else ""
    return f"{head}{diagnosis.severity}: {diagnosis}"


def has_fault(resolved: Resolved) -> bool:
    """Whether any object has a fault, of its own or of something it refers to."""
    return any(diagnosis.severity is not Severity.NOTE for diagnosis in resolved.diagnoses)


def _placed(diagnosis: Diagnosis, source: Source) -> dict[str, Any]:
    return {
        "file": str(source.path) if source.path else "",
        "line": source.line_of(diagnosis.object, diagnosis.key),
        "key": diagnosis.key,
        "object": diagnosis.object,
        "severity": str(diagnosis.severity),
        "message": diagnosis.message,
        "hint": diagnosis.hint,
    }
