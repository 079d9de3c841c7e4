"""Reading a scenario file: everything that can be understood, and all that is wrong with it."""

from __future__ import annotations

import tomllib
from difflib import get_close_matches
from pathlib import Path
from typing import Any, NamedTuple

from tauline.errors import FileUnreadableError
from tauline.scenario.diagnosis import Diagnosis
from tauline.scenario.forms import FORMS, ID, build
from tauline.scenario.objects import Broken, Frame, Object, Value
from tauline.scenario.scenario import Parameter, Scenario, Units
from tauline.scenario.source import Source, entries, locate
from tauline.scenario.syntax import FUNCTIONS
from tauline.scenario.units import LENGTH, TIME, UNITS, Dimension

FORMAT = 1
"""Version of the file format this program writes, and the newest it reads."""

MAX_BYTES = 20_000_000

START = "start it with 'tauline = 1', then the tables of the scenario"


class Loaded(NamedTuple):
    """A scenario and the text it came from."""

    scenario: Scenario
    source: Source


def read(path: Path | str) -> Loaded:
    """Read a scenario file.

    FileUnreadableError if nothing of it can be used: no such file, a folder, not text, not TOML,
    or of a newer format. Any other fault is kept with the object that has it.
    """
    file = Path(path)
    return parse(_text_of(file), file)


def parse(text: str, path: Path | None = None) -> Loaded:
    """Read a scenario from its text; see :func:`read`."""
    shown = path if path is not None else Path("scenario")
    bare = text.removeprefix("\N{BYTE ORDER MARK}")
    if not bare.strip():
        raise FileUnreadableError(shown, "the file is empty", START)
    try:
        tables = tomllib.loads(bare.replace("\r\n", "\n"))
    except tomllib.TOMLDecodeError as error:
        raise _not_toml(shown, error, bare) from None
    except RecursionError:
        raise FileUnreadableError(shown, "brackets are nested too deeply to be read") from None
    except ValueError as error:
        # a number of thousands of digits is refused by Python itself
        raise FileUnreadableError(shown, f"a value cannot be read: {error}") from None
    _check_format(shown, tables)
    faults: list[Diagnosis] = []
    if "tauline" not in tables:
        faults.append(_fault("tauline", "the format version is missing", START))
    objects, names = _objects(tables, bare)
    scenario = Scenario(
        title=_string(tables, "title", faults),
        description=_string(tables, "description", faults).strip(),
        dimensions=_dimensions(tables, faults),
        units=_units(tables.get("units", {}), faults),
        parameters=_parameters(tables.get("parameters", {}), faults),
        objects=objects,
        faults=(*_unknown(tables), *faults),
    )
    return Loaded(scenario, Source(path=path, text=text, lines=locate(bare, names)))


def _text_of(file: Path) -> str:
    try:
        if file.is_dir():
            raise FileUnreadableError(file, "this is a folder", "name a scenario file in it")
        if file.stat().st_size > MAX_BYTES:
            raise FileUnreadableError(file, f"the file is larger than {MAX_BYTES // 10**6} MB")
        data = file.read_bytes()
    except FileNotFoundError:
        raise FileUnreadableError(file, "there is no such file") from None
    except OSError as error:
        reason = error.strerror or str(error)
        raise FileUnreadableError(file, f"the file cannot be opened: {reason}") from None
    except ValueError as error:
        raise FileUnreadableError(file, f"this is not a file name: {error}") from None
    if b"\0" in data:
        raise FileUnreadableError(file, "this is a binary file, not a text", START)
    try:
        return data.decode("utf-8")
    except UnicodeDecodeError as error:
        line = data[: error.start].count(b"\n") + 1
        raise FileUnreadableError(
            file, "this is not UTF-8 text", "save it as UTF-8", line=line
        ) from None


def _not_toml(
    file: Path, error: tomllib.TOMLDecodeError, text: str
) -> FileUnreadableError:
    message, _, place = str(error).partition(" (at ")
    words = place.rstrip(")").replace(",", "").split()
    if words[:1] == ["line"]:
        line = int(words[1])
    else:
        line = text.count("\n") + 1
    return FileUnreadableError(file, f"this is not valid TOML: {message[:1].lower()}{message[1:]}", line=line)


def _check_format(file: Path, tables: dict[str, Any]) -> None:
    version = tables.get("tauline", FORMAT)
    if type(version) is not int or version < 1:
        raise FileUnreadableError(file, f"{version!r} is not a format version", START)
    if version > FORMAT:
        raise FileUnreadableError(
            file,
            f"the file has format {version}, this program reads up to {FORMAT}",
            "it was written by a newer version of Tauline",
        )


def _objects(
    tables: dict[str, Any], text: str
) -> tuple[tuple[Object, ...], dict[tuple[str, int], str]]:
    """All objects in the order of the file, and their ids by kind and index."""
    order: dict[tuple[str, int], None] = {}
    for entry in entries(text):
        match entry.path:
            case [str(kind), int(index), *_] if kind in FORMS:
                order[kind, index] = None
    for kind in FORMS:
        listed = tables.get(kind, [])
        for index in range(len(listed) if isinstance(listed, list) else 1):
            order.setdefault((kind, index))
    objects: list[Object] = []
    names: dict[tuple[str, int], str] = {}
    taken: dict[str, str] = {}
    base = ""
    for kind, index in order:
        listed = tables.get(kind)
        table = listed[index] if isinstance(listed, list) and index < len(listed) else listed
        made = build(kind, index, table)
        if made.id in taken:
            made = _broken(
                made, kind, index, table, "id", f"the id '{made.id}' is taken by a {taken[made.id]}"
            )
        elif isinstance(made, Frame) and _names_base(made):
            if base:
                message = f"'{base}' is the base frame already"
                made = _broken(made, kind, index, table, "", message, "give it a velocity")
            base = base or made.id
        taken.setdefault(made.id, kind)
        names[kind, index] = made.id
        objects.append(made)
    return tuple(objects), names


def _broken(
    made: Object, kind: str, index: int, table: dict[str, Any], key: str, message: str, hint: str = ""
) -> Broken:
    handle = f"{kind}[{index + 1}]" if key == "id" else made.id
    hint = hint or "every id of a file is used once"
    fault = Diagnosis(object=handle, key=key, message=message, hint=hint)
    earlier = made.faults if isinstance(made, Broken) else ()
    return Broken(
        id=handle, kind=kind, table=dict(table), faults=(*earlier, fault), label=made.label
    )


def _names_base(frame: Frame) -> bool:
    given = (frame.velocity, frame.rapidity, frame.gamma, frame.one_minus_beta)
    return frame.relative_to is None and all(value is None for value in given)


def _unknown(tables: dict[str, Any]) -> list[Diagnosis]:
    known = ["tauline", "title", "description", "dimensions", "units", "parameters", *FORMS]
    faults = []
    for key in tables:
        if key not in known:
            near = get_close_matches(key, known, n=1)
            hint = f"did you mean '{near[0]}'?" if near else "known: " + ", ".join(known)
            faults.append(_fault(key, f"unknown key or table '{key}'", hint))
    return faults


def _string(tables: dict[str, Any], key: str, faults: list[Diagnosis]) -> str:
    value = tables.get(key, "")
    if isinstance(value, str):
        return value
    faults.append(_fault(key, "expected a text"))
    return ""


def _dimensions(tables: dict[str, Any], faults: list[Diagnosis]) -> int:
    value = tables.get("dimensions", 1)
    if value != 1 or value is True:
        faults.append(
            _fault("dimensions", f"{value!r} is not supported", "this version knows 1: motion along x")
        )
    return 1


def _units(table: object, faults: list[Diagnosis]) -> Units:
    if not isinstance(table, dict):
        faults.append(_fault("units", "expected a table", "start it with [units]"))
        return Units()
    for key in table:
        if key not in ("time", "length"):
            faults.append(_fault(f"units.{key}", f"unknown key '{key}'", "known: time, length"))
    return Units(
        time=_unit(table, "time", TIME, "yr", faults),
        length=_unit(table, "length", LENGTH, "ly", faults),
    )


def _unit(
    table: dict[str, Any], key: str, dimension: Dimension, default: str, faults: list[Diagnosis]
) -> str:
    name = table.get(key, default)
    unit = UNITS.get(name) if isinstance(name, str) else None
    if unit is not None and unit.dimension == dimension:
        return str(name)
    fitting = ", ".join(name for name, unit in UNITS.items() if unit.dimension == dimension)
    faults.append(_fault(f"units.{key}", f"{name!r} is not a unit of {key}", f"known: {fitting}"))
    return default


def _parameters(table: object, faults: list[Diagnosis]) -> tuple[Parameter, ...]:
    if not isinstance(table, dict):
        faults.append(_fault("parameters", "expected a table", "start it with [parameters]"))
        return ()
    found = []
    for name, value in table.items():
        key = f"parameters.{name}"
        problem = _name_problem(name)
        if problem:
            faults.append(_fault(key, problem, "choose another name"))
        elif isinstance(value, bool) or not isinstance(value, int | float | str):
            faults.append(_fault(key, "expected a number or a text"))
        else:
            found.append(Parameter(name=name, value=_plain(value)))
    return tuple(found)


def _plain(value: float | str) -> Value:
    try:
        return value if isinstance(value, str) else float(value)
    except OverflowError:
        return float("inf")


def _name_problem(name: str) -> str:
    if not name.isidentifier():
        return f"'{name}' cannot be used in an expression"
    if name in UNITS:
        return f"'{name}' is a unit"
    if name in FUNCTIONS or name in ("pi", "π"):
        return f"'{name}' has a meaning of its own in expressions"
    return ""


def _fault(key: str, message: str, hint: str = "") -> Diagnosis:
    return Diagnosis(object="", key=key, message=message, hint=hint)


__all__ = ["FORMAT", "ID", "Loaded", "parse", "read"]
