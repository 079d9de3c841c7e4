"""What a value of the document is worth: quantities and expressions.

Every step is checked for its dimension and for being finite, so that a mistake is told where it
is made. Values are in powers of the scenario's time unit with c = 1 (see
:mod:`tauline.scenario.units`).
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping

from tauline.errors import QuantityError
from tauline.scenario.syntax import (
    FUNCTIONS,
    Binary,
    Call,
    Name,
    Negate,
    Node,
    Number,
    nearest,
    parse,
)
from tauline.scenario.units import (
    ACCELERATION,
    LENGTH,
    NUMBER,
    TIME,
    UNITS,
    VELOCITY,
    Dimension,
    Quantity,
    UnitSystem,
)
from tauline.scenario.values import Value

CONSTANTS = {"pi": math.pi, "π": math.pi}

MAX_EXPONENT = 99
"""Largest power of time or length a quantity may have."""

_PURE: dict[str, Callable[[float], float]] = {
    "exp": math.exp,
    "log": math.log,
    "sin": math.sin,
    "cos": math.cos,
    "tan": math.tan,
    "asin": math.asin,
    "acos": math.acos,
    "atan": math.atan,
    "sinh": math.sinh,
    "cosh": math.cosh,
    "tanh": math.tanh,
    "asinh": math.asinh,
    "acosh": math.acosh,
    "atanh": math.atanh,
}


def evaluate(
    value: Value,
    units: UnitSystem,
    parameters: Mapping[str, Quantity],
    dimension: Dimension | None,
) -> Quantity:
    """Find what a value is worth.

    Parameters
    ----------
    value : a number, in the scenario's units of ``dimension``; or a quantity or expression.
    units : the scenario's units.
    parameters : the named quantities it may use.
    dimension : the dimension it must have; None for any (a bare number is then a pure number).

    Raises
    ------
    QuantityError
        It cannot be read, is not finite, or has another dimension.

    >>> evaluate("sqrt(1 - 0.6^2) * 5 yr", UnitSystem("yr", "ly"), {}, TIME).value
    4.0
    """
    if not isinstance(value, str):
        wanted = dimension or NUMBER
        number = units.from_reader(_finite_number(value), wanted)
        return Quantity(_finite_number(number), wanted)
    found = _Evaluation(units, parameters).value(parse(value).node)
    if dimension is not None and found.dimension != dimension:
        raise QuantityError(
            f"'{value}' is {found.dimension}, but {dimension} is needed",
            _hint_for(value, found.dimension, dimension, units),
        )
    return found


def names_in(value: Value) -> frozenset[str]:
    """Names of the parameters a value uses; none if it cannot be read.

    >>> sorted(names_in("2*L + 1 ly"))
    ['L']
    """
    if not isinstance(value, str):
        return frozenset()
    try:
        names = parse(value).names
    except QuantityError:
        return frozenset()
    return frozenset(name for name in names if name not in UNITS and name not in CONSTANTS)


def _finite_number(value: float) -> float:
    if isinstance(value, bool) or not isinstance(value, int | float):
        raise QuantityError(f"{value!r} is not a number", "write a number or a text with a unit")
    try:
        number = float(value)
    except OverflowError:
        number = math.inf
    if not math.isfinite(number):
        raise QuantityError(f"{number} is not a finite number")
    return number


def _hint_for(text: str, found: Dimension, wanted: Dimension, units: UnitSystem) -> str:
    examples = {
        TIME: units.time,
        LENGTH: units.length,
        VELOCITY: "c",
        ACCELERATION: f"{units.length}/{units.time}^2",
    }
    if wanted == NUMBER:
        return "write it without a unit, or divide by a quantity of the same kind"
    unit = examples.get(wanted)
    if unit is None:
        return ""
    if found != NUMBER:
        return f"write it in a unit such as {unit}"
    number = text.strip()
    simple = isinstance(parse(text).node, Number | Name)
    return f"write '{number if simple else f'({number})'} {unit}'"


class _Evaluation:
    """One evaluation of a tree, in one system of units, with these parameters."""

    def __init__(self, units: UnitSystem, parameters: Mapping[str, Quantity]) -> None:
        self._units = units
        self._parameters = parameters

    def value(self, node: Node) -> Quantity:
        # Long sums and products lean to the left: walk down that side without recursion. What
        # recursion is left is bounded by the parser's MAX_DEPTH.
        chain: list[Binary] = []
        while isinstance(node, Binary):
            chain.append(node)
            node = node.left
        found = self._leaf(node)
        for link in reversed(chain):
            found = self._join(link, found, self.value(link.right))
        return found

    def _leaf(self, node: Node) -> Quantity:
        match node:
            case Number():
                return _checked(node.value, NUMBER, node.column)
            case Name():
                return self._named(node)
            case Negate():
                inner = self.value(node.operand)
                return Quantity(-inner.value, inner.dimension)
            case Call():
                return _call(node, [self.value(argument) for argument in node.arguments])
            case Binary():  # pragma: no cover - taken apart by value()
                raise AssertionError

    def _named(self, node: Name) -> Quantity:
        name = node.name
        if name in UNITS:
            return self._units.unit(name)
        if name in CONSTANTS:
            return Quantity(CONSTANTS[name], NUMBER)
        if name in self._parameters:
            return self._parameters[name]
        raise QuantityError(
            f"'{name}' at column {node.column} is neither a unit nor a parameter",
            self._hint_for_name(name),
        )

    def _hint_for_name(self, name: str) -> str:
        if name in FUNCTIONS:
            return f"to use the function, write '{name}(…)'"
        near = nearest(name, [*self._parameters, *UNITS])
        if near:
            return f"did you mean '{near}'?"
        return f"define '{name}' under [parameters], or use a unit such as s, yr, m, ly, c or g"

    def _join(self, link: Binary, left: Quantity, right: Quantity) -> Quantity:
        match link.operator:
            case "+" | "-":
                if left.dimension != right.dimension:
                    raise QuantityError(
                        f"{left.dimension} and {right.dimension} cannot be"
                        f" {'added' if link.operator == '+' else 'subtracted'},"
                        f" at column {link.column}",
                        "give the number a unit" if NUMBER in (left[1], right[1]) else "",
                    )
                other = right.value if link.operator == "+" else -right.value
                return _checked(left.value + other, left.dimension, link.column)
            case "*":
                return _checked(
                    left.value * right.value, _times(left, right, 1, link.column), link.column
                )
            case "/":
                if right.value == 0.0:
                    raise QuantityError(f"division by zero at column {link.column}")
                return _checked(
                    left.value / right.value, _times(left, right, -1, link.column), link.column
                )
            case "^":
                return _power(left, right, link.column)


def _times(left: Quantity, right: Quantity, sign: int, column: int) -> Dimension:
    return _dimension(
        left.dimension.time + sign * right.dimension.time,
        left.dimension.length + sign * right.dimension.length,
        column,
    )


def _dimension(time: int, length: int, column: int) -> Dimension:
    if max(abs(time), abs(length)) > MAX_EXPONENT:
        raise QuantityError(f"the power of the unit at column {column} is too large")
    return Dimension(time, length)


def _power(base: Quantity, exponent: Quantity, column: int) -> Quantity:
    if exponent.dimension != NUMBER:
        raise QuantityError(
            f"the exponent at column {column} is {exponent.dimension}, not a number"
        )
    power = exponent.value
    dimension = NUMBER
    if base.dimension != NUMBER:
        if power != int(power):
            raise QuantityError(
                f"{base.dimension} can be raised to whole powers only, at column {column}",
                "use sqrt(…) for a square root",
            )
        if abs(power) > MAX_EXPONENT:
            raise QuantityError(f"the power of the unit at column {column} is too large")
        times = int(power)
        dimension = _dimension(base.dimension.time * times, base.dimension.length * times, column)
    if base.value == 0.0 and power < 0.0:
        raise QuantityError(f"division by zero at column {column}")
    if base.value < 0.0 and power != int(power):
        raise QuantityError(
            f"a negative number has no power of {power:g}, at column {column}",
            "put the minus before the power, or brackets around the base",
        )
    try:
        value = math.pow(base.value, power)
    except OverflowError:
        value = math.inf
    return _checked(value, dimension, column)


def _call(call: Call, arguments: list[Quantity]) -> Quantity:
    name, column = call.function, call.column
    if name in ("min", "max"):
        if len({argument.dimension for argument in arguments}) > 1:
            raise QuantityError(f"the arguments of '{name}' at column {column} differ in kind")
        chosen = (min if name == "min" else max)(argument.value for argument in arguments)
        return Quantity(chosen, arguments[0].dimension)
    if len(arguments) != 1:
        raise QuantityError(f"'{name}' at column {column} takes one argument, not {len(arguments)}")
    value, dimension = arguments[0]
    if name == "abs":
        return Quantity(abs(value), dimension)
    if name == "sqrt":
        return _square_root(value, dimension, column)
    if dimension != NUMBER:
        raise QuantityError(
            f"'{name}' at column {column} takes a pure number, not {dimension}",
            "divide by a quantity of the same kind",
        )
    try:
        return _checked(_PURE[name](value), NUMBER, column)
    except ValueError:
        raise QuantityError(f"'{name}' at column {column} is not defined at {value:g}") from None
    except OverflowError:
        return _checked(math.inf, NUMBER, column)


def _square_root(value: float, dimension: Dimension, column: int) -> Quantity:
    if value < 0.0:
        raise QuantityError(f"'sqrt' at column {column} is not defined at {value:g}")
    if dimension.time % 2 or dimension.length % 2:
        raise QuantityError(f"{dimension} has no square root, at column {column}")
    return Quantity(math.sqrt(value), Dimension(dimension.time // 2, dimension.length // 2))


def _checked(value: float, dimension: Dimension, column: int) -> Quantity:
    if not math.isfinite(value):
        raise QuantityError(f"the value at column {column} is too large or not a number")
    return Quantity(value, dimension)
