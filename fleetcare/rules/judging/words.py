"""What a sheet says in words, held against what a rule asks to be said and not to be said."""

from collections.abc import Iterable

from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Rule


def words_of(sheet: MeasuredSheet, quantity: str, point: str = "") -> frozenset[str]:
    """Give what a sheet says of something at a point, in small letters; a word without a point is said of all."""
    return frozenset(
        word.text.strip().casefold()
        for word in sheet.words
        if word.quantity == quantity and word.point in {point, ""} and word.text.strip()
    )


def says(sheet: MeasuredSheet, rule: Rule) -> bool:
    """Whether a sheet says all a rule asks to be said, and nothing it must not."""
    if not rule.words and not rule.unless:
        return True
    return (
        not unsaid(sheet, rule)
        and all(
            any(_among(word, words_of(sheet, quantity)) for word in wanted) for quantity, wanted in rule.words.items()
        )
        and not any(words_of(sheet, quantity) & _small(barred) for quantity, barred in rule.unless.items())
    )


def unsaid(sheet: MeasuredSheet, rule: Rule) -> tuple[str, ...]:
    """Give what a rule asks to be said and the sheet says nothing of; an empty word asks for nothing to be said."""
    return tuple(
        quantity for quantity, wanted in rule.words.items() if "" not in wanted and not words_of(sheet, quantity)
    )


def _among(word: str, said: frozenset[str]) -> bool:
    return word.casefold() in said if word else not said


def _small(words: Iterable[str]) -> frozenset[str]:
    return frozenset(word.casefold() for word in words)
