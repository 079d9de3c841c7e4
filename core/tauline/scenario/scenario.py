"""The document: everything the author wrote, as one frozen value."""

from __future__ import annotations

import msgspec

from tauline.scenario.diagnosis import Diagnosis
from tauline.scenario.objects import Broken, Object
from tauline.scenario.values import Value


class Units(msgspec.Struct, frozen=True, kw_only=True):
    """The units of bare numbers."""

    time: str = "yr"
    length: str = "ly"


class Parameter(msgspec.Struct, frozen=True, kw_only=True):
    """A named value that others are computed from."""

    name: str
    value: Value


class Scenario(msgspec.Struct, frozen=True, kw_only=True):
    """A scenario: units, parameters and objects, in the order of the file."""

    title: str = ""
    description: str = ""
    dimensions: int = 1
    units: Units = Units()
    parameters: tuple[Parameter, ...] = ()
    objects: tuple[Object, ...] = ()
    faults: tuple[Diagnosis, ...] = ()
    """Faults of the file outside its objects: an unknown table, a bad unit."""

    def find(self, object_id: str) -> Object | None:
        """Return the object with this id, or None."""
        return next((thing for thing in self.objects if thing.id == object_id), None)

    @property
    def broken(self) -> tuple[Broken, ...]:
        """The tables that do not have the form of their kind."""
        return tuple(thing for thing in self.objects if isinstance(thing, Broken))
