"""What is typed wrongly into each field of each form, and what is then said beside it."""

from fleetcare.tui.forms.all import FORMS
from fleetcare.tui.forms.fields_task import RARER, USUAL

MISSING = ("", "this is missing")
NOT_COME = ("2026-05-02", "2026-05-02 has not come yet, today counts as 2026-05-01; give an earlier “Day”")
STAYS = "stands here and cannot be taken away; change it, or Ctrl N"

Cases = dict[tuple[str, str], list[tuple[str, str]]]

_WORK: Cases = {
    ("log", "task"): [("Oyl and filter", "PS-1 has no task 'Oyl and filter'; did you mean Oil and filter?")],
    ("log", "on"): [("2026-02-30", "there is no day 2026-02-30"), NOT_COME],
    ("log", "at"): [
        ("many", "'many' is not"),
        ("5600km", "no meter counts distance of PS-1 on that day; check the day, or add one to PS-1: x, then e"),
    ],
    ("log", "part"): [("Oil filter:0", "0 cannot be right")],
    ("log", "top_up"): [("8", "'8' is not a volume; write it like 8L")],
    ("log", "until"): [("2026-06-01", "“… until” says by when a follow-up is due; give “Follow-up” as well")],
    ("log", "follow_up"): [("yes", "a follow-up is raised from a defect; give “Defect” as well")],
    ("correct", "task"): [("Oyl", "PS-1 has no task 'Oyl'")],
    ("correct", "on"): [("30.4.2026", "'30.4.2026' is not a date"), ("", "2025-12-01 cannot be left out")],
    ("correct", "at"): [("12 furlongs", "furlongs")],
    ("correct", "part"): [("Oil filter:x", "x")],
    ("correct", "top_up"): [("0L", "0L cannot be right"), ("8L", "entry 1 is no top-up; leave out “Topped up”")],
    ("correct", "repair"): [("valve cover", "entry 1 is no repair; leave out “Repair”")],
    ("correct", "defect"): [("drips", "entry 1 is no defect; leave out “Defect”")],
    ("void", "why"): [("", "voiding an entry needs a reason; give “Why”")],
    ("defer", "until"): [
        ("soon", "'soon' is not"),
        ("2025-01-01", "2025-01-01 is past"),
        ("2026-06-01; 2026-07-01", "give “Until” once for each"),
    ],
    ("defer", "why"): [MISSING],
    ("defer", "by"): [MISSING],
}
_METERS: Cases = {
    ("reading", "value"): [MISSING, ("lots", "'lots' is not"), ("5km", "no meter counts distance of PS-1")],
    ("reading", "on"): [("2026-5-1", "'2026-5-1' is not a date"), NOT_COME],
    ("swap", "on"): [("1776-07-04", "1776-07-04 cannot be right")],
    ("swap", "old_last"): [("none", "'none' is not"), ("1", "1 h on 2026-05-01 does not fit reading")],
    ("swap", "new_first"): [MISSING],
    ("swap", "unmetered"): [("some", "'some' is not")],
    ("swap", "value"): [("12h 3", "12h 3")],
    ("void-reading", "why"): [MISSING],
}
_STANDING: Cases = {
    ("lay-up", "on"): [("today", "'today' is not a date"), NOT_COME],
    ("return", "on"): [MISSING, NOT_COME],
    ("return", "by"): [MISSING],
    ("stand-down", "on"): [("x", "'x' is not a date"), NOT_COME],
    ("withdraw", "on"): [("2026-13-01", "there is no day 2026-13-01"), NOT_COME],
    ("move", "machine"): [
        ("", "goes into a machine or out of one; give “Into” or “Take it out”"),
        ("PH-7", "no engine or machine has the tag 'PH-7'"),
        ("PS-2", "PS-2 is an engine, not a machine; name a machine, or add one: 2, then m"),
    ],
    ("move", "on"): [("1 May", "'1 May' is not a date"), NOT_COME],
}
_FACTOR: Cases = {
    ("factor", "kind"): [MISSING, ("days", "'days' is no kind of trigger; use one of hours")],
    ("factor", "factor"): [MISSING, ("half", "'half' is not a number"), ("1.5", "a duty factor of 1.5 cannot be")],
    ("factor", "on"): [("now", "'now' is not a date")],
    ("factor", "why"): [MISSING],
}
_ITEMS: Cases = {
    ("engine", "tag"): [MISSING, ("PS-2", "the tag 'PS-2' belongs to an engine in use")],
    ("engine", "machine"): [("PH-7", "no engine or machine has the tag 'PH-7'")],
    ("engine", "meter"): [("hour", "no meter counts 'hour'"), ("hours; hours", "“Meter” names one kind twice")],
    ("engine", "in_service"): [("2024", "'2024' is not a date")],
    ("engine", "start_at"): [("nought", "'nought' is not"), ("5", "a start figure needs its day; give “In service”")],
    ("engine", "as_new"): [("yes", "give “In service” and “Starts at”")],
    ("engine", "cylinders"): [("six", "'six'"), ("0", "0 cannot be right")],
    ("engine", "firing_order"): [("1-2-3", "firing order 1-2-3 leaves out cylinders 4, 5, 6")],
    ("machine", "tag"): [MISSING, ("ps-2", "the tag 'PS-2' belongs to an engine in use")],
    ("machine", "meter"): [("hours:km", "'km' is no unit of hours")],
    ("machine", "in_service"): [("May", "'May' is not a date")],
    ("machine", "start_at"): [("5 moons", "'5 moons' has the unknown unit")],
    ("machine", "as_new"): [("yes", "give “In service” and “Starts at”")],
    ("edit", "name"): [("", STAYS)],
    ("edit", "in_service"): [("", STAYS), ("2024-13-01", "there is no day 2024-13-01"), ("2026-04-01", "lies before")],
    ("edit", "start_at"): [("", STAYS), ("x", "'x' is not"), ("5km", "no meter counts distance of PS-1")],
    ("edit", "as_new"): [("no", STAYS)],
    ("edit", "meter"): [("hours", "counts hours already; one that replaces it: x, then n"), ("oil", "no meter counts")],
    ("edit", "meter_digits"): [
        ("many", "'many' is not digits of a dial"),
        ("2.1", "“Digits” 2.1 has no room for reading 12 of PS-1, 302 h"),
    ],
}
_PLATE: Cases = {
    ("edit", "duty"): [("", STAYS)],
    ("edit", "fuel"): [("", STAYS)],
    ("edit", "cylinders"): [("six", "'six'"), ("4", "firing order 1-5-3-6-2-4 goes beyond the engine")],
    ("edit", "layout"): [("w", "'w' is not known; use 'inline', 'v', 'opposed' or 'single'"), ("single", "1 cylinder")],
    ("edit", "numbering"): [("odd", "'odd' is not known")],
    ("edit", "firing_order"): [("1-2", "firing order 1-2 leaves out"), ("one", "'one' is not a firing order")],
    ("edit", "bore"): [("wide", "'wide'"), ("0", "0 cannot be right"), ("9000", "bore 9000 mm cannot be right")],
    ("edit", "stroke"): [("-1", "-1"), ("9000", "stroke 9000 mm cannot be right")],
    ("edit", "rod"): [("long", "'long'"), ("90000", "rod 90000 mm cannot be right")],
    ("edit", "compression_ratio"): [("17:1", "'17:1'"), ("99", "compression ratio 99 cannot be right")],
    ("edit", "rated_rpm"): [("fast", "'fast'"), ("999999", "rated rpm 999999 rpm cannot be right")],
    ("edit", "rated_kw"): [("strong", "'strong'"), ("900000", "rated kw 900000 kW cannot be right")],
    ("edit", "altitude"): [("high", "'high'"), ("9999", "altitude 9999 m cannot be right")],
    ("edit", "oil_grade"): [("", STAYS)],
    ("edit", "sump"): [("full", "'full'"), ("999999", "sump 999999 L cannot be right")],
    ("edit", "valves_per_cylinder"): [("4.5", "'4.5'"), ("9", "valves per cylinder 9 cannot be right")],
    ("edit", "bridged"): [("all", "'all' is not known"), ("both", "a bridge needs the number of valves; give")],
    ("edit", "intake_closes"): [("late", "'late'"), ("999", "intake closes 999 degrees cannot be right")],
    ("edit", "adjuster"): [("nut", "'nut' is not known")],
    ("edit", "screw_pitch"): [("fine", "'fine'"), ("99", "screw pitch 99 mm cannot be right")],
    ("edit", "screw_at"): [("top", "'top' is not known")],
    ("edit", "rocker_ratio"): [("big", "'big'"), ("99", "rocker ratio 99 cannot be right")],
    ("edit", "shim_step"): [("5", "shim step 5 mm cannot be right")],
    ("edit", "lash_intake"): [
        ("0.3", "'0.3' is not a lash range"),
        ("0.3-0.2", "runs backwards"),
    ],
    ("edit", "lash_set_intake"): [("tight", "'tight' is not a lash")],
    ("edit", "lash_exhaust"): [("wide", "'wide' is not a lash range")],
    ("edit", "lash_set_exhaust"): [("0", "0 cannot be right")],
    ("edit", "lash_when"): [("warm", "'warm' is not known")],
}
_TASK: dict[str, list[tuple[str, str]]] = {
    "every": [
        ("sometimes", "'sometimes'"),
        ("0h", "“Every” 0 h is no interval"),
        ("250h; 300h", "“Every” names hours twice"),
    ],
    "first": [("soon", "'soon'"), ("50km", "“First” 50 km binds to no interval of this task; add an “Every” counting")],
    "ahead": [("a bit", "'a bit'"), ("900h", "“Near from” 900 h is not shorter than the interval")],
    "grace": [("some", "'some'"), ("5L", "“Grace” 5 L binds to no interval")],
    "last_done": [("spring", "'spring'"), ("2026-05-02", "“Last done” 2026-05-02 has not come yet")],
    "part": [("Oil filter:none", "none")],
    "labour": [("all day", "'all day' is not"), ("2km", "'2km' is not working time")],
    "anchor": [("loose", "'loose' is not known")],
    "grid_origin": [("there", "'there' is not"), ("100h", "“Grid from” needs a grid; add “Count from” on-grid")],
    "combine": [("both", "'both' is not known"), ("last", "could wait for ever; bound it with “Not later than”")],
    "not_later_than": [("never", "'never'"), ("5y", "“Not later than” bounds “Combine” last only")],
    "once_each": [("day", "'day' is not known")],
    "window": [("10", "'10'")],
    "needs_sheet": [("paper", "'paper' is not known")],
    "covers": [("Oyl", "PS-1 has no task 'Oyl'")],
    "deferrable": [("perhaps", "'perhaps' is not known")],
    "on_condition": [("yes", "on-condition work has no interval; leave out “Every”, or “On condition”")],
}
_TASKS: Cases = {
    **{(form, field): cases for form in ("task", "task-edit") for field, cases in _TASK.items()},
    ("task", "window"): [
        ("10d", "“Window” lies around a calendar date; give a calendar interval, such as “Every” 6mo")
    ],
    ("task-edit", "window"): [("900d", "“Window” 900 d does not fit into the interval")],
    ("task", "name"): [MISSING, ("oil and filter", "PS-1 has a task 'oil and filter' already")],
    ("task", "through_month_end"): [("yes", "“To month end” extends a plain calendar interval; give one")],
    ("task-edit", "on"): [("", STAYS), ("May", "'May' is not a date")],
    ("task-edit", "every"): [("", "the task has no interval; give “Every”"), ("sometimes", "'sometimes'")],
    ("task-edit", "last_done"): [("spring", "'spring'"), ("2026-05-02", "“Last done” 2026-05-02 has not come yet")],
    ("task-end", "on"): [MISSING, NOT_COME],
    ("schedule", "name"): [
        MISSING,
        ("diesel-genset", "PS-1 has these of diesel-genset already: Oil and filter, Valve lash; end them (x, then k)"),
        ("nonesuch", "'nonesuch'"),
        ("no.toml", "cannot read no.toml"),
    ],
    ("schedule-out", "name"): [MISSING],
    ("schedule-out", "source"): [MISSING],
    ("schedule-out", "file"): [
        MISSING,
        ("ours.csv", "'ours.csv' does not end in .toml; name a file such as our-pumps.toml"),
    ],
    ("schedule", "counts_from"): [
        ("maybe", "'maybe'"),
        ("start; unset", "“Count from” start stands alone"),
        ("2026-04-30; 2026-04-29", "“Count from” names two days"),
        ("2026-05-02", "“Count from” 2026-05-02 has not come yet"),
    ],
}
_NAMES: Cases = {
    ("site-name", "known"): [MISSING, ("Nowhere", "there is no site 'Nowhere'; choose one of")],
    ("site-name", "name"): [MISSING, ("board yard", "there is a site 'Board Yard' already; write another name")],
    ("person-name", "known"): [MISSING, ("Nobody", "there is no person 'Nobody'; choose one of")],
    ("person-name", "name"): [MISSING, ("QUILL", "there is a person 'Quill' already; write another name")],
}
_MEASURES: Cases = {
    (form.name, field): cases
    for form in FORMS.values()
    if [one.name for one in form.fields] == ["on", "at", "by", "note"]
    for field, cases in (("on", [("May", "'May' is not a date")]), ("at", [("many", "'many' is not")]))
}
"""Forms on measurements alone: what is measured goes on a sheet, not on the form."""

WRONG: Cases = {**_MEASURES, **_WORK, **_METERS, **_STANDING, **_FACTOR, **_ITEMS, **_PLATE, **_TASKS, **_NAMES}

SAID_ELSEWHERE = {
    ("log", "follow_up", "yes"): "defect",
    ("engine", "start_at", "5"): "in_service",
    ("engine", "as_new", "yes"): "in_service",
    ("machine", "as_new", "yes"): "in_service",
    ("edit", "bridged", "both"): "valves_per_cylinder",
    ("edit", "cylinders", "4"): "firing_order",
    ("task", "on_condition", "yes"): "every",
    ("task-edit", "on_condition", "yes"): "every",
}
"""Where something else must be given first, it is said beside that."""

FREE = {
    *("as_advised", "by", "note", "why", "repair", "defect", "position", "part_done", "out", "name", "site", "fuel"),
    *(field.name for field in (*USUAL, *RARER) if field.is_yes_no or field.name in {"work", "caution", "source"}),
}
"""Fields in which nothing can be wrong: text of one's own, and a yes or no."""

BESIDE = {
    "defer": {"until": "2026-06-01", "why": "x", "by": "Harbin"},
    "return": {"by": "Harbin"},
    "swap": {"old_last": "302", "new_first": "0"},
    "reading": {"value": "310"},
    "void": {"by": "Harbin"},
    "engine": {"tag": "PS-7", "cylinders": "6"},
    "machine": {"tag": "PH-2"},
    "task": {"name": "Belts", "every": "500h"},
    "schedule": {"name": "emergency-exercise"},
    "schedule-out": {"name": "Ours", "source": "shop rule 4", "file": "ours.toml"},
    "move": {"machine": "PH-1"},
    "factor": {"kind": "hours", "factor": "0.8", "why": "dust"},
    "site-name": {"known": "North Sluice", "name": "North Gate"},
    "person-name": {"known": "Fenn", "name": "Fen"},
}
"""What the other fields of a form need for what is said to be about this one."""
