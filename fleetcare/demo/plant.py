"""Tractors and diggers of the demo fleet."""

from fleetcare.demo.items import Ago, Item, Kept, Meter, Told
from fleetcare.demo.measured import Measured, Tested
from fleetcare.demo.oil import Followed, Sampled
from fleetcare.demo.plans import Counted, Dated, Each, FromNew
from fleetcare.demo.plates import DIGGER, TRACTOR
from fleetcare.demo.small import SMALL_ENGINES
from fleetcare.demo.steps import Verb
from fleetcare.demo.tasks import AIR_FILTER, BOOM, FUEL_FILTER, GREASE, HOSES, HYDRAULIC_OIL, LASH, OIL, WEEKLY
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
        # It was stood down for this: little oil pressure.
        measured=Measured(tested=(Tested(12, "spot", ("oil_pressure,,,88", "coolant,,,91")),)),
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
        # A sound oil, changed by the book rather than by what it is like.
        measured=Measured(
            Followed(50, fills=2, topped_up=(70, 160)),
            tested=(
                Tested(182, "spot", ("oil_pressure,,,310", "coolant,,,84")),
                Tested(44, "spot", ("oil_pressure,,,300", "coolant,,,86")),
            ),
        ),
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
        # Dust gets past the air filter.
        measured=Measured(
            Sampled(1, rises={"Si": ("18", "40", "76"), "Al": ("7", "11", "18"), "Fe": ("18", "32", "55")})
        ),
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
        measured=Measured(Sampled(1)),
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
        # Rings and liners wear.
        measured=Measured(
            Sampled(1, rises={"Fe": ("30", "62", "95"), "Cr": ("7", "10", "14"), "Al": ("7", "12", "18")})
        ),
        tasks=(
            Kept({**OIL, "every": ["500h", "12mo"]}, Counted(500, 77)),
            Kept({"name": "Axle oils", "every": ["1500h"], "work": "gear-oil", "labour": "3h"}, Counted(1500, 610)),
            Kept(WEEKLY, Each(0, most=4)),
        ),
    ),
    Item(
        "TH-1",
        820,
        {**DIGGER, "name": "Telehandler", "sump": "11", "rated_kw": "75", **_YARD},
        (Meter("hours", "h", 2144, scaled(digger, 0.6), unread=3, digits="5.1"),),
        measured=Measured(Sampled(1)),
        tasks=(
            Kept({**OIL, "every": ["500h"]}, Counted(500, -61)),
            Kept(BOOM, Dated(12, 163)),
            Kept({**GREASE, "name": "Boom pads and grease", "every": ["100h"]}, Counted(100, 44, most=5)),
        ),
    ),
)
PLANT = (*_TRACTORS, *_DIGGERS, *SMALL_ENGINES)
