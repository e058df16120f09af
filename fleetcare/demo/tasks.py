"""What each engine and machine of the demo fleet needs, as a person would type it.

Intervals are invented defaults, save where a law is named; its text stands in the Code of Federal Regulations.
"""

from collections.abc import Mapping

Values = Mapping[str, object]

_HOT_OIL = "Hot oil: let it cool, wear gloves. Used oil harms skin and must not reach a drain."
_ROTATING = "Isolate and lock out the starter; keep clear of rotating parts."
_ZZZZ = "40 CFR 63 subpart ZZZZ, table 2d item 4 (emergency diesel at an area source)"

_OIL: Values = {
    "name": "Oil and filter",
    "work": "drain",
    "labour": "1.5h",
    "part": ["Oil filter:1"],
    "caution": _HOT_OIL,
}
LASH: Values = {"name": "Valve lash", "work": "lash", "labour": "3h", "caution": _ROTATING}

TASKS: Mapping[str, tuple[Values, ...]] = {
    "PS-01": (
        {**_OIL, "every": ["250h", "12mo"], "ahead": ["25h", "30d"]},
        {**LASH, "every": ["1000h"], "grace": ["10h"], "anchor": "from-due"},
        {"name": "Fuel filter", "every": ["500h"], "work": "filter", "part": ["Fuel filter:1"]},
        {"name": "Coolant", "every": ["24mo"], "work": "coolant", "labour": "2h"},
    ),
    "PS-02": (
        {"name": "250 h service", "every": ["250h"], "anchor": "on-grid", "work": "drain", "caution": _HOT_OIL},
        {"name": "500 h service", "every": ["500h"], "anchor": "on-grid", "covers": ["250 h service"]},
        {"name": "1000 h service", "every": ["1000h"], "anchor": "on-grid", "covers": ["500 h service"]},
    ),
    "PS-03": (
        {**_OIL, "every": ["250h"]},
        {"name": "Fuel filter", "every": ["500h"], "grace": ["25h"], "work": "filter", "part": ["Fuel filter:1"]},
        {"name": "Injector test", "on_condition": True, "work": "injectors", "labour": "4h"},
        {"name": "Timing gear", "every": ["6000h"], "last_done": ["4000h"], "work": "inspection"},
    ),
    "PS-04": (
        {**_OIL, "every": ["250h", "12mo"]},
        {"name": "Breather", "every": ["6mo"], "pause_while_laid_up": True, "work": "filter"},
        {"name": "Starter batteries", "every": ["3mo"], "work": "battery", "caution": "Battery gas can explode."},
    ),
    "PS-05": ({**_OIL, "every": ["250h"]},),
    "SB-01": (
        {"name": "Hoses and belts", "every": ["500h", "12mo"], "law": True, "source": _ZZZZ, "work": "inspection"},
        {**_OIL, "every": ["500h", "12mo"], "law": True, "source": _ZZZZ, "covers": ["Hoses and belts"]},
        {"name": "Air cleaner", "every": ["1000h", "12mo"], "law": True, "source": _ZZZZ, "work": "inspection"},
        {"name": "Exercise run", "once_each": "month", "work": "test run", "labour": "0.5h"},
        {"name": "Weekly check", "once_each": "week", "work": "inspection", "labour": "0.2h"},
    ),
    "SB-02": (
        {**_OIL, "every": ["300h", "12mo"]},
        {"name": "Exercise run", "once_each": "month", "work": "test run", "labour": "0.5h"},
        {
            "name": "Load test",
            "every": ["12mo"],
            "through_month_end": True,
            "insurer": True,
            "work": "test run",
            "source": "the insurer's letter on the outfall gates",
        },
        {"name": "Day tank cleaning", "every": ["24mo"], "work": "fuel system"},
    ),
    "LR-1": (
        {
            "name": "Roadworthiness test",
            "every": ["12mo"],
            "anchor": "from-due",
            "law": True,
            "source": "vehicle testing law of the country the lorry is registered in",
        },
    ),
    "LE-1": (
        {**_OIL, "every": ["10000km"], "part": ["Oil filter:1", "Sump plug washer:1"]},
        {"name": "Air filter", "every": ["20000km"], "work": "filter", "part": ["Air filter:1"]},
        {"name": "Full service", "every": ["40000km"], "labour": "6h", "covers": ["Oil and filter", "Air filter"]},
        {**LASH, "every": ["1500h"]},
    ),
    "LE-2": (
        {**_OIL, "every": ["10000km"]},
        {"name": "Air filter", "every": ["20000km"], "work": "filter", "part": ["Air filter:1"]},
    ),
    "LR-2": ({"name": "Chassis grease", "every": ["5000km"], "work": "lubrication"},),
    "TR-1": (
        {**_OIL, "every": ["250h"], "first": ["50h"]},
        {**LASH, "every": ["500h"], "first": ["50h"]},
        {"name": "Retighten wheel and drawbar bolts", "every": ["10h"], "once": True},
        {"name": "Hydraulic hoses", "every": ["6mo"], "work": "inspection", "caution": "Oil under pressure."},
    ),
    "TR-2": (
        {**_OIL, "every": ["250h"]},
        {"name": "Air filter", "every": ["250h"], "grace": ["20h"], "work": "filter", "part": ["Air filter:1"]},
        {
            "name": "Injector service",
            "every": ["400h", "3y"],
            "combine": "last",
            "not_later_than": "4y",
            "work": "injectors",
        },
    ),
    "WB-1": ({"name": "Slip, scrape and antifoul", "every": ["12mo"], "window": "15d", "labour": "16h"},),
    "WB-1P": (
        {**_OIL, "every": ["200h", "12mo"]},
        {"name": "Reduction gear oil", "every": ["12mo"], "work": "drain", "caution": _HOT_OIL},
        {"name": "Raw water impeller", "every": ["12mo"], "anchor": "from-due", "part": ["Impeller:1"]},
    ),
    "WB-1S": (
        {**_OIL, "every": ["200h", "12mo"], "first": ["50h"]},
        {"name": "Trial after overhaul", "every": ["2mo"], "once": True, "labour": "3h"},
    ),
}
