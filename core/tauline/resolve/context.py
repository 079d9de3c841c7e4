"""What a resolver may ask for: quantities, frames, events and paths by their ids."""

from __future__ import annotations

import math
from collections.abc import Mapping
from difflib import get_close_matches
from typing import cast

import numpy as np

from tauline.errors import QuantityError
from tauline.resolve.memo import Blocked, Failed, Fault, Memo
from tauline.resolve.results import (
    EventResult,
    FrameResult,
    Point,
    PulsesResult,
    SignalResult,
    WorldlineResult,
)
from tauline.scenario.diagnosis import Diagnosis, Severity
from tauline.scenario.expression import evaluate, names_in
from tauline.scenario.forms import names_base
from tauline.scenario.objects import (
    Broken,
    CoastLine,
    CompanionLine,
    DisplacedLine,
    Frame,
    HalfwayFrame,
    Itinerary,
    Object,
    RestLine,
    Worldline,
    kind_of,
)
from tauline.scenario.units import (
    LENGTH,
    NUMBER,
    TIME,
    VELOCITY,
    Dimension,
    Quantity,
    UnitSystem,
)
from tauline.scenario.values import BASE, Value, Velocity
from tauline.spacetime import from_gamma, from_one_minus_beta
from tauline.worldlines import Chain, Coast, ConstantAcceleration, Leg, legs_of
from tauline.worldlines import Worldline as WorldlineCurve
from tauline.worldlines.protocol import Array

MAX_RAPIDITY = 300.0
"""e^{2φ} stays a finite double."""

ROUNDING = 64 * np.finfo(np.float64).eps
"""An event is on a line if it is off by no more than this share of its coordinates."""

LINES = (RestLine, CoastLine, Itinerary, CompanionLine, DisplacedLine)


Line = Coast | ConstantAcceleration | Chain


class Context:
    """Gives the resolver of one object what it asks for by id; raises Fault or Blocked.

    Every ``key`` is the place of the reference below the object, for the diagnosis.
    """

    def __init__(
        self,
        objects: Mapping[str, Object],
        units: UnitSystem,
        faulty_parameters: frozenset[str],
        base: FrameResult,
    ) -> None:
        self.objects = objects
        self.units = units
        self.base = base
        self.memo: Memo
        self._faulty_parameters = faulty_parameters

    # --- quantities -----------------------------------------------------------------------

    def quantity(self, value: Value, dimension: Dimension, key: str) -> float:
        """Evaluate a value of the document, in internal units."""
        known: dict[str, Quantity] = {}
        for name in names_in(value):
            if name in self._faulty_parameters:
                raise Blocked(key, f"parameters.{name}")
            parameter = self.memo.parameter(name)
            if parameter is not None:
                known[name] = parameter
        try:
            return evaluate(value, self.units, known, dimension).value
        except QuantityError as error:
            raise Fault(key, error.message, error.hint) from None

    def rapidity(self, velocity: Velocity, key: str, frame: FrameResult) -> float | None:
        """Rapidity in the base frame of a velocity measured in ``frame``; None for none given."""
        sign = -1.0 if velocity.direction == "-x" else 1.0
        if velocity.velocity is not None:
            own = self._from_beta(velocity.velocity, key + "velocity")
        elif velocity.rapidity is not None:
            own = self.quantity(velocity.rapidity, NUMBER, key + "rapidity")
        elif velocity.gamma is not None:
            gamma = self.quantity(velocity.gamma, NUMBER, key + "gamma")
            if gamma < 1.0:
                raise Fault(key + "gamma", f"γ = {gamma:g} is less than 1")
            own = float(from_gamma(gamma, sign))
        elif velocity.one_minus_beta is not None:
            deficit = self.quantity(velocity.one_minus_beta, NUMBER, key + "one_minus_beta")
            if not 0.0 < deficit <= 1.0:
                raise Fault(key + "one_minus_beta", f"1 − β = {deficit:g} is not in (0, 1]")
            own = float(from_one_minus_beta(deficit, sign))
        else:
            return None
        total = frame.rapidity + own
        if abs(total) > MAX_RAPIDITY:
            raise Fault(key + "rapidity", f"rapidity {total:g} is beyond ±{MAX_RAPIDITY:g}")
        return total

    def _from_beta(self, value: Value, key: str) -> float:
        beta = self.quantity(value, VELOCITY, key)
        if abs(beta) >= 1.0:
            raise Fault(
                key,
                f"a speed of {abs(beta):.6g} c is not below that of light",
                "a worldline or a frame moves slower than c",
            )
        return math.atanh(beta)

    def point(self, t: float, x: float, frame: FrameResult) -> Point:
        """The event at t′, x′ (internal units) of a frame."""
        stretch = math.exp(frame.rapidity)
        return np.add(frame.origin, ((t - x) / stretch, (t + x) * stretch))

    def coordinates(self, point: Point, frame: FrameResult) -> tuple[float, float]:
        """Coordinates t′, x′ (internal units) of an event in a frame."""
        stretch = math.exp(frame.rapidity)
        u, v = (point - frame.origin) * (stretch, 1.0 / stretch)
        return float(0.5 * (u + v)), float(0.5 * (v - u))

    def time(self, value: float) -> str:
        """Write a time for a message."""
        return f"{self.units.to_reader(value, TIME):.6g} {self.units.time}"

    def place(self, value: float) -> str:
        """Write a place for a message."""
        return f"{self.units.to_reader(value, LENGTH):.6g} {self.units.length}"

    # --- things by id -----------------------------------------------------------------------

    def frame(self, frame_id: str | None, key: str) -> FrameResult:
        """Return a frame by id: declared, a leg's, or the base frame for None."""
        if frame_id is None or frame_id == self.base.id:
            return self.base
        owner, _, member = frame_id.partition(".")
        thing = self._object(owner, key, "frame")
        if isinstance(thing, Frame | HalfwayFrame) and not member:
            return cast(FrameResult, self._value("object", owner, key))
        if isinstance(thing, LINES) and member:
            for frame in leg_frames(thing, self.path(owner, key), self.base.origin):
                if frame.id == frame_id:
                    return frame
            raise Fault(key, f"'{owner}' has no leg at rest in a frame '{member}'")
        raise self._wrong_kind(frame_id, thing, key, "a frame")

    def event(self, event_id: str, key: str) -> EventResult:
        """Return an event by id: the author's, or one made by another object."""
        owner, _, member = event_id.partition(".")
        thing = self._object(owner, key, "event")
        if not member and kind_of(thing) == "event":
            return cast(EventResult, self._value("object", owner, key))
        found: EventResult | None = None
        if isinstance(thing, LINES):
            found = self._line_event(owner, member, key)
        elif member:
            made = self._value("object", owner, key)
            found = _light_event(made, event_id, key)
        if found is None:
            raise self._wrong_kind(event_id, thing, key, "an event")
        return found

    def path(self, line_id: str, key: str) -> Line:
        """Return a worldline's curve, without its clock."""
        thing = self._object(line_id, key, "worldline")
        if not isinstance(thing, LINES):
            raise self._wrong_kind(line_id, thing, key, "a worldline")
        return cast(Line, self._value("path", line_id, key))

    def own_path(self, line_id: str) -> Line:
        """Return the curve of the worldline being worked out; its faults are the worldline's."""
        outcome = self.memo.outcome(("path", line_id))
        if outcome.failure is not None:
            raise Failed(outcome.failure)
        for remark in outcome.notes:
            self.memo.note(remark)
        return cast(Line, outcome.value)

    def worldline(self, line_id: str, key: str) -> WorldlineResult:
        """Return a worldline with its clock."""
        self.path(line_id, key)
        return cast(WorldlineResult, self._value("object", line_id, key))

    def is_worldline(self, some_id: str) -> bool:
        """Whether an id is that of a worldline."""
        return isinstance(self.objects.get(some_id), LINES)

    def note(self, object_id: str, key: str, message: str) -> None:
        """Remark something that is not a fault."""
        self.memo.note(
            Diagnosis(object=object_id, key=key, severity=Severity.NOTE, message=message)
        )

    def _value(self, what: str, object_id: str, key: str) -> object:
        outcome = self.memo.outcome((what, object_id))
        if outcome.failure is not None:
            raise Blocked(key, object_id)
        return outcome.value

    def _object(self, object_id: str, key: str, wanted: str) -> Object:
        thing = self.objects.get(object_id)
        if thing is None:
            candidates = [name for name, it in self.objects.items() if kind_of(it) == wanted]
            near = get_close_matches(object_id, candidates or list(self.objects), n=1)
            hint = f"did you mean '{near[0]}'?" if near else f"there is no {wanted} of that id"
            raise Fault(key, f"nothing has the id '{object_id}'", hint)
        if isinstance(thing, Broken):
            raise Blocked(key, object_id)
        return thing

    def _wrong_kind(self, some_id: str, thing: Object, key: str, wanted: str) -> Fault:
        owner, _, member = some_id.partition(".")
        if kind_of(thing) == "view" or not member:
            return Fault(key, f"'{some_id}' is a {kind_of(thing)}, not {wanted}")
        return Fault(key, f"the {kind_of(thing)} '{owner}' has no '{member}' that is {wanted}")

    def _line_event(self, owner: str, member: str, key: str) -> EventResult | None:
        line = self.path(owner, key)
        match member.split("."):
            case ["start"] if math.isfinite(line.start):
                tau = line.start
            case ["end"] if math.isfinite(line.end):
                tau = line.end
            case [leg_name, "end"] if leg_name.startswith("leg-") and leg_name[4:].isdecimal():
                ends = [offset + leg.end for offset, leg in authors_legs(line)]
                index = int(leg_name[4:]) - 1
                if not (0 <= index < len(ends) and math.isfinite(ends[index])):
                    return None
                tau = ends[index]
            case _:
                return None
        return EventResult(id=f"{owner}.{member}", label="", point=line.event(tau), owner=owner)


def _light_event(made: object, event_id: str, key: str) -> EventResult | None:
    signal: SignalResult | None = None
    match made:
        case SignalResult():
            signal = made
        case PulsesResult():
            name = event_id.rpartition(".")[0]
            signal = next((s for s in made.signals if s.id == name), None)
    if signal is None:
        return None
    end = event_id.rpartition(".")[2]
    event = {"sent": signal.sent, "received": signal.received}.get(end)
    if event is None and end in ("sent", "received"):
        raise Fault(key, f"there is no event '{event_id}': {signal.reason}")
    return event


def authors_legs(line: Line) -> tuple[tuple[float, Leg], ...]:
    """The legs of a line as its author counts them, with the proper times they begin at.

    What an itinerary travels before its start, from the endless past, is none of them.
    """
    legs = legs_of(line)
    return legs[1:] if len(legs) > 1 and math.isinf(line.start) else legs


def leg_frames(thing: Worldline, line: Line, origin: Point) -> tuple[FrameResult, ...]:
    """The rest frames of a worldline's coasting legs, ``ID.leg-1`` and so on."""
    legs = authors_legs(line)
    name = thing.label or thing.id
    return tuple(
        FrameResult(
            id=f"{thing.id}.leg-{number}",
            label=f"{name}, leg {number}" if len(legs) > 1 else name,
            rapidity=leg.start_rapidity,
            origin=origin,
            leg_of=thing.id,
        )
        for number, (_, leg) in enumerate(legs, start=1)
        if isinstance(leg, Coast)
    )


def tau_of(line: Line, point: Point) -> float:
    """Proper time of the line at an event ``(2,)`` that lies on it; NaN where it does not."""
    return float(proper_times_on(line, point[:, np.newaxis])[0])


def proper_times_on(line: WorldlineCurve, points: Array) -> Array:
    """Proper times at which a line passes through events ``(2, N)``; NaN where it does not.

    An event is on the line if it is off by no more than the rounding of its coordinates.
    """
    by_u, by_v = line.tau_at_u(points[0]), line.tau_at_v(points[1])
    # the null coordinate that runs faster tells the proper time better
    with np.errstate(invalid="ignore"):
        rapidity = line.rapidity(np.where(np.isnan(by_u), by_v, by_u))
    use_v = np.isnan(by_u) | ((rapidity > 0.0) & ~np.isnan(by_v))
    tau = np.where(use_v, by_v, by_u)
    there = line.event(tau)
    size = np.maximum(np.max(np.abs(points), axis=0), np.max(np.abs(there), axis=0))
    with np.errstate(invalid="ignore"):
        on_line = np.all(np.abs(there - points) <= ROUNDING * size, axis=0)
    return np.where(on_line, tau, np.nan)


def base_frame(objects: Mapping[str, Object]) -> FrameResult:
    """The base frame, under the name the scenario gives it."""
    for thing in objects.values():
        if isinstance(thing, Frame) and names_base(thing):
            return FrameResult(
                id=thing.id, label=thing.label or thing.id, rapidity=0.0, origin=np.zeros(2)
            )
    return FrameResult(id=BASE, label=BASE, rapidity=0.0, origin=np.zeros(2))
