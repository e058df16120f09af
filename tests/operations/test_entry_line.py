"""One line from anywhere: what is read back is what happens when it is stored, and reading back stores nothing."""

import subprocess
import sys

import pytest

from fleetcare.context import Context
from fleetcare.domain.quantities import Kind
from fleetcare.operations.due import Filters, due_rows
from fleetcare.operations.entry_line import load_vocabulary, read_back
from tests.operations.entry_yard import TODAY, Reader, back, ctx, rows, store

__all__ = ["back", "ctx"]

SAID = {
    "p3 oil 1234 8L fenn": "P-03, oil and filter, 1234 h on the dial, 8 L, Fenn; next 1484 h or 20 Apr 2027;"
    " 8 L filled in goes into the note",
    "p3 air 1234 on sunday": "P-03, air filter, 1234 h on the dial, on Sun 19 Apr 2026; next 1734 h",
    "p3 oil+air 1234 by Ruddock": "P-03, oil and filter, air filter, 1234 h on the dial, Ruddock (a new name);"
    " next oil and filter 1484 h or 20 Apr 2027, air filter 1734 h",
    "p3 annual 1234": "P-03, annual service, 1234 h on the dial; next 20 Apr 2027; covers oil and filter, wipe;"
    " valve lash stays open: it closes only with its lash sheet;"
    " look stays open: before its window opened on 2026-07-22",
    "p3 look": "P-03, look; look stays open: before its window opened on 2026-07-22",
    "p3 test": "P-03, test; next 31 May 2026; test: serves 2026-04",
    "p3 test 2026-03-20": "P-03, test, on Fri 20 Mar 2026; next 30 Apr 2026; test: its period was already served,"
    " the next one stays open",
    "p3 gasket 1234": "P-03, gasket, 1234 h on the dial; next 1534 h and 20 Apr 2028, at the latest 20 Apr 2031",
    "p3 retighten 1234": "P-03, retighten, 1234 h on the dial; next never, it is done once",
    "p3 bleed": "P-03, bleed; next only when called for",
    "p3 lash part-done 1234": "P-03, valve lash in part, 1234 h on the dial",
    "p3 oil": "P-03, oil and filter; next ~1450 h or 20 Apr 2027; counted from ~1200 h, as no figure is given",
    "p3 oil 1190 2026-03-25": "P-03, oil and filter, 1190 h on the dial, on Wed 25 Mar 2026; next 1440 h or 25 Mar 2027",
    "p3 1249": "P-03, 1249 h on the dial; next retighten 50 h, overdue",
    "p3 1200 2026-04-01": "P-03, 1200 h on the dial, on Wed 1 Apr 2026; next retighten 50 h, overdue;"
    " said already by reading 6",
    'p3 defect "leaks at pump" 1234 top-up 2L repair "hose" "ask Quill"': 'P-03, repair "hose", defect "leaks at pump",'
    ' 1234 h on the dial, 2 L topped up, note "ask Quill"',
    "le1 oil 620h 62000km": "LE-1, oil, 620 h on the dial, 62000 km on the dial; next 72000 km or 1020 h",
    "le1 oil": "LE-1, oil; next ~71000 km or ~1000 h; counted from ~600 h, as no figure is given;"
    " counted from ~61000 km, as no figure is given",
    "lr1 brakes 62000": "LR-1, brakes, 62000 km on the dial; next 82000 km",
    "lr1 62000": "LR-1, 62000 km on the dial; next brakes 70000 km",
    "r1 oil 5 rolled over": "R-1, oil, 5 h on the dial; next 255 h",
    "r1 9300 sure": "R-1, 9300 h on the dial; next oil 150 h; set aside as suspect: reading 9",
    "g9 oil 40": "G-9, oil, 40 h on the dial; next 140 h",
    "g9 12": "G-9, 12 h on the dial",
    "g9 wash": "G-9, wash; next 20 Apr 2027 or by distance not known",
}
MORE = (
    "p3 annual + oil 1234 yesterday",
    "p3 annual",
    "p3 look + test",
    "p3 oil 900 sure",
    "le1 oil 590h yesterday sure",
)


@pytest.mark.parametrize("text", SAID)
def test_a_line_is_read_back_as_one_sentence_with_all_it_does(back: Reader, text: str) -> None:
    found = back(text)
    assert (found.sentence, found.questions) == (SAID[text], ())


@pytest.mark.parametrize("text", [*SAID, *MORE])
def test_what_is_read_back_is_what_happens_on_storing(ctx: Context, back: Reader, text: str) -> None:
    seen = back(text)
    store(ctx, seen)
    with ctx.read() as connection:
        due = due_rows(connection, TODAY, Filters(engine=seen.line.tag, recorded_only=True))
    done = rows(
        ctx,
        "select task.name, coalesce(big_task.name, '') from log_task join task on task.id = log_task.task_id"
        " left join log_task big on big.id = log_task.covered_by_id left join task big_task on big_task.id = big.task_id"
        " where not log_task.part_done order by log_task.id",
    )
    in_vain = {task for task, _ in seen.stays_open}
    assert [task for task, big in done if not big and task not in in_vain] == list(seen.closes)
    assert [(task, big) for task, big in done if big] == list(seen.covers)
    named = {*seen.closes, *(small for small, _ in seen.covers)}
    assert {row.task: row for row in due if row.task in named} == {row.task: row for row in seen.rows}


@pytest.mark.parametrize("text", [*SAID, *MORE, "p3 900", "p9", "p3 lash 1234", "p3 oil fen"])
def test_reading_back_stores_nothing(ctx: Context, back: Reader, text: str) -> None:
    before = ctx.path.read_bytes()
    back(text)
    assert ctx.path.read_bytes() == before


def test_the_log_keeps_what_the_sentence_says(ctx: Context, back: Reader) -> None:
    assert store(ctx, back('p3 oil 1234 8L "new plug" fenn yesterday')) == [
        "Entry 2 (scheduled) of P-03 on 2026-04-19.",
        "Done: Oil and filter.",
        "P-03  Oil and filter: 1250 h or 2026-10-01 → 1484 h or 2027-04-19",
    ]
    entry = rows(
        ctx,
        'select entry."on", entry.note, person.name, litres, reading.value, reading.unit from log_entry entry'
        " join person on person.id = entry.person_id join reading on reading.entry_id = entry.id where entry.id = 2",
    )
    assert entry == [("2026-04-19", "8 L filled in; new plug", "Fenn", None, "1234", "h")]


def test_a_top_up_a_repair_and_a_defect_are_entries_of_their_own(ctx: Context, back: Reader) -> None:
    store(ctx, back('p3 defect "leaks at pump" 1234 top-up 2L repair "hose" "ask Quill"'))
    kept = rows(ctx, "select kind, title, note, litres, litres_unit from log_entry where id > 1 order by id")
    assert kept == [
        ("repair", "hose", "ask Quill", None, ""),
        ("defect", "leaks at pump", "", None, ""),
        ("top-up", "", "", "2", "L"),
    ]


def test_a_reading_of_each_meter_is_stored_with_who_read_it(ctx: Context, back: Reader) -> None:
    store(ctx, back("le1 620h 62000km by Ruddock"))
    kept = rows(
        ctx,
        "select value, unit, person.name from reading join person on person.id = reading.person_id"
        " where entry_id is null order by reading.id",
    )
    assert kept == [("620", "h", "Ruddock"), ("62000", "km", "Ruddock")]


def test_what_is_in_use_can_be_named_and_nothing_else(ctx: Context) -> None:
    with ctx.read() as connection:
        words = load_vocabulary(connection, TODAY)
    assert words.tagged("old1") == []
    assert "Belts" not in words.item("P-03").tasks
    assert [meter.kind for meter in words.item("LE-1").meters] == [Kind.DISTANCE, Kind.HOURS]
    assert words.people.names == ("Fenn",)


def test_the_vocabulary_is_loaded_once_and_handed_in(ctx: Context) -> None:
    with ctx.read() as connection:
        words = load_vocabulary(connection, TODAY)
        assert read_back(connection, "p3 oil 1234", TODAY, words) == read_back(connection, "p3 oil 1234", TODAY)


LOOK = """
import sys
from datetime import date
from fleetcare.context import Context
from fleetcare.operations.entry_line import read_back
context = Context(sys.argv[1], date(2026, 4, 20))
with context.read() as connection:
    assert read_back(connection, "p3 annual 1234 8L fenn", context.today()).can_be_stored
print(*sorted({name.partition(".")[0] for name in sys.modules}))
"""


def test_reading_back_loads_no_tables_and_no_forms(ctx: Context) -> None:
    ran = subprocess.run([sys.executable, "-c", LOOK, str(ctx.path)], capture_output=True, text=True, check=True)
    assert not {"sqlmodel", "pydantic", "alembic", "textual"} & set(ran.stdout.split())
