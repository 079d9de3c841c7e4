"""The examples in the docstrings of the core do what they say."""

from __future__ import annotations

import doctest
import importlib
import pkgutil

import pytest

import tauline

MODULES = [
    found.name
    for found in pkgutil.walk_packages(tauline.__path__, "tauline.")
    if not found.name.endswith("__main__")
]


def test_there_are_examples() -> None:
    finder = doctest.DocTestFinder()
    found = [
        example
        for name in MODULES
        for test in finder.find(importlib.import_module(name))
        for example in test.examples
    ]
    assert len(found) > 5


@pytest.mark.parametrize("name", MODULES)
def test_examples(name: str) -> None:
    assert doctest.testmod(importlib.import_module(name), raise_on_error=True).failed == 0
