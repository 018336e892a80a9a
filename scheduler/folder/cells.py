"""Read single cells of a table: numbers, dates, ISO weeks and weekdays as people write them."""

from __future__ import annotations

import re
from datetime import date

from models.calendar import Week
from models.farm.crew import WEEKDAYS
from models.farm.references import nearest_choice
from scheduler.folder.plain_words import shown

DAY_NAMES = ("monday", "tuesday", "wednesday", "thursday", "friday", "saturday", "sunday")

_NUMBER = re.compile(r"^[+-]?\d+(?:[.,]\d+)?$")
_GROUPED = re.compile(r"^[+-]?\d{1,3}(?:[.,'\s]\d{3})+(?:[.,]\d*)?$")
_WEEK = re.compile(r"^(\d{4})-?[wW](\d{1,2})$")
_DOTTED = re.compile(r"^(\d{1,2})\.(\d{1,2})\.(\d{4})$")
_SLASHED = re.compile(r"^\d{1,4}/\d{1,2}/\d{2,4}$")


class CellError(ValueError):
    """A cell that is not what its column holds."""

    def __init__(self, expected: str, found: str, nearest: str = "") -> None:
        super().__init__(f"{expected} was expected; found {found}")
        self.expected, self.found, self.nearest = expected, found, nearest


def number(text: str, *, decimal_comma: bool = False) -> float:
    """Read a number with a decimal point or comma and no thousands separator.

    Parameters
    ----------
    text : str
        The cell.
    decimal_comma : bool
        Whether other cells of the file have a decimal comma; then ``1.250`` could be read in two ways and is refused.

    Raises
    ------
    CellError
        It is no number, or one that could be read in two ways.

    Examples
    --------
    >>> number("11,5"), number("11.50")
    (11.5, 11.5)
    """
    whole, mark, decimals = text.replace(",", ".").partition(".")
    two_ways = len(decimals) == 3 and whole.strip("+-0") != "" and ("," in text or decimal_comma)
    if _NUMBER.match(text) and not (mark and two_ways):
        return float(text.replace(",", "."))
    if _NUMBER.match(text) or _GROUPED.match(text):
        plain = re.sub(r"[.,'\s]", "", text)
        last = max(text.rfind("."), text.rfind(","))
        decimals = text[last + 1 :]
        meant = plain if len(decimals) == 3 else f"{plain[: len(plain) - len(decimals)]}.{decimals}"
        expected = f"a number without thousands separators, such as {meant}"
        raise CellError(expected, f"{shown(text)}, which can be read in two ways")
    raise CellError("a number", shown(text))


def whole_number(text: str, *, decimal_comma: bool = False) -> int:
    """Read a whole number; ``60.0`` counts as one.

    Raises
    ------
    CellError
        It is not a whole number.
    """
    try:
        value = number(text, decimal_comma=decimal_comma)
    except CellError as error:
        raise CellError(error.expected.replace("a number", "a whole number"), error.found) from error
    if not value.is_integer():
        raise CellError("a whole number", shown(text))
    return int(value)


def iso_week(text: str) -> Week:
    """Read an ISO week such as ``2027-W03``.

    Raises
    ------
    CellError
        It is not an ISO week, or that year has no such week.
    """
    match = _WEEK.match(text)
    if not match:
        raise CellError("an ISO week such as 2027-W03, or nothing", shown(text))
    try:
        return Week(int(match[1]), int(match[2]))
    except ValueError as error:
        expected, _, found = str(error).partition(" was expected")
        where, _, found = found.partition("; found ")
        raise CellError(expected + where, found) from error


def day(text: str) -> date:
    """Read a date such as ``2027-01-31`` or ``31.1.2027``, between the years 2000 and 2100.

    Raises
    ------
    CellError
        There is no such day, or the text can be read in two ways.
    """
    dotted = _DOTTED.match(text)
    try:
        if dotted:
            value = date(int(dotted[3]), int(dotted[2]), int(dotted[1]))
        else:
            value = date.fromisoformat(re.sub(r"[ T]00:00(:00(\.0+)?)?$", "", text))
    except ValueError as error:
        why = ", which can be read in two ways" if _SLASHED.match(text) else ""
        raise CellError("a date such as 2027-01-31", shown(text) + why) from error
    if not 2000 <= value.year <= 2100:
        raise CellError("a date between 2000 and 2100", shown(text))
    return value


def weekday(text: str) -> str:
    """Read a weekday, ``mon`` or ``Monday`` in any case, as its first three letters.

    Raises
    ------
    CellError
        It is no weekday.
    """
    word = text.lower().rstrip(".")
    for name in DAY_NAMES:
        if len(word) >= 3 and name.startswith(word):
            return name[:3]
    near = nearest_choice(word, DAY_NAMES)
    raise CellError(f"a weekday ({', '.join(WEEKDAYS)})", shown(text), near[:3])


def codes(text: str) -> tuple[str, ...]:
    """Read codes with spaces, commas, semicolons or slashes between them.

    Examples
    --------
    >>> codes("LIO ERY"), codes("LIO/ERY")
    (('LIO', 'ERY'), ('LIO', 'ERY'))
    """
    return tuple(re.split(r"[\s,;/]+", text.strip()))


def yes_or_no(text: str) -> bool:
    """Read yes or no, in any case and as people shorten it.

    Raises
    ------
    CellError
        It is neither.
    """
    word = text.lower().rstrip(".")
    if word in {"yes", "y", "true", "1", "x"}:
        return True
    if word in {"no", "n", "false", "0"}:
        return False
    raise CellError("yes or no", shown(text), nearest_choice(word, ("yes", "no")))
