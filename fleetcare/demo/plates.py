"""Nameplates of the demo fleet, by kind of engine. Invented figures of a common size, none of a real make."""

from collections.abc import Mapping

Plate = Mapping[str, str]

_SCREW_2V = {"adjuster": "screw", "valves_per_cylinder": "2"}
_COLD_LASH = {
    "lash_intake": "0.20-0.30",
    "lash_exhaust": "0.40-0.50",
    "lash_set_intake": "0.25",
    "lash_set_exhaust": "0.45",
    "lash_when": "cold",
}
SIX: Plate = {"cylinders": "6", "layout": "inline", "firing_order": "1-5-3-6-2-4", "fuel": "diesel"}
FOUR: Plate = {"cylinders": "4", "layout": "inline", "firing_order": "1-3-4-2", "fuel": "diesel"}
THREE: Plate = {"cylinders": "3", "layout": "inline", "firing_order": "1-3-2", "fuel": "diesel"}

PUMP: Plate = {
    **SIX,
    **_SCREW_2V,
    **_COLD_LASH,
    "duty": "land drainage pump",
    "bore": "114",
    "stroke": "135",
    "rod": "219",
    "compression_ratio": "17.5",
    "intake_closes": "38",
    "oil_grade": "15W-40",
    "sump": "22",
    "rated_rpm": "1500",
    "rated_kw": "118",
    "altitude": "2",
}
BIG_PUMP: Plate = {
    **SIX,
    "adjuster": "screw",
    "valves_per_cylinder": "4",
    "bridged": "both",
    "duty": "land drainage pump",
    "bore": "158",
    "stroke": "186",
    "rod": "318",
    "compression_ratio": "15.5",
    "lash_intake": "0.30-0.40",
    "lash_exhaust": "0.60-0.70",
    "lash_set_intake": "0.35",
    "lash_set_exhaust": "0.65",
    "lash_when": "cold",
    "oil_grade": "15W-40",
    "sump": "58",
    "rated_rpm": "1000",
    "rated_kw": "264",
    "altitude": "1",
}
SLOW_PUMP: Plate = {
    **THREE,
    **_SCREW_2V,
    "duty": "land drainage pump",
    "bore": "127",
    "stroke": "152",
    "oil_grade": "30",
    "sump": "18",
    "rated_rpm": "1000",
    "rated_kw": "34",
    "altitude": "0",
}
SET: Plate = {
    **FOUR,
    **_SCREW_2V,
    "duty": "standby",
    "bore": "108",
    "stroke": "130",
    "compression_ratio": "17",
    "oil_grade": "15W-40",
    "rated_rpm": "1500",
}
V_SET: Plate = {
    "cylinders": "8",
    "layout": "v",
    "numbering": "by-bank",
    "firing_order": "1-5-4-2-6-3-7-8",
    "fuel": "diesel",
    "adjuster": "screw",
    "valves_per_cylinder": "4",
    "bridged": "both",
    "lash_intake": "0.35-0.45",
    "lash_exhaust": "0.55-0.65",
    "lash_when": "cold",
    "duty": "standby",
    "bore": "128",
    "stroke": "140",
    "oil_grade": "15W-40",
    "sump": "38",
    "rated_rpm": "1500",
    "rated_kw": "310",
}
GAS_SET: Plate = {
    "cylinders": "2",
    "layout": "v",
    "firing_order": "1-2",
    "fuel": "propane",
    "adjuster": "hydraulic",
    "duty": "standby",
    "bore": "83",
    "stroke": "92",
    "oil_grade": "10W-30",
    "sump": "2.2",
    "rated_rpm": "3000",
    "rated_kw": "11",
}
LORRY: Plate = {
    **SIX,
    "adjuster": "screw",
    "valves_per_cylinder": "4",
    "lash_intake": "0.30-0.40",
    "lash_exhaust": "0.45-0.55",
    "lash_when": "cold",
    "duty": "road",
    "bore": "106",
    "stroke": "127",
    "oil_grade": "10W-40",
    "sump": "24",
}
VAN: Plate = {**FOUR, "adjuster": "hydraulic", "duty": "road", "bore": "81", "stroke": "95", "oil_grade": "5W-30"}
PETROL_VAN: Plate = {**VAN, "fuel": "petrol", "bore": "79", "stroke": "81", "sump": "4.5"}
TRACTOR: Plate = {
    **FOUR,
    **_SCREW_2V,
    **_COLD_LASH,
    "duty": "tractor",
    "bore": "103",
    "stroke": "115",
    "oil_grade": "15W-40",
    "sump": "12",
}
DIGGER: Plate = {**FOUR, **_SCREW_2V, "duty": "earthmoving", "bore": "104", "stroke": "132", "oil_grade": "15W-40"}
BOAT: Plate = {**FOUR, **_SCREW_2V, "duty": "weed cutting", "bore": "98", "stroke": "112", "oil_grade": "15W-40"}
OUTBOARD: Plate = {
    **FOUR,
    "fuel": "petrol",
    "adjuster": "shim",
    "shim_step": "0.05",
    "valves_per_cylinder": "4",
    "duty": "survey",
    "bore": "65",
    "stroke": "75",
    "lash_intake": "0.15-0.23",
    "lash_exhaust": "0.23-0.31",
    "lash_when": "cold",
    "oil_grade": "10W-30",
    "sump": "2.8",
}
SMALL_DIESEL: Plate = {
    **THREE,
    **_SCREW_2V,
    "lash_intake": "0.15-0.25",
    "lash_exhaust": "0.15-0.25",
    "lash_set_intake": "0.20",
    "lash_set_exhaust": "0.20",
    "lash_when": "cold",
    "duty": "utility",
    "bore": "84",
    "stroke": "90",
    "oil_grade": "15W-40",
}
SMALL_PETROL: Plate = {
    "cylinders": "1",
    "layout": "single",
    "firing_order": "1",
    "fuel": "petrol",
    "adjuster": "screw",
    "valves_per_cylinder": "2",
    "duty": "utility",
    "bore": "77",
    "stroke": "58",
    "lash_intake": "0.13-0.17",
    "lash_exhaust": "0.18-0.22",
    "lash_when": "cold",
    "oil_grade": "10W-30",
    "sump": "0.6",
    "rated_rpm": "3600",
}
PETROL_TWIN: Plate = {
    **SMALL_PETROL,
    "cylinders": "2",
    "layout": "opposed",
    "firing_order": "1-2",
    "bore": "80",
    "stroke": "68",
    "lash_intake": "0.08-0.14",
    "lash_exhaust": "0.12-0.18",
    "oil_grade": "10W-30",
    "sump": "1.7",
}
