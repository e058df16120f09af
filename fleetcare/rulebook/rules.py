"""The rule book as data: TOML files of rules beside this module, and what a shop makes of them.

A file lists its rules under `[[rule]]`; fields under `[defaults]` hold for each rule that does not give its own. A shop
writes rules of its own the same way. A rule of a shop with the id of a shipped one may change its limits, or switch it
off with a reason, and nothing else; `[[preset]]` names the engines a preset is for.
"""

import tomllib
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal
from difflib import get_close_matches
from functools import cache
from pathlib import Path
from typing import Any, TypeVar

from pydantic import BaseModel, ValidationError

from fleetcare.domain.rule_book import Rule, RuleBook
from fleetcare.errors import Refusals, Refused
from fleetcare.rulebook.overrides import Chosen, Override, override
from fleetcare.rulebook.rule_in import RuleIn
from fleetcare.rulebook.shipped import rule_files

_Form = TypeVar("_Form", bound=BaseModel)
_PARTS = ("rule", "preset", "defaults")


@dataclass(frozen=True, slots=True)
class ShopRules:
    """What one shop file says: rules of its own, changes to shipped ones, and presets named for engines."""

    rules: tuple[Rule, ...] = ()
    overrides: tuple[Override, ...] = ()
    chosen: tuple[Chosen, ...] = ()


@cache
def shipped_rules() -> tuple[Rule, ...]:
    """Give every rule that comes with the program, file by file in the order they stand in."""
    rules: list[Rule] = []
    for path in rule_files():
        rules += _read_file(_toml(path, path.name), path.name, {}).rules
    _check_unique(rules, "the shipped rules")
    return tuple(rules)


def read_shop_rules(path: Path) -> ShopRules:
    """Read a shop's own rules from a TOML file. Everything not in form is refused together, by file, rule and field."""
    return shop_rules(_toml(path, path.name), path.name)


def read_shop_text(text: str, name: str) -> ShopRules:
    """Read a shop's own rules from TOML text that stands under a name, as `read_shop_rules` does from a file."""
    return shop_rules(_parsed(text, name), name)


def shop_rules(content: Mapping[str, Any], name: str) -> ShopRules:
    """Read a shop's own rules from what a file, or the database, has of them; `name` says where it stands."""
    return _read_file(content, name, {rule.id: rule for rule in shipped_rules()})


def rule_book(*shops: ShopRules) -> RuleBook:
    """Put the shipped rules and those of a shop together; of several changes to one rule the last counts."""
    changes = {change.id: change for shop in shops for change in shop.overrides}
    own = {rule.id: rule for shop in shops for rule in shop.rules}
    rules = [override(rule, changes[rule.id]) if rule.id in changes else rule for rule in shipped_rules()]
    chosen: dict[str, tuple[str, ...]] = {}
    for choice in (choice for shop in shops for choice in shop.chosen):
        chosen[choice.name] = tuple(dict.fromkeys((*chosen.get(choice.name, ()), *choice.engines)))
    off = {change.id: change for change in changes.values() if change.off}
    return RuleBook(
        rules=tuple(rule for rule in (*rules, *own.values()) if rule.id not in off),
        chosen=chosen,
        off=tuple(change.switched_off for change in off.values()),
        overridden=tuple(change.id for change in changes.values() if not change.off),
    )


def _toml(path: Path, name: str) -> Mapping[str, Any]:
    return _parsed(read_rule_file(path, name), name)


def read_rule_file(path: Path, name: str) -> str:
    """Give the text of a file of rules. Raises Refused where it cannot be read."""
    try:
        return path.read_text(encoding="utf-8-sig")
    except OSError as error:
        raise Refused(f"cannot read {name}: {error.strerror}", "name a TOML file that can be read") from None
    except UnicodeDecodeError:
        raise Refused(f"{name} is not UTF-8 text", "save it as UTF-8") from None


def _parsed(text: str, name: str) -> Mapping[str, Any]:
    try:
        return tomllib.loads(text, parse_float=Decimal)
    except tomllib.TOMLDecodeError as error:
        raise Refused(f"{name} is not TOML: {error}", "correct it there") from None


def _read_file(content: Mapping[str, Any], name: str, shipped: Mapping[str, Rule]) -> ShopRules:
    wrong = [
        Refused(f"{name}: {field} is not known here", "write [[rule]], [[preset]] or [defaults]")
        for field in content
        if field not in _PARTS
    ]
    rules, overrides, chosen = [], [], []
    for where, raw in _tables(content, "rule", name, wrong):
        if raw.get("id") in shipped:
            change = _read(Override, raw, where, wrong)
            overrides += [change] if change and _fits(change, shipped, where, wrong) else []
        else:
            rule = _read(RuleIn, {**_defaults(content, name), **raw}, where, wrong)
            rules += [rule.fact] if rule else []
    presets = {rule.preset for rule in (*shipped.values(), *rules)} - {""}
    for where, raw in _tables(content, "preset", name, wrong):
        choice = _read(Chosen, raw, where, wrong)
        if choice and choice.name not in presets:
            wrong.append(Refused(f"{where}: there is no such preset", f"name one of {', '.join(sorted(presets))}"))
        chosen += [choice] if choice else []
    _refuse(wrong)
    _check_unique([*rules, *overrides], name)
    return ShopRules(tuple(rules), tuple(overrides), tuple(chosen))


def _fits(change: Override, shipped: Mapping[str, Rule], where: str, wrong: list[Refused]) -> bool:
    """Whether the rule a change is for can be changed so."""
    try:
        override(shipped[change.id], change)
    except ValueError as fault:
        wrong.append(_fault(where, str(fault)))
        return False
    return True


def _defaults(content: Mapping[str, Any], name: str) -> Mapping[str, Any]:
    defaults = content.get("defaults", {})
    if isinstance(defaults, Mapping):
        return defaults
    raise Refused(f"{name}: defaults is no table", "begin it with [defaults] on a line of its own")


def _tables(
    content: Mapping[str, Any], part: str, name: str, wrong: list[Refused]
) -> Iterator[tuple[str, Mapping[str, Any]]]:
    """Give each table of a part of a file with where it stands: by id or name, else by number."""
    tables = content.get(part, [])
    if not isinstance(tables, list) or not all(isinstance(table, Mapping) for table in tables):
        wrong.append(
            Refused(f"{name}: {part} is no list of tables", f"begin each with [[{part}]] on a line of its own")
        )
        return
    for number, table in enumerate(tables, start=1):
        called = table.get("id", table.get("name"))
        yield f"{name}, {part} {repr(called) if isinstance(called, str) and called else number}", table


def _read(form: type[_Form], raw: Mapping[str, Any], where: str, wrong: list[Refused]) -> _Form | None:
    try:
        return form.model_validate(raw)
    except ValidationError as error:
        wrong.extend(_fault(_field(where, fault["loc"]), _say(form, fault)) for fault in error.errors())
        return None


def _field(where: str, place: Sequence[int | str]) -> str:
    return f"{where}: {'.'.join(str(part) for part in place)}" if place else where


def _say(form: type[BaseModel], fault: Mapping[str, Any]) -> str:
    """Put a fault of a field as what is wrong and, behind a bar, how to mend it."""
    field = str(fault["loc"][-1]) if fault["loc"] else ""
    if fault["type"] == "missing":
        return "it is missing|give it"
    if fault["type"] == "extra_forbidden":
        near = get_close_matches(field, form.model_fields, n=1)
        meant = f"did you mean {near[0]}?" if near else "leave it out, or check its spelling"
        return f"it is not known here|{meant}"
    if fault["type"] == "value_error":
        return str(fault["ctx"]["error"])
    return f"{fault['input']!r} does not fit|{fault['msg'][0].lower()}{fault['msg'][1:]}"


def _fault(where: str, said: str) -> Refused:
    detail, _, remedy = said.partition("|")
    return Refused(f"{where}: {detail}", remedy)


def _check_unique(named: Sequence[Rule | Override], name: str) -> None:
    ids = [one.id for one in named]
    _refuse([Refused(f"{name}: {one!r} stands there twice", "give each an id of its own") for one in _twice(ids)])


def _twice(ids: Sequence[str]) -> list[str]:
    return sorted({one for one in ids if ids.count(one) > 1})


def _refuse(wrong: Sequence[Refused]) -> None:
    if wrong:
        raise wrong[0] if len(wrong) == 1 else Refusals(wrong)
