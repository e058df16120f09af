"""Text in terminal columns: always literal, never markup, and measured as the terminal shows it."""

from collections.abc import Iterator

from rich.cells import cell_len, chop_cells, set_cell_size

from fleetcare.domain.printable import clean

CUT = "…"
_GAP = "  "

Label = tuple[str, str]


def columns_of(text: str) -> int:
    """Give how many terminal columns the text takes when shown."""
    return cell_len(clean(text))


def fit(text: str, width: int, *, to_right: bool = False) -> str:
    """Give the text exactly `width` columns wide, cut with … where it is too long; control characters show."""
    text = clean(text)
    wide = cell_len(text)
    if wide <= width:
        gap = " " * (width - wide)
        return gap + text if to_right else text + gap
    return set_cell_size(text, width - 1) + CUT if width > 0 else ""


def wrap(text: str, width: int, *, most: int | None = None) -> list[str]:
    """Break the text at spaces into lines of at most `width` columns; what is left after `most` lines is cut with …."""
    lines = list(_broken(clean(text), max(width, 1)))
    if most is not None and len(lines) > most:
        lines = [*lines[: most - 1], fit(f"{lines[most - 1]} {CUT}", width).rstrip()]
    return lines


def wrap_labels(labels: list[Label], width: int) -> list[Label]:
    """Break labelled sentences into lines: the label stands on the first, the text hangs beside it.

    Labels take the width of the longest, up to a third of `width`. Lines come out padded and ready to print.
    """
    beside = min(max((columns_of(label) for label, _ in labels), default=0), width // 3)
    lines = []
    for label, text in labels:
        for number, line in enumerate(wrap(text, width - beside - len(_GAP))):
            lines.append((fit(label if number == 0 else "", beside) + _GAP, line))
    return lines


def _broken(text: str, width: int) -> Iterator[str]:
    line = ""
    for word in text.split(" "):
        if cell_len(line) + 1 + cell_len(word) <= width and line:
            line = f"{line} {word}"
            continue
        if line:
            yield line
        *full, line = chop_cells(word, width) or [""]
        yield from full
    yield line
