"""The one error of the thermal model."""

from __future__ import annotations


class ThermalError(ValueError):
    """A cycle that cannot be: the sentence says why and what would help."""
