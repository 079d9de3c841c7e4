"""The command ``tauline``.

Exit status: 0 clean; 1 an object of the scenario has a fault (whatever could be made has been
made); 2 the file cannot be read, or the command cannot be carried out. Errors go to standard
error, one line each.
"""

from __future__ import annotations

import argparse
import os
import sys
from collections.abc import Sequence
from pathlib import Path

import msgspec

from tauline import __version__
from tauline.errors import TaulineError
from tauline.readouts import (
    chosen_frames,
    diagnosis_line,
    event_table,
    has_fault,
    inspection,
)
from tauline.resolve import Resolved, resolve
from tauline.scenario.diagnosis import Severity
from tauline.scenario.read import read
from tauline.scenario.source import Source

CLEAN, FAULTY, FAILED = 0, 1, 2


def main(arguments: Sequence[str] | None = None) -> int:
    """Run the command and return its exit status."""
    for stream in (sys.stdout, sys.stderr):
        reconfigure = getattr(stream, "reconfigure", None)
        if reconfigure is not None:
            reconfigure(encoding="utf-8", errors="replace")
    options = _parser().parse_args(arguments)
    try:
        status: int = options.run(options)
        sys.stdout.flush()
    except TaulineError as error:
        _complain(str(error))
        return FAILED
    except BrokenPipeError:
        # whoever read our output has had enough; nothing more can be said there
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return FAILED
    return status


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(
        prog="tauline", description="Spacetime diagrams: figures, event tables and a window."
    )
    parser.add_argument("--version", action="version", version=f"tauline {__version__}")
    commands = parser.add_subparsers(required=True, metavar="COMMAND")

    figure = commands.add_parser("figure", help="write a scenario's diagram to a file")
    figure.add_argument("file", type=Path, metavar="FILE")
    figure.add_argument("--out", type=Path, required=True, help="a .pdf, .svg or .png file")
    figure.add_argument("--frame", metavar="ID", help="frame to look from (default: the view's)")
    figure.add_argument("--view", metavar="ID", help="view of the scenario (default: its first)")
    figure.add_argument("--width", type=float, metavar="MM", help="width in millimetres")
    figure.add_argument("--height", type=float, metavar="MM", help="height in millimetres")
    figure.add_argument(
        "--time",
        nargs=2,
        type=float,
        metavar=("FROM", "TO"),
        help="time window, in the frame and in the scenario's units",
    )
    figure.set_defaults(run=_figure)

    table = commands.add_parser("table", help="tabulate the events in several frames")
    table.add_argument("file", type=Path, metavar="FILE")
    table.add_argument("--frames", metavar="A,B", help="ids of frames (default: all declared)")
    table.add_argument("--from", dest="origin", metavar="EVENT", help="class intervals from here")
    table.add_argument("--format", choices=("csv", "md", "latex", "html", "json"), default="md")
    table.add_argument("--out", type=Path, help="file to write (default: standard output)")
    table.set_defaults(run=_table)

    inspect = commands.add_parser("inspect", help="list the objects and what is wrong with them")
    inspect.add_argument("file", type=Path, metavar="FILE")
    inspect.add_argument("--format", choices=("text", "json"), default="text")
    inspect.set_defaults(run=_inspect)

    window = commands.add_parser("open", help="open the window")
    window.add_argument("file", type=Path, nargs="?", metavar="FILE")
    window.set_defaults(run=_open)
    return parser


def _figure(options: argparse.Namespace) -> int:
    from tauline.export.figure import export_figure

    resolved, status = _load(options.file)
    export_figure(
        resolved,
        options.out,
        frame=options.frame,
        view=options.view,
        width_mm=options.width,
        height_mm=options.height,
        time_window=tuple(options.time) if options.time else None,
    )
    return status


def _table(options: argparse.Namespace) -> int:
    from tauline.export.tables import write_table
    from tauline.export.text import write_text

    resolved, status = _load(options.file)
    frames = chosen_frames(resolved, options.frames.split(",")) if options.frames else None
    text = write_table(event_table(resolved, frames, options.origin or ""), options.format)
    if options.out is None:
        _say(text)
    else:
        write_text(options.out, text)
    return status


def _inspect(options: argparse.Namespace) -> int:
    loaded = read(options.file)
    resolved = resolve(loaded.scenario)
    report = inspection(resolved, loaded.source)
    if options.format == "json":
        _say(msgspec.json.format(msgspec.json.encode(report), indent=2).decode() + "\n")
    else:
        width = max((len(item["id"]) for item in report["objects"]), default=0)
        for item in report["objects"]:
            _say(f"{item['id']:{width}}  {item['kind']:12}  {item['state']}\n")
        for diagnosis in resolved.diagnoses:
            if diagnosis.severity is Severity.NOTE:
                _say(diagnosis_line(diagnosis, loaded.source) + "\n")
        _report_faults(resolved, loaded.source)
    return FAULTY if has_fault(resolved) else CLEAN


def _open(options: argparse.Namespace) -> int:
    from tauline.launch import open_window

    return open_window(options.file)


def _load(path: Path) -> tuple[Resolved, int]:
    """Read and resolve a file; its faults go to standard error."""
    loaded = read(path)
    resolved = resolve(loaded.scenario)
    _report_faults(resolved, loaded.source)
    return resolved, FAULTY if has_fault(resolved) else CLEAN


def _report_faults(resolved: Resolved, source: Source) -> None:
    for diagnosis in resolved.faults:
        _complain(diagnosis_line(diagnosis, source))


def _say(text: str) -> None:
    # a table brings its own line ends, which a text stream might change
    buffer = getattr(sys.stdout, "buffer", None)
    if buffer is None:
        sys.stdout.write(text)
    else:
        sys.stdout.flush()
        buffer.write(text.encode())


def _complain(line: str) -> None:
    print(f"tauline: {' '.join(line.split())}", file=sys.stderr)


if __name__ == "__main__":
    sys.exit(main())
