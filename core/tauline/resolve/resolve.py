"""Scenario → Resolved: a pure function that redoes only what changed."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from functools import partial
from itertools import chain
from typing import Any, TypeVar, cast

from tauline.resolve import events, light, lines, surfaces
from tauline.resolve.broken import value_faults
from tauline.resolve.context import LINES, Context, Line, base_frame, leg_frames
from tauline.resolve.memo import Fault, Memo, Node, Outcome, StaleMemo
from tauline.resolve.placements import place_on_worldlines
from tauline.resolve.results import (
    BodyResult,
    EventResult,
    FrameResult,
    LightConeResult,
    PulsesResult,
    Resolved,
    SignalResult,
    SimultaneityResult,
    State,
    ViewResult,
    WorldlineResult,
)
from tauline.scenario.diagnosis import Diagnosis, Severity
from tauline.scenario.forms import names_base
from tauline.scenario.objects import (
    Body,
    Broken,
    Frame,
    HalfwayFrame,
    LightCone,
    Pulses,
    Signal,
    Simultaneity,
    View,
    Worldline,
)
from tauline.scenario.parameters import evaluate_parameters
from tauline.scenario.scenario import Scenario
from tauline.scenario.units import Quantity, UnitSystem

T = TypeVar("T")


def resolve(scenario: Scenario, previous: Resolved | None = None) -> Resolved:
    """Work out where everything of a scenario is.

    Never raises for what the scenario says: faults become diagnoses, and everything that does
    not depend on them resolves. ``previous`` is an earlier resolution (of any scenario) whose
    results are taken over where the objects they came from, and all these depend on, are the
    same objects still.
    """
    units = UnitSystem(scenario.units.time, scenario.units.length)
    objects = {thing.id: thing for thing in scenario.objects}
    base = base_frame(objects)
    memo: Mapping[Node, Outcome] = {}
    if previous is not None and previous.units == units and _same_frame(previous.base, base):
        base, memo = previous.base, previous.memo
    try:
        return _resolve(scenario, units, base, memo)
    except StaleMemo:
        return _resolve(scenario, units, base, {})


def _same_frame(first: FrameResult, second: FrameResult) -> bool:
    return (first.id, first.label) == (second.id, second.label)


def _resolve(
    scenario: Scenario, units: UnitSystem, base: FrameResult, old: Mapping[Node, Outcome]
) -> Resolved:
    parameters, faults = evaluate_parameters(scenario, units)
    objects = {thing.id: thing for thing in scenario.objects}
    unusable = frozenset(p.name for p in scenario.parameters if p.name not in parameters)
    context = Context(objects, units, unusable, base)
    lines_in_order = [thing.id for thing in scenario.objects if isinstance(thing, LINES)]
    observers = {name: number for number, name in enumerate(lines_in_order)}
    context.memo = Memo(
        objects, parameters, partial(_build, context, observers), _numbered(old, observers)
    )
    outcomes = {
        thing.id: context.memo.settle(("object", thing.id))
        for thing in scenario.objects
        if not isinstance(thing, Broken)
    }
    return _assemble(scenario, context, parameters, outcomes, (*scenario.faults, *faults))


def _numbered(old: Mapping[Node, Outcome], observers: dict[str, int]) -> dict[Node, Outcome]:
    """Leave out the worldlines whose running number has changed: no node reads that."""
    return {
        node: outcome
        for node, outcome in old.items()
        if not isinstance(outcome.value, WorldlineResult)
        or outcome.value.observer == observers.get(node[1])
    }


def _build(context: Context, observers: dict[str, int], node: Node) -> object:
    what, name = node
    thing = context.objects[name]
    if isinstance(thing, LINES):
        if what == "path":
            return lines.path(context, thing)
        return lines.worldline(context, thing, observers[name])
    # events come in several forms, all other kinds in one
    builder = BUILDERS.get(type(thing), events.event)
    return builder(context, thing)


def _frame(context: Context, thing: Frame) -> FrameResult:
    if names_base(thing):
        if thing.origin is not None:
            raise Fault("origin", "the base frame has its origin at t = 0, x = 0")
        return context.base
    relative = context.frame(thing.relative_to, "relative_to")
    rapidity = context.rapidity(thing, "", relative)
    origin = (
        relative.origin if thing.origin is None else context.event(thing.origin, "origin").point
    )
    return FrameResult(
        id=thing.id,
        label=thing.label or thing.id,
        rapidity=relative.rapidity if rapidity is None else rapidity,
        origin=origin,
    )


def _halfway_frame(context: Context, thing: HalfwayFrame) -> FrameResult:
    """Rapidities along one line add, so the half-way one is their mean."""
    first, second = (
        context.frame(name, f"halfway[{number}]")
        for number, name in enumerate(thing.halfway, start=1)
    )
    origin = first.origin if thing.origin is None else context.event(thing.origin, "origin").point
    return FrameResult(
        id=thing.id,
        label=thing.label or thing.id,
        rapidity=0.5 * (first.rapidity + second.rapidity),
        origin=origin,
    )


BUILDERS: dict[type, Callable[[Context, Any], object]] = {
    Frame: _frame,
    HalfwayFrame: _halfway_frame,
    Signal: light.signal,
    Pulses: light.pulses,
    Simultaneity: surfaces.simultaneity,
    LightCone: surfaces.light_cone,
    Body: surfaces.body,
    View: surfaces.view,
}


def _assemble(
    scenario: Scenario,
    context: Context,
    parameters: dict[str, Quantity],
    outcomes: dict[str, Outcome],
    faults: tuple[Diagnosis, ...],
) -> Resolved:
    made = {name: outcome.value for name, outcome in outcomes.items() if not outcome.failure}
    worldlines = _of(WorldlineResult, made)
    signals = _of(SignalResult, made)
    pulses = _of(PulsesResult, made)
    declared = _of(FrameResult, made)
    declared.pop(context.base.id, None)
    leg_frames_by_id = {
        frame.id: frame
        for name, result in worldlines.items()
        for frame in leg_frames(
            cast(Worldline, context.objects[name]), cast(Line, result.line), context.base.origin
        )
    }
    events_by_id = _of(EventResult, made)
    for signal in chain(signals.values(), *(group.signals for group in pulses.values())):
        for event in (signal.sent, signal.received):
            if event is not None and event.owner:
                events_by_id[event.id] = event
    return Resolved(
        scenario=scenario,
        units=context.units,
        parameters=parameters,
        frames={context.base.id: context.base} | declared,
        leg_frames=leg_frames_by_id,
        worldlines=worldlines,
        events=place_on_worldlines(events_by_id, worldlines),
        signals=signals,
        pulses=pulses,
        simultaneities=_of(SimultaneityResult, made),
        light_cones=_of(LightConeResult, made),
        bodies=_of(BodyResult, made),
        views=_of(ViewResult, made),
        states={thing.id: _state(outcomes.get(thing.id)) for thing in scenario.objects},
        diagnoses=(*faults, *_diagnoses(scenario, context.units, parameters, outcomes)),
        memo=context.memo.outcomes,
    )


def _of(kind: type[T], made: Mapping[str, object]) -> dict[str, T]:
    return {name: value for name, value in made.items() if isinstance(value, kind)}


def _state(outcome: Outcome | None) -> State:
    if outcome is None:
        return "faulty"
    if outcome.failure is not None:
        return "blocked" if outcome.failure.blocked else "faulty"
    value = outcome.value
    if isinstance(value, SignalResult) and value.reason and not value.sent_off:
        return "not received"
    return "resolved"


def _diagnoses(
    scenario: Scenario,
    units: UnitSystem,
    parameters: Mapping[str, Quantity],
    outcomes: dict[str, Outcome],
) -> Iterator[Diagnosis]:
    """All remarks, in the order of the file."""
    for thing in scenario.objects:
        if isinstance(thing, Broken):
            yield from thing.faults
            yield from value_faults(thing, units, parameters)
            continue
        outcome = outcomes[thing.id]
        yield from outcome.notes
        if outcome.failure is not None:
            yield Diagnosis(
                object=thing.id,
                key=outcome.failure.key,
                severity=Severity.CONSEQUENCE if outcome.failure.blocked else Severity.ERROR,
                message=outcome.failure.message,
                hint=outcome.failure.hint,
            )
