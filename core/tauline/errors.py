"""The exceptions a caller of the core may meet.

    TaulineError
    ├── FileUnreadableError   the file cannot be read as a scenario at all
    ├── QuantityError         a text is not a quantity of the dimension asked for
    ├── UnknownIdError        an id names nothing in this scenario
    ├── UnresolvedError       the object named has a fault, so it has no place
    └── ExportError           a drawing or a table could not be written

A fault of one object in a scenario is never an exception: it is a
:class:`tauline.scenario.diagnosis.Diagnosis` on that object.
"""

from __future__ import annotations

from pathlib import Path


class TaulineError(Exception):
    """Base of all errors that the core raises on purpose.

    Parameters
    ----------
    message : what is wrong.
    hint : how to mend it; may be empty.
    """

    def __init__(self, message: str, hint: str = "") -> None:
        super().__init__(message)
        self.message = message
        self.hint = hint

    def __str__(self) -> str:
        return f"{self.message} ({self.hint})" if self.hint else self.message


class FileUnreadableError(TaulineError):
    """The file is missing, is not text, or is not TOML: nothing of it can be used."""

    def __init__(self, path: Path, message: str, hint: str = "", line: int | None = None) -> None:
        super().__init__(message, hint)
        self.path = path
        self.line = line

    def __str__(self) -> str:
        place = f"{self.path}:{self.line}" if self.line else f"{self.path}"
        return f"{place}: {super().__str__()}"


class QuantityError(TaulineError):
    """A value cannot be read, is not finite, or has the wrong dimension."""


class UnknownIdError(TaulineError):
    """An id that names nothing in the scenario."""


class UnresolvedError(TaulineError):
    """The object exists but could not be resolved."""


class ExportError(TaulineError):
    """A drawing or a table could not be written."""
