"""Light: signals and repeated signals, received or not."""

from __future__ import annotations

import math

import msgspec
import numpy as np

from tauline.meetings import (
    emissions,
    horizon,
    receptions,
    why_no_emission,
    why_no_reception,
)
from tauline.resolve.context import ROUNDING, Context, Line, tau_of
from tauline.resolve.memo import Fault
from tauline.resolve.results import EventResult, Point, PulsesResult, SignalResult
from tauline.scenario.objects import Pulses, Signal
from tauline.scenario.units import TIME

MAX_PULSES = 10_000


def signal(context: Context, thing: Signal) -> SignalResult:
    """Work out both ends of a signal."""
    from_line, to_line = (
        name is not None and context.is_worldline(name) for name in (thing.source, thing.to)
    )
    if from_line and (to_line or thing.to is None):
        raise Fault(
            "from",
            f"it does not say when the light leaves the worldline '{thing.source}'",
            "name an event it leaves from or arrives at",
        )
    if (thing.to is None) == (thing.direction is None):
        raise Fault("to", "a signal goes to one thing", "give either to or direction")
    if from_line:
        return _sent_from_line(context, thing)
    source = context.event(thing.source, "from")
    if thing.to is None:
        towards = 1 if thing.direction == "+x" else -1
        name = "+x" if towards > 0 else "−x"
        made = _result(thing, source, None, towards, f"it goes off towards {name}")
        return msgspec.structs.replace(made, sent_off=True)
    if not to_line:
        return _between(thing, source, context.event(thing.to, "to"))
    line = context.path(thing.to, "to")
    tau, towards_array = receptions(line, source.point)
    if np.isnan(tau):
        reason = why_no_reception(line, source.point) + _cut_off(context, line, source.point)
        context.note(thing.id, "to", f"never received: {reason}")
        side = 1 if _lies_ahead(line, source) else -1
        return _result(thing, source, None, side, reason)
    side = int(towards_array)
    received = _made(f"{thing.id}.received", line, float(tau), thing.id, source.point, side)
    return _result(thing, source, received, side)


def pulses(context: Context, thing: Pulses) -> PulsesResult:
    """Work out every pulse: sent after each period of the sender's proper time."""
    sender = context.path(thing.source, "from")
    receiver = context.path(thing.to, "to")
    every = context.quantity(thing.every, TIME, "every")
    if every <= 0.0:
        raise Fault("every", "the period must be positive")
    first = _tau_of_event(context, sender, thing.start, "start", sender.start)
    last = _tau_of_event(context, sender, thing.end, "end", sender.end)
    if math.isinf(first):
        raise Fault("start", f"'{thing.source}' has no start", "name the event to count from")
    if thing.count is not None and thing.count < 0:
        raise Fault("count", "a number of pulses cannot be negative")
    span = (last - first) / every
    allowed = math.inf if thing.count is None else thing.count
    # the end itself counts, so a rounding must not lose the pulse that falls on it
    number = min(math.floor(span * (1.0 + ROUNDING)) if math.isfinite(span) else span, allowed)
    if number > MAX_PULSES:
        amount = "no end" if math.isinf(number) else f"{number:.0f} of them"
        raise Fault(
            "end", f"too many pulses: {amount}", f"give an end or a count up to {MAX_PULSES}"
        )
    taus = np.minimum(first + every * np.arange(1, int(max(number, 0)) + 1), last)
    points = sender.event(taus)
    found, towards = receptions(receiver, points)
    signals = []
    for k in range(len(taus)):
        name = f"{thing.id}.{k + 1}"
        sent = EventResult(id=f"{name}.sent", label="", point=points[:, k], owner=thing.id)
        lost = bool(np.isnan(found[k]))
        side = (1 if _lies_ahead(receiver, sent) else -1) if lost else int(towards[k])
        received = None
        if not lost:
            place = sent.point
            end = f"{name}.received"
            received = _made(end, receiver, float(found[k]), thing.id, place, side)
        reason = ""
        if lost:
            reason = why_no_reception(receiver, sent.point)
            reason += _cut_off(context, receiver, sent.point)
        signals.append(
            SignalResult(
                id=name,
                label="",
                sent=sent,
                received=received,
                towards=side,
                reason=reason,
                owner=thing.id,
                source_line=thing.source,
                target_line=thing.to,
            )
        )
    lost_ones = [item for item in signals if item.received is None]
    if lost_ones:
        context.note(
            thing.id,
            "to",
            f"{len(lost_ones)} of {len(signals)} pulses are never received: {lost_ones[0].reason}",
        )
    return PulsesResult(id=thing.id, label=thing.label, signals=tuple(signals))


def _sent_from_line(context: Context, thing: Signal) -> SignalResult:
    assert thing.to is not None
    target = context.event(thing.to, "to")
    line = context.path(thing.source, "from")
    tau, towards = emissions(line, target.point)
    if np.isnan(tau):
        reason = why_no_emission(line, target.point)
        context.note(thing.id, "from", f"never sent: {reason}")
        side = -1 if _lies_ahead(line, target) else 1
        return _result(thing, None, target, side, reason)
    side = int(towards)
    sent = _made(f"{thing.id}.sent", line, float(tau), thing.id, target.point, side)
    return _result(thing, sent, target, side)


def _between(thing: Signal, source: EventResult, target: EventResult) -> SignalResult:
    """Light from event to event: they must lie on one another's light cones."""
    du, dv = (float(step) for step in target.point - source.point)
    slack = ROUNDING * float(np.max(np.abs([source.point, target.point])))
    if abs(du) <= slack and dv >= -slack:
        return _result(thing, source, target, 1)
    if abs(dv) <= slack and du >= -slack:
        return _result(thing, source, target, -1)
    if abs(du) <= slack or abs(dv) <= slack:
        what = f"'{target.id}' happens before '{source.id}'"
    elif du * dv > 0.0:
        what = "light would be there at another time (their separation is timelike)"
    else:
        what = "light is not fast enough (their separation is spacelike)"
    raise Fault("to", f"no light goes from '{source.id}' to '{target.id}': {what}")


def _result(
    thing: Signal,
    sent: EventResult | None,
    received: EventResult | None,
    towards: int,
    reason: str = "",
) -> SignalResult:
    return SignalResult(
        id=thing.id,
        label=thing.label,
        sent=sent,
        received=received,
        towards=towards,
        reason=reason,
        source_line=thing.source if sent is not None and sent.owner == thing.id else "",
        target_line=thing.to or "" if received is not None and received.owner == thing.id else "",
    )


def _cut_off(context: Context, line: Line, point: Point) -> str:
    """Until when light from the same place would have been received, where a horizon forbids it."""
    u_limit, v_limit = horizon(line)
    t, x = context.coordinates(point, context.base)
    latest = min(u_limit + x, v_limit - x)
    if not (math.isfinite(latest) and t >= latest):
        return ""
    return (
        f"; from x = {context.place(x)} the last that arrives leaves before"
        f" t = {context.time(latest)} of frame '{context.base.id}'"
    )


def _made(
    event_id: str, line: Line, tau: float, owner: str, other: Point, towards: int
) -> EventResult:
    """The event at the far end of a ray from (or to) ``other``.

    A ray keeps its u (towards +x) or its v exactly, so the interval is null by construction.
    """
    point = line.event(tau)
    row = 0 if towards > 0 else 1
    point[row] = other[row]
    return EventResult(id=event_id, label="", point=point, owner=owner)


def _tau_of_event(
    context: Context, line: Line, event_id: str | None, key: str, default: float
) -> float:
    if event_id is None:
        return default
    tau = tau_of(line, context.event(event_id, key).point)
    if math.isnan(tau):
        raise Fault(key, f"the event '{event_id}' does not lie on the sender's worldline")
    return tau


def _lies_ahead(line: Line, source: EventResult) -> bool:
    """Whether the line is on the +x side of an event, as far as it can be told."""
    for ask, row in ((line.tau_at_u, 0), (line.tau_at_v, 1)):
        tau = ask(source.point[row])
        if not np.isnan(tau):
            u, v = line.event(tau) - source.point
            return bool(v > 0.0 if row == 0 else u < 0.0)
    end = next(tau for tau in (line.start, line.end, 0.0) if math.isfinite(tau))
    u, v = line.event(end) - source.point
    return bool(v - u > 0.0)
