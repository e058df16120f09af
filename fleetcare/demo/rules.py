"""The rules the Tallow Fen Drainage Board has of its own: a warning before the hours the law gives are used up."""

NAME = "hours"
WHY = "the set of the pump control is proved for many hours each year"
TEXT = """\
[[preset]]
name = "zzzz-emergency-hours"
engines = ["SB-04"]

[[rule]]
id = "hours-near-100"
kinds = "run"
quantity = "minutes"
bounds = { basis = "year" }
unit = "h"
high = { alert = { reach = 90 } }
words = { purpose = ["test", "supplemental", "36-month", "other"] }
applies = { engines = ["SB-04"] }
cause = "yearly hours for testing nearly used up"
message = "an emergency engine may run at most 100 h of a calendar year for maintenance and readiness testing"
source = "the Board's own: nine tenths of the 100 h of 40 CFR 63.6640(f); hold that against the current text"
next_step = "prove it no longer this year; keep what is left for the monthly runs"
caution = "Exhaust gas kills: run only where ventilated. Clear of rotating parts; hot surfaces; ears protected."
"""
