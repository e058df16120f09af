"""Sheets held against the rule book: a module for each shape of rule, pure and exact."""
