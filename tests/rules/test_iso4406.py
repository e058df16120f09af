"""Particle codes: read as the lab writes them, and refused where counts could not be cumulative."""

import pytest

from fleetcare.errors import Misread, Refused
from fleetcare.rules.iso4406 import read_code


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("18/16/13", "18/16/13"),
        ("14/12/>=7", "14/12/>=7"),  # the example of the Schroeder handbook, appendix on ISO 4406
        ("14/12/≥7", "14/12/>=7"),
        (" 18 / 16 / 13 ", "18/16/13"),
        ("15/15/15", "15/15/15"),
        ("-/16/13", "-/16/13"),  # a microscope count, ISO 4407
        (">28/28/20", ">28/28/20"),
        ("0/0/0", "0/0/0"),
    ],
)
def test_a_code_is_kept_as_the_lab_writes_it(text: str, code: str) -> None:
    assert read_code(text) == code


@pytest.mark.parametrize("text", ["18/16", "18/16/13/11", "", "18-16-13", "18/-/13", "a/b/c", "18/16/<13"])
def test_what_is_no_code_is_misread(text: str) -> None:
    with pytest.raises(Misread, match="is no ISO 4406 code"):
        read_code(text)


@pytest.mark.parametrize("text", ["18/19/13", "18/16/17", "-/13/16", "28/>28/13"])
def test_larger_particles_are_part_of_the_smaller_so_a_code_never_rises(text: str) -> None:
    with pytest.raises(Refused, match="rises from"):
        read_code(text)


@pytest.mark.parametrize("text", ["29/16/13", ">27/16/13", "99/98/97"])
def test_scale_numbers_end_at_28(text: str) -> None:
    with pytest.raises(Refused, match="is no scale number"):
        read_code(text)
