"""The forecast as a plain function, for scorers outside this project."""

from datetime import date

from fleetcare.rules.forecast import History

Ends = tuple[date | None, date | None, date | None]


def forecast(readings: list[tuple[date, float]], target: float, today: date) -> Ends | None:
    """(early, likely, late) with None for an open end, or None where no date can be told.

    `today` is not used: a forecast rests on readings, and may lie before today when the last one is old.
    """
    answer = History(readings).reach(target)
    return None if answer.likely is None else (answer.early, answer.likely, answer.late)
