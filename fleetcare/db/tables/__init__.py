"""Every table, in one place to import from."""

from fleetcare.db.columns import Row, Stored
from fleetcare.db.tables.findings import FindingAnswer, JudgedEngine, ShopRules
from fleetcare.db.tables.items import (
    DutyFactor,
    Engine,
    Fitting,
    Item,
    LashSpec,
    Person,
    Setting,
    Site,
    StartFigure,
    StatusSpell,
)
from fleetcare.db.tables.ledger import LedgerEntry
from fleetcare.db.tables.log import (
    Deferral,
    DeferralFigure,
    LogEntry,
    LogPart,
    LogTask,
    TaskCall,
)
from fleetcare.db.tables.meters import Meter, MeterFit, Reading, ReadingMark
from fleetcare.db.tables.sheets import Sheet, SheetValue
from fleetcare.db.tables.tasks import (
    OriginFigure,
    Task,
    TaskCover,
    TaskOrigin,
    TaskPart,
    TaskTrigger,
    TaskVersion,
)

metadata = Stored.metadata

__all__ = [
    "Deferral",
    "DeferralFigure",
    "DutyFactor",
    "Engine",
    "FindingAnswer",
    "Fitting",
    "Item",
    "JudgedEngine",
    "LashSpec",
    "LedgerEntry",
    "LogEntry",
    "LogPart",
    "LogTask",
    "Meter",
    "MeterFit",
    "OriginFigure",
    "Person",
    "Reading",
    "ReadingMark",
    "Row",
    "Setting",
    "Sheet",
    "SheetValue",
    "ShopRules",
    "Site",
    "StartFigure",
    "StatusSpell",
    "Task",
    "TaskCall",
    "TaskCover",
    "TaskOrigin",
    "TaskPart",
    "TaskTrigger",
    "TaskVersion",
    "metadata",
]
