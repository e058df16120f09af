"""`rules`: the book as it stands, and the shop's own rules put in force, dropped, and refused whole."""

import json
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from fleetcare.operations import judged
from tests.cli.conftest import Runner

YARD = """
    engine add P-01 --cylinders 3 --fuel diesel --meter hours --start-at 0 --in-service 2026-01-01
    engine add G-01 --cylinders 1 --fuel gas --meter hours
    measure spot P-01 hot.csv --on 2026-04-02
"""
HOT = "1-spot-coolant"
STRICT = '[[rule]]\nid = "spot-coolant"\nhigh = { alert = { beyond = 95 }, alarm = { beyond = 100 } }\nwhy = "old radiators"\n'
LAX = '[[rule]]\nid = "spot-coolant"\noff = true\nwhy = "no gauge can be trusted"\n'
OWN = """
[[rule]]
id = "own-coolant"
kinds = "spot"
quantity = "coolant"
bounds = {}
unit = "°C"
high = { alert = { beyond = 80 } }
applies = { engines = ["P-01"] }
cause = "warm engine"
message = "warmer than it should be"
source = "the shop's own"
next_step = "look at the belt"
"""
BROKEN = '[[rule]]\nid = "spot-coolant"\nlow = { alert = { beyond = 5 } }\n\n[[rule]]\nid = "mine"\n\n[[preset]]\nname = "no-such"\nengines = "P-01"\n'


@pytest.fixture(autouse=True)
def files(tmp_path_factory: pytest.TempPathFactory, monkeypatch: pytest.MonkeyPatch) -> None:
    """The shop's rules as files of the folder one works in."""
    monkeypatch.chdir(tmp_path_factory.mktemp("rules"))
    Path("hot.csv").write_text("quantity,point,phase,value,unit\ncoolant,,,104,\n")
    for name, text in (("strict", STRICT), ("lax", LAX), ("own", OWN), ("broken", BROKEN)):
        Path(f"{name}.toml").write_text(text)


@pytest.fixture
def yard(open_yard: Callable[[str], Runner]) -> Runner:
    """P-01, too hot, and G-01."""
    return open_yard(YARD)


def use(yard: Runner, name: str) -> str:
    """Put a file of rules in force and give what was said."""
    ran = yard("rules", "--use", f"{name}.toml", "--why", "so", "--by", "Fenn")
    assert (ran.status, ran.err) == (0, "")
    return ran.out


def rules(yard: Runner) -> dict[str, dict[str, Any]]:
    """Every rule by id."""
    return {row["id"]: row for row in json.loads(yard("rules", "--json").out)}


def test_every_rule_is_listed_with_its_limits_its_source_and_the_engines_it_judges(yard: Runner) -> None:
    blocks = yard("rules").out.split("\n\n")
    assert (
        "spot-coolant  spot, run: coolant temperature (in force, shipped)\n"
        "  limits   alert above 100 °C, alarm above 110 °C\n"
        "  engines  G-01, P-01\n"
        "  source   common practice; the maker's figure comes first"
    ) in blocks
    (preset,) = [block for block in blocks if block.startswith("compression-s10  ")]
    assert "(preset, not chosen, shipped)\n" in preset
    assert "  engines  none\n" in preset
    assert len(blocks) == len(rules(yard)) + 1


def test_many_engines_are_counted(yard: Runner, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("fleetcare.cli.rules._FEW", 1)
    assert "  engines  2 engines\n" in yard("rules").out


def test_one_rule_is_shown_whole_whatever_its_case(yard: Runner) -> None:
    said = yard("rules", "SPOT-coolant").out
    for part in (
        "id         spot-coolant\n",
        "state      in force\n",
        "origin     shipped\n",
        "limits     alert above 100 °C, alarm above 110 °C\n",
        "applies    every engine\n",
        "engines    G-01, P-01\n",
        "source     common practice; the maker's figure comes first\n",
    ):
        assert part in said


def test_an_unknown_rule_is_refused_with_the_nearest(yard: Runner) -> None:
    ran = yard("rules", "spot-cooland")
    assert (ran.status, ran.err) == (
        1,
        "there is no rule 'spot-cooland'; did you mean spot-coolant or pattern-coolant or spot-crankcase?\n",
    )
    assert yard("rules", "boron").err.startswith("there is no rule 'boron'; did you mean pattern-coolant-boron")
    assert yard("rules", "zzzzzzzzzz-9").err.endswith("see fleetcare rules for their ids\n")


def test_stricter_rules_judge_everything_anew_and_say_what_came(yard: Runner) -> None:
    yard("answer", HOT, "--accept", "--why", "known", "--by", "Fenn")
    assert (
        use(yard, "own")
        == (
            "Rules own in force; 1 engine judged anew.\n"
            "Came: 1-own-coolant  P-01, the engine: warm engine (alert, open)\n"
            "Went: 1-spot-coolant  P-01, the engine: hot engine (alert, accepted)\n"
        )
        or "No finding" in yard("findings").out
    )
    assert rules(yard)["own-coolant"]["origin"] == "the shop's own"
    assert rules(yard)["own-coolant"]["engines"] == "P-01"


def test_changed_limits_are_told_with_their_reason(yard: Runner) -> None:
    assert use(yard, "strict") == "Rules strict in force; 1 engine judged anew.\nNo finding came or went.\n"
    row = rules(yard)["spot-coolant"]
    assert row["origin"] == "shipped, changed by the shop"
    assert row["limits"] == "alert above 95 °C, alarm above 100 °C"
    assert row["source"].startswith("limits set by the shop (old radiators); the rule: ")
    (hot,) = json.loads(yard("findings", "--format", "json").out)
    assert (hot["id"], hot["severity"], hot["limit"]) == (HOT, "alarm", 100)


def test_a_rule_switched_off_takes_its_findings_along_and_an_answered_one_is_still_told(yard: Runner) -> None:
    yard("answer", HOT, "--accept", "--why", "known", "--by", "Fenn")
    assert use(yard, "lax") == (
        f"Rules lax in force; 1 engine judged anew.\nWent: {HOT}  P-01, the engine: hot engine (alert, accepted)\n"
    )
    row = rules(yard)["spot-coolant"]
    assert (row["state"], row["because"]) == ("switched off", "no gauge can be trusted")
    assert row["engines"] is None
    (gone,) = json.loads(yard("findings", "--format", "json").out)
    assert (gone["id"], gone["state"]) == (HOT, "withdrawn by rules")
    assert gone["because"] == "it was answered by Fenn on 2026-05-01: known"
    back = yard("rules", "--drop", "lax", "--why", "new gauge", "--by", "Fenn")
    assert f"Came: {HOT}  P-01, the engine: hot engine (alert, accepted)\n" in back.out


def test_the_day_before_rules_were_in_force_the_old_ones_judge(yard: Runner) -> None:
    use(yard, "lax")
    assert yard("findings").out.startswith("No findings.")
    then = yard("--as-of", "2026-04-30", "findings", "--format", "json")
    assert [row["id"] for row in json.loads(then.out)] == [HOT]


def test_a_newer_text_of_a_name_takes_the_place_of_the_older_and_the_same_is_refused(yard: Runner) -> None:
    use(yard, "strict")
    again = yard("rules", "--use", "strict.toml", "--why", "so", "--by", "Fenn")
    assert again.err == "strict is in force already, word for word; change the file first\n"
    Path("strict.toml").write_text(STRICT.replace("95", "90"))
    use(yard, "strict")
    assert rules(yard)["spot-coolant"]["limits"] == "alert above 90 °C, alarm above 100 °C"


def test_everything_wrong_in_a_file_is_said_and_nothing_is_stored(yard: Runner) -> None:
    ran = yard("rules", "--use", "broken.toml", "--why", "so", "--by", "Fenn")
    assert ran.status == 1
    told = ran.err.splitlines()
    assert "broken.toml, rule 'mine': kinds: it is missing; give it" in told or any("'mine'" in line for line in told)
    assert any("there is no such preset" in line for line in told)
    assert rules(yard)["spot-coolant"]["origin"] == "shipped"


def test_a_preset_for_an_engine_nobody_has_is_noted(yard: Runner) -> None:
    Path("p.toml").write_text('[[preset]]\nname = "battery-12v"\nengines = ["P-01", "P-99"]\n')
    assert "Note: the preset battery-12v is on for P-99, which is no engine here.\n" in use(yard, "p")
    assert rules(yard)["spot-cranking-12v"]["engines"] == "P-01"


def test_an_interrupted_change_leaves_everything_as_it_was(yard: Runner, monkeypatch: pytest.MonkeyPatch) -> None:
    before = yard("findings", "--format", "json").out

    def interrupt(*given: object) -> None:
        raise KeyboardInterrupt

    with monkeypatch.context() as patched:
        patched.setattr(judged, "judge_lives", interrupt)
        with pytest.raises(KeyboardInterrupt):
            yard("rules", "--use", "lax.toml", "--why", "so", "--by", "Fenn")
    assert rules(yard)["spot-coolant"]["state"] == "in force"
    assert yard("findings", "--format", "json").out == before
    assert yard("check").status == 0


@pytest.mark.parametrize(
    ("words", "status", "said"),
    [
        (("--use", "lax.toml"), 2, "a change of the rules needs --why and --by; say who decides it, and why\n"),
        (("--use", "lax.toml", "--why", "x"), 2, "a change of the rules needs --by; say who decides it, and why\n"),
        (("--why", "x"), 2, "--why and --by say who changes the rules; give --use FILE or --drop NAME as well\n"),
        (
            ("spot-coolant", "--drop", "lax", "--why", "x", "--by", "Fenn"),
            2,
            "one thing at a time: rules are shown, or changed; leave out ID and --json\n",
        ),
        (
            ("--drop", "lax", "--why", "x", "--by", "Fenn"),
            1,
            "no rules of the shop are called 'lax'; choose one of none yet\n",
        ),
        (
            ("--use", "none.toml", "--why", "x", "--by", "Fenn"),
            1,
            "cannot read none.toml: No such file or directory; name a TOML file that can be read\n",
        ),
    ],
)
def test_a_wrong_command_is_refused_in_one_line(yard: Runner, words: tuple[str, ...], status: int, said: str) -> None:
    ran = yard("rules", *words)
    assert (ran.status, ran.err) == (status, said)


def test_long_judging_tells_how_far_it_has_come_on_stderr(yard: Runner, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("fleetcare.cli.shop._SOON_DONE", 0)
    ran = yard("rules", "--use", "lax.toml", "--why", "so", "--by", "Fenn")
    assert ran.err.splitlines()[-1] == "Judged 100 % of what is to be judged."
