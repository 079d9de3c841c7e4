"""Who may know whom: the arrows between the rooms, read off the imports.

Imports are found by parsing, in functions too. The same scanner is turned on made-up offenders
first, so that a scanner that sees nothing cannot pass.
"""

from __future__ import annotations

import ast
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path
from typing import NamedTuple

import pytest

ROOT = Path(__file__).resolve().parents[2]
CORE = ROOT / "core" / "tauline"
APP = ROOT / "app" / "tauline_app"

ROOMS = (
    "export",
    "figure",
    "readouts",
    "charts",
    "resolve",
    "scenario",
    "meetings",
    "worldlines",
    "spacetime",
)
"""Arrows run from left to right only."""

SHARED = ("errors", "files", "resources")
"""Modules at the root of the core that any room may use, and that know no room."""

QT = ("PySide2", "PySide6", "PyQt4", "PyQt5", "PyQt6", "shiboken2", "shiboken6", "sip", "qtpy")
QT_USERS = (*QT, "pyqtgraph", "pytestqt", "tauline_app")
HEAVY = ("matplotlib", "tomlkit", "scipy", "astropy", "PIL", "mpmath", "sympy", *QT_USERS)

PLOTTING_ROOMS = ("canvas", "plots")

PHYSICS = ("tauline.spacetime", "tauline.worldlines", "tauline.meetings")
PHYSICS_OF_THE_APP = {
    "beta",
    "from_beta",
    "from_gamma",
    "from_one_minus_beta",
    "gamma",
    "one_minus_beta",
}
"""How a rapidity is typed and shown: all that the app may take from the rooms of physics."""

PHYSICS_FUNCTIONS = {
    stem + name
    for stem in ("", "a", "arc")
    for name in ("sinh", "cosh", "tanh")
} | {"expm1", "log1p"}  # fmt: skip
"""Names that betray physics computed in the app."""

PACKAGES = ["tauline", *sorted(f"tauline.{room}" for room in ROOMS)]


class Import(NamedTuple):
    """One import: the module, the name taken from it ("" for the whole), the line."""

    module: str
    name: str
    line: int

    def of(self, *packages: str) -> bool:
        """Whether it is of one of these packages, or of something in it."""
        full = f"{self.module}.{self.name}" if self.name else self.module
        return any(f"{full}.".startswith(f"{package}.") for package in packages)


def imports(source: str, module: str, is_package: bool = False) -> Iterator[Import]:
    """Every import of a module's source, relative ones made absolute."""
    for node in ast.walk(ast.parse(source)):
        match node:
            case ast.Import(names=names):
                for name in names:
                    yield Import(name.name, "", node.lineno)
            case ast.ImportFrom(module=origin, names=names, level=level):
                if level:
                    parts = module.split(".")
                    base = parts[: len(parts) - level + is_package]
                    origin = ".".join([*base, *([origin] if origin else [])])
                for name in names:
                    yield Import(origin or "", name.name, node.lineno)
            case ast.Call(func=function, args=[ast.Constant(value=str(name)), *_]):
                called = getattr(function, "attr", getattr(function, "id", ""))
                if called in ("import_module", "__import__"):
                    yield Import(name, "", node.lineno)


def files(root: Path) -> list[Path]:
    return sorted(root.rglob("*.py"))


def module_name(path: Path, root: Path) -> str:
    parts = path.relative_to(root.parent).with_suffix("").parts
    return ".".join(parts[:-1] if parts[-1] == "__init__" else parts)


def imports_of(path: Path, root: Path) -> Iterator[Import]:
    source = path.read_text(encoding="utf-8")
    return imports(source, module_name(path, root), is_package=path.name == "__init__.py")


def room_of(module: str) -> str:
    """The room of a module of the core, or the name of a module at its root."""
    return [*module.split("."), ""][1]


def breaks_the_arrows(module: str, found: Import) -> bool:
    """Whether a module of the core may not have this import."""
    if not found.of("tauline"):
        return False
    room = room_of(module)
    full = f"{found.module}.{found.name}"
    target = room_of(full) if found.module == "tauline" else room_of(found.module)
    if target == room or target in SHARED or (found.module, target) == ("tauline", "__version__"):
        return False
    if room in ROOMS:
        return target not in ROOMS[ROOMS.index(room) :]
    # at the root: what is shared knows nobody; the package itself loads nothing
    return room in SHARED or room == ""


def offences(found: Iterator[tuple[str, Import]]) -> list[str]:
    return [f"{module}, line {item.line}: {'.'.join(item[:2])}" for module, item in found]


# --- the scanner itself -----------------------------------------------------------------------

OFFENDER = '''
"""A module that does all that is forbidden."""
import numpy as np, PySide6.QtCore as qt
from tauline.export import figure as f
def later():
    from ..figure import drawing
    from . import sibling
    import importlib
    importlib.import_module("pyqtgraph")
    __import__("core.tauline")
'''


def test_the_scanner_sees_every_form_of_import() -> None:
    found = {item[:2] for item in imports(OFFENDER, "tauline.spacetime.offender")}
    assert found == {
        ("numpy", ""),
        ("PySide6.QtCore", ""),
        ("tauline.export", "figure"),
        ("tauline.figure", "drawing"),
        ("tauline.spacetime", "sibling"),
        ("importlib", ""),
        ("pyqtgraph", ""),
        ("core.tauline", ""),
    }


def test_relative_imports_of_a_package() -> None:
    (found,) = imports("from .boost import boost", "tauline.spacetime", is_package=True)
    assert found[:2] == ("tauline.spacetime.boost", "boost")
    (found,) = imports("from ..errors import X", "tauline.spacetime", is_package=True)
    assert found[:2] == ("tauline.errors", "X")


@pytest.mark.parametrize(
    ("module", "line", "breaks"),
    [
        ("tauline.spacetime.boost", "from tauline.worldlines import coast", True),
        ("tauline.spacetime.boost", "from tauline import scenario", True),
        ("tauline.spacetime.boost", "import tauline.cli", True),
        ("tauline.spacetime.boost", "from tauline.spacetime.lightcone import Array", False),
        ("tauline.meetings", "from tauline.worldlines import coast", False),
        ("tauline.meetings.light", "from tauline.scenario.units import TIME", True),
        ("tauline.scenario.read", "from tauline.figure.drawing import Drawing", True),
        ("tauline.scenario.read", "from tauline.errors import TaulineError", False),
        ("tauline.export.pdf", "from tauline.figure.drawing import Drawing", False),
        ("tauline.export.pdf", "from tauline import __version__", False),
        ("tauline.export.pdf", "from tauline import cli", True),
        ("tauline.errors", "from tauline.scenario import units", True),
        ("tauline", "from tauline.cli import main", True),
        ("tauline.cli", "from tauline.export.tables import write", False),
        ("tauline.export.pdf", "import numpy", False),
        ("tauline.export.pdf", "import taulines", False),
    ],
)
def test_the_rule_of_the_arrows(module: str, line: str, breaks: bool) -> None:
    (found,) = imports(line, module)
    assert breaks_the_arrows(module, found) is breaks


def test_there_is_something_to_look_at() -> None:
    rooms = {path.name for path in CORE.iterdir() if path.is_dir()} - {"_shipped", "__pycache__"}
    assert rooms == set(ROOMS), "a new room needs its place among the arrows"
    assert len(files(CORE)) > 30
    assert len(files(APP)) > 5


# --- the core ---------------------------------------------------------------------------------


def test_arrows_between_the_rooms() -> None:
    found = [
        (module, item)
        for path in files(CORE)
        for module in [module_name(path, CORE)]
        for item in imports_of(path, CORE)
        if breaks_the_arrows(module, item)
    ]
    assert offences(iter(found)) == []


def test_the_core_knows_no_qt_and_no_app() -> None:
    found = [
        (module_name(path, CORE), item)
        for path in files(CORE)
        for item in imports_of(path, CORE)
        if item.of(*QT_USERS)
    ]
    assert offences(iter(found)) == []


def loaded_after(statement: str) -> set[str]:
    """Top-level packages in memory after a statement, in a process of its own."""
    code = f"import sys\n{statement}\nprint(*{{name.split('.')[0] for name in sys.modules}})"
    run = subprocess.run(
        [sys.executable, "-W", "error", "-c", code], capture_output=True, text=True, check=True
    )
    return set(run.stdout.split())


def test_loading_is_seen() -> None:
    assert "matplotlib" in loaded_after("import matplotlib")


@pytest.mark.parametrize("package", [*PACKAGES, "tauline.cli"])
def test_importing_loads_nothing_heavy(package: str) -> None:
    assert loaded_after(f"import {package}") & set(HEAVY) == set()


def test_no_module_of_the_core_loads_qt() -> None:
    names = {module_name(path, CORE) for path in files(CORE)} - {"tauline.__main__"}
    everything = "\n".join(f"import {name}" for name in sorted(names))
    assert loaded_after(everything) & set(QT_USERS) == set()


# --- the app ----------------------------------------------------------------------------------


def test_only_the_plotting_rooms_know_pyqtgraph() -> None:
    found = [
        (module_name(path, APP), item)
        for path in files(APP)
        if path.relative_to(APP).parts[0] not in PLOTTING_ROOMS
        for item in imports_of(path, APP)
        if item.of("pyqtgraph")
    ]
    assert offences(iter(found)) == []


def test_the_app_takes_no_physics_from_below() -> None:
    found = [
        (module_name(path, APP), item)
        for path in files(APP)
        for item in imports_of(path, APP)
        if item.of(*PHYSICS) and item.name not in PHYSICS_OF_THE_APP
    ]
    assert offences(iter(found)) == []


def physics_in(source: str) -> list[str]:
    """Uses of functions that only physics needs, as "line: name"."""
    return [
        f"{node.lineno}: {name}"
        for node in ast.walk(ast.parse(source))
        if isinstance(node, ast.Attribute | ast.Name)
        for name in [node.attr if isinstance(node, ast.Attribute) else node.id]
        if name in PHYSICS_FUNCTIONS
    ]


def test_physics_is_recognised() -> None:
    assert physics_in("import math\ny = math.atanh(0.6)\nz = np.cosh(y)") == ["2: atanh", "3: cosh"]
    assert physics_in("from math import tanh\ntanh(1)") == ["2: tanh"]


def test_the_app_computes_no_physics() -> None:
    found = [
        f"{module_name(path, APP)}, line {use}"
        for path in files(APP)
        for use in physics_in(path.read_text(encoding="utf-8"))
    ]
    assert found == []


# --- both, and the tests ----------------------------------------------------------------------


def test_nobody_imports_the_folders_around_the_packages() -> None:
    everywhere = [(CORE, path) for path in files(CORE)] + [(APP, path) for path in files(APP)]
    tests = ROOT / "tests"
    everywhere += [(tests, path) for path in files(tests)]
    found = [
        (module_name(path, root), item)
        for root, path in everywhere
        for item in imports_of(path, root)
        if item.of("core", "app", "tests")
    ]
    assert offences(iter(found)) == []


def test_a_file_reads_from_top_to_bottom() -> None:
    """A module holds one noun: none is much longer than 400 lines."""
    long = {
        module_name(path, root): lines
        for root in (CORE, APP)
        for path in files(root)
        if (lines := len(path.read_text(encoding="utf-8").splitlines())) > 420
    }
    assert long == {}
