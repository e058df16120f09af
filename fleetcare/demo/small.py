"""Small engines of the demo fleet: compressor, mobile pumps, chipper, welding set."""

from decimal import Decimal

from fleetcare.demo.items import Ago, Item, Kept, Meter, Shown, Told
from fleetcare.demo.measured import Measured, Tested, compression
from fleetcare.demo.plans import Counted, Dated, FromNew
from fleetcare.demo.plates import PETROL_TWIN, SMALL_DIESEL, SMALL_PETROL
from fleetcare.demo.steps import Verb
from fleetcare.demo.tasks import AIR_FILTER, BELTS, LASH, OIL
from fleetcare.demo.use import now_and_then, scaled
from fleetcare.demo.wear import Gauged

_YARD = {"site": "Board Yard"}
_SMALL = scaled(now_and_then, 0.5)

SMALL_ENGINES = (
    Item(
        "CP-1",
        1098,
        {**SMALL_DIESEL, "name": "Towed compressor", "sump": "7", "rated_kw": "36", **_YARD},
        (Meter("hours", "h", 1322, now_and_then, unread=5, digits="5.1"),),
        # Air past the rings of cylinder 2.
        measured=Measured(
            tested=(
                Tested(360, "leakdown", ("leak,1,,6", "leak,2,,9", "leak,3,,7"), "T1"),
                Tested(24, "leakdown", ("leak,1,,7", "leak,2,,31", "leak,3,,8", "heard,2,,crankcase"), "T1"),
            )
        ),
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
        # Worn rings in cylinder 2: low, and oil raises it.
        measured=Measured(tested=(compression(400, "2710 2690 2720"), compression(37, "2690 1840 2700", {2: "2240"}))),
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
