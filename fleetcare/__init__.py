"""What each engine of a small fleet needs next, with the working shown."""

__version__ = "0.1.0"
