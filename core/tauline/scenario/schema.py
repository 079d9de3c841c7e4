"""The JSON Schema of a scenario file, made from the object classes.

For editors that check and complete TOML by a schema (JSON Schema, draft 2020-12).
"""

from __future__ import annotations

import inspect
from typing import Any

import msgspec

from tauline.scenario.fields import Shape, fields_of_class
from tauline.scenario.forms import FORMS, ID
from tauline.scenario.read import FORMAT
from tauline.scenario.units import LENGTH, TIME, UNITS, Dimension

Schema = dict[str, Any]


def json_schema() -> Schema:
    """Return the schema of the whole file."""
    classes: dict[str, type[msgspec.Struct]] = {}
    kinds = {kind: _kind(kind, classes) for kind in FORMS}
    definitions: Schema = {}
    while classes.keys() - definitions.keys():
        for name in sorted(classes.keys() - definitions.keys()):
            definitions[name] = _class(classes[name], classes)
    return {
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        "title": "Tauline scenario",
        "type": "object",
        "required": ["tauline"],
        "additionalProperties": False,
        "properties": {
            "tauline": {"const": FORMAT, "description": "Version of the file format."},
            "title": {"type": "string"},
            "description": {"type": "string"},
            "dimensions": {"const": 1, "description": "Dimensions of space."},
            "units": {
                "type": "object",
                "description": "The units of bare numbers.",
                "additionalProperties": False,
                "properties": {"time": _units(TIME), "length": _units(LENGTH)},
            },
            "parameters": {
                "type": "object",
                "description": "Named values, for use in expressions.",
                "additionalProperties": {"type": ["number", "string"]},
            },
            **kinds,
        },
        "$defs": dict(sorted(definitions.items())),
    }


def _kind(kind: str, classes: dict[str, type[msgspec.Struct]]) -> Schema:
    forms = list(dict.fromkeys(form for form, _ in FORMS[kind]))
    return {"type": "array", "items": _either([_reference(form, classes) for form in forms])}


def _class(struct: type[msgspec.Struct], classes: dict[str, type[msgspec.Struct]]) -> Schema:
    fields = fields_of_class(struct)
    properties = {field.key: _shape(field.shape, classes) for field in fields}
    if "id" in properties:
        properties["id"] = {"type": "string", "pattern": f"^{ID.pattern}$"}
    schema: Schema = {
        "type": "object",
        "description": inspect.cleandoc(struct.__doc__ or "").partition("\n\n")[0],
        "additionalProperties": False,
        "properties": properties,
    }
    required = [field.key for field in fields if field.required]
    return schema | ({"required": required} if required else {})


def _shape(shape: Shape, classes: dict[str, type[msgspec.Struct]]) -> Schema:
    options: list[Schema] = [_reference(struct, classes) for struct in shape.structs]
    plain = {
        "number": shape.number,
        "integer": shape.integer,
        "boolean": shape.flag,
        "string": shape.text,
    }
    names = [name for name, allowed in plain.items() if allowed]
    if shape.choices:
        options.append({"enum": list(shape.choices)})
    elif names:
        options.append({"type": names[0] if len(names) == 1 else names})
    if shape.items and shape.repeated:
        options.append({"type": "array", "items": _shape(shape.items[0], classes)})
    elif shape.items:
        size = len(shape.items)
        options.append(
            {
                "type": "array",
                "prefixItems": [_shape(part, classes) for part in shape.items],
                "minItems": size,
                "maxItems": size,
            }
        )
    schema = _either(options)
    if shape.dimension is not None:
        schema["description"] = f"{shape.dimension}: a number, or a text with a unit"
    elif shape.refers_to:
        schema["description"] = f"id: {' or '.join(shape.refers_to)}"
    return schema


def _either(options: list[Schema]) -> Schema:
    return options[0] if len(options) == 1 else {"anyOf": options}


def _reference(struct: type[msgspec.Struct], classes: dict[str, type[msgspec.Struct]]) -> Schema:
    classes[struct.__name__] = struct
    return {"$ref": f"#/$defs/{struct.__name__}"}


def _units(dimension: Dimension) -> Schema:
    return {"enum": [name for name, unit in UNITS.items() if unit.dimension == dimension]}


if __name__ == "__main__":
    import json

    from tauline.resources import resource

    text = json.dumps(json_schema(), indent=2, ensure_ascii=False) + "\n"
    resource("tauline-scenario.schema.json").write_text(text, encoding="utf-8")
