"""Tasks that many engines of the demo fleet share, as a person would type them. Intervals are invented defaults."""

from collections.abc import Mapping

Values = Mapping[str, object]

HOT_OIL = "Hot oil: let it cool, wear gloves. Used oil harms skin and must not reach a drain."
ROTATING = "Isolate and lock out the starter; keep clear of rotating parts."
UNDER_PRESSURE = "Let the pressure off first; never feel for a leak by hand."
_CRANKING = "Fuel off before cranking; crank from a switch at arm's length, clear of rotating parts."
_HOT_COOLANT = "Never open the cap hot."
_BATTERY = "Battery gas can explode: no flame, eye protection."

OIL: Values = {
    "name": "Oil and filter",
    "work": "drain",
    "labour": "1.5h",
    "part": ["Oil filter:1"],
    "caution": HOT_OIL,
}
LASH: Values = {
    "name": "Valve lash",
    "work": "lash",
    "needs_sheet": "lash",
    "labour": "3h",
    "caution": ROTATING,
}
COMPRESSION: Values = {
    "name": "Compression test",
    "work": "compression",
    "needs_sheet": "compression",
    "labour": "2h",
    "caution": _CRANKING,
}
FUEL_FILTER: Values = {
    "name": "Fuel filter",
    "work": "filter",
    "labour": "0.5h",
    "part": ["Fuel filter:1"],
    "caution": UNDER_PRESSURE,
}
AIR_FILTER: Values = {"name": "Air filter", "work": "filter", "labour": "0.3h", "part": ["Air filter:1"]}
COOLANT: Values = {"name": "Coolant", "work": "coolant", "labour": "2h", "caution": _HOT_COOLANT}
BATTERIES: Values = {"name": "Starter batteries", "work": "battery", "labour": "0.5h", "caution": _BATTERY}
BELTS: Values = {"name": "Belts and hoses", "work": "inspection", "labour": "0.5h", "caution": ROTATING}
EXERCISE: Values = {"name": "Exercise run", "once_each": "month", "work": "test run", "labour": "0.5h"}
WEEKLY: Values = {"name": "Weekly check", "once_each": "week", "work": "inspection", "labour": "0.2h"}
GREASE: Values = {"name": "Chassis grease", "work": "lubrication", "labour": "1h"}
HYDRAULIC_OIL: Values = {
    "name": "Hydraulic oil and filters",
    "work": "hydraulic-oil",
    "labour": "3h",
    "caution": UNDER_PRESSURE,
}
HOSES: Values = {"name": "Hydraulic hoses", "work": "inspection", "labour": "0.5h", "caution": UNDER_PRESSURE}
INJECTORS: Values = {"name": "Injector test", "on_condition": True, "work": "injectors", "labour": "4h"}
ROAD_TEST: Values = {
    "name": "Roadworthiness test",
    "every": ["12mo"],
    "anchor": "from-due",
    "law": True,
    "work": "inspection",
    "labour": "4h",
    "source": "vehicle testing law of the country the vehicle is registered in",
}
LIFTING: Values = {
    "name": "Lifting gear examination",
    "work": "inspection",
    "insurer": True,
    "source": "the insurer's letter on lifting gear",
}
BOOM: Values = {**LIFTING, "name": "Lifting hook and boom examination", "every": ["12mo"]}
