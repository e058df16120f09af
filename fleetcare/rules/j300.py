"""SAE J300 grades an engine oil can be, from its viscosity at 100 °C and its high-shear viscosity (HTHS) at 150 °C.

Table of J300 2015-01 (ASTM D445; D4683). It grades new oil: a used one is only inside or outside the band of its grade.
The bands of 8, 12, 16 and 20 overlap on purpose, so that without HTHS several grades may fit.
"""

import re
from dataclasses import dataclass
from decimal import Decimal

from fleetcare.rules.bounds import check_within

MOST_CST = 1000  # limits of sense
MOST_HTHS = 100

# With these in front a 40 may have the lower HTHS.
THIN_WINTER_GRADES = ("0W", "5W", "10W")


@dataclass(frozen=True, slots=True)
class Grade:
    """A grade without winter part: `least` <= viscosity < `below` in mm2/s, and the least HTHS in mPa.s.

    `hths` is what it needs in any case, `hths_thick` what it needs alone or behind 15W, 20W or 25W.
    """

    name: str
    least: Decimal
    below: Decimal
    hths: Decimal
    hths_thick: Decimal


def _grade(name: str, least: str, below: str, hths: str, hths_thick: str | None = None) -> Grade:
    return Grade(name, Decimal(least), Decimal(below), Decimal(hths), Decimal(hths_thick or hths))


# SAE J300_201501, Table 1; 3.5 for a thin-winter 40 since the edition of January 2009 (date from memory).
GRADES = (
    _grade("8", "4.0", "6.1", "1.7"),
    _grade("12", "5.0", "7.1", "2.0"),
    _grade("16", "6.1", "8.2", "2.3"),
    _grade("20", "6.9", "9.3", "2.6"),
    _grade("30", "9.3", "12.5", "2.9"),
    _grade("40", "12.5", "16.3", "3.5", "3.7"),
    _grade("50", "16.3", "21.9", "3.7"),
    _grade("60", "21.9", "26.1", "3.7"),
)


WINTER_GRADES = ("0W", "5W", "10W", "15W", "20W", "25W")
_HOT = "|".join(one.name for one in GRADES)
_WRITTEN = re.compile(rf"(?:{'|'.join(WINTER_GRADES).casefold()})(?:/?(?:{_HOT}))?|{_HOT}")


@dataclass(frozen=True, slots=True)
class Grading:
    """The grades that fit what is known, thin to thick, and the one that follows; None where none or several do.

    `needs_thin_winter` says that the HTHS is enough for that grade only behind one of THIN_WINTER_GRADES.
    """

    candidates: tuple[Grade, ...]
    grade: Grade | None
    needs_thin_winter: bool


def grade_key(grade: str) -> str:
    """Give a grade as it compares: SAE 15W-40 and 15w40 are one."""
    return grade.casefold().replace("sae", "").replace("-", "").replace(" ", "")


def is_grade(text: str) -> bool:
    """Whether a text is a grade of J300 as people write it: 15W-40, SAE 15w40, 10W, SAE 30, 30."""
    return _WRITTEN.fullmatch(grade_key(text)) is not None


def grade_oil(kv100: Decimal, hths: Decimal | None = None) -> Grading:
    """Give the grades a new oil can be. With HTHS known it is the thickest that fits (J300 section 6, from memory).

    Raises Refused for a figure that cannot be right.
    """
    check_within("viscosity at 100 °C", kv100, MOST_CST, "mm²/s")
    if hths is not None:
        check_within("HTHS", hths, MOST_HTHS, "mPa·s")
    fitting = tuple(
        grade for grade in GRADES if grade.least <= kv100 < grade.below and (hths is None or hths >= grade.hths)
    )
    grade = fitting[-1] if fitting and (hths is not None or len(fitting) == 1) else None
    return Grading(fitting, grade, grade is not None and hths is not None and hths < grade.hths_thick)
