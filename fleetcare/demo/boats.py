"""The boats of the demo fleet: weed cutters that work from May to September, and the survey launch."""

from fleetcare.demo.items import Ago, Item, Kept, Meter, Shown, Told
from fleetcare.demo.measured import Measured, Tested
from fleetcare.demo.oil import Followed
from fleetcare.demo.plans import Counted, Dated, Each, FromNew
from fleetcare.demo.plates import BOAT, OUTBOARD
from fleetcare.demo.steps import Verb
from fleetcare.demo.tasks import HOT_OIL, LASH, OIL
from fleetcare.demo.use import now_and_then, scaled, weed_boat
from fleetcare.demo.wear import Gauged

_SLIPPING = {"name": "Slip, scrape and antifoul", "every": ["12mo"], "window": "15d", "labour": "16h"}
_GEAR_OIL = {"name": "Reduction gear oil", "every": ["12mo"], "work": "gear-oil", "caution": HOT_OIL}
_IMPELLER = {"name": "Raw water impeller", "every": ["12mo"], "anchor": "from-due", "part": ["Impeller:1"]}

BOATS = (
    Item(
        "WB-1",
        1118,
        {"name": "Weed-cutting boat Sedge Hen", "site": "Ousel Outfall"},
        tasks=(
            Kept(_SLIPPING, Dated(12, 5), note="three anodes of four gone"),
            Kept(
                {"name": "Fire extinguishers", "once_each": "year", "insurer": True, "work": "inspection"},
                Each(12, most=3),
            ),
        ),
        is_engine=False,
    ),
    Item(
        "WB-1P",
        1118,
        {**BOAT, "name": "Port main", "sump": "9", "machine": "WB-1", "position": "port"},
        (Meter("hours", "h", 2260, weed_boat, seed="WB-1"),),
        # Gas oil with much sulphur was bunkered: it uses up the base number before the oil is due.
        measured=Measured(
            Followed(20, gains={"tbn": "-4.0"}, topped_up=(10, 65), is_stated=False),
            (Tested(41, "spot", ("oil_pressure,,,330", "coolant,,,79")),),
        ),
        tasks=(
            Kept({**OIL, "every": ["200h", "12mo"]}, Counted(200, 60)),
            Kept(_GEAR_OIL, Dated(12, -25)),
            Kept(_IMPELLER, Dated(12, 90), note="two vanes cracked"),
        ),
        told=(
            Told(390, Verb.LOG, {"top_up": "1.5L", "by": "Quill"}),
            Told(
                40,
                Verb.LOG,
                {"task": ["Raw water impeller"], "at": [Shown(40)], "by": "Quill"},
                name="wrong engine",
            ),
            Told(38, Verb.CORRECT, {"void": True, "why": "it was the starboard engine"}, about="wrong engine"),
            Told(
                10,
                Verb.LOG,
                {
                    "task": ["Reduction gear oil"],
                    "part_done": True,
                    "note": "drained; the right oil is on order",
                    "by": "Fenn",
                },
            ),
        ),
    ),
    Item(
        "WB-1S",
        56,
        {**BOAT, "name": "Starboard main, reconditioned", "sump": "9", "machine": "WB-1", "position": "starboard"},
        (Meter("hours", "h", 0, weed_boat, seed="WB-1"),),
        tasks=(
            Kept({**OIL, "every": ["200h", "12mo"], "first": ["50h"]}, FromNew(50, 200)),
            Kept({"name": "Trial after overhaul", "every": ["2mo"], "once": True, "labour": "3h"}),
        ),
        as_new=True,
    ),
    Item(
        "WB-2",
        1118,
        {"name": "Weed-cutting boat Reed Rail", "site": "Withy Lode"},
        tasks=(Kept(_SLIPPING, Dated(12, 170)),),
        is_engine=False,
    ),
    Item(
        "WB-2M",
        1118,
        {**BOAT, "name": "Main", "sump": "11", "machine": "WB-2", "position": "centre"},
        (Meter("hours", "h", 5015, weed_boat, unread=6),),
        schedule=("workboat-diesel", Ago(230)),
        tasks=(
            Kept("Oil and filter", Counted(250, 115)),
            Kept("Anodes", Dated(6, 44, most=2)),
            Kept("Weekly look-round", Each(0, most=3)),
        ),
    ),
    Item(
        "LN-1",
        760,
        {**OUTBOARD, "name": "Outboard of the survey launch", "site": "Ousel Outfall", "rated_kw": "44"},
        (Meter("hours", "h", 318, scaled(now_and_then, 0.4), unread=11),),
        tasks=(
            Kept({**OIL, "every": ["100h", "12mo"]}, Dated(12, 64)),
            Kept(
                {**LASH, "every": ["300h"]}, Counted(300, 262, most=1), note="shims changed where a gap was near an end"
            ),
            Kept(
                {"name": "Spark plugs", "every": ["100h"], "work": "ignition", "part": ["Spark plug:4"]},
                Counted(100, 55, most=2),
            ),
        ),
        gauged=Gauged("Valve lash", every=4, pace=6),
    ),
)
