"""A forecast in words: no more exact than its range allows, and what it rests on."""

from datetime import date, timedelta

from fleetcare.domain.forecasts import Forecast

_DAYS_UP_TO = 14
_WEEKS_UP_TO = 60


def say_range(forecast: Forecast) -> str:
    """Say when a figure is reached: to the day, the week or the month as the width of the range allows.

    Without a last day "not before ..."; without any day the reason.
    """
    early, likely, late = forecast.early, forecast.likely, forecast.late
    if likely is None or early is None:
        return f"no date: {forecast.reason}"
    if late is None:
        return f"not before {early.isoformat()}"
    width = (late - early).days
    if width <= _DAYS_UP_TO:
        return f"about {likely.isoformat()} ({early.isoformat()} to {late.isoformat()})"
    if width <= _WEEKS_UP_TO:
        return f"about the week of {_monday(likely)} (weeks of {_monday(early)} to {_monday(late)})"
    return f"about {likely:%Y-%m} ({early:%Y-%m} to {late:%Y-%m})"


def say_clues(forecast: Forecast) -> str:
    """Say what a forecast rests on: "last 13 weeks: 62 d; same date in 2021, 2022: 131 d, 135 d"."""
    clues = []
    for clue in forecast.clues:
        days = ", ".join(f"{round(took)} d" for took in clue.days)
        clues.append(f"{clue.label}: {days} ({round(100 * clue.weight)} %)" if days else clue.label)
    return "; ".join(clues)


def _monday(day: date) -> str:
    return (day - timedelta(days=day.weekday())).isoformat()
