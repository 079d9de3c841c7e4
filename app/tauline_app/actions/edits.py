"""Changes of the document."""

from __future__ import annotations

from typing import Any

from tauline.errors import TaulineError
from tauline.scenario.edit import Field, fields_of, set_field, set_parameter, value_of
from tauline_app.session import Session


def change_field(session: Session, object_id: str, key: str, text: str) -> str:
    """Give a field what was typed, as one step of the history; "" or why it cannot be.

    An empty text takes the field out.
    """
    thing = session.scenario.find(object_id)
    if thing is None:
        return f"'{object_id}' is gone"
    field = next((item for item in fields_of(thing) if item.key == key), None)
    try:
        changed = set_field(session.scenario, object_id, key, _typed(field, text))
    except TaulineError as error:
        return str(error)
    if changed == session.scenario:
        return ""
    if key == "id":
        session.selection = tuple(text if name == object_id else name for name in session.selection)
    session.apply(changed, f"Change {key} of {object_id}")
    return ""


def change_parameter(session: Session, name: str, text: str) -> str:
    """Give a parameter what was typed, as one step of the history; "" or why it cannot be."""
    if not text:
        return "a parameter needs a value"
    try:
        changed = set_parameter(session.scenario, name, value_of(text))
    except TaulineError as error:
        return str(error)
    session.apply(changed, f"Change parameter {name}")
    return ""


def undo(session: Session) -> None:
    """Take back the last step."""
    session.undo()


def redo(session: Session) -> None:
    """Make it again."""
    session.redo()


def _typed(field: Field | None, text: str) -> Any:  # noqa: ANN401 - whatever the field takes
    if not text:
        return None
    kind = field.kind if field is not None else "text"
    if kind == "quantity":
        return value_of(text)
    if kind in ("ids", "choices"):
        return [part.strip() for part in text.split(",") if part.strip()]
    if kind == "integer":
        number = text.replace("−", "-")
        return int(number) if number.lstrip("+-").isdecimal() else text
    if kind == "flag":
        return {"true": True, "false": False}.get(text.lower(), text)
    return text
