"""The cautions that stand under what this program says about work to be done."""

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
