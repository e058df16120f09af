"""What is asked about an engine or machine: where and since when, its meters, and the nameplate of an engine."""

from dataclasses import replace

from fleetcare.tui.forms.base import METERS, Field

NAME = Field("name", "Name", "what people call it")
SITE = Field("site", "Site", "where it stands", "sites")
METER = Field("meter", "Meter", "hours, distance, fuel or starts; distance:mi for miles", "meter kinds", several=True)
START = (
    Field("in_service", "In service", "its first day here, year-month-day"),
    Field("start_at", "Starts at", "what the dial showed on that day, such as 0 or 1875h", METERS, several=True),
    Field("as_new", "As new", "new or overhauled: every task counts from that day and figure", is_yes_no=True),
)
FUEL = Field("fuel", "Fuel", "such as diesel", "fuels")
CYLINDERS = Field("cylinders", "Cylinders", "how many")
FIRING_ORDER = Field("firing_order", "Firing order", "such as 1-5-3-6-2-4")

_ENGINE = (
    Field("duty", "Duty", "what it is used for, such as standby or marine propulsion", group="ENGINE"),
    FUEL,
    CYLINDERS,
    Field("layout", "Layout", "how its cylinders stand", choices=("inline", "v", "opposed", "single")),
    Field("numbering", "Numbering", "of the cylinders of a V", choices=("by-bank", "alternating")),
    FIRING_ORDER,
    Field("bore", "Bore, mm", "such as 114"),
    Field("stroke", "Stroke, mm", "such as 135"),
    Field("rod", "Rod, mm", "length of the connecting rod, between the middles of its eyes"),
    Field("compression_ratio", "Compression", "the ratio, such as 17.5"),
    Field("rated_rpm", "Rated, rpm", "rated speed, such as 1500"),
    Field("rated_kw", "Rated, kW", "rated power, such as 96"),
    Field("altitude", "Altitude, m", "of its site above the sea"),
    Field("oil_grade", "Oil grade", "such as 15W-40"),
    Field("sump", "Sump, L", "oil it holds"),
)
_VALVES = (
    Field("valves_per_cylinder", "Valves each", "valves of one cylinder, such as 4", group="VALVES"),
    Field("bridged", "Bridged", "two valves under one bridge", choices=("none", "intake", "exhaust", "both")),
    Field("intake_closes", "Intake shuts °", "degrees after bottom dead centre"),
    Field("adjuster", "Adjuster", "how the lash is set", choices=("screw", "shim", "hydraulic")),
    Field("screw_pitch", "Pitch, mm", "thread pitch of the adjusting screw, such as 1"),
    Field("screw_at", "Screw at", "end of the rocker it sits at", choices=("pushrod", "valve", "centre")),
    Field("rocker_ratio", "Rocker ratio", "valve lift over cam lift, such as 1.5"),
    Field("shim_step", "Shim step, mm", "between stocked shims, such as 0.05"),
)
_LASH = (
    Field("lash_intake", "Check intake", "leave it alone inside: 0.20-0.30 (mm) or 0.008-0.012in", group="VALVE LASH"),
    Field("lash_set_intake", "Set intake", "what to set when outside: 0.25 (mm) or 0.010in"),
    Field("lash_exhaust", "Check exhaust", "leave it alone inside: 0.40-0.50 (mm) or 0.016-0.020in"),
    Field("lash_set_exhaust", "Set exhaust", "what to set when outside: 0.45 (mm) or 0.018in"),
    Field("lash_when", "Measured", "the condition these figures are for", choices=("cold", "hot", "any")),
)
PLATE = tuple(replace(field, of_engines=True) for field in (*_ENGINE, *_VALVES, *_LASH))

EDITED = (
    NAME,
    SITE,
    *START,
    replace(METER, label="New meter", tells="another kind to count from today: hours, distance:mi, fuel or starts"),
    Field("meter_digits", "Digits", "of a dial, before and after the point: hours:5.1; tells when it goes round", several=True),
    *PLATE,
)  # fmt: skip
"""What can be changed of an engine or machine; which machine an engine is in is a move on a day."""
