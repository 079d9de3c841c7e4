"""Key paths, such as ``leg[2].until.time``: where a value stands below an object or a file.

Items of a list count from 1. A key with other characters than letters, digits, ``_`` and ``-``
stands in quotes.
"""

from __future__ import annotations

import json
import re

_BARE = re.compile(r"[\w-]+")
_STEP = re.compile(r'\.?(?:(?P<bare>[\w-]+)|(?P<quoted>"(?:[^"\\]|\\.)*")|\[(?P<item>[0-9]+)\])')
_LAST = re.compile(r'(?:\.?[\w-]+|\.?"(?:[^"\\]|\\.)*"|\[[0-9]+\])$')


def join(path: str, key: str) -> str:
    """Go down to a key.

    >>> join("leg[2]", "until")
    'leg[2].until'
    """
    shown = key if _BARE.fullmatch(key) else json.dumps(key, ensure_ascii=False)
    return f"{path}.{shown}" if path else shown


def item(path: str, number: int) -> str:
    """Go to an item of a list, counted from 1."""
    return f"{path}[{number}]"


def split(path: str) -> tuple[str | int, ...]:
    """Take a path apart into keys and numbers of items; ValueError if it is not one.

    >>> split("leg[2].until.time")
    ('leg', 2, 'until', 'time')
    """
    steps: list[str | int] = []
    at = 0
    while at < len(path):
        match = _STEP.match(path, at)
        if match is None:
            raise ValueError(f"'{path}' is not a key path")
        if match["item"]:
            steps.append(int(match["item"]))
        else:
            steps.append(match["bare"] or str(json.loads(match["quoted"])))
        at = match.end()
    return tuple(steps)


def parent(path: str) -> str:
    """Go up one step; "" from a single key.

    >>> parent("leg[2].until")
    'leg[2]'
    """
    return _LAST.sub("", path)
