__all__ = ["__version__", "voltage_drop"]

__version__: str

def voltage_drop(
    one_way_m: float,
    cross_section_mm2: float,
    resistivity_ohm_m: float,
    current_A: float,
) -> float: ...
