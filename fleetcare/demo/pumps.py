"""The pump stations of the demo fleet: drainage diesels, hard at work in winter, kept turning in summer."""

from collections.abc import Mapping

from fleetcare.demo.items import Ago, Item, Kept, Meter, Shown, Told
from fleetcare.demo.measured import Measured, Tested, compression
from fleetcare.demo.oil import Sampled
from fleetcare.demo.plans import Counted, Dated, Each, FromNew, OnGrid
from fleetcare.demo.plates import BIG_PUMP, PUMP, SLOW_PUMP
from fleetcare.demo.steps import Verb
from fleetcare.demo.tasks import (
    AIR_FILTER,
    BATTERIES,
    COOLANT,
    FUEL_FILTER,
    HOT_OIL,
    INJECTORS,
    LASH,
    LIFTING,
    OIL,
)
from fleetcare.demo.use import scaled, winter_pump
from fleetcare.demo.wear import Gauged

_SERVICE: Mapping[str, object] = {"anchor": "on-grid", "work": "drain", "caution": HOT_OIL, "labour": "2h"}
_WEEDSCREEN: Mapping[str, object] = {
    "name": "Weedscreen and guards",
    "once_each": "quarter",
    "work": "inspection",
    "labour": "1h",
}

_NORTH_SLUICE = (
    Item(
        "PH-1",
        1120,
        {"name": "Pump house", "site": "North Sluice"},
        tasks=(
            Kept(
                {**LIFTING, "every": ["12mo"], "anchor": "from-due", "through_month_end": True},
                Dated(12, 36),
                note="beam and chain block passed; hook latch renewed",
            ),
        ),
        is_engine=False,
    ),
    Item(
        "PS-01",
        1120,
        {**PUMP, "name": "Pump diesel", "machine": "PH-1", "position": "bay 1"},
        (Meter("hours", "h", 3210, winter_pump, replaced=100),),
        measured=Measured(
            Sampled(is_first=True),
            (
                compression(1010, "2620 2610 2640 2610 2620 2600"),
                compression(700, "2610 2590 2640 2600 2620 2580"),
                compression(330, "2590 2580 2620 2570 2600 2560"),
                compression(25, "2570 2560 2600 2560 2580 2540"),
            ),
        ),
        tasks=(
            Kept(
                {**OIL, "every": ["250h", "12mo"], "ahead": ["25h", "30d"]},
                Counted(250, -12),
                note="no water in the old oil",
            ),
            Kept({**LASH, "every": ["1000h"], "grace": ["10h"], "anchor": "from-due"}, Counted(1000, 210)),
            Kept({**FUEL_FILTER, "every": ["500h"]}, Counted(500, 160), note="a cupful of water drained off the tank"),
            Kept({**COOLANT, "every": ["24mo"]}, Dated(24, 300)),
        ),
        told=(
            Told(
                310,
                Verb.LOG,
                {"repair": "Raw water pump seal renewed", "component": "raw water pump", "downtime": "5h"},
            ),
        ),
        gauged=Gauged("Valve lash", every=3, hot=1),
    ),
    Item(
        "PS-02",
        1120,
        {**PUMP, "name": "Pump diesel", "machine": "PH-1", "position": "bay 2"},
        (Meter("hours", "h", 0, winter_pump, unread=1),),
        # An injector that dribbles: fuel thins the oil.
        measured=Measured(Sampled(rises={"kv100": ("-1.9",)}, found={"fuel": ("4.4",)})),
        tasks=(
            Kept({"name": "250 h service", "every": ["250h"], **_SERVICE, "part": ["Oil filter:1"]}, OnGrid(250, 500)),
            Kept(
                {"name": "500 h service", "every": ["500h"], **_SERVICE, "covers": ["250 h service"]},
                OnGrid(500, 1000),
            ),
            Kept({"name": "1000 h service", "every": ["1000h"], **_SERVICE, "covers": ["500 h service"]}, OnGrid(1000)),
            Kept({**LASH, "every": ["1000h"], "needs_sheet": "lash", "last_done": [Ago(300)]}),
        ),
        gauged=Gauged(every=3, skipped=4),
        as_new=True,
    ),
)
_CRAKE_DROVE = (
    Item(
        "PH-2",
        1116,
        {"name": "Pump house", "site": "Crake Drove"},
        tasks=(Kept({**LIFTING, "once_each": "year"}, Each(12, most=3)),),
        is_engine=False,
    ),
    Item(
        "PS-03",
        1116,
        {**PUMP, "name": "Pump diesel", "machine": "PH-2", "position": "east"},
        (Meter("hours", "h", 5140, winter_pump),),
        measured=Measured(
            Sampled(),
            (
                compression(820, "2590 2600 2580 2570 2600 2600"),
                compression(560, "2580 2600 2570 2560 2590 2600"),
                compression(300, "2570 2590 2560 2330 2580 2590"),
                compression(29, "2550 2580 2550 1760 2560 2570", {4: "1830"}),
            ),
        ),
        tasks=(
            Kept({**OIL, "every": ["300h"]}, Counted(250, 14)),
            Kept({**FUEL_FILTER, "every": ["500h"], "grace": ["25h"]}, Counted(500, -9)),
            Kept({**LASH, "every": ["1000h"]}, Counted(1000, 190), note="exhaust of 4 had closed; set"),
            Kept(INJECTORS),
            Kept({"name": "Timing gear", "every": ["6000h"], "last_done": ["4000h"], "work": "inspection"}),
        ),
        told=(
            Told(190, Verb.EDIT, {"task": "Oil and filter", "every": ["250h"]}),
            Told(118, Verb.LOG, {"top_up": "2.5L", "by": "Quill"}),
            Told(44, Verb.LOG, {"top_up": "3L", "by": "Quill"}),
            Told(
                30,
                Verb.LOG,
                {
                    "task": ["Injector test"],
                    "defect": "White smoke on a cold start",
                    "follow_up": True,
                    "until": Ago(-20),
                },
            ),
        ),
        # A seat that burns away: white smoke, an injector not yet tested, and a gap that closes.
        gauged=Gauged("Valve lash", every=2, closing={"4E": 51}),
    ),
    Item(
        "PS-06",
        1116,
        {**PUMP, "name": "Pump diesel", "machine": "PH-2", "position": "west"},
        (Meter("hours", "h", 7725, winter_pump, unread=3),),
        schedule=("pump-diesel", Ago(290)),
        measured=Measured(Sampled(), (Tested(75, "spot", ("oil_pressure,,,340", "coolant,,,82")),)),
        tasks=(
            Kept("Oil and filter", Counted(250, 95)),
            Kept("Air cleaner", Counted(250, 95)),
            Kept("Fuel filters", Counted(500, 140, most=2)),
            Kept("Belts, hoses and coupling", Counted(500, 210, most=2)),
            Kept("Quarterly look-round", Dated(3, 41, most=3)),
            Kept("Tank water drained", Dated(3, 6, most=3), note="half a litre of water, no sludge"),
            Kept("Annual service", Dated(12, 75, most=2)),
            Kept("Valve lash", Counted(1000, 700, most=1)),
        ),
        gauged=Gauged("Valve lash", every=4),
        told=(Told(75, Verb.LOG, {"repair": "Fan belt renewed, frayed at the edge", "part": ["Fan belt:1"]}),),
    ),
)
_OUTFALL_AND_OLD = (
    Item(
        "PS-04",
        1108,
        {**PUMP, "name": "Relief pump diesel", "site": "Ousel Outfall"},
        (Meter("hours", "h", 1875, winter_pump, unread=130),),
        measured=Measured(Sampled()),
        tasks=(
            Kept({**OIL, "every": ["250h", "12mo"]}, Dated(12, -20)),
            Kept({"name": "Breather", "every": ["6mo"], "pause_while_laid_up": True, "work": "filter"}, Dated(6, -40)),
            Kept({**BATTERIES, "every": ["3mo"]}, Dated(3, -45, most=3)),
        ),
        told=(
            Told(
                130,
                Verb.STATUS,
                {"status": "laid up", "why": "the relief channel is dry until the bank is mended", "by": "Harbin"},
            ),
        ),
    ),
    Item(
        "PS-05",
        1100,
        {**SLOW_PUMP, "name": "Old pump diesel", "site": "Crake Drove"},
        (Meter("hours", "h", 31640, winter_pump, unread=151),),
        tasks=(Kept({**OIL, "every": ["200h"]}, Counted(200, 120)),),
        told=(
            Told(155, Verb.LOG, {"defect": "Main bearing knocks", "note": "not worth a repair", "by": "Fenn"}),
            Told(150, Verb.STATUS, {"status": "withdrawn", "why": "main bearing; not worth a repair", "by": "Harbin"}),
        ),
    ),
)
_HERN_CORNER = (
    Item(
        "PS-07",
        1116,
        {**BIG_PUMP, "name": "Main pump diesel", "site": "Hern Corner"},
        (
            Meter("hours", "h", 18204, winter_pump, unread=2),
            Meter("fuel", "L", 402310, scaled(winter_pump, 38, unit=10), unread=2, seed="PS-07", digits="7.0"),
        ),
        # Bearings that wear, of an engine with 18,000 h.
        measured=Measured(Sampled(rises={"Pb": ("14", "26"), "Sn": ("12", "15"), "Cu": ("22", "36")})),
        tasks=(
            Kept({**OIL, "every": ["500h", "12mo"]}, Counted(500, 130), note="filter cut open: no metal"),
            Kept(
                {"name": "Injector nozzles", "every": ["40000L"], "work": "injectors", "labour": "8h"},
                Counted(40000, 2400, of="PS-07 fuel"),
                note="two of six dribbled; all renewed",
            ),
            Kept({**LASH, "name": "Valve bridges and lash", "every": ["2000h"]}, Counted(2000, 640)),
            Kept(_WEEDSCREEN, Each(3, most=4)),
            Kept({"name": "Big-end bolts", "every": ["8000h"], "work": "inspection", "labour": "12h"}),
        ),
        told=(Told(96, Verb.LOG, {"top_up": "6L", "by": "Fenn"}),),
        gauged=Gauged("Valve bridges and lash", every=4),
    ),
)
_WITHY_LODE = (
    Item(
        "PS-08",
        1110,
        {**PUMP, "name": "Pump diesel", "site": "Withy Lode"},
        (Meter("hours", "h", 2480, winter_pump, unread=4),),
        tasks=(
            Kept({**OIL, "every": ["250h"], "grace": ["10h"]}, Counted(250, -6)),
            Kept({**AIR_FILTER, "every": ["500h", "24mo"]}, Counted(500, 310)),
            Kept(_WEEDSCREEN, Each(3, skipped=2, most=2)),
        ),
        told=(
            Told(
                4,
                Verb.DEFER,
                {
                    "task": "Oil and filter",
                    "until": [Shown(4, more=40)],
                    "why": "high water, cannot be stopped this week",
                    "by": "Harbin",
                },
            ),
        ),
    ),
    Item(
        "PS-09",
        1110,
        {**PUMP, "name": "Pump diesel", "site": "Sallow Bank"},
        (Meter("hours", "h", 4890, winter_pump, unread=5, idle=(180, 60)),),
        # Coolant finds its way into the oil.
        measured=Measured(
            Sampled(
                rises={"Na": ("52", "120"), "K": ("25", "75"), "Cu": ("18", "28")}, found={"water": ("0.15", "0.35")}
            )
        ),
        tasks=(
            Kept({**OIL, "every": ["250h"]}, Counted(250, 60)),
            Kept(
                {**COOLANT, "every": ["24mo"], "pause_while_laid_up": True},
                Dated(24, -50),
                note="antifreeze mixed for -25 C",
            ),
        ),
        told=(
            Told(180, Verb.STATUS, {"status": "laid up", "why": "pump impeller away for repair", "by": "Harbin"}),
            Told(60, Verb.STATUS, {"status": "in service", "why": "impeller back", "by": "Harbin"}),
        ),
    ),
    Item(
        "PS-10",
        420,
        {**PUMP, "name": "Pump diesel, second-hand", "site": "Sallow Bank", "adjuster": "hydraulic"},
        (Meter("hours", "h", 0, winter_pump, unread=5, digits="5.1"),),
        measured=Measured(Sampled()),
        tasks=(
            Kept({**OIL, "every": ["250h"], "first": ["50h"]}, FromNew(50, 250)),
            Kept({"name": "Retighten cylinder head", "every": ["50h"], "once": True, "labour": "2h"}, FromNew(50, 0)),
        ),
        as_new=True,
    ),
)

PUMPS = (*_NORTH_SLUICE, *_CRAKE_DROVE, *_OUTFALL_AND_OLD, *_HERN_CORNER, *_WITHY_LODE)
