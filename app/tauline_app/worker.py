"""Work that takes longer than a glance, beside the window."""

from __future__ import annotations

from collections.abc import Callable

from PySide6.QtCore import QObject, QThreadPool, Signal

from tauline.errors import TaulineError


class Work(QObject):
    """One task in a thread of its own; its answer comes back in the window's thread.

    The task must only read values that do not change. An answer that nobody waits for any more
    (the receiver is gone) is dropped.
    """

    done = Signal(object)
    """What the task returned."""
    failed = Signal(str)
    """Why there is no answer."""

    def __init__(self, task: Callable[[], object]) -> None:
        super().__init__()
        self._task = task

    def start(self) -> None:
        """Begin."""
        QThreadPool.globalInstance().start(self._run)

    def _run(self) -> None:
        try:
            found = self._task()
        except TaulineError as error:
            self.failed.emit(str(error))
        except Exception as error:  # a thread has nobody else to tell
            self.failed.emit(f"Something went wrong in the program: {str(error) or type(error)}")
        else:
            self.done.emit(found)
