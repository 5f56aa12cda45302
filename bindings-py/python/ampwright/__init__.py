"""Low-voltage DC power where there is no grid.

``ampwright.arrays`` takes plain numbers whose unit stands at the end of the name; ``ampwright.errors``
holds what can be raised. All computation happens in the compiled module, checked as in every other face.

Batteries deliver thousands of amperes into a fault, DC arcs do not go out by themselves, charging gives off
hydrogen: isolate and prove dead before work. Local codes and licensed practice decide, and the text of each
standard governs.
"""

from ampwright import arrays
from ampwright._ampwright import __version__
from ampwright.errors import AmpwrightError, RangeError

__all__ = ["AmpwrightError", "RangeError", "__version__", "arrays"]
