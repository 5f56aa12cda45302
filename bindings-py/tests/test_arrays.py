"""The plain-number face: the value, its limits, and what a wrong input says."""

import math

import pytest

from ampwright import AmpwrightError, RangeError
from ampwright.arrays import voltage_drop

PUMP = {
    "one_way_m": 12.0,
    "cross_section_mm2": 16.0,
    "resistivity_ohm_m": 1 / 58e6,
    "current_A": 25.0,
}


def test_the_drop_by_hand():
    # 2 * 12 * 25 / (58 * 16), in double precision.
    assert voltage_drop(**PUMP) == pytest.approx(0.64655172413793103, rel=1e-15)


def test_the_sign_of_the_current_gives_the_direction():
    assert voltage_drop(**PUMP | {"current_A": -25.0}) == -voltage_drop(**PUMP)
    assert voltage_drop(**PUMP | {"current_A": 0}) == 0.0


@pytest.mark.parametrize("name", PUMP)
@pytest.mark.parametrize("value", [math.nan, math.inf, -math.inf])
def test_what_is_not_a_number_is_refused_by_name(name, value):
    with pytest.raises(RangeError) as caught:
        voltage_drop(**PUMP | {name: value})
    assert caught.value.name == name
    assert str(caught.value).startswith(f"{name} is ")
    assert isinstance(caught.value, AmpwrightError)
    assert isinstance(caught.value, ValueError)


@pytest.mark.parametrize("name", ["one_way_m", "cross_section_mm2", "resistivity_ohm_m"])
@pytest.mark.parametrize("value", [0.0, -0.0, -3.0])
def test_zero_and_less_are_refused(name, value):
    with pytest.raises(RangeError):
        voltage_drop(**PUMP | {name: value})


def test_an_area_that_vanishes_in_square_metres_is_refused():
    with pytest.raises(RangeError):
        voltage_drop(**PUMP | {"cross_section_mm2": 5e-324})


def test_a_result_too_large_for_a_number_is_refused():
    with pytest.raises(RangeError) as caught:
        voltage_drop(**PUMP | {"one_way_m": 1e308, "current_A": 1e308})
    assert caught.value.name == "drop_V"


def test_a_text_is_not_a_number():
    with pytest.raises(TypeError):
        voltage_drop(**PUMP | {"one_way_m": "12 m"})
