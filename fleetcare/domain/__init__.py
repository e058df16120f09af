"""The words of the trade as frozen facts. Standard library only; no database, no clock."""
