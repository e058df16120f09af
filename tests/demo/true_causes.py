"""What really is the matter with engines of the demo fleet, stated here and not read off the program."""

from datetime import date
from pathlib import Path
from typing import NamedTuple

from fleetcare.context import Context
from fleetcare.operations.finding_rows import finding_rows
from fleetcare.rules.finding_life import FindingState
from fleetcare.rules.finding_record import FindingRecord

ENGINE = "the engine"


class Cause(NamedTuple):
    """What ails an engine, where, and whether that is an alarm."""

    cause: str
    at: str
    is_alarm: bool


TRUE = {
    "PS-02": Cause("leaking injector", ENGINE, is_alarm=False),  # fuel in the oil, and thin with it
    "PS-03": Cause("closing exhaust valve", "cylinder 4", is_alarm=True),  # its seat burns away, see test_demo_lash
    "PS-07": Cause("bearing wear", ENGINE, is_alarm=True),  # lead, tin and copper
    "PS-09": Cause("coolant in the oil", ENGINE, is_alarm=True),  # sodium, potassium, copper and water
    "EX-1": Cause("dirt", ENGINE, is_alarm=True),  # silicon to aluminium as in dust, and iron
    "LD-1": Cause("ring, liner and piston wear", ENGINE, is_alarm=True),  # iron, chromium, aluminium
    "LE-3": Cause("spent base number", ENGINE, is_alarm=False),  # long drains
    "LE-4": Cause("head gasket between two cylinders", "cylinders 3 and 4", is_alarm=True),
    "LE-1": Cause("low compression", "cylinder 4", is_alarm=False),  # a seat; its limit is still ahead, see true_ahead
    "MP-1": Cause("worn rings or bore", "cylinder 2", is_alarm=True),  # oil raises it
    "CP-1": Cause("worn rings or bore", "cylinder 2", is_alarm=True),  # air heard in the crankcase
    "SB-01": Cause("run below its load", ENGINE, is_alarm=False),
    "SB-02": Cause("run too short", ENGINE, is_alarm=False),
    "SB-04": Cause("yearly hours for testing nearly used up", ENGINE, is_alarm=False),
    "TR-2": Cause("low oil pressure", ENGINE, is_alarm=False),  # what it was stood down for
    "MP-4": Cause("valves found out and set", ENGINE, is_alarm=False),  # one, a hundredth under its range
}

HEALTHY = ("PS-01", "PS-04", "PS-06", "PS-10", "EX-2", "TH-1", "TR-3", "WB-1P", "SB-06")
"""Engines on which more than the lash was measured, and nothing is wrong."""

_OVER = {FindingState.CLEARED, FindingState.JOINED, FindingState.WITHDRAWN}


_AHEAD = {"lash-closing", "lash-opening"}


def standing(path: Path, day: date) -> dict[str, list[Cause]]:
    """What stands on the engines of a file on a day, answered or not, but gaps inside their range that come to its end."""
    rows = [row for row in _rows(path, day) if row.rule not in _AHEAD]
    return {
        tag: [Cause(row.cause, row.subject, row.severity == "alarm") for row in rows if row.engine == tag]
        for tag in {row.engine for row in rows}
    }


def ahead(path: Path, day: date) -> list[tuple[str, str]]:
    """The gaps of a file that come to an end of their range soon, as it says on a day: the engine and the point of each."""
    return [(row.engine, row.subject) for row in _rows(path, day) if row.rule in _AHEAD]


def _rows(path: Path, day: date) -> list[FindingRecord]:
    with Context(str(path), day).read() as connection:
        return [row for row in finding_rows(connection, day) if row.state not in _OVER]


def has_proved(day: date) -> bool:
    """Whether the nine Thursdays on which SB-04 is proved are over in the year of a day."""
    return day.timetuple().tm_yday > 63
