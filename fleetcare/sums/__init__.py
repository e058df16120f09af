"""Bench sums: what each asks for, and its answer with the working; no database needed. Each subject has a file of its own."""

from fleetcare.sums import compression, lash, oil, shapes, valve_order
from fleetcare.sums.base import Sum

SUMS: tuple[Sum, ...] = (*valve_order.SUMS, *lash.SUMS, *compression.SUMS, *shapes.SUMS, *oil.SUMS)
"""Every sum, in the order of help."""
