"""Print what README.md tells the reader to type, so that the checks run exactly that.

readme_says.py Run        the one command under "## Run"
readme_says.py Test       the one command under "## Test"
readme_says.py packages   the system packages a bare Linux lacks
"""

from __future__ import annotations

import re
import sys
from pathlib import Path

README = Path(__file__).resolve().parents[1] / "README.md"


def command(section: str, text: str) -> str:
    """Return the command under a heading: one block of code, one line in it."""
    parts = re.split(r"^## +(.+?) *$", text, flags=re.MULTILINE)
    sections = dict(zip(parts[1::2], parts[2::2], strict=True))
    if section not in sections:
        raise SystemExit(f"README.md has no section '## {section}'")
    blocks = re.findall(r"^```\w*\n(.*?)^```$", sections[section], re.MULTILINE | re.DOTALL)
    lines = [line for block in blocks for line in block.splitlines()]
    if len(lines) != 1:
        raise SystemExit(f"'## {section}' of README.md must hold one command, not {len(lines)}")
    return lines[0]


def packages(text: str) -> str:
    """Return the packages after the first ``apt-get install``."""
    found = re.search(r"apt-get install ((?:[a-z0-9][a-z0-9.+-]*\s+)*[a-z0-9][a-z0-9.+-]*)", text)
    if not found:
        raise SystemExit("README.md names no system packages")
    return " ".join(found.group(1).split())


def main() -> None:
    """Print one of the three."""
    (what,) = sys.argv[1:]
    text = README.read_text(encoding="utf-8")
    print(packages(text) if what == "packages" else command(what, text))


if __name__ == "__main__":
    main()
