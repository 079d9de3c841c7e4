"""From the text of an expression to its tree.

A strict lexer and a Pratt parser (V. R. Pratt, "Top down operator precedence", POPL 1973, from
memory) for arithmetic over numbers, units and names. The tree only says what was written; what it
is worth is found in :mod:`tauline.scenario.expression`.

    sum      product (('+' | '-') product)*
    product  sign (('*' | '/') sign | NAME-just-after-a-value)*
    sign     ('+' | '-') sign | power
    power    atom (('^' | '**') sign)?          groups to the right
    atom     NUMBER | NAME | NAME '(' sum (',' sum)* ')' | '(' sum ')'
"""

from __future__ import annotations

import difflib
import re
from collections.abc import Iterable
from functools import lru_cache
from typing import Literal, NamedTuple

import msgspec

from tauline.errors import QuantityError

MAX_LENGTH = 1000
"""Characters of an expression."""
MAX_TOKENS = 400
MAX_DEPTH = 40
"""Brackets, signs and powers within one another."""

FUNCTIONS = frozenset(
    {
        *("sqrt", "exp", "log", "abs", "min", "max"),
        *("sin", "cos", "tan", "asin", "acos", "atan"),
        *("sinh", "cosh", "tanh", "asinh", "acosh", "atanh"),
    }
)
"""Names that are functions where a bracket follows (``min`` elsewhere is the minute)."""

Operator = Literal["+", "-", "*", "/", "^"]


class Number(msgspec.Struct, frozen=True):
    """A number as written."""

    value: float
    column: int


class Name(msgspec.Struct, frozen=True):
    """A unit, a constant or a parameter."""

    name: str
    column: int


class Negate(msgspec.Struct, frozen=True):
    """Minus the operand."""

    operand: Node
    column: int


class Binary(msgspec.Struct, frozen=True):
    """Two operands joined by an operator; ``column`` is that of the operator."""

    operator: Operator
    left: Node
    right: Node
    column: int


class Call(msgspec.Struct, frozen=True):
    """A function of one or more arguments."""

    function: str
    arguments: tuple[Node, ...]
    column: int


Node = Number | Name | Negate | Binary | Call


class Tree(msgspec.Struct, frozen=True):
    """A parsed text: its tree and all names in it that are not functions."""

    node: Node
    names: frozenset[str]


class _Token(NamedTuple):
    kind: Literal["number", "name", "operator", "end"]
    text: str
    column: int


_NUMBER = re.compile(r"(?:[0-9]+(?:\.[0-9]*)?|\.[0-9]+)(?:[eE][+\-−]?[0-9]+)?")
_SUPERSCRIPT = re.compile("[⁺⁻]?[⁰¹²³⁴-⁹]+")
_FROM_SUPERSCRIPT = str.maketrans("⁺⁻⁰¹²³⁴⁵⁶⁷⁸⁹", "+-0123456789")
_OPERATORS = {"−": "-", "·": "*", "⋅": "*", "×": "*", "**": "^"} | {c: c for c in "+-*/^(),"}

_POWERS = {"+": 10, "-": 10, "*": 20, "/": 20, "^": 40}
_JUXTAPOSED = 20
_SIGN = 30


@lru_cache(maxsize=4096)
def parse(text: str) -> Tree:
    """Parse an expression; QuantityError, with the column counted from 1, if it is not one."""
    if len(text) > MAX_LENGTH:
        raise QuantityError(
            f"an expression of {len(text)} characters is too long",
            f"at most {MAX_LENGTH}; give parts of it names under [parameters]",
        )
    tokens = _tokens(text)
    if len(tokens) > MAX_TOKENS:
        raise QuantityError(
            f"an expression of {len(tokens)} parts is too long",
            f"at most {MAX_TOKENS}; give parts of it names under [parameters]",
        )
    if tokens[0].kind == "end":
        raise QuantityError("the text is empty", "write a quantity such as '1 yr'")
    parser = _Parser(tokens)
    node = parser.expression(0, 0)
    last = parser.peek
    if last.kind != "end":
        raise _unexpected(last)
    return Tree(node, frozenset(parser.names))


def nearest(name: str, names: Iterable[str]) -> str:
    """Return the name most like ``name``, or "" if none is.

    >>> nearest("vellocity", ["velocity", "rapidity"])
    'velocity'
    """
    candidates = sorted(names)
    same = [other for other in candidates if other.lower() == name.lower()]
    found = same or difflib.get_close_matches(name, candidates, n=1, cutoff=0.67)
    return found[0] if found else ""


def is_name(text: str) -> bool:
    """Whether a text is one name of an expression."""
    return text.isidentifier() and "·" not in text


def _tokens(text: str) -> list[_Token]:
    tokens: list[_Token] = []
    at = 0
    while at < len(text):
        column = at + 1
        if text[at].isspace():
            at += 1
        elif match := _SUPERSCRIPT.match(text, at):
            power = match[0].translate(_FROM_SUPERSCRIPT)
            tokens.append(_Token("operator", "^", column))
            if power[0] in "+-":
                tokens.append(_Token("operator", power[0], column))
            tokens.append(_Token("number", power.lstrip("+-"), column))
            at = match.end()
        elif match := _NUMBER.match(text, at):
            tokens.append(_Token("number", match[0].replace("−", "-"), column))
            at = match.end()
        elif text[at].isidentifier():
            at = _end_of_name(text, at)
            tokens.append(_Token("name", text[column - 1 : at].replace("μ", "µ"), column))
        elif text[at : at + 2] in _OPERATORS:
            tokens.append(_Token("operator", _OPERATORS[text[at : at + 2]], column))
            at += 2
        elif text[at] in _OPERATORS:
            tokens.append(_Token("operator", _OPERATORS[text[at]], column))
            at += 1
        else:
            raise QuantityError(
                f"{text[at]!r} at column {column} has no meaning here",
                "an expression has numbers, units, parameters, + - * / ^ and brackets",
            )
    tokens.append(_Token("end", "", len(text) + 1))
    return tokens


def _end_of_name(text: str, start: int) -> int:
    end = start
    # the raised dot of a product may stand within an identifier of Python
    while end < len(text) and text[start : end + 1].isidentifier() and text[end] not in "·":
        end += 1
    return end


class _Parser:
    """Reads the tokens once, from left to right."""

    def __init__(self, tokens: list[_Token]) -> None:
        self._tokens = tokens
        self._at = 0
        self.names: set[str] = set()

    @property
    def peek(self) -> _Token:
        return self._tokens[self._at]

    def _next(self) -> _Token:
        token = self.peek
        self._at += 1
        return token

    def _take(self, operator: str) -> bool:
        found = self.peek.kind == "operator" and self.peek.text == operator
        self._at += found
        return found

    def expression(self, power: int, depth: int) -> Node:
        """Read what binds more tightly than ``power``."""
        if depth > MAX_DEPTH:
            raise QuantityError(
                f"brackets, signs and powers are nested too deeply at column {self.peek.column}",
                f"at most {MAX_DEPTH} levels; give parts of it names under [parameters]",
            )
        left = self._prefix(depth)
        while True:
            token = self.peek
            if token.kind == "name" and self._ends_a_value() and power < _JUXTAPOSED:
                right = self.expression(_JUXTAPOSED, depth + 1)
                left = Binary("*", left, right, token.column)
            elif token.kind == "operator" and _POWERS.get(token.text, 0) > power:
                left = self._infix(left, depth)
            else:
                return left

    def _infix(self, left: Node, depth: int) -> Node:
        token = self._next()
        operator: Operator = token.text  # type: ignore[assignment]
        # the power groups to the right, and its exponent may carry a sign
        binding = _SIGN - 1 if operator == "^" else _POWERS[operator]
        return Binary(operator, left, self.expression(binding, depth + 1), token.column)

    def _ends_a_value(self) -> bool:
        """Whether the token before this one is a number or a closing bracket."""
        before = self._tokens[self._at - 1]
        return before.kind == "number" or before.text == ")"

    def _prefix(self, depth: int) -> Node:
        token = self._next()
        if token.kind == "number":
            return Number(float(token.text), token.column)
        if token.kind == "name":
            return self._name(token, depth)
        if token.text == "(":
            node = self.expression(0, depth + 1)
            if not self._take(")"):
                raise _unexpected(self.peek, f"the bracket at column {token.column} is not closed")
            return node
        if token.text == "-":
            return Negate(self.expression(_SIGN - 1, depth + 1), token.column)
        if token.text == "+":
            return self.expression(_SIGN - 1, depth + 1)
        raise _unexpected(token)

    def _name(self, token: _Token, depth: int) -> Node:
        if not self._take("("):
            self.names.add(token.text)
            return Name(token.text, token.column)
        if token.text not in FUNCTIONS:
            near = nearest(token.text, FUNCTIONS)
            raise QuantityError(
                f"'{token.text}' at column {token.column} is not a function",
                f"did you mean '{near}'?" if near else f"to multiply, write '{token.text}*(…)'",
            )
        arguments = [self.expression(0, depth + 1)]
        while self._take(","):
            arguments.append(self.expression(0, depth + 1))
        if not self._take(")"):
            raise _unexpected(self.peek, f"the bracket of '{token.text}' is not closed")
        return Call(token.text, tuple(arguments), token.column)


def _unexpected(token: _Token, hint: str = "") -> QuantityError:
    if token.kind == "end":
        return QuantityError(f"the expression breaks off at column {token.column}", hint)
    if token.kind in ("name", "number") or token.text == "(":
        hint = hint or "to multiply, write * between the two"
    return QuantityError(f"'{token.text}' at column {token.column} is not expected there", hint)
