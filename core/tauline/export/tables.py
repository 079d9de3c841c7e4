"""Event tables as CSV, TSV, Markdown, LaTeX, HTML and JSON."""

from __future__ import annotations

import csv
import html
import io
from collections.abc import Callable
from typing import Any

import msgspec

from tauline.errors import ExportError
from tauline.readouts.event_table import EventTable
from tauline.readouts.readout import format_number
from tauline.resolve.results import FrameResult
from tauline.scenario.units import LENGTH, TIME
from tauline.spacetime import beta, one_minus_beta

DIGITS = 6
"""Significant digits in tables for reading; CSV, TSV and JSON carry all of them."""

Cell = str | float


class _Grid(msgspec.Struct, frozen=True):
    """A header of (frame, quantity) pairs, and rows of texts and numbers."""

    columns: tuple[tuple[str, str], ...]
    rows: tuple[tuple[Cell, ...], ...]


def write_table(table: EventTable, form: str) -> str:
    """Return a table as text: ``csv``, ``tsv``, ``md``, ``latex``, ``html`` or ``json``."""
    writers: dict[str, Callable[[EventTable], str]] = {
        "csv": _csv,
        "tsv": _tsv,
        "md": _markdown,
        "latex": _latex,
        "html": _html,
        "json": _json,
    }
    try:
        writer = writers[form]
    except KeyError:
        raise ExportError(f"no table is written as '{form}'", ", ".join(writers)) from None
    return writer(table)


def _grid(table: EventTable) -> _Grid:
    time, length = table.units.symbol(TIME), table.units.symbol(LENGTH)
    columns = [("", "event")]
    for frame in table.frames:
        name = frame.label or frame.id or "view"
        columns += [(name, f"t/{time}"), (name, f"x/{length}")]
    if table.interval_from:
        columns.append(("", f"interval from {table.interval_from}"))
    rows = []
    for row in table.rows:
        cells: list[Cell] = [row.label or row.id]
        for place in row.coordinates:
            cells += [place.t, place.x]
        if table.interval_from:
            cells.append(row.interval_class)
        rows.append(tuple(cells))
    return _Grid(tuple(columns), tuple(rows))


def _header(column: tuple[str, str]) -> str:
    frame, quantity = column
    return f"{quantity} ({frame})" if frame else quantity


def _guarded(text: str) -> str:
    """Keep a spreadsheet from taking a text for a formula."""
    return "'" + text if text[:1] in ("=", "+", "-", "@", "\t", "\r") else text


def _full(cell: Cell) -> str:
    """A guarded text, or a number with all its digits."""
    return _guarded(cell) if isinstance(cell, str) else repr(cell)


def _csv(table: EventTable) -> str:
    """RFC 4180: CRLF, quotes where needed."""
    grid = _grid(table)
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\r\n")
    writer.writerow([_guarded(_header(column)) for column in grid.columns])
    for row in grid.rows:
        writer.writerow([_full(cell) for cell in row])
    return out.getvalue()


def _tsv(table: EventTable) -> str:
    grid = _grid(table)
    lines = [[_header(column) for column in grid.columns], *_texts(grid, _full)]
    return "".join("\t".join(" ".join(c.split()) for c in line) + "\n" for line in lines)


def _texts(grid: _Grid, write: Callable[[Cell], str]) -> list[list[str]]:
    return [[write(cell) for cell in row] for row in grid.rows]


def _read(cell: Cell) -> str:
    return cell if isinstance(cell, str) else format_number(cell + 0.0, DIGITS)


def _markdown(table: EventTable) -> str:
    grid = _grid(table)

    def escaped(text: str) -> str:
        return " ".join(text.replace("\\", "\\\\").replace("|", "\\|").split())

    header = [escaped(_header(column)) for column in grid.columns]
    body = [[escaped(cell) for cell in row] for row in _texts(grid, _read)]
    numeric = [bool(frame) for frame, _ in grid.columns]
    widths = [max(3, *(len(row[k]) for row in [header, *body])) for k in range(len(header))]

    def line(cells: list[str]) -> str:
        padded = (
            cell.rjust(width) if right else cell.ljust(width)
            for cell, width, right in zip(cells, widths, numeric, strict=True)
        )
        return "| " + " | ".join(padded) + " |\n"

    rule = [
        "-" * (width - 1) + ":" if right else "-" * width
        for width, right in zip(widths, numeric, strict=True)
    ]
    return line(header) + line(rule) + "".join(line(row) for row in body)


_LATEX_SIGNS = {
    "\\": r"\textbackslash{}",
    "&": r"\&",
    "%": r"\%",
    "$": r"\$",
    "#": r"\#",
    "_": r"\_",
    "{": r"\{",
    "}": r"\}",
    "~": r"\textasciitilde{}",
    "^": r"\textasciicircum{}",
    "′": r"\ensuremath{'}",
    "−": r"\ensuremath{-}",
}


def _escaped_latex(text: str) -> str:
    return "".join(_LATEX_SIGNS.get(sign, sign) for sign in text)


def _latex(table: EventTable) -> str:
    """A tabular of booktabs and siunitx: one S column to each number."""
    grid = _grid(table)
    # the title column, S for numbers, l for the interval class
    shape = "".join("S" if frame else "l" for frame, _ in grid.columns)
    lines = [
        "% needs \\usepackage{booktabs} and \\usepackage{siunitx}",
        f"\\begin{{tabular}}{{{shape}}}",
        "\\toprule",
    ]
    groups = [""]
    groups += [
        f"\\multicolumn{{2}}{{c}}{{{_escaped_latex(_name(frame))}}}" for frame in table.frames
    ]
    groups += [""] if table.interval_from else []
    lines.append(" & ".join(groups) + r" \\")
    lines += [f"\\cmidrule(lr){{{2 * k + 2}-{2 * k + 3}}}" for k in range(len(table.frames))]
    lines.append(" & ".join(_latex_heading(column) for column in grid.columns) + r" \\")
    lines.append("\\midrule")
    for row in grid.rows:
        cells = [
            _escaped_latex(cell) if isinstance(cell, str) else f"{cell + 0.0:.{DIGITS}g}"
            for cell in row
        ]
        lines.append(" & ".join(cells) + r" \\")
    lines += ["\\bottomrule", "\\end{tabular}"]
    return "\n".join(lines) + "\n"


def _latex_heading(column: tuple[str, str]) -> str:
    frame, quantity = column
    if not frame:
        return _escaped_latex(quantity)
    symbol, _, unit = quantity.partition("/")
    return f"{{${symbol}/\\mathrm{{{_escaped_latex(unit)}}}$}}"


def _name(frame: FrameResult) -> str:
    return frame.label or frame.id or "view"


def _html(table: EventTable) -> str:
    grid = _grid(table)
    last = '<th scope="col" rowspan="2">{}</th>'
    span = "".join(
        f'<th scope="colgroup" colspan="2">{html.escape(_name(frame))}</th>'
        for frame in table.frames
    )
    tail = last.format(html.escape(grid.columns[-1][1])) if table.interval_from else ""
    units = "".join(
        f'<th scope="col"><i>{html.escape(quantity[0])}</i>{html.escape(quantity[1:])}</th>'
        for frame, quantity in grid.columns
        if frame
    )
    right = ' style="text-align:right"'
    rows = []
    for row in grid.rows:
        cells = "".join(
            f"<td>{html.escape(cell)}</td>"
            if isinstance(cell, str)
            else f'<td{right} data-value="{cell!r}">{_read(cell)}</td>'
            for cell in row[1:]
        )
        rows.append(f'<tr><th scope="row">{html.escape(str(row[0]))}</th>{cells}</tr>')
    head = f"<tr>{last.format('event')}{span}{tail}</tr>\n<tr>{units}</tr>"
    body = "\n".join(rows)
    return f"<table>\n<thead>\n{head}\n</thead>\n<tbody>\n{body}\n</tbody>\n</table>\n"


def _json(table: EventTable) -> str:
    units = table.units
    document: dict[str, Any] = {
        "units": {"time": units.time, "length": units.length},
        "frames": [
            {
                "id": frame.id,
                "label": frame.label,
                "rapidity": frame.rapidity,
                "beta": float(beta(frame.rapidity)),
                "one_minus_beta": float(one_minus_beta(frame.rapidity)),
            }
            for frame in table.frames
        ],
        "events": [
            {
                "id": row.id,
                "label": row.label,
                "coordinates": {
                    frame.id: {"t": place.t, "x": place.x, "u": place.u, "v": place.v}
                    for frame, place in zip(table.frames, row.coordinates, strict=True)
                },
                "on": [
                    {
                        "worldline": placement.worldline,
                        "proper_time": placement.proper_time,
                    }
                    for placement in row.on
                ],
            }
            for row in table.rows
        ],
        "worldlines": [
            {
                "id": line.id,
                "label": line.label,
                "start": line.start,
                "end": line.end,
                "proper_time": line.proper_time,
            }
            for line in table.worldlines
        ],
    }
    return msgspec.json.format(msgspec.json.encode(document), indent=2).decode() + "\n"
