"""Calculations on plain numbers, with the unit at the end of each name.

Floats only for now: arrays are refused with a ``TypeError``, until the vectorised entries are built in.
"""

from ampwright import _ampwright

__all__ = ["voltage_drop"]


def voltage_drop(
    one_way_m: float,
    cross_section_mm2: float,
    resistivity_ohm_m: float,
    current_A: float,
) -> float:
    """Voltage drop at the far end of a two-conductor DC run, there and back.

    Parameters
    ----------
    one_way_m : float
        Route in metres, > 0; not the sum of both conductors.
    cross_section_mm2 : float
        One conductor, in square millimetres, > 0.
    resistivity_ohm_m : float
        In ohm metres, > 0; at operating temperature, not at 20 °C.
    current_A : float
        In amperes; the sign gives the direction.

    Returns
    -------
    drop_V : float
        Volts.

    Raises
    ------
    RangeError
        An input is NaN, infinite or out of range, or the drop is too large for a float.

    Examples
    --------
    A pump 12 m away on 16 mm² of copper at 20 °C draws 25 A:

    >>> round(voltage_drop(12.0, 16.0, 1 / 58e6, 25.0), 4)
    0.6466
    """
    return _ampwright.voltage_drop(one_way_m, cross_section_mm2, resistivity_ohm_m, current_A)
