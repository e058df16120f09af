"""How long laws are tried: a few cases, the same each time, by default; many new ones with LAWS=long.

LAWS=ten-thousand is for the laws over sheets, a law at a time: minutes to half an hour each.
"""

import os

from hypothesis import HealthCheck, settings

# Other work on the machine may slow a case down; that is no fault of the law.
settings.register_profile("unhurried", deadline=None, suppress_health_check=[HealthCheck.too_slow])
settings.register_profile("short", settings.get_profile("unhurried"), max_examples=20, derandomize=True)
settings.register_profile("long", settings.get_profile("unhurried"), max_examples=500)
settings.register_profile("ten-thousand", settings.get_profile("unhurried"), max_examples=10_000)
settings.load_profile(os.environ.get("LAWS", "short"))
