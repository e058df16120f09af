"""Tractors, diggers and small engines of the demo fleet."""

from decimal import Decimal

from fleetcare.demo.items import Ago, Item, Kept, Meter, Shown, Told
from fleetcare.demo.plans import Counted, Dated, Each, FromNew
from fleetcare.demo.plates import DIGGER, PETROL_TWIN, SMALL_DIESEL, SMALL_PETROL, TRACTOR
from fleetcare.demo.steps import Verb
from fleetcare.demo.tasks import AIR_FILTER, BELTS, BOOM, FUEL_FILTER, GREASE, HOSES, HYDRAULIC_OIL, LASH, OIL, WEEKLY
from fleetcare.demo.use import digger, now_and_then, scaled, tractor
from fleetcare.demo.wear import Gauged

_YARD = {"site": "Board Yard"}
_SMALL = scaled(now_and_then, 0.5)

_TRACTORS = (
    Item(
        "TR-1",
        230,
        {**TRACTOR, "name": "Tractor with flail mower", "rated_kw": "74", **_YARD},
        (Meter("hours", "h", 0, tractor, digits="5.1"),),
        tasks=(
            Kept({**OIL, "every": ["250h"], "first": ["50h"]}, FromNew(50, 250)),
            Kept({**LASH, "every": ["500h"], "first": ["50h"]}, FromNew(50, 500)),
            Kept({"name": "Retighten wheel and drawbar bolts", "every": ["10h"], "once": True}, FromNew(10, 0)),
            Kept({**HOSES, "every": ["6mo"]}),
        ),
        told=(
            Told(
                52,
                Verb.DEFER,
                {
                    "task": "Hydraulic hoses",
                    "until": [Ago(6)],
                    "why": "mowing first, hoses looked at daily",
                    "by": "Harbin",
                },
            ),
        ),
        gauged=Gauged("Valve lash", every=3),
        as_new=True,
    ),
    Item(
        "TR-2",
        1114,
        {**TRACTOR, "name": "Tractor with ditching bucket", "rated_kw": "66", **_YARD},
        (Meter("hours", "h", 4420, tractor, unread=12, digits="5.1", idle=(12, 0)),),
        tasks=(
            # Every 250 h, since the duty factor every 200 h.
            Kept({**OIL, "every": ["250h"]}, Counted(200, 30)),
            Kept({**AIR_FILTER, "every": ["250h"], "grace": ["20h"]}, Counted(200, -8)),
            Kept(
                {
                    "name": "Injector service",
                    "every": ["500h", "3y"],
                    "combine": "last",
                    "not_later_than": "4y",
                    "work": "injectors",
                },
                Dated(36, 495),
            ),
        ),
        told=(
            Told(150, Verb.FACTOR, {"kind": "hours", "factor": "0.8", "why": "dust on the banks"}),
            Told(165, Verb.LOG, {"top_up": "2L", "by": "Fenn"}),
            Told(75, Verb.LOG, {"top_up": "15L", "by": "Fenn"}, name="top-up typed wrong"),
            Told(74, Verb.CORRECT, {"top_up": "1.5L", "why": "point left out"}, about="top-up typed wrong"),
            Told(
                12,
                Verb.LOG,
                {"defect": "Oil pressure low at hot idle", "follow_up": True, "until": Ago(0), "by": "Fenn"},
            ),
            Told(12, Verb.STATUS, {"status": "stood down", "why": "oil pressure low at hot idle", "by": "Harbin"}),
        ),
    ),
    Item(
        "TR-3",
        1114,
        {**TRACTOR, "name": "Tractor with side-arm mower", "rated_kw": "81", **_YARD},
        (Meter("hours", "h", 2655, tractor, unread=2, digits="5.1"),),
        tasks=(
            Kept({**OIL, "every": ["250h"]}, Counted(250, 19)),
            Kept({**FUEL_FILTER, "every": ["500h"]}, Counted(500, 270)),
            Kept({**HYDRAULIC_OIL, "every": ["1000h"]}, Counted(1000, 530)),
            Kept({**HOSES, "every": ["6mo"]}, Dated(6, 71, most=4), note="two hoses chafed at the arm; sleeved"),
        ),
        told=(Told(182, Verb.LOG, {"repair": "Alternator renewed", "component": "alternator", "downtime": "4h"}),),
    ),
    Item(
        "TR-4",
        1114,
        {**TRACTOR, "name": "Yard tractor", "rated_kw": "41", **_YARD},
        (Meter("hours", "h", 9120, _SMALL, unread=8, digits="5.1"),),
        tasks=(
            Kept({**OIL, "every": ["150h", "12mo"]}, Dated(12, 22)),
            Kept({**LASH, "every": ["600h"]}),
        ),
    ),
)
_DIGGERS = (
    Item(
        "EX-1",
        1104,
        {**DIGGER, "name": "Long-reach excavator", "sump": "16", "rated_kw": "110", **_YARD},
        (Meter("hours", "h", 6240, digger, digits="5.1"),),
        tasks=(
            Kept({**OIL, "every": ["500h"]}, Counted(500, 240)),
            Kept({"name": "Hydraulic return filter", "every": ["1000h"], "work": "filter"}, Counted(1000, -6)),
            Kept({**AIR_FILTER, "every": ["500h"]}, Counted(500, 33), note="outer element only; inner one clean"),
            Kept(BOOM, Dated(12, 29)),
        ),
        told=(
            Told(
                0,
                Verb.DEFER,
                {
                    "task": "Hydraulic return filter",
                    "until": [Ago(-10)],
                    "why": "on the bank at Sallow; comes home next week",
                    "by": "Harbin",
                },
            ),
        ),
    ),
    Item(
        "EX-2",
        1104,
        {**DIGGER, "name": "Excavator on wide tracks", "sump": "14", "rated_kw": "72", "site": "Withy Lode"},
        (Meter("hours", "h", 3875, digger, unread=118, digits="5.1"),),
        tasks=(
            Kept({**OIL, "every": ["500h"]}, Counted(500, 8)),
            Kept({**HYDRAULIC_OIL, "every": ["2000h"]}, Counted(2000, 700)),
            Kept({**FUEL_FILTER, "every": ["500h"]}, Counted(500, 140)),
        ),
    ),
    Item(
        "LD-1",
        1104,
        {**DIGGER, "name": "Wheel loader", "sump": "15", "rated_kw": "96", **_YARD},
        (Meter("hours", "h", 7710, digger, unread=1, digits="5.1"),),
        tasks=(
            Kept({**OIL, "every": ["500h", "12mo"]}, Counted(500, 77)),
            Kept({"name": "Axle oils", "every": ["1500h"], "work": "drain", "labour": "3h"}, Counted(1500, 610)),
            Kept(WEEKLY, Each(0, most=4)),
        ),
    ),
    Item(
        "TH-1",
        820,
        {**DIGGER, "name": "Telehandler", "sump": "11", "rated_kw": "75", **_YARD},
        (Meter("hours", "h", 2144, scaled(digger, 0.6), unread=3, digits="5.1"),),
        tasks=(
            Kept({**OIL, "every": ["500h"]}, Counted(500, -61)),
            Kept(BOOM, Dated(12, 163)),
            Kept({**GREASE, "name": "Boom pads and grease", "every": ["100h"]}, Counted(100, 44, most=5)),
        ),
    ),
)
_SMALL_ENGINES = (
    Item(
        "CP-1",
        1098,
        {**SMALL_DIESEL, "name": "Towed compressor", "sump": "7", "rated_kw": "36", **_YARD},
        (Meter("hours", "h", 1322, now_and_then, unread=5, digits="5.1"),),
        tasks=(
            Kept({**OIL, "every": ["250h", "12mo"]}, Dated(12, 150)),
            Kept({"name": "Separator element", "every": ["500h", "24mo"], "work": "filter"}, Dated(24, 212)),
            Kept(
                {
                    "name": "Air receiver examination",
                    "every": ["24mo"],
                    "law": True,
                    "work": "inspection",
                    "source": "pressure vessel law",
                },
                Dated(24, 98),
            ),
        ),
        told=(
            Told(
                16,
                Verb.LOG,
                {"defect": "Hose reel will not lock", "follow_up": True, "until": Ago(-30), "by": "Quill"},
            ),
        ),
    ),
    Item(
        "MP-1",
        1098,
        {**SMALL_DIESEL, "name": "Mobile pump, six inch", "sump": "6", "rated_kw": "18", "site": "North Sluice"},
        (Meter("hours", "h", 2087, now_and_then, unread=7),),
        tasks=(
            Kept({**OIL, "every": ["200h", "12mo"]}, Dated(12, 45)),
            Kept({**BELTS, "every": ["200h"]}, Counted(200, 118)),
            Kept({"name": "Priming pump", "every": ["100h"], "work": "inspection"}, Counted(100, 72, most=2)),
        ),
        told=(
            Told(
                23,
                Verb.LOG,
                {"task": ["Priming pump"], "at": [Shown(23)], "by": "Fenn", "note": "diaphragm renewed"},
                name="day wrong",
            ),
            Told(21, Verb.CORRECT, {"on": Ago(22), "why": "done the day after"}, about="day wrong"),
        ),
    ),
    Item(
        "MP-2",
        1098,
        {**SMALL_DIESEL, "name": "Mobile pump, eight inch", "sump": "8", "rated_kw": "31", "site": "Crake Drove"},
        (Meter("hours", "h", 977, now_and_then, unread=30),),
        tasks=(
            Kept({**OIL, "every": ["200h", "12mo"]}, Dated(12, 118)),
            Kept({**LASH, "every": ["400h"]}, Counted(400, 170)),
        ),
        gauged=Gauged("Valve lash", every=4, pace=3),
        told=(Told(20, Verb.LOG, {"defect": "Fuel tap drips", "follow_up": True, "until": Ago(6), "by": "Fenn"}),),
    ),
    Item(
        "MP-3",
        470,
        {**SMALL_PETROL, "name": "Trash pump", "rated_kw": "5", **_YARD},
        (Meter("hours", "h", 0, _SMALL, unread=15),),
        schedule=("petrol-utility", "start"),
        tasks=(
            Kept("Oil", FromNew(20, 100)),
            Kept("Air cleaner", FromNew(50, 50)),
            Kept("Annual service", Dated(12, 130), note="pull cord renewed as well"),
        ),
        gauged=Gauged(every=2, pace=10),
        as_new=True,
    ),
    Item(
        "CH-1",
        700,
        {**SMALL_PETROL, "name": "Wood chipper", "rated_kw": "10", "sump": "1.1", **_YARD},
        (Meter("hours", "h", 141, _SMALL, unread=10),),
        tasks=(
            Kept({**OIL, "name": "Oil", "every": ["100h", "6mo"]}, Dated(6, -18, most=3)),
            Kept({"name": "Blades", "every": ["25h"], "work": "inspection"}, Counted(25, 9, most=6)),
        ),
        gauged=Gauged(every=3, pace=10, blades=Decimal("0.02")),
    ),
    Item(
        "MP-4",
        1088,
        {**PETROL_TWIN, "name": "Portable fire pump", "rated_kw": "16", "site": "Ousel Outfall"},
        (Meter("hours", "h", 204, _SMALL, unread=9),),
        tasks=(
            Kept({**OIL, "name": "Oil", "every": ["100h", "12mo"]}, Dated(12, 88)),
            Kept({**LASH, "every": ["200h", "36mo"]}, Dated(36, 250)),
        ),
        gauged=Gauged("Valve lash", every=4, pace=10),
    ),
    Item(
        "WL-1",
        1090,
        {**SMALL_DIESEL, "name": "Welding set", "sump": "5", "rated_kw": "14", **_YARD},
        (Meter("hours", "h", 3350, _SMALL, unread=14),),
        tasks=(
            Kept({**OIL, "every": ["150h", "12mo"]}, Dated(12, 240)),
            Kept({**AIR_FILTER, "every": ["300h"]}),
            Kept(
                {
                    "name": "Injector service",
                    "every": ["500h", "2y"],
                    "combine": "last",
                    "not_later_than": "3y",
                    "work": "injectors",
                },
                Dated(24, -30),
                note="spray even, all three open at the same pressure",
            ),
        ),
    ),
)

PLANT = (*_TRACTORS, *_DIGGERS, *_SMALL_ENGINES)
