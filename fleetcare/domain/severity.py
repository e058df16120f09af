"""How grave a finding is; apart from the rules, so that whoever counts findings need not load those."""

from collections.abc import Iterable
from enum import StrEnum


class Severity(StrEnum):
    """How much a value calls for (ISO 13372): alert, look closer; alarm, act."""

    ALERT = "alert"
    ALARM = "alarm"


def worst(severities: Iterable[Severity]) -> Severity:
    """Give the graver of some severities, at least one."""
    return Severity.ALARM if Severity.ALARM in set(severities) else Severity.ALERT
