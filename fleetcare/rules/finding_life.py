"""The life of findings: when each began, how it stood after every sheet, what people answered, and what became of it.

A finding is the same one from sheet to sheet while cause and subject are the same and a point it rests on is; it is known
by the sheet it began on.
It is cleared by the sheet that measured and judged its values again and no longer flags them, or is joined to another
finding that has taken over its values. An acceptance holds for the severity it was given for, and a follow-up until a
sheet taken after it was done flags the finding again. What is dated after the day asked about is not looked at.
"""

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from enum import StrEnum
from typing import TYPE_CHECKING

from fleetcare.domain.severity import Severity
from fleetcare.rules.finding_row import FindingRow

if TYPE_CHECKING:
    from fleetcare.domain.findings import Finding
    from fleetcare.rules.judge_history import Standing

_Key = tuple[str, str]  # cause and subject


class AnswerKind(StrEnum):
    """What somebody decides about a finding: to live with it, or to have something done."""

    ACCEPT = "accept"
    FOLLOW_UP = "follow-up"


class FindingState(StrEnum):
    """How a finding stands, those that want an answer first."""

    OPEN = "open"
    FOLLOW_UP = "follow-up raised"
    ACCEPTED = "accepted"
    CLEARED = "cleared"
    JOINED = "joined to another"
    WITHDRAWN = "withdrawn by rules"


@dataclass(frozen=True, slots=True, order=True)
class At:
    """A moment in the order of entries: a day, and within it the number of an entry."""

    on: date
    entry: int


@dataclass(frozen=True, slots=True)
class Stand:
    """How a finding stood from a sheet on; `is_seen` where that very sheet flags it."""

    at: At
    row: FindingRow
    is_seen: bool


@dataclass(frozen=True, slots=True)
class End:
    """By which sheet a finding ended; `joined` is the finding that took its values over, empty where it was cleared."""

    at: At
    joined: str = ""


@dataclass(frozen=True, slots=True)
class FindingLife:
    """A finding from the sheet it began on. `cause` and `subject` are those of its rules, `stands` are in order."""

    id: str
    cause: str
    subject: str
    stands: tuple[Stand, ...]
    end: End | None = None

    @property
    def begun(self) -> At:
        """When it was seen first."""
        return self.stands[0].at


@dataclass(frozen=True, slots=True)
class Answer:
    """What somebody decided about a finding on a day.

    `done` is when a follow-up was done, `removed_on` when it was removed without that; both None while it waits.
    """

    number: int
    finding: str
    cause: str
    subject: str
    severity: Severity
    kind: AnswerKind
    why: str
    by: str
    on: date
    done: At | None = None
    removed_on: date | None = None


@dataclass(frozen=True, slots=True)
class Lived:
    """A finding on a day: its row as it stood last, its state, what that rests on, and the answer that counts."""

    life: FindingLife
    row: FindingRow
    state: FindingState
    because: str = ""
    answer: Answer | None = None


def finding_lives(standings: "Sequence[Standing]", first_entries: Mapping[int, int]) -> tuple[FindingLife, ...]:
    """Give the findings of an engine from what stood after each sheet, in the order they began.

    `first_entries` names the entry that another one corrects, so that a finding keeps its id when its sheet is put right.
    """
    ended: list[FindingLife] = []
    going: dict[_Key, tuple[FindingLife, Finding]] = {}
    for standing in standings:
        entry = standing.sheet.entry
        at = At(standing.sheet.on, first_entries.get(entry, entry))
        now = {(finding.cause, finding.subject): finding for finding in standing.findings}
        gone = [going.pop(key) for key, (_, before) in [*going.items()] if not _is_same(before, now.get(key))]
        for key, finding in now.items():
            going[key] = (_go_on(going.get(key), finding, at, entry), finding)
        ended += [_ended(life, finding, at, going.values()) for life, finding in gone]
    return tuple(sorted((*ended, *(life for life, _ in going.values())), key=lambda life: (life.begun, life.id)))


def live(lives: Iterable[FindingLife], answers: Sequence[Answer], on: date) -> tuple[Lived, ...]:
    """Give the findings of an engine on a day; those that began later are left out."""
    begun = [life for life in lives if life.begun.on <= on]
    given = {
        life.id: [answer for answer in answers if answer.on <= on and _is_of(answer, life, begun)] for life in begun
    }
    return tuple(_lived(life, given[life.id], on) for life in begun)


def withdrawn(lives: Iterable[FindingLife], answers: Iterable[Answer], on: date) -> tuple[Answer, ...]:
    """Give the newest answer to each finding that the rules, or a corrected sheet, no longer make, by a day."""
    begun = [life for life in lives if life.begun.on <= on]
    lost = [answer for answer in answers if answer.on <= on and not any(_is_of(answer, life, begun) for life in begun)]
    return tuple({answer.finding: answer for answer in sorted(lost, key=_in_order)}.values())


def _is_same(before: "Finding", now: "Finding | None") -> bool:
    """Whether a finding of a cause and subject is the one there was: valves set on one sheet are not those of the next."""
    return now is not None and not {value.point for value in before.evidence}.isdisjoint(
        value.point for value in now.evidence
    )


def _go_on(before: "tuple[FindingLife, Finding] | None", finding: "Finding", at: At, entry: int) -> FindingLife:
    """Let a finding go on, or begin."""
    if before is not None and before[1] == finding:
        return before[0]
    from fleetcare.rules.explain_finding import finding_row  # its words are not worth loading where kept ones are read

    stand = Stand(at, finding_row(finding), any(value.sheet == entry for value in finding.evidence))
    if before is None:
        name = "-".join(part for part in (str(at.entry), finding.rule, finding.subject) if part)
        return FindingLife(name, finding.cause, finding.subject, (stand,))
    life, _ = before
    return FindingLife(life.id, life.cause, life.subject, (*life.stands, stand))


def _ended(life: FindingLife, last: "Finding", at: At, going: "Iterable[tuple[FindingLife, Finding]]") -> FindingLife:
    """End a finding: joined to one that has a value of it now, else cleared."""
    values = set(last.evidence)
    joined = (other.id for other, finding in going if values & set(finding.evidence))
    return FindingLife(life.id, life.cause, life.subject, life.stands, End(at, next(joined, "")))


def _is_of(answer: Answer, life: FindingLife, lives: Sequence[FindingLife]) -> bool:
    """Whether an answer is to a finding: by its id, or where that is gone, as it had this cause on that day."""
    if any(answer.finding == other.id for other in lives):
        return answer.finding == life.id
    is_same = (answer.cause, answer.subject) == (life.cause, life.subject)
    return is_same and life.begun.on <= answer.on and (life.end is None or answer.on <= life.end.at.on)


def _in_order(answer: Answer) -> tuple[date, int]:
    return answer.on, answer.number


def _lived(life: FindingLife, answers: Sequence[Answer], on: date) -> Lived:
    stands = [stand for stand in life.stands if stand.at.on <= on]
    row, answer = stands[-1].row, max(answers, key=_in_order, default=None)
    if life.end is not None and life.end.at.on <= on:
        end = life.end
        what = f"joined to {end.joined}" if end.joined else "cleared"
        state = FindingState.JOINED if end.joined else FindingState.CLEARED
        return Lived(life, row, state, f"{what} by entry {end.at.entry} on {end.at.on}", answer)
    if answer is None:
        return Lived(life, row, FindingState.OPEN)
    if answer.kind is AnswerKind.ACCEPT:
        return Lived(life, row, *_accepted(row, answer), answer)
    return Lived(life, row, *_followed_up(stands, answer, on), answer)


def _accepted(row: FindingRow, answer: Answer) -> tuple[FindingState, str]:
    said = f"accepted as {answer.severity} by {answer.by} on {answer.on}: {answer.why}"
    if row.severity == Severity.ALARM and answer.severity is Severity.ALERT:
        return FindingState.OPEN, f"graver than when it was {said}"
    return FindingState.ACCEPTED, said


def _followed_up(stands: Sequence[Stand], answer: Answer, on: date) -> tuple[FindingState, str]:
    said = f"follow-up raised by {answer.by} on {answer.on}: {answer.why}"
    done = answer.done
    if done is None or done.on > on:
        if answer.removed_on is not None and answer.removed_on <= on:
            return FindingState.OPEN, f"its follow-up was removed on {answer.removed_on} without being done"
        return FindingState.FOLLOW_UP, said
    again = next((stand for stand in stands if stand.is_seen and stand.at > done), None)
    if again is not None:
        return FindingState.OPEN, f"still there on {again.at.on}, after its follow-up was done on {done.on}"
    return FindingState.FOLLOW_UP, f"{said}; done on {done.on}, not measured since"
