"""The README says what is so."""

from __future__ import annotations

import re
import shlex
import subprocess
import sys
from pathlib import Path

import pytest

from tauline.cli import main
from tauline.launch import SYSTEM_LIBRARIES
from tauline.resolve import resolve
from tauline.resources import resource, scenarios_folder
from tauline.scenario.read import parse

ROOT = Path(__file__).resolve().parents[2]
README = (ROOT / "README.md").read_text(encoding="utf-8")


def says(what: str) -> str:
    script = ROOT / ".ci" / "readme_says.py"
    run = subprocess.run([sys.executable, script, what], capture_output=True, text=True, check=True)
    return run.stdout.strip()


def test_one_command_to_run_and_one_to_test() -> None:
    assert says("Run").endswith("tauline open scenarios/courier.toml")
    assert says("Test").endswith("python -m pytest")
    assert (ROOT / shlex.split(says("Run"))[-1]).is_file()


def test_a_section_that_is_not_there_is_an_error() -> None:
    with pytest.raises(subprocess.CalledProcessError):
        says("Walk")


def test_system_packages_are_those_the_program_asks_for() -> None:
    assert set(says("packages").split()) == {*SYSTEM_LIBRARIES.values(), "fonts-dejavu-core"}


def test_the_example_is_a_sound_scenario() -> None:
    (example,) = re.findall(r"^```toml\n(.*?)^```", README, re.MULTILINE | re.DOTALL)
    resolved = resolve(parse(example).scenario)
    assert [str(diagnosis) for diagnosis in resolved.diagnoses] == []
    assert set(resolved.events) >= {"launch", "question", "ping.received", "echo.received"}


@pytest.mark.parametrize("command", ["figure", "table", "inspect", "open"])
def test_every_option_named_exists(command: str, capsys: pytest.CaptureFixture[str]) -> None:
    (line,) = re.findall(rf"^tauline {command} +(.*)$", README, re.MULTILINE)
    with pytest.raises(SystemExit):
        main([command, "--help"])
    known = capsys.readouterr().out
    for option in re.findall(r"--\w+", line):
        assert option in known


def test_every_file_linked_to_exists() -> None:
    links = re.findall(r"\]\(([^)]+)\)", README)
    assert links
    assert [link for link in links if not (ROOT / link).exists()] == []


def test_shipped_folders_are_found() -> None:
    assert (scenarios_folder() / "courier.toml").is_file()
    assert resource("pictures/window.png").is_file()
