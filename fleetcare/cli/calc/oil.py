"""Bench sums on oil: its viscosity, the grade it can be, and the wear it shows."""

import argparse

from fleetcare.cli.calc.answers import Answer, add_sum, all_or_none, shown
from fleetcare.cli.parser import CommandParser, Commands, number
from fleetcare.domain.quantities import plain


def add_sums(sums: Commands) -> None:
    """Add `viscosity-index`, `viscosity`, `grade` and `wear-rate`."""
    _add_pair(add_sum(sums, "viscosity-index", "viscosity index from two viscosities", _viscosity_index))

    viscosity = add_sum(sums, "viscosity", "viscosity at another temperature", _viscosity)
    _add_pair(viscosity)
    viscosity.add_argument("--at", type=number, required=True, metavar="C", help="temperature in °C")

    grade = add_sum(sums, "grade", "the SAE J300 grades a new oil can be", _grade)
    grade.add_argument("--kv100", type=number, required=True, metavar="CST", help="mm²/s (cSt) at 100 °C")
    grade.add_argument("--hths", type=number, metavar="MPAS", help="high-shear viscosity at 150 °C, mPa·s")

    wear = add_sum(sums, "wear-rate", "wear metal per 100 h, corrected for top-up", _wear_rate)
    wear.add_argument("--ppm", type=number, required=True, help="metal in the sample, ppm or mg/kg")
    wear.add_argument("--hours", type=number, required=True, metavar="H", help="hours on the oil")
    wear.add_argument("--top-up", type=number, metavar="L", help="litres added since the oil was fresh")
    wear.add_argument("--sump", type=number, metavar="L", help="litres in the sump")


def _add_pair(parser: CommandParser) -> None:
    for name, temperature in (("kv40", 40), ("kv100", 100)):
        parser.add_argument(
            f"--{name}", type=number, required=True, metavar="CST", help=f"mm²/s (cSt) at {temperature} °C"
        )


def _viscosity_index(given: argparse.Namespace) -> Answer:
    from fleetcare.rules.viscosity import viscosity_index

    index = viscosity_index(given.kv40, given.kv100)
    warm, hot, hundred = plain(given.kv40), plain(given.kv100), shown(index.hundred)
    working = (
        f"100 × (L − U) / (L − H), U = {warm}, L = {shown(index.zero)}, H = {hundred} (ASTM D2270, procedure A)"
        if index.power is None
        else f"(10^N − 1) / 0.00715 + 100, N = (log H − log U) / log Y = {shown(index.power)}, U = {warm}, Y = {hot}, "
        f"H = {hundred} (ASTM D2270, procedure B)"
    )
    return Answer(
        f"Viscosity index {index.rounded} ({plain(round(index.unrounded, 2))}): {working}.",
        {"viscosity_index": index.rounded, "unrounded": index.unrounded},
    )


def _viscosity(given: argparse.Namespace) -> Answer:
    from fleetcare.rules.viscosity import walther

    line = walther(given.kv40, given.kv100)
    viscosity = line.at(given.at)
    is_between = 40 <= given.at <= 100
    caution = "" if is_between else " Outside 40 to 100 °C this is extrapolated."
    return Answer(
        f"{shown(viscosity)} mm²/s at {plain(given.at)} °C: log log (v + 0.7) = A − B log T, T in kelvin, "
        f"A = {shown(line.a)}, B = {shown(line.b)} through the two figures given (ASTM D341).{caution}",
        {"kinematic_viscosity_cst": viscosity, "extrapolated": not is_between},
    )


def _grade(given: argparse.Namespace) -> Answer:
    from fleetcare.rules.j300 import THIN_WINTER_GRADES, grade_oil

    grading = grade_oil(given.kv100, given.hths)
    names = [grade.name for grade in grading.candidates]
    bands = ", ".join(
        f"{grade.name} from {plain(grade.least)} to below {plain(grade.below)} mm²/s, HTHS {plain(grade.hths)} or more"
        for grade in grading.candidates
    )
    if grading.grade:
        verdict = f"SAE {grading.grade.name}"
    elif names:
        verdict = f"SAE {' or '.join(names)}; HTHS at 150 °C decides"
    else:
        verdict = "No SAE grade"
    figures = f"{plain(given.kv100)} mm²/s at 100 °C" + (f", HTHS {plain(given.hths)} mPa·s" if given.hths else "")
    winter = f" Only behind {', '.join(THIN_WINTER_GRADES)}." if grading.needs_thin_winter else ""
    return Answer(
        f"{verdict}: {figures}; {bands or 'no grade takes that'} (SAE J300, which grades new oil).{winter}",
        {
            "candidates": names,
            "sae_j300": grading.grade.name if grading.grade else None,
            "only_behind": THIN_WINTER_GRADES if grading.needs_thin_winter else (),
        },
    )


def _wear_rate(given: argparse.Namespace) -> Answer:
    from fleetcare.rules.oil import TRUSTED_MAKE_UP, wear_rate

    make_up = (given.top_up, given.sump) if all_or_none(given, "top-up", "sump") else None
    rate = wear_rate(given.ppm, given.hours, make_up=make_up)
    ppm, hours, corrected = plain(given.ppm), plain(given.hours), shown(rate.corrected_ppm)
    working = f"{corrected} ppm / {hours} h × 100"
    if make_up:
        added, sump = make_up
        working += (
            f"; {corrected} ppm = {ppm} ppm × x / (1 − e^−x), x = {plain(added)} L / {plain(sump)} L = "
            f"{shown(rate.make_up)}, what the sample would read without top-up"
        )
    rough = " More than a whole sump was added: a rough figure." if rate.make_up > TRUSTED_MAKE_UP else ""
    return Answer(
        f"Wear {shown(rate.ppm_per_100h)} ppm per 100 h: {working}.{rough}",
        {
            "ppm_per_100h": rate.ppm_per_100h,
            "corrected_ppm": rate.corrected_ppm,
            "uncorrected_ppm_per_100h": 100 * given.ppm / given.hours,
        },
    )
