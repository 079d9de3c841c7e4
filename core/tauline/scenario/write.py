"""Writing a scenario: into the text it came from, and safely onto the disk."""

from __future__ import annotations

from pathlib import Path

from tauline.errors import FileUnreadableError, TaulineError
from tauline.files import replace_file
from tauline.scenario.forms import table_of
from tauline.scenario.objects import kind_of
from tauline.scenario.patch import same
from tauline.scenario.read import parse
from tauline.scenario.render import scenario_text
from tauline.scenario.rewrite import Rewriting
from tauline.scenario.scenario import Scenario
from tauline.scenario.source import Source


def to_text(scenario: Scenario, source: Source | None = None) -> str:
    """Write a scenario as the text of a file.

    With the source it was read from, only what differs from that changes: comments, order, blank
    lines and the way numbers are written stay, and so does what could not be understood.
    """
    if source is None or not source.text.removeprefix("\ufeff").strip():
        return scenario_text(scenario)
    text = Rewriting(scenario, source).text()
    _check(scenario, text)
    return text


def _check(scenario: Scenario, text: str) -> None:
    """Make sure that a text says what the scenario says, before anything is replaced by it."""
    try:
        again = parse(text).scenario
    except FileUnreadableError as error:
        raise TaulineError(
            f"the change cannot be made in the text of the file: {error.message}",
            "mend the faults of the file first",
        ) from None
    if not same(_content(again), _content(scenario)):
        raise TaulineError(
            "the change cannot be made in the text of the file", "mend the faults of the file first"
        )


def _content(scenario: Scenario) -> list[object]:
    """List what a file says of a scenario; handles of broken tables count anew in each reading."""
    return [
        scenario.title,
        scenario.description,
        scenario.units.time,
        scenario.units.length,
        {parameter.name: parameter.value for parameter in scenario.parameters},
        [[kind_of(thing), table_of(thing)] for thing in scenario.objects],
    ]


def save(scenario: Scenario, source: Source | None, path: Path) -> Source:
    """Write a scenario to a file and return the text's new source.

    The file is replaced in one step, so that it is never half written; it keeps its permissions,
    and a symbolic link goes on pointing to it. TaulineError if it cannot be written; then
    the file is as it was.
    """
    text = to_text(scenario, source)
    try:
        replace_file(path, text.encode("utf-8"))
    except UnicodeEncodeError:
        raise TaulineError(f"{path}: a text has a character that no file can hold") from None
    except OSError as error:
        raise TaulineError(
            f"{path}: the file cannot be written: {error.strerror or error}",
            "save it in another place",
        ) from None
    return parse(text, path).source
