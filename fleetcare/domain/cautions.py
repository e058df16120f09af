"""The caution that stands under everything this program says about work to be done."""

GENERAL = (
    "Limits and intervals are to be checked against the engine maker's manual, local codes and law;"
    " work on engines is for competent, where required licensed, people."
)
