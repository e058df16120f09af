"""What may stand on which kind of sheet."""

from fleetcare.domain.cautions import OF_SHEETS
from fleetcare.domain.measured import LASH, SHEET_KINDS
from fleetcare.domain.measures import ELEMENTS, QUANTITIES
from fleetcare.domain.sheet_kinds import KINDS, WORDS
from fleetcare.domain.sheets import Phase
from fleetcare.rulebook.rules import shipped_rules

WORKED_OUT = {"wet_gain"}
"""What rules work out themselves, from quantities that stand on sheets."""


def test_every_kind_but_the_lash_sheet_stands_here_and_every_kind_has_its_cautions() -> None:
    assert {*KINDS, LASH} == set(SHEET_KINDS) == set(OF_SHEETS)


def test_every_quantity_on_a_sheet_is_known_with_its_unit() -> None:
    for kind in KINDS.values():
        assert [column.quantity for column in kind.columns if column.quantity not in QUANTITIES] == []
        assert len(set(kind.quantities)) == len(kind.quantities)


def test_words_are_no_quantities() -> None:
    assert WORDS.isdisjoint(QUANTITIES)


def test_every_quantity_a_shipped_rule_judges_stands_on_a_sheet_of_its_kind() -> None:
    for rule in shipped_rules():
        for kind in rule.kinds:
            if kind != LASH and rule.quantity:
                assert KINDS[kind].column(rule.quantity) or rule.quantity in WORKED_OUT, rule.id


def test_every_word_a_shipped_rule_asks_for_can_be_said() -> None:
    for rule in shipped_rules():
        for quantity, words in (*rule.words.items(), *rule.unless.items()):
            columns = [KINDS[kind].word_column(quantity) for kind in rule.kinds]
            assert any(column and set(words) - {""} <= set(column.words) for column in columns), rule.id


def test_an_oil_sheet_holds_every_element_of_the_sample_and_of_fresh_oil() -> None:
    for symbol in ELEMENTS:
        column = KINDS["oil"].column(symbol)
        assert column is not None
        assert (column.phases, column.is_lab) == ((Phase.NONE, Phase.NEW), True)


def test_what_has_no_column_is_not_found() -> None:
    assert KINDS["oil"].column("pressure") is None
    assert KINDS["oil"].word_column("heard") is None
