"""A small yard, invented, in which every group of the due list has a line on 1 May 2026. Entered by command lines."""

_USED = "--in-service 2023-05-02 --meter hours"
_NEW = "--in-service 2024-01-10 --start-at 0 --as-new --meter hours"

# One command line each, as typed; words in double quotes are one.
LINES = f"""
setting shop-name "Tallow Fen Drainage Board"
machine add PH-1 --name "Pump house" --site "North Sluice"
engine add PS-1 --name "Pump diesel" --machine PH-1 --duty pump --fuel diesel --cylinders 6 --firing-order 1-5-3-6-2-4 --bore 114 --stroke 135 --rated-rpm 1500 --oil-grade 15W-40 {_NEW}
engine add PS-2 --name "Relief pump diesel" --site "Ousel Outfall" --fuel diesel --cylinders 4 {_USED} --start-at 1875
engine add SB-1 --name "Standby set" --site "Board Yard" --duty standby {_NEW}
engine add TR-1 --name "Tractor with flail mower" --site "Board Yard" {_USED} --start-at 4420
engine add TR-2 --name "Tractor with bucket" --site "Board Yard" {_USED} --start-at 900
engine add PS-9 --name "Old pump diesel" --site "Crake Drove" {_USED} --start-at 11640
task add PS-1 "Oil and filter" --every 250h --every 12mo --work drain --part "Oil filter:1" --labour 1.5h --caution "Hot oil: let it cool."
task add PS-1 "Valve lash" --every 1000h --first 50h --grace 10h --anchor from-due --work lash --last-done 2025-11-02
task add PS-1 Coolant --every 3y --work coolant --source "shop rule 4"
task add PS-2 "Oil and filter" --every 250h --every 12mo --work drain --last-done 2025-04-11 --last-done 1990h
task add SB-1 "Exercise run" --once-each month --grace 5d --law --work run --source "40 CFR 63, table 2d"
task add SB-1 "Day tank cleaning" --every 24mo --work cleaning --last-done 2025-06-01
task add TR-1 "Hydraulic hoses" --every 24mo --work inspection --last-done 2024-03-13
task add TR-1 "Air filter" --every 500h --work filter --last-done 4420h --last-done 2023-05-02
task add TR-1 Gearbox --every 4000h --work gear-oil
task add TR-2 "Oil and filter" --every 200h --work drain --last-done 940h --last-done 2026-01-05
task add TR-2 "Air filter" --every 100h --work filter --last-done 1000h --last-done 2026-02-02
reading PS-1 412 --on 2024-08-01
reading PS-1 820.5 --on 2025-05-20
reading PS-1 3 --on 2025-11-01 --replaced 1101.5 0 --unmetered 4h
log PS-1 "Oil and filter" --on 2025-12-01 --at 40h --by Fenn
log PS-1 Coolant --on 2025-02-03 --by Quill
reading PS-1 302 --on 2026-04-30
reading PS-2 2100 --on 2025-10-01
engine lay-up PS-2 --on 2025-12-22 --why "relief channel dry" --by Harbin
reading SB-1 24 --on 2026-04-27
log SB-1 "Exercise run" --on 2026-03-30 --at 23h --by Fenn
log TR-1 --top-up 15L --on 2026-02-16 --by Fenn
correct 4 --top-up 1.5L --why "comma left out"
reading TR-1 4700 --on 2025-08-10
reading TR-1 4905 --on 2026-04-28
engine factor TR-1 hours 0.98 --on 2026-04-01 --why "dust on the banks"
defer TR-1 "Hydraulic hoses" --until 2026-04-20 --why "mowing first, hoses looked at daily" --by Harbin --as-of 2026-03-10
engine stand-down TR-1 --on 2026-04-29 --why "oil pressure low" --by Harbin
reading TR-2 950 --on 2025-12-15
reading TR-2 1010 --on 2026-01-12
reading TR-2 1066 --on 2026-02-09
reading TR-2 1094 --on 2026-02-23
engine withdraw PS-9 --on 2026-01-31 --why "main bearing"
"""

_RANGES = (
    "--lash-intake 0.20-0.30 --lash-exhaust 0.40-0.50 --lash-set-intake 0.25 --lash-set-exhaust 0.45 --lash-when cold"
)
_SCREWS = f"{_RANGES} --adjuster screw --screw-pitch 1"

# Engines to set the valves of, one of each shape; their valves are due.
BENCH = f"""
engine add B-6 --name "Pump diesel" --site "North Sluice" --fuel diesel --cylinders 6 --layout inline --valves-per-cylinder 2 --firing-order 1-5-3-6-2-4 {_SCREWS} {_NEW}
engine add B-8 --name "Standby set" --site "Board Yard" --fuel diesel --cylinders 8 --layout v --valves-per-cylinder 2 --firing-order 1-5-4-8-6-3-7-2 {_SCREWS} {_NEW}
engine add B-4 --name "Lorry" --site "Board Yard" --fuel diesel --cylinders 4 --layout inline --valves-per-cylinder 4 --firing-order 1-3-4-2 {_RANGES} --adjuster shim --shim-step 0.05 {_NEW}
engine add B-2 --name "Weed boat" --site "Ousel Outfall" --fuel petrol --cylinders 2 --layout opposed --valves-per-cylinder 2 --firing-order 1-2 --lash-intake 0.004-0.006in --lash-exhaust 0.010-0.014in {_NEW}
engine add B-1 --name "Trash pump" --site "Ousel Outfall" --fuel petrol --cylinders 1 --layout single --valves-per-cylinder 2 {_SCREWS} {_NEW}
""" + "".join(
    f"""
task add {tag} "Valve lash" --every 1000h --work lash --needs-sheet lash --last-done 2024-01-10 --last-done 0h
reading {tag} 990 --on 2026-03-30
"""
    for tag in ("B-6", "B-8", "B-4", "B-2", "B-1")
)
