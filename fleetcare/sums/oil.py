"""Bench sums on oil: its viscosity, the grade it can be, and the wear it shows."""

from fleetcare.domain.quantities import plain
from fleetcare.sums.base import Answer, Given, Option, Sum, all_or_none, shown


def _viscosity_index(given: Given) -> Answer:
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


def _viscosity(given: Given) -> Answer:
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


def _grade(given: Given) -> Answer:
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


def _wear_rate(given: Given) -> Answer:
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


_PAIR = (
    Option("kv40", "mm²/s (cSt) at 40 °C", "CST", is_required=True),
    Option("kv100", "mm²/s (cSt) at 100 °C", "CST", is_required=True),
)

SUMS = (
    Sum("viscosity-index", "viscosity index from two viscosities", _PAIR, _viscosity_index),
    Sum(
        "viscosity",
        "viscosity at another temperature",
        (*_PAIR, Option("at", "temperature in °C", "C", is_required=True)),
        _viscosity,
    ),
    Sum(
        "grade",
        "the SAE J300 grades a new oil can be",
        (
            Option("kv100", "mm²/s (cSt) at 100 °C", "CST", is_required=True),
            Option("hths", "high-shear viscosity at 150 °C, mPa·s", "MPAS"),
        ),
        _grade,
    ),
    Sum(
        "wear-rate",
        "wear metal per 100 h, corrected for top-up",
        (
            Option("ppm", "metal in the sample, ppm or mg/kg", is_required=True),
            Option("hours", "hours on the oil", "H", is_required=True),
            Option("top-up", "litres added since the oil was fresh", "L"),
            Option("sump", "litres in the sump", "L", plate="sump_l"),
        ),
        _wear_rate,
    ),
)
