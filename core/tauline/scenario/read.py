"""Reading a scenario file: everything that can be understood, and all that is wrong with it."""

from __future__ import annotations

import math
import re
import tomllib
from collections.abc import Iterator, Mapping
from pathlib import Path
from typing import Any, NamedTuple

from tauline.errors import FileUnreadableError
from tauline.scenario.diagnosis import Diagnosis
from tauline.scenario.fields import with_article
from tauline.scenario.forms import FORMS, broken, build, names_base
from tauline.scenario.layout import Layout
from tauline.scenario.objects import Broken, Frame, Object
from tauline.scenario.paths import join
from tauline.scenario.scenario import Parameter, Scenario, Units
from tauline.scenario.source import Source, source_of
from tauline.scenario.syntax import nearest
from tauline.scenario.units import LENGTH, TIME, UNITS, Dimension

FORMAT = 1
"""Version of the file format that this program writes, and the newest it reads."""

MAX_BYTES = 20_000_000
MAX_NESTING = 32
"""Tables and lists within one another."""

KEYS = ("tauline", "title", "description", "dimensions", "units", "parameters", *FORMS)
"""What a file may have at its top level."""

_START = "begin it with 'tauline = 1', then the tables of the scenario"
_PLACE = re.compile(r" \(at (?:line (\d+), column (\d+)|end of document)\)$")
_OBJECT = re.compile(r"([a-z]+)\[([0-9]+)\]")


class Loaded(NamedTuple):
    """A scenario and the text it came from."""

    scenario: Scenario
    source: Source


def read(path: Path | str) -> Loaded:
    """Read a scenario file.

    FileUnreadableError if nothing of it can be used: no such file, a folder, not text, not TOML,
    or of a newer format. Any other fault is kept with the object that has it, or in
    :attr:`Scenario.faults`.
    """
    file = Path(path)
    return parse(_text_of(file), file)


def parse(text: str, path: Path | None = None) -> Loaded:
    r"""Read a scenario from its text; see :func:`read`.

    >>> parse('tauline = 1\n[[event]]\nid = "flash"\nt = 0\nx = 2').scenario.find("flash").x
    2.0
    """
    file = path or Path("scenario")
    tables = tables_of(text, file)
    layout = Layout(text)
    faults = _Faults()
    if "tauline" not in tables:
        faults.add("tauline", "the version of the file format is missing", _START)
    else:
        _check_version(tables["tauline"], file, layout, faults)
    for key in tables:
        if key not in KEYS:
            near = nearest(key, KEYS)
            hint = f"did you mean '{near}'?" if near else "known: " + ", ".join(KEYS)
            what = "table" if isinstance(tables[key], dict | list) else "key"
            faults.add(join("", key), f"unknown {what} '{key}'", hint)
    objects, ids = _objects(tables, layout, faults)
    scenario = Scenario(
        title=_text(tables, "title", faults),
        description=_text(tables, "description", faults),
        dimensions=_dimensions(tables, faults),
        units=_units(tables.get("units", {}), faults),
        parameters=_parameters(tables.get("parameters", {}), faults),
        objects=objects,
        faults=tuple(faults.found),
    )
    return Loaded(scenario, source_of(path, text, ids, layout))


class _Faults:
    """Collects the faults of the file outside its objects."""

    def __init__(self) -> None:
        self.found: list[Diagnosis] = []

    def add(self, key: str, message: str, hint: str = "") -> None:
        self.found.append(Diagnosis(object="", key=key, message=message, hint=hint))


# --- from bytes to tables -----------------------------------------------------------------------


def _text_of(file: Path) -> str:
    try:
        if file.is_dir():
            raise FileUnreadableError(file, "this is a folder", "name a scenario file in it")
        if file.exists() and not file.is_file():
            raise FileUnreadableError(file, "this is not a file")
        if file.stat().st_size > MAX_BYTES:
            raise FileUnreadableError(file, f"the file is larger than {MAX_BYTES // 10**6} MB")
        data = file.read_bytes()
    except FileNotFoundError:
        raise FileUnreadableError(file, "there is no such file") from None
    except PermissionError:
        raise FileUnreadableError(
            file, "the file may not be read", "change its permissions"
        ) from None
    except OSError as error:
        raise FileUnreadableError(
            file, f"the file cannot be read: {error.strerror or error}"
        ) from None
    except ValueError:
        raise FileUnreadableError(file, "this is not the name of a file") from None
    if b"\0" in data:
        raise FileUnreadableError(
            file, "this is a binary file, not a text", "a scenario is a text file in TOML"
        )
    try:
        return data.decode("utf-8")
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        raise FileUnreadableError(
            file, "this is not UTF-8 text", "save it as UTF-8", line
        ) from None


def tables_of(text: str, file: Path) -> dict[str, Any]:
    """Return the tables of a TOML text; FileUnreadableError if it is not one."""
    bare = text.removeprefix("\ufeff")
    if not bare.strip():
        raise FileUnreadableError(file, "the file is empty", _START)
    try:
        tables = tomllib.loads(bare)
    except tomllib.TOMLDecodeError as error:
        raise _not_toml(file, error, bare) from None
    except RecursionError:
        raise FileUnreadableError(file, "its lists are nested too deeply") from None
    except ValueError:
        # Python itself refuses to read a number of more than some thousands of digits
        raise FileUnreadableError(file, "a number in it has too many digits") from None
    if _nesting(tables) > MAX_NESTING:
        raise FileUnreadableError(
            file, f"its tables and lists are nested more than {MAX_NESTING} deep"
        )
    return tables


def _not_toml(file: Path, error: tomllib.TOMLDecodeError, text: str) -> FileUnreadableError:
    message = str(error)
    place = _PLACE.search(message)
    lines = text.splitlines() or [""]
    number, column = len(lines), len(lines[-1]) + 1
    if place is not None:
        message = message[: place.start()]
        if place[1]:
            number, column = int(place[1]), int(place[2])
    line = lines[number - 1] if number <= len(lines) else ""
    hint = ""
    if "Cannot declare" in message:
        hint = "a kind of object begins with double brackets, as in [[event]], each time"
    elif "Cannot overwrite" in message or "Cannot mutate" in message:
        hint = "a key stands once in a table"
    elif re.match(r"\s*\[{1,2}[^\]]*$", line):
        hint = "a table begins with its name in brackets, as in [[event]]"
    elif "=" in line and '"' not in line.partition("=")[2] and "'" not in line:
        hint = 'a text, or a number with a unit, stands in quotes, as in velocity = "0.6 c"'
    elif line.count('"') % 2:
        hint = "a quote is missing"
    return FileUnreadableError(
        file,
        f"{message[:1].lower()}{message[1:]}, at column {column}: not valid TOML",
        hint,
        number,
    )


def _nesting(value: object) -> int:
    """Depth of tables and lists within one another, found without recursion."""
    depth = 0
    level: list[Any] = [value]
    while level and depth <= MAX_NESTING:
        depth += 1
        inner: list[Any] = []
        for part in level:
            inner += part.values() if isinstance(part, dict) else part
        level = [part for part in inner if isinstance(part, dict | list)]
    return depth


def _check_version(version: object, file: Path, layout: Layout, faults: _Faults) -> None:
    if isinstance(version, bool) or not isinstance(version, int) or version < 1:
        faults.add("tauline", f"{version!r} is not a version of the file format", _START)
    elif version > FORMAT:
        raise FileUnreadableError(
            file,
            f"the file has format {version}; this program reads formats up to {FORMAT}",
            "open it with a newer version of Tauline",
            layout.lines.get("tauline"),
        )


# --- from tables to the document ----------------------------------------------------------------


def _objects(
    tables: Mapping[str, Any], layout: Layout, faults: _Faults
) -> tuple[tuple[Object, ...], dict[str, str]]:
    """All objects in the order of the file, and their ids by place (``worldline[2]``)."""
    objects: list[Object] = []
    ids: dict[str, str] = {}
    taken: dict[str, str] = {}
    base = ""
    for kind in FORMS:
        if not isinstance(tables.get(kind, []), list):
            faults.add(kind, f"a {kind} is one of a list", f"begin each with [[{kind}]]")
    for place, kind, table in object_tables(tables, layout):
        if not isinstance(table, dict):
            faults.add(place, f"a {kind} is a table", f"begin each with [[{kind}]]")
            continue
        made = build(kind, table, place)
        if made.id in taken:
            made = _with_fault(
                made,
                place,
                Diagnosis(
                    object=place,
                    key="id",
                    message=f"the id '{made.id}' is taken, by {with_article(taken[made.id])}",
                    hint="every id of a file is used once",
                ),
                table,
                kind,
            )
        elif isinstance(made, Frame) and names_base(made):
            if base:
                fault = Diagnosis(
                    object=made.id,
                    message=f"it has no velocity, but '{base}' is the base frame already",
                    hint="give it a velocity, or relative_to",
                )
                made = _with_fault(made, made.id, fault, table, kind)
            base = base or made.id
        taken.setdefault(made.id, kind)
        ids[place] = made.id
        objects.append(made)
    return tuple(objects), ids


def object_tables(tables: Mapping[str, Any], layout: Layout) -> Iterator[tuple[str, str, object]]:
    """Yield place (``worldline[2]``), kind and table of all objects, in the order of the file."""
    for place in layout.lines:
        match = _OBJECT.fullmatch(place)
        if match is not None and match[1] in FORMS:
            yield place, match[1], tables[match[1]][int(match[2]) - 1]


def _with_fault(
    made: Object, name: str, fault: Diagnosis, table: Mapping[str, Any], kind: str
) -> Broken:
    earlier = made.faults if isinstance(made, Broken) else ()
    return broken(kind, table, name, (*_renamed(earlier, name), fault))


def _renamed(faults: tuple[Diagnosis, ...], name: str) -> tuple[Diagnosis, ...]:
    return tuple(
        Diagnosis(object=name, key=fault.key, message=fault.message, hint=fault.hint)
        for fault in faults
    )


def _text(tables: Mapping[str, Any], key: str, faults: _Faults) -> str:
    value = tables.get(key, "")
    if isinstance(value, str):
        return value
    faults.add(key, f"expected a text; this is {value!r}")
    return ""


def _dimensions(tables: Mapping[str, Any], faults: _Faults) -> int:
    value = tables.get("dimensions", 1)
    if isinstance(value, bool) or value != 1:
        faults.add(
            "dimensions",
            f"{value!r} dimensions of space are not known to this version",
            "it knows dimensions = 1: motion along x",
        )
    return 1


def _units(table: object, faults: _Faults) -> Units:
    if not isinstance(table, dict):
        faults.add("units", "the units are a table", "begin it with [units]")
        return Units()
    for key in table:
        if key in ("time", "length"):
            continue
        near = nearest(key, ("time", "length"))
        hint = f"did you mean '{near}'?" if near else "known: time, length"
        faults.add(join("units", key), f"unknown key '{key}'", hint)
    default = Units()
    return Units(
        time=_unit(table.get("time", default.time), "time", TIME, default.time, faults),
        length=_unit(table.get("length", default.length), "length", LENGTH, default.length, faults),
    )


def _unit(name: object, key: str, dimension: Dimension, default: str, faults: _Faults) -> str:
    fitting = [symbol for symbol, unit in UNITS.items() if unit.dimension == dimension]
    if isinstance(name, str) and name in fitting:
        return name
    near = nearest(name, fitting) if isinstance(name, str) else ""
    hint = f"did you mean '{near}'?" if near else "known: " + ", ".join(fitting)
    faults.add(f"units.{key}", f"{name!r} is not a unit of {key}", hint)
    return default


def _parameters(table: object, faults: _Faults) -> tuple[Parameter, ...]:
    if not isinstance(table, dict):
        faults.add("parameters", "the parameters are a table", "begin it with [parameters]")
        return ()
    found: list[Parameter] = []
    for name, value in table.items():
        if isinstance(value, str):
            found.append(Parameter(name=name, value=value))
        elif isinstance(value, bool) or not isinstance(value, int | float):
            faults.add(
                join("parameters", name), "expected a number or a text with a unit or an expression"
            )
        else:
            # what is not finite stays, so that the parameter is known; evaluating it says so
            found.append(Parameter(name=name, value=_float(value)))
    return tuple(found)


def _float(number: float) -> float:
    try:
        return float(number)
    except OverflowError:
        return math.inf if number > 0 else -math.inf
