"""`measure KIND --help`: how each kind of sheet is written."""

from collections.abc import Callable

import pytest

from tests.cli.conftest import Runner


@pytest.mark.parametrize(
    ("kind", "parts"),
    [
        ("compression", ("pressure", "dry or wet", "kgf/cm2")),
        ("leakdown", ("supply and held", "crankcase")),
        ("run", ("purpose", "36-month")),
        ("spot", ("cranking_volts",)),
        ("oil", ("iso4406", "<1 or ND", "fresh oil", "%")),
    ],
)
def test_help_says_how_a_sheet_is_written(
    open_yard: Callable[[str], Runner], kind: str, parts: tuple[str, ...]
) -> None:
    said = " ".join(open_yard("")("measure", kind, "--help").out.split())
    for part in (*parts, "quantity,point,phase,value,unit", "- for standard input"):
        assert part in said
