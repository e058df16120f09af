"""What people say of findings, the shop's rules, and what rules made of each engine."""

from datetime import date

from sqlmodel import Field

from fleetcare.db.columns import Row, Stored, choice, ref
from fleetcare.domain.rule_book import Severity


class FindingAnswer(Row, table=True):
    """What somebody decided about a finding, known by its id, its cause and subject; `severity` is how grave it was then."""

    __tablename__ = "finding_answer"

    item_id: int = ref("item")
    finding: str
    cause: str
    subject: str = ""
    severity: Severity = choice("severity", Severity)
    kind: str = choice("kind", "accept", "follow-up")
    why: str
    person_id: int = ref("person")
    on: date
    call_id: int | None = ref("task_call", default=None)


class ShopRules(Row, table=True):
    """Rules of the shop under a name, as TOML, from a day on. The newest row of a name counts; one may drop it."""

    __tablename__ = "shop_rules"

    name: str
    text: str = ""
    is_dropped: bool = False
    from_on: date
    why: str
    person_id: int = ref("person")


class JudgedEngine(Stored, table=True):
    """What the rules made of an engine, as JSON. Derived: every row may be dropped, the ledger knows none.

    `seq` is the ledger's entry up to which it is known to hold, `book` the digest of the rules, `facts` that of what was
    judged.
    """

    __tablename__ = "judged_engine"

    item_id: int = Field(primary_key=True, foreign_key="item.id")
    seq: int
    book: str
    facts: str
    content: str
