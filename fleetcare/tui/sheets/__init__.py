"""Sheets of measurements on the screen, one file for each kind."""
