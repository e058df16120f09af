"""The cautions that stand under what this program says about work to be done."""

from collections.abc import Mapping

GENERAL = (
    "Limits and intervals are to be checked against the engine maker's manual, local codes and law;"
    " work on engines is for competent, where required licensed, people."
)

# Own words; TM 5-3805-290-23-2 WP 0155 00 (battery, tag), TM 9-6115-670-14&P (direction, tool), 29 CFR 1910.147(d)
# (isolate and verify); a locknut that pulls the setting and hot parts: common practice.
LASH = (
    "Shut the engine down and isolate it: battery off, key out, tag hung. Nothing may start it while it is turned by hand.",
    "Fuel and ignition off before the crank is turned; an engine turned by hand can fire.",
    "Turn the crank only in its normal direction and with the tool meant for it; hands clear of belts, fan and gears.",
    "Hot parts burn, hot oil too. Measure again when the locknut is tight: it can pull the setting.",
    "The engine maker's manual comes before these limits and this order of setting.",
)

# Own words; TM 5-4210-230-14&P-1, car makers' service texts of 1992 to 2009 (ignition, fuel, remote starter, plug holes),
# 29 CFR 1910.147(d) (isolate and verify); oil that locks a diesel and hot
# parts: common practice.
COMPRESSION = (
    "Ignition and fuel off before cranking: ground the coil lead, stop injectors from spraying. Fuel at a plug hole burns.",
    "Crank with a remote starter, not with the key; brake on, out of gear, clear of fan, belts and plug holes.",
    "For a wet test a spoon of oil is enough; a cylinder full of oil locks, and bends rods, in a diesel first.",
    "The test wants a warm engine: gloves. Never open a hot cap. Do not run the battery flat: the figures fall with it.",
    "The engine maker's manual comes before these limits and this way of testing.",
)

# Own words; FAA AC 43.13-1B 8-14 (test air turns the crank), a car maker's leak-down text of 2002 (cap never opened hot).
LEAKDOWN = (
    "Test air turns the crank: piston exactly at TDC, crank held by a second person or out of its swing.",
    "No tools on the crank bolt; everybody clear of fan, propeller, belts and shafts before air goes in.",
    "Raise the pressure slowly and let it off before a fitting is undone. Eye protection.",
    "Battery off, ignition and fuel off: an engine turned by hand or by air can fire. Never open a hot cap to listen.",
    "The engine maker's manual comes before these limits.",
)

# Own words; TM 10-4320-307-24 (exhaust gas), a car maker's service text (rotating parts), makers' warnings on high-pressure fuel;
# hot parts, noise and stored load: common practice.
RUN = (
    "Exhaust gas kills: run only where it is led away. Headache or dizziness: stop, and get everybody out.",
    "Guards on, no loose clothing, clear of fan, belts and shafts. Hot surfaces. Ears protected.",
    "Never feel for a fuel leak by hand: the jet goes through skin. Oil and coolant are hot and under pressure.",
    "Know how to stop it, and who is on the load, before it starts. Electrical work is for licensed people.",
    "The engine maker's manual and local rules come before these limits.",
)

# Own words; TM 10-3930-671-24 (burns), EU carcinogen texts on used engine oil (skin), 40 CFR 279.22 and Directive
# 2008/98/EC Art. 21 (keeping and collecting), LO 9-2350-261-12 (sample warm, before topping up).
OIL = (
    "Hot oil burns: sample through a valve or pump, hands off rotating and hot parts.",
    "Used oil on skin can cause cancer: nitrile gloves, wash skin, change soaked clothing, no oily rags in pockets.",
    "Sample warm, before topping up, always at the same point; a clean bottle, sealed and labelled at once.",
    "Used oil goes into a closed, marked container, never into a drain or the ground.",
    "Confirm an abnormal result with another sample before anything is taken apart. The maker's limits come first.",
)

OF_SHEETS: Mapping[str, tuple[str, ...]] = {
    "lash": LASH,
    "compression": COMPRESSION,
    "leakdown": LEAKDOWN,
    "run": RUN,
    "spot": RUN,
    "oil": OIL,
}
"""By kind of sheet."""
