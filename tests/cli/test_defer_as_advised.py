"""`defer --as-advised`: the advice to drain a sound oil later, taken by a supervisor; and the warning beyond it."""

import pytest

from fleetcare.context import Context
from tests.cli.conftest import Runner
from tests.operations.test_measured_wears import drained, samples, yard

WHY = ("--why", "oil is sound", "--by", "Harbin")


@pytest.fixture
def run(ctx: Context, fleetcare: Runner) -> Runner:
    """Runs a command on P-01, whose oil is due to be drained at 1650 h and known to be sound until 1900 h."""
    drained(samples(yard(ctx), "10 20 31 40"), "450h", "12mo")
    return lambda *words: fleetcare("--db", str(ctx.path), "--as-of", "2026-05-01", *words)


def test_a_supervisor_takes_the_advice_without_a_figure(run: Runner) -> None:
    run("setting", "supervisors", "Harbin,  Quill")
    ran = run("defer", "P-01", "Oil", "--as-advised", *WHY)
    assert (ran.status, ran.err) == (0, "")
    assert ran.out.splitlines() == [
        "Oil of P-01 deferred until 1900 h by Harbin: as advised: oil is sound",
        "P-01  Oil: 1650 h or 2027-01-01 → 1900 h or 2027-01-01",
    ]


def test_where_the_shop_named_nobody_it_says_how(run: Runner) -> None:
    ran = run("defer", "P-01", "Oil", "--as-advised", *WHY)
    assert (ran.status, ran.out) == (1, "")
    assert ran.err == (
        "nobody is named as a supervisor, and only a supervisor may let an oil stay in longer; name them:"
        " fleetcare setting supervisors 'Harbin', several with commas between\n"
    )
    assert run("setting", "supervisors", "Harbin").status == 0
    assert run("defer", "P-01", "Oil", "--as-advised", *WHY).status == 0


def test_who_puts_it_off_further_is_warned_beside_the_answer(run: Runner) -> None:
    ran = run("defer", "P-01", "Oil", "--until", "2000h", *WHY)
    assert ran.status == 0
    assert ran.out.splitlines()[0] == "Oil of P-01 deferred until 2000 h by Harbin: oil is sound"
    assert ran.err == (
        "Beware: the oil is only known to be sound until 1900 h on the dial; nothing sampled speaks for it beyond.\n"
    )
