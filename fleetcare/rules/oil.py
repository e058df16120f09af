"""Wear shown by the oil: metal per 100 h, with what the topped-up oil thinned out and the burnt oil took along.

Mass balance of a well mixed sump of volume V under constant wear, its losses made up as they come by oil with `fresh`
metal c_f: after make-up x = (volume added) / V the sample reads C = c_f + (C* - c_f) (1 - e^-x) / x, where C* is what it
would read without any make-up. JOAP (TM 38-301-1, 2-7.i-j) describes the levelling off, the trade calls the figure
compensated. It holds for metal too fine for the filter, without an oil change in between, and up to about x = 1.
"""

from dataclasses import dataclass
from decimal import Decimal

from fleetcare.domain.quantities import plain
from fleetcare.errors import Refused
from fleetcare.rules.bounds import check_between, check_within

MOST_PPM = 1_000_000  # by definition; the others are limits of sense
MOST_HOURS = 100_000
MOST_LITRES = 100_000

# Beyond one sump of make-up the oil was hardly lost and replaced evenly any more.
TRUSTED_MAKE_UP = 1


@dataclass(frozen=True, slots=True)
class WearRate:
    """What a sample would read without top-up, ppm, and the metal shed per 100 h above that of fresh oil.

    `make_up` is x, the top-up as a share of the sump; `factor` is x / (1 - e^-x), by which the metal read is multiplied.
    """

    corrected_ppm: Decimal
    ppm_per_100h: Decimal
    make_up: Decimal
    factor: Decimal


def wear_rate(
    ppm: Decimal, hours: Decimal, *, make_up: tuple[Decimal, Decimal] | None = None, fresh: Decimal = Decimal(0)
) -> WearRate:
    """Give the wear rate from the metal in a sample (ppm, that is mg/kg), and the hours on the oil since the fresh fill.

    `make_up` is the litres added since, and the litres of the sump. Raises Refused for a figure that cannot be right.
    """
    check_between("metal", ppm, 0, MOST_PPM, "ppm")
    check_between("metal in fresh oil", fresh, 0, MOST_PPM, "ppm")
    check_within("hours on the oil", hours, MOST_HOURS, "h")
    share = Decimal(0)
    if make_up:
        added, sump = make_up
        check_between("top-up", added, 0, MOST_LITRES, "L")
        check_within("sump", sump, MOST_LITRES, "L")
        share = added / sump
    factor = make_up_factor(share)
    shed = (ppm - fresh) * factor
    return WearRate(fresh + shed, 100 * shed / hours, share, factor)


def make_up_factor(share: Decimal) -> Decimal:
    """Give x / (1 - e^-x) for a top-up of x sumps: 1 without any, near 1 + x/2, always below 1 + x."""
    return share / (1 - (-share).exp()) if share else Decimal(1)


def steady_ppm(rate: WearRate, *, fresh: Decimal = Decimal(0)) -> Decimal | None:
    """Give the level the metal tends to, and never reaches, at this wear and top-up; None without top-up: it has none.

    C_inf = c_f + w/q of the mass balance above, with w and q told by the rate.
    """
    return fresh + (rate.corrected_ppm - fresh) / rate.make_up if rate.make_up else None


def before_top_up(ppm: Decimal, *, added: Decimal, sump: Decimal, fresh: Decimal = Decimal(0)) -> Decimal:
    """Give what a sample would have read just before `added` litres filled the sump up to its `sump` litres.

    One lump of fresh oil, well mixed in: (C V - c_f A) / (V - A). Raises Refused for a figure that cannot be right.
    """
    check_between("metal", ppm, 0, MOST_PPM, "ppm")
    check_between("metal in fresh oil", fresh, 0, MOST_PPM, "ppm")
    check_within("sump", sump, MOST_LITRES, "L")
    check_between("top-up", added, 0, MOST_LITRES, "L")
    if added >= sump:
        raise Refused(
            f"top-up {plain(added)} L cannot be right, the sump holds {plain(sump)} L",
            "give the litres added, less than the sump holds",
        )
    return (ppm * sump - fresh * added) / (sump - added)
