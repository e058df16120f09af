"""What is asked about a task: how often, what it takes, how it counts, and what kind of work it is."""

from fleetcare.tui.forms.base import Field

USUAL = (
    Field("every", "Every", "how often, such as 250h; 12mo", several=True),
    Field("first", "First", "the first interval, where it is another, such as 50h", several=True),
    Field("ahead", "Near from", "how long before it counts as near; left empty a tenth of the interval", several=True),
    Field("grace", "Grace", "what it may run over, such as 10h", several=True),
    Field("last_done", "Last done", "the day, the dial figure, or both, such as 2026-01-15; 900h", several=True),
    Field("work", "Kind of work", "drain (engine oil alone), coolant, gear-oil, filter, lash, ...", "work kinds"),
    Field("part", "Parts", "parts it takes, such as Oil filter:1", "parts", several=True),
    Field("labour", "Labour", "working time, such as 1.5h"),
    Field("caution", "Caution", "what can hurt"),
    Field("source", "Source", "where this interval stands"),
)
_COUNTING = (
    Field("anchor", "Count from", "what the next point counts from", choices=("from-done", "from-due", "on-grid"), group="HOW IT COUNTS"),
    Field("grid_origin", "Grid from", "where a grid begins: a day or a dial figure", several=True),
    Field("combine", "Combine", "due by the first interval that ends, or only by the last", choices=("first", "last")),
    Field("not_later_than", "Not later than", "bound for combining by the last, such as 5y"),
    Field("through_month_end", "To month end", "due through the last day of the month", is_yes_no=True),
    Field("once_each", "Once each", "calendar week, month, quarter or year", choices=("week", "month", "quarter", "year")),
    Field("window", "Window", "days either side of the date, such as 10d"),
)  # fmt: skip
_WORK = (
    Field("needs_sheet", "Needs sheet", "closes only with a sheet of this kind", choices=("lash", "compression", "leakdown", "run", "spot", "oil"), group="WHAT IT IS"),
    Field("covers", "Covers", "tasks that are done along with it", "task", several=True),
    Field("law", "By law", "required by law: never put off", is_yes_no=True),
    Field("insurer", "By insurer", "required by the insurer: never put off", is_yes_no=True),
    Field("deferrable", "May be put off", "yes or no; left empty: no where it is once each, else yes", choices=("yes", "no")),
    Field("once", "Only once", "done once, then no more", is_yes_no=True),
    Field("on_condition", "On condition", "no interval: done when called for", is_yes_no=True),
    Field("pause_while_laid_up", "Pauses", "its calendar stands still while laid up", is_yes_no=True),
)  # fmt: skip
RARER = (*_COUNTING, *_WORK)
