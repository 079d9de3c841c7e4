"""The named parameters of a scenario, whatever order they refer to one another in."""

from __future__ import annotations

from collections import deque
from collections.abc import Mapping

from tauline.errors import QuantityError
from tauline.scenario.diagnosis import Diagnosis, Severity
from tauline.scenario.expression import CONSTANTS, evaluate, names_in
from tauline.scenario.scenario import Scenario
from tauline.scenario.syntax import FUNCTIONS, is_name
from tauline.scenario.units import UNITS, Quantity, UnitSystem
from tauline.scenario.values import Value


def fault_of_parameter_name(name: str) -> QuantityError | None:
    """Say what is wrong with the name of a parameter; None if nothing is."""
    if not is_name(name):
        return QuantityError(
            f"'{name}' cannot be the name of a parameter",
            "a name has letters, digits and _, and begins with a letter",
        )
    for names, what in ((UNITS, "a unit"), (CONSTANTS, "a constant"), (FUNCTIONS, "a function")):
        if name.replace("μ", "µ") in names:
            return QuantityError(
                f"a parameter cannot be called '{name}': that is {what}",
                f"choose another name, such as '{name}_0'",
            )
    return None


def evaluate_parameters(
    scenario: Scenario, units: UnitSystem
) -> tuple[dict[str, Quantity], list[Diagnosis]]:
    """Work out the parameters, which may refer to one another in any order.

    Returns those that could be worked out, and a diagnosis (on the object "", key
    ``parameters.NAME``) for each of the others.
    """
    values = {parameter.name: parameter.value for parameter in scenario.parameters}
    needs = {name: names_in(value) & values.keys() for name, value in values.items()}
    users: dict[str, list[str]] = {name: [] for name in values}
    for user, other in [(user, other) for user, needed in needs.items() for other in needed]:
        users[other].append(user)
    missing = {name: len(needed) for name, needed in needs.items()}
    known: dict[str, Quantity] = {}
    faults: dict[str, Diagnosis] = {}
    ready = deque(name for name in values if not missing[name])
    while ready:
        name = ready.popleft()
        faulty = next((other for other in sorted(needs[name]) if other in faults), None)
        if faulty is not None:
            faults[name] = _consequence(name, faulty)
        else:
            try:
                known[name] = _parameter(name, values[name], units, known)
            except QuantityError as error:
                faults[name] = _fault(name, error.message, error.hint)
        for user in users[name]:
            missing[user] -= 1
            if not missing[user]:
                ready.append(user)
    faults |= {name: _in_a_cycle(name, needs, missing) for name in values if missing[name]}
    return known, [faults[name] for name in values if name in faults]


def _parameter(
    name: str, value: Value, units: UnitSystem, known: Mapping[str, Quantity]
) -> Quantity:
    wrong = fault_of_parameter_name(name)
    if wrong is not None:
        raise wrong
    return evaluate(value, units, known, None)


def _in_a_cycle(
    name: str, needs: Mapping[str, frozenset[str]], missing: Mapping[str, int]
) -> Diagnosis:
    """Say that a parameter depends on itself, or on one that does."""
    path = [name]
    while True:
        step = next(other for other in sorted(needs[path[-1]]) if missing[other])
        if step == name:
            return _fault(
                name,
                f"it depends on itself: {' → '.join([*path, name])}",
                "give one of them a value of its own",
            )
        if step in path:
            return _consequence(name, step)
        path.append(step)


def _fault(name: str, message: str, hint: str) -> Diagnosis:
    return Diagnosis(object="", key=f"parameters.{name}", message=message, hint=hint)


def _consequence(name: str, other: str) -> Diagnosis:
    return Diagnosis(
        object="",
        key=f"parameters.{name}",
        severity=Severity.CONSEQUENCE,
        message=f"it uses the parameter '{other}', which has a fault",
    )
