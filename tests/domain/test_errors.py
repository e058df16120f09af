"""Errors a person can act on."""

import pytest

from fleetcare.errors import FleetError, Misread, NoDatabase, Refusals, Refused


@pytest.mark.parametrize(("error", "status"), [(Refused, 1), (Misread, 2), (NoDatabase, 3)])
def test_each_error_has_its_exit_status_and_one_line_with_the_remedy(error: type[FleetError], status: int) -> None:
    raised = error("tag P-01 is taken", "choose another")
    assert (raised.exit_code, str(raised)) == (status, "tag P-01 is taken; choose another")


def test_several_refusals_are_told_one_line_each_in_the_order_found() -> None:
    several = Refusals([Misread("row 2: no date", "write one"), Refused("row 3: no tag", "add it first")])
    assert several.lines() == ["row 2: no date; write one", "row 3: no tag; add it first"]


@pytest.mark.parametrize(("others", "status"), [([], 1), ([Misread("row 2: no date", "write one")], 2)])
def test_several_refusals_have_the_highest_exit_status_among_them(others: list[FleetError], status: int) -> None:
    assert Refusals([Refused("row 3: no tag", "add it first"), *others]).exit_code == status
