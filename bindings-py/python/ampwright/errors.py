"""What a calculation can refuse, with its numbers as attributes."""

__all__ = ["AmpwrightError", "RangeError"]


class AmpwrightError(Exception):
    """Base of everything this package raises on its own account.

    Attributes
    ----------
    slug : str
        Permanent short name of the kind of error, the same in every face.
    name : str or None
        The input at fault, as the called function spells it.
    value : float or None
        Its value, in ``unit``.
    unit : str or None
        The unit of ``value`` and of ``allowed``.
    allowed : str or None
        What is admitted.
    """

    def __init__(
        self,
        message: str,
        slug: str,
        name: str | None = None,
        value: float | None = None,
        unit: str | None = None,
        allowed: str | None = None,
    ) -> None:
        """Keep the sentence and its parts."""
        # All of them go to Exception, which builds the error again from its arguments when unpickled.
        super().__init__(message, slug, name, value, unit, allowed)
        self.slug = slug
        self.name = name
        self.value = value
        self.unit = unit
        self.allowed = allowed

    def __str__(self) -> str:
        """Return the sentence alone."""
        return str(self.args[0])


class RangeError(AmpwrightError, ValueError):
    """An input is NaN, infinite or outside its range."""
