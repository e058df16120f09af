"""A yard in which things were measured, its sheets as files, and every kind of write that may touch what was judged."""

SHEETS = {
    "low": ("pressure,1,dry,27,bar", "pressure,2,dry,19,bar", "pressure,3,dry,27,bar"),
    "fine": ("pressure,1,dry,27,bar", "pressure,2,dry,26,bar", "pressure,3,dry,27,bar"),
    "iron": ("Fe,,,150,ppm", "tbn,,,4,", "Si,,,30,ppm", "grade,,,15W-40,", "hours_on_oil,,,200,h"),
    "more": ("Fe,,,250,ppm", "tbn,,,4,", "grade,,,15W-40,", "hours_on_oil,,,200,h"),
    "new": ("Fe,,,10,ppm", "tbn,,new,10,", "Si,,new,15,ppm", "grade,,,15W-40,"),
    "tight": ("lash,1I,found,0.25,", "lash,1E,found,0.36,", "lash,2I,found,0.25,", "lash,2E,found,0.45,"),
    "hot": ("coolant,,,104,",),
}

YARD = """
    machine add W-1 --meter hours
    engine add P-01 --cylinders 3 --fuel diesel --meter hours --sump 8 --oil-grade 15W-40
    engine add P-02 --cylinders 2 --firing-order 1-2 --fuel diesel --meter hours --lash-exhaust 0.40-0.50 --lash-intake 0.20-0.30
    engine add P-03 --cylinders 3 --fuel diesel --machine W-1 --in-service 2026-01-01
    engine add P-04 --cylinders 3 --fuel diesel --meter hours
    reading P-01 1000 --on 2026-01-01
    reading W-1 500 --on 2026-01-01
    measure compression P-01 low.csv --on 2026-03-01
    measure oil P-01 iron.csv --on 2026-03-02
    measure lash P-02 tight.csv --on 2026-03-03
    measure oil P-03 iron.csv --on 2026-03-04
"""

WRITES = """
    measure compression P-01 fine.csv --on 2026-04-01
    measure oil P-01 more.csv --on 2026-04-02 --at 1200h
    measure oil P-01 iron.csv --on 2026-02-02
    measure spot P-04 hot.csv --on 2026-04-03
    correct 2 --on 2026-03-05
    correct 1 --void --why wrong-engine
    log P-01 --top-up 4L --on 2026-03-20 --at 1100h
    reading P-01 1300 --on 2026-04-20
    reading W-1 700 --on 2026-04-20
    reading --void 5 --why misread
    reading --restore 5
    reading P-01 5 --on 2026-04-25 --replaced 1310 0
    engine edit P-02 --lash-exhaust 0.30-0.50
    engine edit P-01 --oil-grade 10W-30
    engine edit P-01 --sump 12
    engine add P-05 --cylinders 1 --meter hours
    measure oil P-04 new.csv --on 2026-02-01
    setting shop-name Fen
    engine fit P-03 --out --on 2026-05-01
    engine lay-up P-02 --on 2026-04-29
    engine factor P-01 hours 0.5 --on 2026-04-01 --why dust
    rules --use shop.toml --why stricter --by Fenn
    answer FINDING --accept --why known --by Fenn
    rules --drop shop --why enough --by Fenn
    answer FINDING --follow-up --why look --by Fenn
    engine withdraw P-02 --on 2026-04-30 --why sold
"""
SHOP = '[[rule]]\nid = "oil-fe"\nhigh = { alert = { beyond = 40 } }\n'
