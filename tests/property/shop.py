"""Rule books of shops for the laws of judging: shapes that no shipped rule has, limits made tighter, presets named."""

from itertools import product
from typing import Any

from fleetcare.domain.rule_book import RuleBook
from fleetcare.rulebook.rules import rule_book, shop_rules

_TEXT = {"message": "look closer", "source": "the shop's own", "next_step": "measure again"}


def _own(name: str, kind: object, quantity: str, cause: str, unit: str, **shape: object) -> dict[str, Any]:
    return {"id": name, "kinds": kind, "quantity": quantity, "cause": cause, "unit": unit, **_TEXT, **shape}


def _high(alert: object, alarm: object) -> dict[str, Any]:
    return {"alert": {"beyond": alert}, "alarm": {"reach": alarm}}


OWN = [
    _own("own-fe-usual", "oil", "Fe", "iron wear", "ppm", high=_high(2, 3), low=_high(2, 3),
         statistical={"pool": "own", "method": "mean", "least_samples": 3}),
    _own("own-cu-family", "oil", "Cu", "copper wear", "%", high=_high(90, 98), low=_high(10, 2),
         statistical={"pool": "family", "method": "percentile", "least_samples": 50}),
    _own("own-fe-trend", "oil", "Fe", "iron wear", "ppm", high=_high(10, 30),
         rate={"since": "before", "per": 10, "is_corrected": True}),
    _own("own-pb-rate", "oil", "Pb", "lead wear", "%", high=_high("0.0002", "0.001"), low=_high("-0.0001", "-0.001"),
         rate={"since": "new", "per": 100}),
    _own("own-kv100-step", "oil", "kv100", "oil viscosity out of line", "mm2/s", high=_high(1, 3), low=_high(-1, -3),
         change={"since": "before", "by": "difference"}),
    _own("own-crankcase-rate", ["spot", "run"], "crankcase", "blow-by", "bar", high=_high("0.001", "0.01"),
         rate={"since": "before", "per": 100}),
    _own("own-pressure-lowest", "compression", "pressure", "uneven compression", "%", high=_high(10, 25),
         against_sheet={"reference": "lowest", "by": "share"}),
    _own("own-coolant", ["spot", "run"], "coolant", "hot engine", "°F", high=_high(212, 230), bounds={}),
    _own("own-compression-left", "compression", "pressure", "low compression", "kgf/cm2", phases=["wet"],
         low=_high(20, 12), bounds={}),
    _own("own-leak-mean", "leakdown", "leak", "leaking cylinder", "%", high=_high(5, 15),
         against_sheet={"reference": "mean", "by": "difference"}),
    _own("own-lash", "lash", "lash", "wide gap", "in", high=_high("0.014", "0.016"), bounds={}),
    _own("own-lash-closing", "lash", "lash", "closing valve", "mm", low=_high("-0.03", "-0.06"),
         change={"since": "before", "by": "difference"}),
]  # fmt: skip
OWN_PATTERN = {
    "id": "own-hot-and-thin", "kinds": ["oil", "spot", "run"], "cause": "hot oil", **_TEXT,
    "pattern": {"at": "engine", "severity": "alarm", "absorbs": ["kv100", "oil_pressure"]},
    "condition": [
        {"quantities": ["kv100"], "asks": "flagged low"},
        {"quantities": "coolant", "asks": "within", "low": {"beyond": 100}, "unit": "°C", "calls_out": True},
    ],
}  # fmt: skip

_TIGHTER = [
    {"id": "oil-fe", "high": {"alert": {"beyond": 50}, "alarm": {"beyond": 120}}},
    {"id": "compression-r75", "low": {"alarm": {"reach": 85}}},
    {"id": "compression-past", "low": {"alert": {"beyond": -5}}},
    {"id": "oil-fe-rate", "high": {"alert": {"beyond": 10}}},
    {"id": "oil-pb-own", "high": {"alert": {"beyond": 1}}},
    {"id": "leakdown-bands", "high": {"alert": {"reach": 5}}},
    {"id": "run-load", "low": {"alert": {"beyond": 50}}},
]
_PRESETS = (
    (),
    ("zzzz-ci", "oil-joap-two-stroke", "compression-a20", "zzzz-emergency-hours", "battery-12v"),
    ("zzzz-si", "oil-gas-genset", "compression-s15k", "battery-24v", "compression-s25"),
    ("oil-highspeed", "oil-mediumspeed", "compression-d15", "zzzz-emergency-hours"),
)


def _book(presets: tuple[str, ...], rules: list[dict[str, Any]]) -> RuleBook:
    chosen = [{"name": name, "engines": "P-01"} for name in presets]
    return rule_book(shop_rules({"preset": chosen, "rule": rules}, "shop"))


BOOKS: tuple[RuleBook, ...] = tuple(
    _book(presets, rules)
    for presets, rules in product(_PRESETS, ([], [*OWN, OWN_PATTERN], [*_TIGHTER, *OWN, OWN_PATTERN]))
)

STRICTER = tuple(zip(BOOKS[1::3], BOOKS[2::3], strict=True))
"""Books of a shop, each beside the same with limits of rules of several shapes made tighter."""
