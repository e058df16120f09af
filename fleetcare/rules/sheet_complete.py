"""When a sheet other than the lash sheet is complete enough to close the work that needs it.

Compression and leak-down: every cylinder, dry, as far as the nameplate says how many there are. A run: its minutes, and
its load where the nameplate says the rated power. An oil sample: any value of the laboratory. Spot readings: any.
"""

from collections.abc import Sequence

from fleetcare.domain.measured import COMPRESSION, LEAKDOWN, OIL, RUN, MeasuredEngine
from fleetcare.domain.sheet_kinds import KINDS, WORDS
from fleetcare.domain.sheets import Phase, SheetValue

_PER_CYLINDER = {COMPRESSION: ("pressure",), LEAKDOWN: ("leak", "held")}


def missing_cylinders(kind: str, values: Sequence[SheetValue], engine: MeasuredEngine) -> tuple[str, ...]:
    """Give the cylinders a compression or leak-down sheet says nothing of; none for any other kind."""
    if kind not in _PER_CYLINDER:
        return ()
    measured = {value.point for value in _measured(values) if value.quantity in _PER_CYLINDER[kind]}
    return tuple(name for name in map(str, range(1, engine.cylinders + 1)) if name not in measured)


def why_incomplete(kind: str, values: Sequence[SheetValue], engine: MeasuredEngine) -> str:
    """Say what a sheet lacks to be complete, empty where it lacks nothing."""
    told = {value.quantity for value in _measured(values)}
    if missing := missing_cylinders(kind, values, engine):
        return f"{'cylinder' if len(missing) == 1 else 'cylinders'} {', '.join(missing)} not measured"
    if kind in _PER_CYLINDER:
        return "" if told.intersection(_PER_CYLINDER[kind]) else "no cylinder was measured"
    if kind == RUN:
        wanted = ("minutes", "load") if engine.rated_kw else ("minutes",)
        return " and ".join(f"no {quantity}" for quantity in wanted if quantity not in told)
    if kind == OIL:
        lab = {column.quantity for column in KINDS[OIL].columns if column.is_lab}
        return "" if told & lab else "no value of a laboratory"
    return "" if told else "nothing was measured"


def _measured(values: Sequence[SheetValue]) -> list[SheetValue]:
    """Leave out words, wet tests and fresh oil."""
    return [value for value in values if value.quantity not in WORDS and value.phase not in {Phase.WET, Phase.NEW}]
