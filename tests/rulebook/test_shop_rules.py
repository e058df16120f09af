"""A shop's own rules: new ones, changed limits, rules switched off, presets named; whatever is not in form is refused."""

from decimal import Decimal
from pathlib import Path

import pytest

from fleetcare.domain.rule_book import Limit, Rule, RuleBook
from fleetcare.errors import FleetError, Refusals
from fleetcare.rulebook.rules import read_shop_rules, rule_book, shop_rules

OWN = """
[[rule]]
id = "p-01-least-compression"
kinds = "compression"
quantity = "pressure"
unit = "psi"
bounds = {}
low = { alarm = { beyond = 350.5 } }
applies = { engines = ["P-01"] }
cause = "low compression"
message = "below the maker's least"
source = "engine manual, section 4"
next_step = "wet-test it"
"""


def _shop(tmp_path: Path, text: str) -> RuleBook:
    path = tmp_path / "shop.toml"
    path.write_text(text, encoding="utf-8")
    return rule_book(read_shop_rules(path))


def _rule(book: RuleBook, rule_id: str) -> Rule:
    (rule,) = (one for one in book.rules if one.id == rule_id)
    return rule


def test_a_rule_of_the_shops_own_stands_beside_the_shipped_ones_with_every_digit(tmp_path: Path) -> None:
    rule = _rule(_shop(tmp_path, OWN), "p-01-least-compression")
    assert rule.low.alarm == Limit(Decimal("350.5"))
    assert rule.applies.engines == ("P-01",)


def test_fields_under_defaults_hold_for_each_rule_that_does_not_give_its_own(tmp_path: Path) -> None:
    text = '[defaults]\nsource = "the shop"\ncaution = "Hot."\n' + OWN
    rule = _rule(_shop(tmp_path, text), "p-01-least-compression")
    assert (rule.source, rule.caution) == ("engine manual, section 4", "Hot.")


def test_a_shop_changes_a_limit_and_leaves_the_rest_and_the_source_says_whose_it_is(tmp_path: Path) -> None:
    book = _shop(tmp_path, '[[rule]]\nid = "oil-fe"\nhigh = { alarm = { reach = 150 } }\nwhy = "small sump"\n')
    rule = _rule(book, "oil-fe")
    assert (rule.high.alert, rule.high.alarm) == (Limit(Decimal(100)), Limit(Decimal(150), reach=True))
    assert rule.source.startswith("limits set by the shop (small sump); the rule: ")
    assert book.overridden == ("oil-fe",)


def test_a_changed_low_limit_needs_no_reason(tmp_path: Path) -> None:
    rule = _rule(
        _shop(tmp_path, '[[rule]]\nid = "compression-r75"\nlow = { alert = { beyond = 90 } }\n'), "compression-r75"
    )
    assert rule.low.alert == Limit(Decimal(90))
    assert rule.source.startswith("limits set by the shop; the rule: lowest at least 75 %")


def test_a_shop_switches_a_rule_off_with_a_reason(tmp_path: Path) -> None:
    book = _shop(tmp_path, '[[rule]]\nid = "oil-fe"\noff = true\nwhy = " trend instead "\n')
    assert [rule.id for rule in book.rules if rule.id == "oil-fe"] == []
    assert [(one.id, one.why) for one in book.off] == [("oil-fe", "trend instead")]
    assert book.overridden == ()


def test_presets_are_named_for_engines_in_as_many_places_as_one_likes() -> None:
    first = shop_rules({"preset": [{"name": "zzzz-ci", "engines": "P-01"}]}, "shop.toml")
    second = shop_rules({"preset": [{"name": "zzzz-ci", "engines": ["P-01", "P-02"]}]}, "settings")
    assert rule_book(first, second).chosen == {"zzzz-ci": ("P-01", "P-02")}


def test_of_two_changes_to_one_rule_the_last_counts() -> None:
    changes = [shop_rules({"rule": [{"id": "oil-fe", "high": {"alarm": {"beyond": n}}}]}, "shop") for n in (150, 180)]
    assert _rule(rule_book(*changes), "oil-fe").high.alarm == Limit(Decimal(180))


BAD = {
    "missing field": (
        '[[rule]]\nid = "own"\nkinds = "oil"\nquantity = "Fe"\nunit = "ppm"\nbounds = {}\n',
        "own': cause: it is missing; give it",
    ),
    "unknown field": (
        OWN + "limit = 3\n",
        "p-01-least-compression': limit: it is not known here; leave it out, or check its spelling",
    ),
    "near miss": (OWN + "unles = {}\n", "unles: it is not known here; did you mean unless?"),
    "unknown part": (OWN + "[rules]\n", "shop.toml: rules is not known here; write [[rule]]"),
    "no list": ("rule = 3\n", "rule is no list of tables; begin each with [[rule]]"),
    "kind": (OWN.replace('"compression"', '"tyre"'), "kinds.0: 'tyre' is no kind of sheet; use one of lash,"),
    "quantity": (OWN.replace('"pressure"', '"presure"'), "quantity: 'presure' is measured on no sheet; use one of"),
    "no quantity": (OWN.replace('quantity = "pressure"\n', ""), "quantity is missing; say what is measured"),
    "unit": (OWN.replace('"psi"', '"stone"'), "unit: 'stone' is no unit known here; use one of"),
    "other unit": (OWN.replace('"psi"', '"ppm"'), "unit 'ppm' does not fit pressure; write one that does"),
    "percent of a temperature": (
        OWN.replace('"compression"', '"spot"')
        .replace('"pressure"', '"exhaust"')
        .replace('"psi"', '"%"')
        .replace("bounds = {}", 'against_sheet = { reference = "highest", by = "ratio" }'),
        'a percentage of a temperature is another in °F; compare by = "difference"',
    ),
    "no shape": (OWN.replace("bounds = {}\n", ""), "a rule has one shape, this has 0; give one of bounds,"),
    "two shapes": (OWN + 'change = { since = "new", by = "share" }\n', "a rule has one shape, this has 2"),
    "no limit": (OWN.replace("low = { alarm = { beyond = 350.5 } }\n", ""), "limits: one is needed"),
    "best of both sides": (
        OWN.replace('"psi"', '"%"').replace("bounds = {}", 'change = { since = "own best", by = "share" }')
        + "high = { alarm = { beyond = 15 } }\n",
        "what is best is told by the side a limit is on; give low or high",
    ),
    "rate since the best": (
        OWN.replace("bounds = {}", 'rate = { since = "own best", per = 10 }'),
        "rate.since: 'own best' does not fit; input should be",
    ),
    "two figures": (
        OWN.replace("beyond = 350.5", "beyond = 350, reach = 351"),
        "low.alarm: it needs one figure; write { beyond = 25 }",
    ),
    "no figure": (
        OWN.replace("beyond = 350.5", 'beyond = "many"'),
        "low.alarm.beyond: 'many' does not fit; input should be a valid decimal",
    ),
    "crossed": (
        OWN.replace("alarm = { beyond = 350.5 }", "alarm = { beyond = 350 }, alert = { beyond = 300 }"),
        "low: the alarm comes before the alert; put the alarm further out",
    ),
    "crossed at one figure": (
        OWN.replace("alarm = { beyond = 350.5 }", "alarm = { reach = 350 }, alert = { beyond = 350 }"),
        "low: the alarm comes before the alert",
    ),
    "spec end": (
        OWN.replace("bounds = {}", 'bounds = { end = "low" }'),
        'end or is_set goes with basis "spec"; give one of them there, and neither elsewhere',
    ),
    "set elsewhere": (OWN.replace("bounds = {}", "bounds = { is_set = true }"), 'end or is_set goes with basis "spec"'),
    "both ends and set": (
        OWN.replace("bounds = {}", 'bounds = { basis = "spec", end = "low", is_set = true }'),
        'end or is_set goes with basis "spec"',
    ),
    "approach of no gap": (
        OWN.replace("bounds = {}", 'approach = { end = "low" }'),
        'approach tells hours of lash; give quantity = "lash", unit = "h", and limits in low alone',
    ),
    "altitudes that fall": (
        OWN.replace("bounds = {}", 'by_altitude = { unit = "ft", least = [[500, 515], [500, 480]] }'),
        "by_altitude: altitudes do not rise; write pairs of altitude and least, [[500, 515], [2500, 480]]",
    ),
    "one altitude": (
        OWN.replace("bounds = {}", 'by_altitude = { unit = "m", least = [[500, 515]] }'),
        "by_altitude: altitudes do not rise",
    ),
    "own condition": (
        OWN + '[[rule.condition]]\nquantities = "Fe"\nasks = "clear"\n',
        "conditions belong to a pattern; leave them out",
    ),
    "pattern with limits": (
        OWN.replace("bounds = {}", "pattern = {}"),
        "quantity and limits of a pattern stand in its conditions; move them there",
    ),
    "id": (
        OWN.replace('"p-01-least-compression"', '"P 01"'),
        "rule 'P 01': id: 'P 01' is no name for it; write small letters",
    ),
    "no id": (OWN.replace('id = "p-01-least-compression"\n', ""), "rule 1: id: it is missing; give it"),
    "twice": (OWN + OWN, "'p-01-least-compression' stands there twice; give each an id of its own"),
    "more than limits": ('[[rule]]\nid = "oil-fe"\ncause = "x"\n', "rule 'oil-fe': cause: it is not known here"),
    "changes nothing": ('[[rule]]\nid = "oil-fe"\n', "it changes nothing, or too much; give limits"),
    "off and limits": (
        '[[rule]]\nid = "oil-fe"\noff = true\nwhy = "x"\nhigh = { alert = { beyond = 1 } }\n',
        "it changes nothing, or too much",
    ),
    "off for no reason": (
        '[[rule]]\nid = "oil-fe"\noff = true\n',
        "a rule is switched off without a reason; say in why",
    ),
    "other side": (
        '[[rule]]\nid = "oil-fe"\nlow = { alert = { beyond = 1 } }\n',
        "shop.toml, rule 'oil-fe': it has no low limits; change the side it has",
    ),
    "crossing change": (
        '[[rule]]\nid = "oil-fe"\nhigh = { alarm = { beyond = 50 } }\n',
        "high: the alarm comes before the alert",
    ),
    "law": ('[[rule]]\nid = "law-zzzz-ci-water"\nhigh = { alarm = { beyond = 1 } }\n', "its limits are law; leave it"),
    "no preset": (
        '[[preset]]\nname = "zzz"\nengines = ["P-01"]\n',
        "preset 'zzz': there is no such preset; name one of battery-12v,",
    ),
    "no engines": ('[[preset]]\nname = "zzzz-ci"\nengines = []\n', "preset 'zzzz-ci': engines: [] does not fit"),
    "defaults": ("defaults = 3\n" + OWN, "shop.toml: defaults is no table; begin it with [defaults]"),
    "no number": (OWN.replace("beyond = 350.5", "beyond = true"), "low.alarm.beyond: True does not fit"),
    "share in ppm": (
        OWN.replace("bounds = {}", 'change = { since = "before", by = "share" }').replace('"psi"', '"ppm"'),
        "unit 'ppm' does not fit pressure; write one that does, % for a share",
    ),
    "nan": (OWN.replace("beyond = 350.5", "beyond = nan"), "low.alarm.beyond: Decimal('NaN') does not fit"),
    "no multiple": (
        '[[rule]]\nid = "oil-viscosity-own"\nlow = { alert = { beyond = -3 } }\n',
        "low: a limit is no multiple of the spread; give figures above 0",
    ),
    "no percentage": (
        '[[rule]]\nid = "oil-fe-family"\nhigh = { alarm = { beyond = 120 } }\n',
        "high: a limit is no percentage of the samples; give figures between 0 and 100",
    ),
    "not toml": ("= 3", "shop.toml is not TOML: "),
}

PATTERN = '[[rule]]\nid = "own"\nkinds = "oil"\npattern = {}\ncause = "x"\nmessage = "x"\nsource = "x"\nnext_step = "x"\n[[rule.condition]]\n'
BAD |= {
    "flags nothing": (
        PATTERN + 'quantities = "Fe"\nasks = "clear"\n',
        "no condition flags a value; ask one to be flagged",
    ),
    "a pattern of points": (
        PATTERN.replace("pattern = {}", "pattern = {}\nof_engine = true")
        + 'quantities = "Fe"\nasks = "flagged high"\n',
        "of_engine is not for a pattern; say where it holds with at",
    ),
    "no word": (PATTERN + 'quantities = "heard"\nasks = "said"\n', "condition.0: words are missing; give those"),
    "asked of nothing": (PATTERN + 'quantities = "feet"\nasks = "flagged high"\n', "'feet' is measured on no sheet"),
    "within nothing": (PATTERN + 'quantities = "Fe"\nasks = "within"\n', 'low and high go with asks "within"'),
    "limits elsewhere": (
        PATTERN + 'quantities = "Fe"\nasks = "clear"\nlow = { beyond = 3 }\n',
        'low and high go with asks "within"',
    ),
    "within another unit": (
        PATTERN + 'quantities = "Fe"\nasks = "within"\nunit = "psi"\nlow = { beyond = 3 }\n',
        "unit 'psi' does not fit Fe",
    ),
    "calls out elsewhere": (
        PATTERN + 'quantities = "Fe"\nasks = "clear"\ncalls_out = true\n',
        'calls_out goes with asks "within"; leave it out',
    ),
    "of before elsewhere": (
        PATTERN + 'quantities = "Fe"\nasks = "within"\nof_before = true\nunit = "ppm"\nlow = { beyond = 3 }\n',
        'of_before goes with asks "within" and unit "%"; leave it, over and less_new out elsewhere',
    ),
    "over nothing": (
        PATTERN + 'quantities = "Fe"\nasks = "within"\nover = "x"\nlow = { beyond = 3 }\n',
        "over: 'x' is measured on no sheet",
    ),
    "absorbs nothing": (
        PATTERN.replace("pattern = {}", 'pattern = { absorbs = ["x"] }') + 'quantities = "Fe"\nasks = "flagged high"\n',
        "absorbs.0: 'x' is measured on no sheet",
    ),
}


@pytest.mark.parametrize(("text", "told"), BAD.values(), ids=list(BAD))
def test_what_is_not_in_form_is_refused_with_file_rule_field_and_remedy(tmp_path: Path, text: str, told: str) -> None:
    with pytest.raises(FleetError) as refused:
        _shop(tmp_path, text)
    assert told in str(refused.value)
    assert all(line.partition("; ")[2] for line in refused.value.lines())


def test_everything_that_is_wrong_is_told_together(tmp_path: Path) -> None:
    with pytest.raises(Refusals) as refused:
        _shop(tmp_path, OWN.replace('"psi"', '"stone"').replace('"compression"', '"tyre"'))
    assert len(refused.value.lines()) == 2


def test_a_file_that_cannot_be_read_is_refused(tmp_path: Path) -> None:
    with pytest.raises(FleetError, match=r"cannot read none\.toml"):
        read_shop_rules(tmp_path / "none.toml")
    path = tmp_path / "latin.toml"
    path.write_bytes(b'cause = "\xe9"')
    with pytest.raises(FleetError, match=r"latin\.toml is not UTF-8 text"):
        read_shop_rules(path)


def test_multiples_of_a_spread_count_outwards_on_both_sides(tmp_path: Path) -> None:
    text = '[[rule]]\nid = "oil-viscosity-own"\nlow = { alarm = { beyond = 4 } }\n'
    assert _rule(_shop(tmp_path, text), "oil-viscosity-own").low.alarm == Limit(Decimal(4))
