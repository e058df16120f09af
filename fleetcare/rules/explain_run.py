"""A test run in a few words, for the line of a log: how long, at which share of its load, and what for."""

from collections.abc import Sequence
from decimal import Decimal

from fleetcare.domain.measures import dimension, exactly
from fleetcare.domain.sheets import SheetValue
from fleetcare.rules.explain_finding import say_figure
from fleetcare.rules.judging.spans import decimal

RUN = "run"


def say_run(values: Sequence[SheetValue], rated_kw: Decimal | None) -> str:
    """Say the stages of a run and its purpose: "35 min at 15 kW, 23.44 % of the nameplate, test"; empty with neither.

    A load in power is told as a share where the rated kW are known; one in percent is one already.
    """
    loads = {value.point: value for value in values if value.quantity == "load"}
    stages = [_stage(value, loads.get(value.point), rated_kw) for value in values if value.quantity == "minutes"]
    purposes = [value.qualifier for value in values if value.quantity == "purpose"]
    return ", ".join([*stages, *purposes])


def _stage(minutes: SheetValue, load: SheetValue | None, rated_kw: Decimal | None) -> str:
    ran = f"{minutes} {minutes.unit}"
    if load is None:
        return ran
    return f"{ran} at {load} {load.unit}{_share(load, rated_kw)}"


def _share(load: SheetValue, rated_kw: Decimal | None) -> str:
    if load.value is None or not rated_kw or dimension(load.unit) != "power":
        return ""
    share = decimal(exactly(load.value, load.unit, "kW")) * 100 / rated_kw
    return f", {say_figure(share, '%')} of the nameplate"
