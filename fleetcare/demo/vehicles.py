"""The lorries, vans and pick-up of the demo fleet. A lorry's odometer counts for the engine in it."""

from fleetcare.demo.items import Ago, Item, Kept, Meter, Shown, Told
from fleetcare.demo.measured import Measured, Pressed, compression
from fleetcare.demo.oil import Sampled
from fleetcare.demo.plans import Counted, Dated, Each
from fleetcare.demo.plates import LORRY, PETROL_VAN, VAN
from fleetcare.demo.steps import Verb
from fleetcare.demo.tasks import AIR_FILTER, BOOM, COMPRESSION, FUEL_FILTER, GREASE, LASH, OIL, ROAD_TEST
from fleetcare.demo.use import lorry_hours, lorry_km, lorry_miles, scaled
from fleetcare.demo.wear import Gauged

_YARD = {"site": "Board Yard"}
_ENGINE_MOVED = 110

_TIPPER = (
    Item(
        "LR-1",
        1112,
        {"name": "Tipper lorry", **_YARD},
        (Meter("distance", "km", 61200, lorry_km, digits="6.0"),),
        tasks=(
            Kept(ROAD_TEST, Dated(12, 12), note="passed; one brake lining to be watched"),
            Kept({**GREASE, "every": ["5000km", "3mo"]}, Dated(3, 33, most=4)),
        ),
        is_engine=False,
    ),
    Item(
        "LE-1",
        1112,
        {**LORRY, "name": "Engine of the tipper", "machine": "LR-1"},
        (Meter("hours", "h", 1748, lorry_hours, seed="LR-1"),),
        # A valve of 4 that no longer seats well: it falls further behind the others with each test.
        measured=Measured(
            pressed=Pressed("Compression test", (2820, 2800, 2830, 2810, 2790, 2800), falling={4: (2220, 360)})
        ),
        tasks=(
            Kept(
                {**OIL, "every": ["15000km"], "part": ["Oil filter:1", "Sump plug washer:1"]},
                Counted(15000, -300, of="LR-1"),
            ),
            Kept({**AIR_FILTER, "every": ["30000km"]}, Counted(30000, 900, of="LR-1")),
            Kept(
                {
                    "name": "Full service",
                    "every": ["60000km"],
                    "labour": "6h",
                    "covers": ["Oil and filter", "Air filter"],
                },
                Counted(60000, 21000, of="LR-1"),
            ),
            Kept({**LASH, "every": ["1500h"]}, Counted(1500, 400)),
            Kept({**COMPRESSION, "every": ["400h"]}, Counted(400, 250)),
        ),
        told=(
            Told(140, Verb.LOG, {"top_up": "1L", "by": "Quill"}),
            Told(61, Verb.LOG, {"top_up": "1.5L", "by": "Quill"}),
            Told(
                9,
                Verb.DEFER,
                {
                    "task": "Oil and filter",
                    "until": [Shown(0, more=700, of="LR-1")],
                    "why": "filters on order",
                    "by": "Harbin",
                },
            ),
        ),
        # The exhausts of 5 and 6 were set by the figure of the intakes.
        gauged=Gauged("Valve lash", every=4, badly_set={"5E1": "0.35", "5E2": "0.36", "6E1": "0.35", "6E2": "0.34"}),
    ),
)
_CRANE_LORRY = (
    Item(
        "LR-3",
        1112,
        {"name": "Old crane lorry, kept for parts", **_YARD},
        (Meter("distance", "mi", 143120, lorry_miles, unread=_ENGINE_MOVED, idle=(_ENGINE_MOVED, 0)),),
        told=(Told(_ENGINE_MOVED, Verb.READING, {"value": Shown(_ENGINE_MOVED), "note": "engine out", "by": "Fenn"}),),
        is_engine=False,
    ),
    Item(
        "LR-2",
        _ENGINE_MOVED + 12,
        {"name": "Crane lorry, bought without its engine", **_YARD},
        (Meter("distance", "km", 31200, lorry_km, digits="6.0", idle=(_ENGINE_MOVED + 12, _ENGINE_MOVED)),),
        tasks=(
            Kept({**GREASE, "every": ["5000km"]}, Counted(5000, 1700)),
            Kept(BOOM, Dated(12, 280)),
        ),
        is_engine=False,
    ),
    Item(
        "LE-2",
        1112,
        {**LORRY, "name": "Engine of the crane lorry", "machine": "LR-3", "start_at": ["143120mi"]},
        tasks=(
            Kept({**OIL, "every": ["7500km"]}, Counted(7500, 2600, of="LR-2", most=1)),
            Kept({**AIR_FILTER, "every": ["20000km"]}),
        ),
        told=(
            Told(
                _ENGINE_MOVED + 4,
                Verb.LOG,
                {"repair": "Pistons and rings renewed before the move", "component": "pistons", "downtime": "60h"},
            ),
            Told(_ENGINE_MOVED, Verb.FIT, {"machine": "LR-2"}),
            Told(
                _ENGINE_MOVED,
                Verb.LOG,
                {
                    "task": ["Air filter"],
                    "at": [Shown(_ENGINE_MOVED, of="LR-2")],
                    "note": "new with the move",
                    "by": "Fenn",
                },
            ),
        ),
    ),
)
_FLATBED = (
    Item(
        "LR-4",
        1108,
        {"name": "Flatbed lorry with loading arm", **_YARD},
        (Meter("distance", "mi", 88410, lorry_miles, unread=1, digits="6.0"),),
        schedule=("lorry", Ago(230)),
        tasks=(
            Kept(ROAD_TEST, Dated(12, 104)),
            Kept("Brake inspection", Dated(3, -4, most=3), note="rear drums relined"),
            Kept("Chassis grease", Dated(3, 28, most=3)),
            Kept("Weekly look-round", Each(0, most=3)),
            Kept("Batteries", Dated(6, 70, most=1)),
        ),
        is_engine=False,
    ),
    Item(
        "LE-3",
        1108,
        {**LORRY, "name": "Engine of the flatbed", "machine": "LR-4"},
        schedule=("lorry-diesel", Ago(260)),
        # Long drains: the base number is spent.
        measured=Measured(Sampled(3, found={"tbn": ("6.8", "5.5", "4.2")}, is_first=True)),
        tasks=(Kept("Oil and filter", Counted(12400, 2600, of="LR-4")),),
        gauged=Gauged(every=6),
        told=(
            Told(
                120,
                Verb.LOG,
                {"defect": "Oil weeps at the rear seal", "follow_up": True, "until": Ago(90), "by": "Fenn"},
            ),
            Told(97, Verb.LOG, {"task": ["Oil weeps at the rear seal"], "note": "breather was blocked", "by": "Fenn"}),
        ),
    ),
)
_TANKER = (
    Item(
        "LR-5",
        1108,
        {"name": "Vacuum tanker", **_YARD},
        (Meter("distance", "km", 20480, scaled(lorry_km, 0.4, unit=10), unread=4, digits="6.0"),),
        tasks=(
            Kept(ROAD_TEST, Dated(12, 187)),
            Kept(
                {
                    "name": "Tank and hose pressure test",
                    "every": ["24mo"],
                    "insurer": True,
                    "source": "the insurer's letter on pressure vessels",
                    "work": "inspection",
                },
                Dated(24, 320),
            ),
        ),
        is_engine=False,
    ),
    Item(
        "LE-4",
        1108,
        {**LORRY, "name": "Engine of the tanker; drives the vacuum pump", "machine": "LR-5"},
        (Meter("hours", "h", 905, scaled(lorry_hours, 0.9), unread=4, seed="LR-5"),),
        # The head gasket between cylinders 3 and 4.
        measured=Measured(
            tested=(compression(500, "2790 2800 2780 2810 2800 2790"), compression(18, "2780 2790 1890 1930 2790 2780"))
        ),
        tasks=(
            Kept({**OIL, "every": ["500h", "15000km", "12mo"]}, Counted(500, 36)),
            Kept({**FUEL_FILTER, "every": ["1000h"]}, Counted(1000, 420)),
            Kept({**LASH, "every": ["2000h"]}),
        ),
        told=(
            Told(
                0,
                Verb.ANSWER,
                {
                    "cause": "head gasket between two cylinders",
                    "follow_up": True,
                    "why": "leak-down first, then the head comes off",
                    "by": "Harbin",
                },
            ),
        ),
    ),
)
_LIGHT = (
    Item(
        "VN-1",
        1100,
        {**VAN, "name": "Fitters' van", "sump": "6", **_YARD},
        (Meter("distance", "km", 74310, scaled(lorry_km, 0.8, unit=10), unread=1, digits="6.0"),),
        tasks=(
            Kept({**OIL, "every": ["20000km", "12mo"]}, Counted(20000, 1300)),
            Kept({"name": "Timing belt", "every": ["120000km", "6y"], "work": "belt", "labour": "5h"}),
            Kept(ROAD_TEST, Dated(12, 66)),
        ),
    ),
    Item(
        "VN-2",
        610,
        {**PETROL_VAN, "name": "Surveyors' van", **_YARD},
        (Meter("distance", "mi", 12, scaled(lorry_miles, 0.6, unit=10), unread=118, digits="6.0"),),
        tasks=(
            Kept({**OIL, "every": ["12000mi", "24mo"]}, Counted(12000, 900, most=2)),
            Kept({"name": "Spark plugs", "every": ["36000mi"], "work": "ignition", "part": ["Spark plug:4"]}),
        ),
        as_new=True,
    ),
    Item(
        "PK-1",
        1100,
        {**VAN, "name": "Pick-up of the bank inspector", "sump": "7", "site": "Withy Lode"},
        (Meter("distance", "km", 132870, scaled(lorry_km, 0.5, unit=10), unread=12, digits="6.0"),),
        tasks=(
            Kept({**OIL, "every": ["12000km"]}, Counted(12000, -300)),
            Kept(
                {**AIR_FILTER, "every": ["24000km"]}, Counted(24000, 11900), note="full of chaff, more often in August"
            ),
            Kept(ROAD_TEST, Dated(12, 251)),
        ),
        told=(
            Told(
                0,
                Verb.DEFER,
                {
                    "task": "Oil and filter",
                    "until": [Ago(-12), Shown(0, more=900)],
                    "why": "bank inspections every day this fortnight",
                    "by": "Harbin",
                },
            ),
        ),
    ),
)

VEHICLES = (*_TIPPER, *_CRANE_LORRY, *_FLATBED, *_TANKER, *_LIGHT)
