"""The only place that prints. Answers go to stdout, talk to stderr; nothing typed elsewhere can drive the terminal."""

import json
import os
import re
import shutil
import sys
import textwrap
import unicodedata
from collections.abc import Iterable, Sequence
from contextlib import suppress
from datetime import date
from decimal import Decimal
from pathlib import Path
from typing import Any, TextIO

from fleetcare.domain.printable import UNPRINTABLE, cell_text
from fleetcare.domain.printable import clean as clean
from fleetcare.errors import Refused

_GAP = "  "
_NARROWEST = 10  # a date


def say(text: str) -> None:
    """Print an answer, line by line, on stdout; on a terminal what is too long for it goes on below, a little further in."""
    width = _terminal_width()
    for line in text.split("\n"):
        for part in _folded(clean(line), width):
            _write(sys.stdout, part + "\n")


def complain(*lines: str) -> None:
    """Print talk on stderr; each text stays one line whatever is in it."""
    for line in lines:
        _write(sys.stderr, clean(line) + "\n")


def deliver(text: str, out: str | None = None) -> None:
    """Put machine-readable text as UTF-8 into the file `out`, or on stdout where none is named.

    The file appears whole or not at all. Raises Refused where it cannot be written.
    """
    data = text.encode()
    if out is not None:
        _write_file(Path(out), data)
    elif hasattr(sys.stdout, "buffer"):
        sys.stdout.flush()
        sys.stdout.buffer.write(data)
    else:
        _write(sys.stdout, text)


def finish() -> None:
    """Flush what was printed, so that a full disk or a closed pipe shows while it can still be told."""
    if sys.stdout is not None:
        sys.stdout.flush()


def abandon() -> None:
    """Drop what stdout can no longer take, so that the interpreter does not fail over it at exit."""
    with suppress(OSError, ValueError):
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())


def table(headers: Sequence[str], rows: Iterable[Sequence[Any]], width: int | None = None) -> str:
    """Give rows as an aligned plain-text table; numbers stand to the right, too-wide text wraps in its column.

    `width` is that of the terminal by default; where stdout is no terminal nothing is wrapped.
    """
    rows = list(rows)
    cells = [[clean(cell_text(cell)) for cell in row] for row in rows]
    widths = [max(_columns(cell) for cell in column) for column in zip(headers, *cells, strict=True)]
    _narrow(widths, _terminal_width() if width is None else width)
    numeric = [
        all(isinstance(cell, int | Decimal) or cell is None for cell in column) and bool(rows)
        for column in (zip(*rows, strict=True) if rows else ([] for _ in headers))
    ]
    lines = [*_table_row(headers, widths, numeric), _GAP.join("-" * wide for wide in widths)]
    for row in cells:
        lines.extend(_table_row(row, widths, numeric))
    return "\n".join(line.rstrip() for line in lines)


def labelled(labels: Iterable[tuple[str, str]], indent: str = "", width: int | None = None) -> str:
    """Give texts with a label in front of each, one under the other; too long ones go on under their own beginning.

    `width` is that of the terminal by default; where stdout is no terminal nothing is wrapped.
    """
    shown = [(label, clean(text)) for label, text in labels]
    widest = max((_columns(label) for label, _ in shown), default=0)
    hang = indent + " " * (widest + len(_GAP))
    room = max((_terminal_width() if width is None else width) - len(hang), 2 * _NARROWEST)
    lines = []
    for label, text in shown:
        first, *rest = [text] if _columns(text) <= room else textwrap.wrap(text, room)
        lines += [f"{indent}{label:<{widest}}{_GAP}{first}", *(f"{hang}{line}" for line in rest)]
    return "\n".join(line.rstrip() for line in lines)


def json_text(value: Any) -> str:
    """Give one JSON value, figures unrounded (whole Decimals as integers), dates as ISO text, ending in a newline."""
    text = json.dumps(value, ensure_ascii=False, allow_nan=False, indent=2, default=_json_value)
    # json.dumps leaves C1 and direction marks as they are; they stand inside strings only, so \u escapes fit.
    return "\n".join(UNPRINTABLE.sub(_json_escape, line) for line in text.split("\n")) + "\n"


def _write(stream: TextIO | None, text: str) -> None:
    if stream is None:
        return
    encoding = stream.encoding or "utf-8"
    print(text.encode(encoding, "backslashreplace").decode(encoding), end="", file=stream)


def _write_file(path: Path, data: bytes) -> None:
    path = path.resolve()  # a link keeps pointing where it points
    if not path.parent.is_dir():
        raise Refused(f"there is no folder {path.parent}", "make it first, or name another with --out")
    try:
        if path.exists() and not path.is_file():
            path.write_bytes(data)  # a device or pipe cannot be replaced
            return
        beside = path.with_name(f".{path.name}.{os.getpid()}.part")
        try:
            with beside.open("xb") as file:
                file.write(data)
                file.flush()
                os.fsync(file.fileno())
            beside.replace(path)
        finally:
            beside.unlink(missing_ok=True)
    except OSError as error:
        raise Refused(f"cannot write {path}: {error.strerror}", "name another file with --out") from None


def _json_value(value: Any) -> Any:
    match value:
        case Decimal():
            return int(value) if value == value.to_integral_value() else float(value)
        case date():
            return value.isoformat()
        case _:
            raise TypeError(f"{type(value).__name__} has no JSON form")


def _json_escape(found: re.Match[str]) -> str:
    return json.dumps(found[0])[1:-1]


def _columns(text: str) -> int:
    """Terminal columns a cleaned text takes: wide East Asian characters two, combining marks none."""
    if text.isascii():
        return len(text)
    return sum(0 if unicodedata.combining(c) else 2 if unicodedata.east_asian_width(c) in "WF" else 1 for c in text)


def _terminal_width() -> int:
    if sys.stdout is not None and sys.stdout.isatty():
        return shutil.get_terminal_size().columns
    return sys.maxsize


def _folded(line: str, width: int) -> list[str]:
    """Fold a line between words."""
    if _columns(line) <= width:
        return [line]
    indent = line[: len(line) - len(line.lstrip())]
    return textwrap.wrap(line, max(width, 2 * _NARROWEST), subsequent_indent=f"{indent}{_GAP}", break_on_hyphens=False)


def _narrow(widths: list[int], available: int) -> None:
    """Take columns from the widest until the table fits, or nothing can give way any more."""
    excess = sum(widths) + len(_GAP) * (len(widths) - 1) - available
    while excess > 0 and max(widths) > _NARROWEST:
        widths[widths.index(max(widths))] -= 1
        excess -= 1


def _table_row(cells: Sequence[str], widths: Sequence[int], numeric: Sequence[bool]) -> list[str]:
    wrapped = [
        [cell] if _columns(cell) <= wide else textwrap.wrap(cell, wide)
        for cell, wide in zip(cells, widths, strict=True)
    ]
    return [
        _GAP.join(
            _pad(column[number] if number < len(column) else "", wide, to_right=is_number)
            for column, wide, is_number in zip(wrapped, widths, numeric, strict=True)
        )
        for number in range(max(len(column) for column in wrapped))
    ]


def _pad(text: str, wide: int, *, to_right: bool) -> str:
    gap = " " * (wide - _columns(text))
    return gap + text if to_right else text + gap
