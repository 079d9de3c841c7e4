"""Starting the window, and what is said when something for it is missing."""

from __future__ import annotations

import importlib.util
import sys
from pathlib import Path

import pytest

from tauline import cli, launch
from tauline.errors import TaulineError


def test_without_qt_it_says_what_to_install(
    monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.setattr(importlib.util, "find_spec", lambda _: None)
    assert cli.main(["open", "some.toml"]) == 2
    (line,) = capsys.readouterr().err.splitlines()
    assert 'pip install "tauline[app]"' in line


def test_missing_system_libraries_are_named(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(importlib.util, "find_spec", lambda _: object())
    monkeypatch.setattr(sys, "platform", "linux")
    monkeypatch.setattr(launch, "_loads", lambda library: library != "libxcb-cursor.so.0")
    with pytest.raises(TaulineError, match="apt-get install libxcb-cursor0"):
        launch.open_window(Path("some.toml"))


def test_no_screen_is_told(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(importlib.util, "find_spec", lambda _: object())
    monkeypatch.setattr(sys, "platform", "linux")
    monkeypatch.setattr(launch, "_loads", lambda _: True)
    for name in ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"):
        monkeypatch.delenv(name, raising=False)
    with pytest.raises(TaulineError, match="no screen"):
        launch.open_window(None)
