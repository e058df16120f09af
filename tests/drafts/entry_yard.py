"""The words of a small yard, for tests of the entry line."""

from datetime import date

from fleetcare.domain.quantities import Kind
from fleetcare.drafts.entry_vocabulary import ItemWords, MeterWords, Vocabulary

MONDAY = date(2026, 4, 20)
HOURS, KM, LITRES = MeterWords(Kind.HOURS, "h"), MeterWords(Kind.DISTANCE, "km"), MeterWords(Kind.FUEL, "L")

YARD = Vocabulary(
    MONDAY,
    [
        ItemWords("P-03", ("Oil and filter", "Valve lash", "Raw-water impeller"), (HOURS,)),
        ItemWords("P-04", ("Oil and filter", "Oil cooler", "Oil", "250 h service", "500 h service"), (HOURS,)),
        ItemWords("LE-1", ("Oil and filter",), (HOURS, KM)),
        ItemWords("PS-7", ("Oil and filter", "Harbour check", "Monday look-round"), (HOURS, LITRES)),
        ItemWords("TR-1", ("Brakes",)),
        ItemWords("N-1", ("Oil and filter",), (MeterWords(Kind.HOURS, "h", date(2026, 4, 1), date(2026, 4, 10)),)),
        ItemWords("K-05", ("Oil and filter",), (HOURS,)),
        ItemWords("K-5", ("Oil and filter",), (HOURS,)),
        ItemWords("12", ("Oil and filter",), (HOURS,)),
        ItemWords("77", ("Oil and filter",), (HOURS,)),
        ItemWords("Weed boat 2", ("Anodes",), (HOURS,)),
    ],
    ["Fenn", "Quill", "Harbin", "Ada Fenwick"],
)
"""P-03 is plain; P-04 has tasks with like names; LE-1 and PS-7 two meters each; TR-1 none; N-1 one for some days."""
