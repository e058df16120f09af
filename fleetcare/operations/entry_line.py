"""One line from anywhere: read back as a sentence with what it would do, then stored as it was read back."""

from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import Kind
from fleetcare.drafts.entry_line import understand
from fleetcare.drafts.entry_questions import Question
from fleetcare.drafts.entry_understood import Understood
from fleetcare.drafts.entry_vocabulary import ItemWords, MeterWords, Vocabulary
from fleetcare.errors import Refused
from fleetcare.operations.due import DueRow
from fleetcare.operations.entry_sentence import say_done, say_understood
from fleetcare.operations.entry_trial import Outcome, try_out
from fleetcare.operations.rows import day, fetch, grouped
from fleetcare.rules.due.due_list import item_lines
from fleetcare.rules.due.row import due_row

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session

    from fleetcare.operations.entering import Entered


@dataclass(frozen=True, slots=True)
class ReadBack:
    """A line read back: what is clear of it, what is asked, and in one sentence all that storing it would do.

    `closes` names the tasks it closes, `covers` each task done along with the one it is done with, `stays_open` each
    task that stays open though it was worked on, with why. `rows` are the lines of tasks done as they would stand.
    """

    line: Understood
    questions: tuple[Question, ...]
    sentence: str
    closes: tuple[str, ...] = ()
    covers: tuple[tuple[str, str], ...] = ()
    stays_open: tuple[tuple[str, str], ...] = ()
    rows: tuple[DueRow, ...] = ()

    @property
    def can_be_stored(self) -> bool:
        """Whether nothing is open."""
        return not self.questions


def load_vocabulary(connection: "Connection", on: date) -> Vocabulary:
    """Load all that a line may name: what is in use, with tasks and meters, and people."""
    tasks = grouped(fetch(connection, "select item_id, name from task where removed_on is null order by id"))
    meters = grouped(
        fetch(
            connection,
            "select fit.item_id, meter.kind, meter.unit, fit.from_on, fit.to_on from meter_fit fit"
            " join meter on meter.id = fit.meter_id order by meter.id",
        )
    )
    items = [
        ItemWords(
            tag,
            tuple(row[1] for row in tasks.get(item_id, ())),
            tuple(MeterWords(Kind(row[1]), row[2], day(row[3]), day(row[4])) for row in meters.get(item_id, ())),
        )
        for item_id, tag in fetch(connection, "select id, tag from item where withdrawn_on is null order by tag")
    ]
    people = [row[0] for row in fetch(connection, "select name from person order by name")]
    return Vocabulary(on, items, people)


def read_back(connection: "Connection", text: str, on: date, vocabulary: Vocabulary | None = None) -> ReadBack:
    """Read a line back as of a day, and say what storing it would do; nothing is stored.

    `vocabulary` is that of the same day, loaded before, so that a line may be read again with every key.
    """
    line = understand(text, vocabulary or load_vocabulary(connection, on))
    if line.questions:
        return ReadBack(line, line.questions, say_understood(line, on))
    try:
        outcome = try_out(connection, line, on)
    except Refused as error:
        outcome = [Question(0, len(text), str(error))]
    if not isinstance(outcome, Outcome):
        return ReadBack(line, tuple(outcome), say_understood(line, on))
    lines = item_lines(outcome.facts, recorded_only=True)
    done = {task.id for task in (*outcome.closed, *(small for small, _ in outcome.covered))}
    return ReadBack(
        line=line,
        questions=(),
        sentence=say_done(line, outcome, lines),
        closes=tuple(task.name for task in outcome.closed),
        covers=tuple((small.name, big.name) for small, big in outcome.covered),
        stays_open=tuple((task.name, why) for task, why in outcome.open),
        rows=tuple(due_row(one, outcome.facts) for one in lines if one.task.id in done),
    )


def store_line(session: "Session", seen: ReadBack, on: date, import_key: str | None = None) -> "Entered":
    """Store a line as it was read back, and give what came of it; work under a key that tells it again.

    Refuses one with an open question, and one that says or does something else by now than when it was read back, and
    work that was stored before under its key.
    """
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.drafts.work import LogDraft, ReadingDraft
    from fleetcare.operations.entering import Entered, enter_reading, enter_work

    now = read_back(session.connection(), seen.line.text, on)
    if now != seen:
        raise Refused("the line would do something else by now", "read it again, then store it")
    if not now.can_be_stored:
        raise Refused(f"a question is open: {now.questions[0].asked}", "answer it, then store the line")
    entered = [enter_reading(session, read_draft(ReadingDraft, fields), on) for fields in now.line.readings()]
    if now.line.is_work:
        entered.append(enter_work(session, read_draft(LogDraft, {**now.line.work(), "import_key": import_key}), on))
    return Entered(
        [said for one in entered for said in one.said],
        [moved for one in entered for moved in one.moved],
        [note for one in entered for note in one.notes],
    )
