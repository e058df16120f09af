"""The shop's settings: plausible gains a day, when a meter is stale, the shop's name."""

from dataclasses import dataclass
from decimal import Decimal, InvalidOperation
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import Kind, plain
from fleetcare.errors import Misread, Refused
from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session


@dataclass(frozen=True, slots=True)
class SettingSpec:
    """One setting: its name, what holds where none is stored, and what it means."""

    name: str
    default: str
    meaning: str
    is_figure: bool = True


# Plausible gains: 24 hours in a day; two drivers for 1,800 km (common practice).
SETTINGS = (
    SettingSpec("cap-hours", "24", "most hours a meter may gain in a day"),
    SettingSpec("cap-distance", "1800", "most kilometres a meter may gain in a day"),
    SettingSpec("cap-fuel", "10000", "most litres a meter may gain in a day"),
    SettingSpec("cap-starts", "200", "most starts a meter may gain in a day"),
    SettingSpec("stale-days", "", "days after which a reading is stale; empty: twice the engine's own rhythm"),
    SettingSpec("shop-name", "", "the shop's name, for what is printed", is_figure=False),
)


def read_settings(connection: "Connection") -> dict[str, str]:
    """Give every setting's value in force, by name."""
    stored = {row[0]: row[1] for row in fetch(connection, "select name, value from setting")}
    return {spec.name: stored.get(spec.name, spec.default) for spec in SETTINGS}


def cap_per_day(connection: "Connection", kind: Kind) -> Decimal:
    """Give the most a meter of a kind may gain in a day, in the base unit of the kind."""
    return Decimal(read_settings(connection)[f"cap-{kind}"])


def stale_days(connection: "Connection") -> int | None:
    """Give the set age of a stale reading in days, None where each meter's own rhythm decides."""
    value = read_settings(connection)["stale-days"]
    return int(value) if value else None


def spec_of(name: str) -> SettingSpec:
    """Find a setting by name; refuses an unknown one."""
    for spec in SETTINGS:
        if spec.name == name:
            return spec
    raise Refused(f"there is no setting {name!r}", f"choose one of {', '.join(spec.name for spec in SETTINGS)}")


def change_setting(session: "Session", name: str, value: str) -> None:
    """Store one setting; an empty value goes back to the default."""
    from sqlalchemy import select
    from sqlmodel import col

    from fleetcare.db.tables import Setting

    spec = spec_of(name)
    stored = "" if value == "" else _checked(spec, value)
    row = session.scalars(select(Setting).where(col(Setting.name) == name)).one_or_none()
    row = row or Setting(name=name)
    row.value = stored or spec.default
    session.add(row)


def _checked(spec: SettingSpec, value: str) -> str:
    if not spec.is_figure:
        return value.strip()
    try:
        figure = Decimal(value)
    except InvalidOperation:
        raise Misread(f"{spec.name} takes a number, not {value!r}", "write digits, such as 24") from None
    whole = spec.name == "stale-days"
    if not figure.is_finite() or figure <= 0 or (whole and figure != int(figure)):
        kind = "a whole number of days above 0" if whole else "a number above 0"
        raise Refused(f"{spec.name} cannot be {value}", f"give {kind}; {spec.meaning}")
    return plain(figure)
