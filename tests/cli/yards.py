"""Yards that several files of tests look at: command lines, one a line, as of 1 May 2026."""

PUMP = """
    engine add P-01 --site "North Sluice" --meter hours --in-service 2024-01-10 --start-at 0 --as-new
    reading P-01 1000 --on 2026-04-01
    task add P-01 "Oil and filter" --every 250h --every 12mo --last-done 2026-02-01 --last-done 900
    task add P-01 "Valve lash" --every 1000h --needs-sheet lash
"""
"""One engine: oil due at 1150 h or on 2027-02-01, valve lash at 1000 h, which it has just reached."""

LORRY = """
    machine add LR-1 --site "Board Yard" --meter distance --meter-digits 6.0 --in-service 2025-01-01 --start-at 50000
    machine add LR-2 --site "West Depot" --meter distance:mi --in-service 2025-01-01 --start-at 10000
    engine add E-1 --machine LR-1 --position front --meter hours --in-service 2025-01-01 --start-at 0h
    reading LR-1 61000 --on 2026-04-01
    reading E-1 400h --on 2026-04-01
    task add E-1 Oil --every 10000km --last-done 55000
    task add LR-1 Brakes --every 20000km --last-done 50000
"""
"""Two lorries with odometers in km and in miles, and an engine in the first with an hour meter of its own."""
