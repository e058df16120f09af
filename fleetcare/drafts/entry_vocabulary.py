"""What an entry line may name: tags with their tasks and meters, and people."""

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date
from difflib import get_close_matches

from fleetcare.domain.quantities import Kind
from fleetcare.drafts.entry_words import Fit, fit_name, name_parts, tag_key

_MOST_NEAR = 3
_LIKE_ENOUGH = 0.5  # tags are short: of two letters one may be wrong


@dataclass(frozen=True, slots=True)
class MeterWords:
    """A meter as far as a figure needs to know it: what it counts, in which unit, from when until before when."""

    kind: Kind
    unit: str
    from_on: date | None = None
    to_on: date | None = None

    def counts_on(self, day: date) -> bool:
        """Tell whether it counts on a day."""
        return (self.from_on is None or self.from_on <= day) and (self.to_on is None or day < self.to_on)


@dataclass(frozen=True, slots=True)
class ItemWords:
    """An engine or machine in use: its tag, the names of its tasks in use, and its meters, its machine's too."""

    tag: str
    tasks: tuple[str, ...] = ()
    meters: tuple[MeterWords, ...] = ()


class Names:
    """Names that may be typed in full or by the beginnings of their words."""

    def __init__(self, names: Iterable[str]) -> None:
        self.names = tuple(names)
        self._parts = tuple((name, name_parts(name)) for name in self.names)

    def fitting(self, typed: tuple[str, ...]) -> dict[str, Fit]:
        """Give the names that typed words fit; only those they fit in full where there are any."""
        fits = {name: fit for name, parts in self._parts if (fit := fit_name(typed, parts))}
        return {name: fit for name, fit in fits.items() if fit is Fit.IN_FULL} or fits

    def exactly(self, text: str) -> str | None:
        """Give the name that a text is, whatever its case."""
        return next((name for name in self.names if name.casefold() == text.casefold()), None)

    def near(self, text: str) -> list[str]:
        """Give the names of which a word is like a text that fits none."""
        words = {part: name for name, parts in self._parts for part in parts}
        return list(dict.fromkeys(words[part] for part in get_close_matches(text.casefold(), words, n=_MOST_NEAR)))


class Vocabulary:
    """All that may be named on a day. Made once, for a line is read again with every key."""

    def __init__(self, on: date, items: Iterable[ItemWords] = (), people: Iterable[str] = ()) -> None:
        self.on = on
        self.people = Names(people)
        self.longest_tag = 0
        self._by_tag: dict[str, ItemWords] = {}
        self._by_key: dict[str, list[str]] = {}
        for item in items:
            self.longest_tag = max(self.longest_tag, len(item.tag.split()))
            self._by_tag[item.tag.casefold()] = item
            self._by_key.setdefault(tag_key(item.tag), []).append(item.tag)

    @property
    def names_any(self) -> bool:
        """Whether there is anything to write about."""
        return bool(self._by_tag)

    def item(self, tag: str) -> ItemWords:
        """Give the item of a tag that is one."""
        return self._by_tag[tag.casefold()]

    def exactly(self, text: str) -> str | None:
        """Give the tag that a text is, whatever its case."""
        found = self._by_tag.get(text.casefold())
        return found.tag if found is not None else None

    def tagged(self, text: str) -> list[str]:
        """Give the tag that a text is, else those it is but for hyphens, spaces and leading zeros."""
        exact, key = self.exactly(text), tag_key(text)
        return [exact] if exact is not None else self._by_key.get(key, []) if key else []

    def near(self, text: str) -> list[str]:
        """Give the tags most like a text."""
        keys = get_close_matches(tag_key(text), self._by_key, n=_MOST_NEAR, cutoff=_LIKE_ENOUGH)
        return [tag for key in keys for tag in self._by_key[key]][:_MOST_NEAR]
