"""Which rules of the book are for an engine: by its nameplate, and by the presets the shop names it for."""

import re

from fleetcare.domain.measured import MeasuredEngine
from fleetcare.domain.rule_book import AppliesTo, Rule, RuleBook

_WINTER = re.compile(r"[0-9]+W-?", re.ASCII | re.IGNORECASE)


def rules_for(book: RuleBook, engine: MeasuredEngine) -> tuple[Rule, ...]:
    """Give the rules for an engine, in the order of the book.

    A rule with a preset is off unless the shop names the engine for it. Where one of a choice is on, those of the same
    choice that are on for every engine give way.
    """
    fitting = [rule for rule in book.rules if is_for(rule.applies, engine) and _is_on(rule, book, engine)]
    decided = {rule.choice for rule in fitting if rule.preset and rule.choice}
    return tuple(rule for rule in fitting if rule.preset or rule.choice not in decided)


def is_for(applies: AppliesTo, engine: MeasuredEngine) -> bool:
    """Whether an engine's nameplate matches all that is asked; what it does not say does not match."""
    least, most = applies.cylinders_least, applies.cylinders_most
    return (
        _among(engine.fuel, applies.fuels)
        and not (engine.fuel and applies.not_fuels and _among(engine.fuel, applies.not_fuels))
        and (least is None or engine.cylinders >= least)
        and (most is None or 0 < engine.cylinders <= most)
        and _among(engine.adjuster, applies.adjusters)
        and _among(engine.duty, applies.duties)
        and _among(engine.tag, applies.engines)
        and (not applies.grades or bool(_grades(engine.oil_grade) & {grade.casefold() for grade in applies.grades}))
        and (applies.is_marine is None or applies.is_marine is engine.is_marine)
    )


def _is_on(rule: Rule, book: RuleBook, engine: MeasuredEngine) -> bool:
    return not rule.preset or _among(engine.tag, book.chosen.get(rule.preset, ("",)))


def _among(word: str, wanted: tuple[str, ...]) -> bool:
    """Whether a word is among those wanted, whatever its case; nothing wanted is matched by all."""
    return not wanted or word.strip().casefold() in {one.strip().casefold() for one in wanted}


def _grades(grade: str) -> set[str]:
    """Give the names an oil grade goes by: SAE 15W-40 is 15w-40 and 40."""
    name = grade.strip().casefold().removeprefix("sae").strip()
    return {name, _WINTER.sub("", name)} - {""}
