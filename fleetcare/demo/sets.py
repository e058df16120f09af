"""The standby sets of the demo fleet: run when the mains fails and once a month besides."""

from fleetcare.demo.items import Ago, Item, Kept, Meter, Shown, Told
from fleetcare.demo.measured import Measured, Ran
from fleetcare.demo.plans import Counted, Dated, Each
from fleetcare.demo.plates import GAS_SET, SET, V_SET
from fleetcare.demo.steps import Verb
from fleetcare.demo.tasks import BATTERIES, BELTS, COOLANT, EXERCISE, OIL, WEEKLY
from fleetcare.demo.use import now_and_then, proved, self_test, standby
from fleetcare.demo.wear import Gauged

_LOAD_TEST = {
    "name": "Load test",
    "every": ["12mo"],
    "through_month_end": True,
    "insurer": True,
    "work": "test run",
    "labour": "3h",
    "source": "the insurer's letter on the outfall gates",
}

SETS = (
    Item(
        "SB-01",
        1105,
        {**SET, "name": "Standby set of the workshop", "site": "Board Yard", "rated_kw": "64", "sump": "14"},
        (Meter("hours", "h", 412, standby, unread=2, exercise=Each(1)),),
        schedule=("zzzz-2d-4", Ago(349)),
        # Run each month without enough to do.
        measured=Measured(ran=Ran(8, 35, "15")),
        tasks=(
            Kept("Oil and filter (ZZZZ)", Dated(12, 16)),
            Kept("Air cleaner (ZZZZ)", Dated(12, 140)),
            Kept("Hoses and belts (ZZZZ)", Dated(12, 16)),
            Kept(EXERCISE, Each(1)),
            Kept(WEEKLY, Each(0, most=8)),
        ),
        told=(
            Told(
                0,
                Verb.ANSWER,
                {
                    "cause": "run below its load",
                    "accept": True,
                    "why": "the workshop draws no more; a load bank is hired for the yearly run",
                    "by": "Harbin",
                },
            ),
        ),
    ),
    Item(
        "SB-02",
        1105,
        {**SET, "name": "Standby set of the outfall gates", "site": "Ousel Outfall", "rated_kw": "48", "sump": "12"},
        (Meter("hours", "h", 0, standby, digits="4.1", exercise=Each(1, skipped=2), turned=80),),
        # Stopped early the last time.
        measured=Measured(ran=Ran(6, 35, "21", last=20)),
        tasks=(
            Kept({**OIL, "every": ["300h", "12mo"]}, Dated(12, 75)),
            Kept(EXERCISE, Each(1, skipped=2)),
            Kept(_LOAD_TEST, Dated(12, 50), note="held 41 kW for an hour, exhaust clean"),
            Kept({"name": "Day tank cleaning", "every": ["24mo"], "work": "fuel system"}),
        ),
        told=(Told(33, Verb.LOG, {"note": "Mice in the louvres; mesh fitted", "by": "Quill"}),),
    ),
    Item(
        "SB-03",
        1100,
        {**GAS_SET, "name": "Propane set of the telemetry mast", "site": "Hern Corner"},
        (Meter("starts", "starts", 611, self_test, unread=3, digits="5.0"),),
        tasks=(
            Kept(
                {"name": "Starter brushes and ring gear", "every": ["150starts"], "work": "inspection", "labour": "2h"},
                Counted(150, 11),
            ),
            Kept({**OIL, "every": ["100starts", "12mo"]}, Counted(100, 52)),
            Kept(
                {"name": "Regulator and gas hose", "every": ["12mo"], "law": True, "source": "gas safety law"},
                Dated(12, 130),
            ),
        ),
    ),
    Item(
        "SB-04",
        1100,
        {**V_SET, "name": "Standby set of the pump control", "site": "North Sluice"},
        (Meter("hours", "h", 689, proved, unread=6, exercise=Each(1)),),
        schedule=("emergency-exercise", "unset"),
        # Proved for weeks at the beginning of each year.
        measured=Measured(ran=Ran(4, 42, "120", is_proved=True)),
        tasks=(
            Kept(
                {**OIL, "every": ["250h", "12mo"], "anchor": "on-grid", "grid_origin": [Ago(1100 - 40)]}, Dated(12, 330)
            ),
            Kept(
                {"name": "Bund and tank inspection", "once_each": "year", "insurer": True, "work": "inspection"},
                Each(12, most=3),
            ),
            Kept({**BATTERIES, "every": ["36mo"], "part": ["Battery 12 V:4"]}, Dated(36, 200)),
        ),
        gauged=Gauged(every=6, pace=3),
    ),
    Item(
        "SB-05",
        1096,
        {**SET, "name": "Standby set on a trailer", "site": "Board Yard", "rated_kw": "40", "sump": "11"},
        (Meter("hours", "h", 3301, now_and_then, unread=9),),
        tasks=(
            Kept({**OIL, "every": ["250h", "12mo"]}, Dated(12, 110)),
            Kept({**COOLANT, "every": ["24mo"]}, Dated(24, -6)),
            Kept({"name": "Alternator bearings", "every": ["10000h"], "work": "inspection", "labour": "6h"}),
            Kept({"name": "Trailer brakes and lights", "every": ["6mo"], "through_month_end": True}, Dated(6, 55)),
        ),
        told=(
            Told(
                8,
                Verb.DEFER,
                {"task": "Coolant", "until": [Ago(-21)], "why": "antifreeze on order", "by": "Harbin"},
            ),
            Told(210, Verb.LOG, {"repair": "Voltage regulator renewed", "component": "regulator", "downtime": "12h"}),
        ),
    ),
    Item(
        "SB-06",
        1096,
        {**SET, "name": "Standby set of the sluice gates", "site": "Withy Lode", "rated_kw": "32", "sump": "9"},
        (Meter("hours", "h", 1190, standby, unread=20, exercise=Each(1, most=5, missed=3)),),
        measured=Measured(ran=Ran(4, 34, "13")),
        tasks=(
            Kept({**OIL, "every": ["12mo"], "anchor": "on-grid", "grid_origin": [Ago(1000)]}, Dated(12, 95)),
            Kept({**BELTS, "every": ["12mo"], "window": "21d"}, Dated(12, 60)),
            Kept(EXERCISE, Each(1, most=5, missed=3)),
            Kept({**BATTERIES, "every": ["6mo"]}, Dated(6, 12), note="topped up; 12.6 V at rest"),
        ),
        told=(
            Told(
                66,
                Verb.LOG,
                {
                    "defect": "Fuel lift pump weeps at the gasket",
                    "follow_up": True,
                    "until": Ago(40),
                    "at": [Shown(66)],
                    "by": "Quill",
                },
            ),
            Told(
                45, Verb.LOG, {"task": ["Fuel lift pump weeps at the gasket"], "note": "gasket renewed", "by": "Fenn"}
            ),
        ),
    ),
)
