"""What a lookup gives where nothing may answer."""

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["Nearest", "Refusal"]


@dataclass(frozen=True)
class Nearest:
    """A window near a refused temperature.

    Attributes
    ----------
    correlation : str
        The key of the correlation.
    window : tuple of float
        Where it may answer, K.
    distance : float
        How far away that is, K.
    """

    correlation: str
    window: tuple[float, float]
    distance: float


@dataclass(frozen=True)
class Refusal:
    """Why no correlation may answer at a temperature.

    Attributes
    ----------
    temperature : float
        As asked, K.
    reason : str
        ``no-correlation``, ``several-phases``, ``outside-windows``, ``gap``,
        ``above-critical``, ``below-triple``, ``above-triple``,
        ``not-accepted``, ``no-value`` or ``not-a-temperature``; where an
        uncertainty was asked for ``too-uncertain`` or
        ``uncertainty-not-stated``; of a table by one correlation
        ``no-single-correlation``.
    explanation : str
        The reason, and what can be done.
    nearest : tuple of Nearest
        The nearest windows, nearest first.
    """

    temperature: float
    reason: str
    explanation: str
    nearest: tuple[Nearest, ...] = ()

    @property
    def headline(self) -> str:
        """The reason by its name, and the explanation: what a message says."""
        return f"Refused ({self.reason}): {self.explanation}"
