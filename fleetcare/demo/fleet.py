"""The engines and machines of the Tallow Fen Drainage Board, and what their meters count.

Board, places, people and engines are invented; no maker's figures stand here. Days are days before the anchor day.
"""

from collections.abc import Mapping
from dataclasses import dataclass, field

from fleetcare.demo.use import Rhythm, lorry_hours, lorry_km, lorry_miles, standby, tractor, weed_boat, winter_pump

SHOP = "Tallow Fen Drainage Board"


@dataclass(frozen=True, slots=True)
class Meter:
    """A meter that came with an item: what it showed then, how it runs, and the days since its last round."""

    kind: str
    unit: str
    start: int
    rhythm: Rhythm
    seed: str
    unread: int = 0
    digits: str = ""


@dataclass(frozen=True, slots=True)
class Item:
    """An engine or machine: its tag, the days since it came, what its plate says, and its own meter."""

    tag: str
    came: int
    values: Mapping[str, object] = field(default_factory=dict)
    meter: Meter | None = None
    as_new: bool = False
    is_engine: bool = True


_SIX = {"cylinders": "6", "layout": "inline", "firing_order": "1-5-3-6-2-4", "fuel": "diesel", "adjuster": "screw"}
_FOUR = {"cylinders": "4", "layout": "inline", "firing_order": "1-3-4-2", "fuel": "diesel", "adjuster": "screw"}
_PUMP = {
    **_SIX,
    "duty": "land drainage pump",
    "bore": "114",
    "stroke": "135",
    "rod": "219",
    "compression_ratio": "17.5",
    "valves_per_cylinder": "2",
    "lash_intake": "0.20-0.30",
    "lash_exhaust": "0.40-0.50",
    "lash_set_intake": "0.25",
    "lash_set_exhaust": "0.45",
    "lash_when": "cold",
    "oil_grade": "15W-40",
    "sump": "22",
    "rated_rpm": "1500",
    "rated_kw": "118",
    "altitude": "2",
}
_SET = {**_FOUR, "duty": "standby", "bore": "108", "stroke": "130", "oil_grade": "15W-40", "rated_rpm": "1500"}
_LORRY = {**_SIX, "duty": "lorry", "bore": "106", "stroke": "127", "valves_per_cylinder": "4", "oil_grade": "10W-40"}
_TRACTOR = {**_FOUR, "duty": "tractor", "bore": "103", "stroke": "115", "oil_grade": "15W-40", "sump": "12"}
_BOAT = {**_FOUR, "duty": "weed cutting", "bore": "98", "stroke": "112", "oil_grade": "15W-40", "sump": "9"}

ITEMS = (
    Item("PH-1", 930, {"name": "Pump house", "site": "North Sluice"}, is_engine=False),
    Item(
        "PS-01",
        912,
        {**_PUMP, "name": "Pump diesel", "machine": "PH-1", "position": "bay 1"},
        Meter("hours", "h", 3210, winter_pump, "PS-01"),
    ),
    Item(
        "PS-02",
        912,
        {**_PUMP, "name": "Pump diesel", "machine": "PH-1", "position": "bay 2"},
        Meter("hours", "h", 0, winter_pump, "PS-02"),
        as_new=True,
    ),
    Item(
        "PS-03",
        898,
        {**_PUMP, "name": "Pump diesel", "site": "Crake Drove"},
        Meter("hours", "h", 5140, winter_pump, "PS-03"),
    ),
    Item(
        "PS-04",
        898,
        {**_PUMP, "name": "Relief pump diesel", "site": "Ousel Outfall"},
        Meter("hours", "h", 1875, winter_pump, "PS-04", unread=130),
    ),
    Item(
        "PS-05",
        870,
        {**_PUMP, "name": "Old pump diesel", "site": "Crake Drove"},
        Meter("hours", "h", 11640, winter_pump, "PS-05", unread=201),
    ),
    Item(
        "SB-01",
        884,
        {**_SET, "name": "Standby set of the workshop", "site": "Board Yard", "rated_kw": "64", "sump": "14"},
        Meter("hours", "h", 412, standby, "SB-01"),
    ),
    Item(
        "SB-02",
        884,
        {**_SET, "name": "Standby set of the outfall gates", "site": "Ousel Outfall", "rated_kw": "48", "sump": "12"},
        Meter("hours", "h", 9985, standby, "SB-02", digits="4.1"),
    ),
    Item(
        "LR-1",
        900,
        {"name": "Tipper lorry", "site": "Board Yard"},
        Meter("distance", "km", 61200, lorry_km, "LR-1", digits="6.0"),
        is_engine=False,
    ),
    Item(
        "LE-1",
        900,
        {**_LORRY, "name": "Engine of the tipper", "machine": "LR-1"},
        Meter("hours", "h", 1748, lorry_hours, "LR-1"),
    ),
    Item(
        "LR-3",
        860,
        {"name": "Old flatbed lorry, kept for parts", "site": "Board Yard"},
        Meter("distance", "mi", 143120, lorry_miles, "LR-3", unread=420),
        is_engine=False,
    ),
    Item("LE-2", 860, {**_LORRY, "name": "Engine of the crane lorry", "machine": "LR-3", "start_at": "143120mi"}),
    Item(
        "LR-2",
        430,
        {"name": "Crane lorry, bought without its engine", "site": "Board Yard"},
        Meter("distance", "km", 31200, lorry_km, "LR-2", unread=45, digits="6.0"),
        is_engine=False,
    ),
    Item(
        "TR-1",
        230,
        {**_TRACTOR, "name": "Tractor with flail mower", "site": "Board Yard", "rated_kw": "74"},
        Meter("hours", "h", 0, tractor, "TR-1", digits="5.1"),
        as_new=True,
    ),
    Item(
        "TR-2",
        905,
        {**_TRACTOR, "name": "Tractor with ditching bucket", "site": "Board Yard", "rated_kw": "66"},
        Meter("hours", "h", 4420, tractor, "TR-2", digits="5.1"),
    ),
    Item("WB-1", 905, {"name": "Weed-cutting boat Sedge Hen", "site": "Ousel Outfall"}, is_engine=False),
    Item(
        "WB-1P",
        905,
        {**_BOAT, "name": "Port main", "machine": "WB-1", "position": "port"},
        Meter("hours", "h", 2260, weed_boat, "WB-1"),
    ),
    Item(
        "WB-1S",
        56,
        {**_BOAT, "name": "Starboard main, reconditioned", "machine": "WB-1", "position": "starboard"},
        Meter("hours", "h", 0, weed_boat, "WB-1"),
        as_new=True,
    ),
)
