"""What the figures of a nameplate make of each other."""

import pytest

from fleetcare.operations.plate_figures import derived_figures

PLATE = {"bore_mm": "114", "stroke_mm": "135", "cylinders": 6, "rated_rpm": "1500"}


def test_bore_stroke_cylinders_and_speed_give_displacement_and_piston_speed() -> None:
    # pi/4 * 1.14^2 * 1.35 * 6 = 8.268 L; 2 * 0.135 m * 25/s = 6.75 m/s, worked by hand
    assert derived_figures(PLATE) == [
        ("displacement", "8.27 L (bore/stroke 0.84, undersquare)"),
        ("mean piston speed", "6.8 m/s at rated speed"),
    ]


@pytest.mark.parametrize(
    ("missing", "left"),
    [
        ("bore_mm", ["mean piston speed"]),
        ("cylinders", ["mean piston speed"]),
        ("rated_rpm", ["displacement"]),
        ("stroke_mm", []),
    ],
)
def test_what_a_figure_is_missing_for_is_left_out(missing: str, left: list[str]) -> None:
    assert [label for label, _ in derived_figures(PLATE | {missing: None})] == left
