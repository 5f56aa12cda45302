"""Errors keep their parts, and survive being sent to another process."""

import pickle

import pytest

from ampwright import RangeError
from ampwright.arrays import voltage_drop


def refused():
    with pytest.raises(RangeError) as caught:
        voltage_drop(-3.0, 16.0, 1 / 58e6, 25.0)
    return caught.value


def test_the_sentence_and_its_parts():
    error = refused()
    assert str(error) == "one_way_m is -3 m; it must be greater than 0"
    assert (error.slug, error.name, error.value) == ("out-of-range", "one_way_m", -3.0)
    assert (error.unit, error.allowed) == ("m", "greater than 0")


def test_an_error_pickles_whole():
    error = refused()
    again = pickle.loads(pickle.dumps(error))
    assert type(again) is RangeError
    assert str(again) == str(error)
    assert vars(again) == vars(error)
