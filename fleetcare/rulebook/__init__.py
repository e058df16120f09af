"""Shipped rules and schedules: data with its sources, and what reads it."""
