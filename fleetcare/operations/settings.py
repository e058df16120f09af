"""The shop's settings: plausible gains a day, when a meter is stale, the shop's name, supervisors and holidays."""

from collections.abc import Callable
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from difflib import get_close_matches
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import Kind, parse_figure, plain
from fleetcare.errors import Misread, Refused
from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session


def _number(unit: str) -> Callable[[str], str]:
    """Make a reader of a number above 0; the setting's own unit may stand behind it."""

    def read(value: str) -> str:
        number, given = parse_figure(value)
        if given not in {None, unit}:
            raise Misread(f"{value!r} is not in {unit}", f"give it in {unit}, such as 24")
        if number <= 0:
            raise Refused(f"it cannot be {value}", "give a number above 0")
        return plain(number)

    return read


def _days(value: str) -> str:
    days = _number("d")(value)
    if not days.isdigit():
        raise Refused(f"it cannot be {value}", "give whole days")
    return days


def _name(value: str) -> str:
    return " ".join(value.split())


def _names(value: str) -> str:
    """Read names between commas, each once whatever its case."""
    names: dict[str, str] = {}
    for name in filter(None, map(_name, value.split(","))):
        names.setdefault(name.casefold(), name)
    if not names:
        raise Refused(f"no name stands in {value!r}", "give names with commas between")
    return ", ".join(names.values())


_DAYS_REMEDY = "give days such as 2026-12-25, 2026-12-26"


def _day(text: str) -> date:
    try:
        return date.fromisoformat(text)
    except ValueError:
        raise Misread(f"{text!r} is no day", _DAYS_REMEDY) from None


def _dates(value: str) -> str:
    """Read days between commas, each once and in order."""
    days = {_day(text) for text in map(_name, value.split(",")) if text}
    if not days:
        raise Refused(f"no day stands in {value!r}", _DAYS_REMEDY)
    return ", ".join(day.isoformat() for day in sorted(days))


@dataclass(frozen=True, slots=True)
class SettingSpec:
    """One setting: its name, what holds where none is stored, what it means, and how a value of it is read."""

    name: str
    default: str
    meaning: str
    read: Callable[[str], str]


# Plausible gains: 24 hours in a day; two drivers for 1,800 km (common practice).
SETTINGS = (
    SettingSpec("cap-hours", "24", "most hours a meter may gain in a day", _number("h")),
    SettingSpec("cap-distance", "1800", "most kilometres a meter may gain in a day", _number("km")),
    SettingSpec("cap-fuel", "10000", "most litres a meter may gain in a day", _number("L")),
    SettingSpec("cap-starts", "200", "most starts a meter may gain in a day", _number("starts")),
    SettingSpec("stale-days", "", "days after which a reading is stale; empty: twice the engine's own rhythm", _days),
    SettingSpec("shop-name", "", "the shop's name, for what is printed", _name),
    SettingSpec("supervisors", "", "who may take the advice to drain a sound oil later; names, commas between", _names),
    SettingSpec("holidays", "", "days that are no business days, for dates by which a law wants work done", _dates),
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


def supervisors(connection: "Connection") -> tuple[str, ...]:
    """Give the names of the supervisors, none where the shop has not said."""
    return tuple(filter(None, read_settings(connection)["supervisors"].split(", ")))


def holidays(connection: "Connection") -> frozenset[date]:
    """Give the days the shop says nobody works on, beside Saturdays and Sundays."""
    return frozenset(map(date.fromisoformat, filter(None, read_settings(connection)["holidays"].split(", "))))


def spec_of(name: str) -> SettingSpec:
    """Find a setting by name, whatever its case; refuses an unknown one with the nearest names."""
    specs = {spec.name: spec for spec in SETTINGS}
    key = name.strip().lower()
    if key in specs:
        return specs[key]
    near = get_close_matches(key, specs, n=3)
    remedy = f"did you mean {' or '.join(near)}?" if near else f"choose one of {', '.join(specs)}"
    raise Refused(f"there is no setting {name!r}", remedy)


def change_setting(session: "Session", name: str, value: str) -> str:
    """Store one setting and give its value as stored; an empty one goes back to the default.

    Raises Misread or Refused, naming the setting, for a value it cannot have.
    """
    from sqlalchemy import select
    from sqlmodel import col

    from fleetcare.db.tables import Setting

    spec = spec_of(name)
    stored = _checked(spec, value) if value.strip() else spec.default
    row = session.scalars(select(Setting).where(col(Setting.name) == spec.name)).one_or_none()
    row = row or Setting(name=spec.name)
    row.value = stored
    session.add(row)
    return stored


def _checked(spec: SettingSpec, value: str) -> str:
    try:
        return spec.read(value)
    except (Misread, Refused) as error:
        raise type(error)(f"{spec.name}: {error.detail}", f"{error.remedy} ({spec.meaning})") from None
