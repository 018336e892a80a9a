"""Field types that the farm file shares: codes, shares, clock times."""

from __future__ import annotations

import re
from datetime import date
from typing import Annotated

from pydantic import AfterValidator, BaseModel, ConfigDict, Field

CODE_PATTERN = r"^[A-Za-z0-9][A-Za-z0-9-]{0,11}$"
"""A code is 1-12 letters, digits or dashes, so that a lot code stays within 20 characters."""

Code = Annotated[str, Field(pattern=CODE_PATTERN)]
Positive = Annotated[float, Field(gt=0, allow_inf_nan=False)]
NotNegative = Annotated[float, Field(ge=0, allow_inf_nan=False)]
Percent = Annotated[float, Field(ge=0, le=100, allow_inf_nan=False)]
Temperature = Annotated[float, Field(ge=-60, le=200, allow_inf_nan=False)]
Count = Annotated[int, Field(ge=1, le=1_000_000)]

_CLOCK = re.compile(r"^([01]\d|2[0-3]):([0-5]\d)$|^24:00$")


class FarmModel(BaseModel):
    """Base of every noun of the farm file: frozen, unknown keys refused, each field described by the text below it."""

    model_config = ConfigDict(extra="forbid", frozen=True, allow_inf_nan=False, use_attribute_docstrings=True)


def clock_minutes(text: str) -> int:
    """Minutes after local midnight of a clock time.

    Parameters
    ----------
    text : str
        ``"HH:MM"``, 00:00 to 24:00.

    Returns
    -------
    int
        Minutes after midnight [min].

    Raises
    ------
    ValueError
        The text is not a clock time.

    Examples
    --------
    >>> clock_minutes("07:30")
    450
    """
    if not _CLOCK.match(text):
        raise ValueError(f"a clock time HH:MM between 00:00 and 24:00, such as 07:30, was expected; found {text!r}")
    hours, minutes = text.split(":")
    return int(hours) * 60 + int(minutes)


def span_minutes(text: str) -> tuple[int, int]:
    """Start and end of a span such as ``"07:30-16:00"`` [minutes after midnight].

    Raises
    ------
    ValueError
        The text is not a span, or it does not end after it starts.

    Examples
    --------
    >>> span_minutes("07:30-16:00")
    (450, 960)
    """
    start_text, dash, end_text = text.partition("-")
    if not dash:
        raise ValueError(f'a span of clock times such as "07:30-16:00" was expected; found {text!r}')
    start, end = clock_minutes(start_text.strip()), clock_minutes(end_text.strip())
    if end <= start:
        raise ValueError(f"a span that ends after it starts, on the same day, was expected; found {text!r}")
    return start, end


def _checked_clock(text: str) -> str:
    clock_minutes(text)
    return text


def _checked_span(text: str) -> str:
    span_minutes(text)
    return text


Clock = Annotated[str, AfterValidator(_checked_clock)]
Span = Annotated[str, AfterValidator(_checked_span)]
ClosedDays = tuple[date, ...]
