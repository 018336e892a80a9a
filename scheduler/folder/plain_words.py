"""Say in plain words what a validation expected and what it found."""

from __future__ import annotations

import re
from typing import Any

from models.farm.units import CODE_PATTERN

_MESSAGE = re.compile(r"^(?P<expected>.+?),? (?:was|were) expected(?P<why>.*?); found (?P<found>.*)$", re.DOTALL)

_TYPES = {
    "float_type": "a number",
    "float_parsing": "a number",
    "finite_number": "a finite number",
    "int_type": "a whole number",
    "int_parsing": "a whole number",
    "int_from_float": "a whole number",
    "int_parsing_size": "a whole number of ordinary size",
    "bool_type": "true or false",
    "bool_parsing": "true or false",
    "string_type": "text in quotes",
    "tuple_type": "a list in brackets",
    "list_type": "a list in brackets",
    "dict_type": "a table in braces",
    "date_type": "a date such as 2027-01-31",
    "date_parsing": "a date such as 2027-01-31",
    "date_from_datetime_parsing": "a date such as 2027-01-31",
    "date_from_datetime_inexact": "a date without a time, such as 2027-01-31",
}

_PATTERNS = {
    CODE_PATTERN: "a code of 1-12 letters, digits or dashes",
    r"^[A-Za-z0-9]{1,6}$": "a code of 1-6 letters or digits",
    r"^[A-Za-z0-9-]{1,20}$": "a lot code of 1-20 letters, digits or dashes",
    r"^[A-Z]{3}$": "an ISO 4217 code of three capital letters, such as EUR",
}


def shown(value: object, width: int = 60) -> str:
    """Show a value of a file in words, cut where it is long.

    Examples
    --------
    >>> shown("oak62"), shown(True), shown([1, 2]), shown({"a": 1})
    ("'oak62'", 'true', '[1, 2]', 'a table')
    """
    if isinstance(value, bool):
        text = "true" if value else "false"
    elif isinstance(value, str):
        text = f"'{value}'" if value.strip() else "an empty text"
    elif isinstance(value, dict):
        text = "a table"
    elif isinstance(value, list | tuple):
        text = "[" + ", ".join(shown(item) for item in value[:20]) + "]"
    elif isinstance(value, float):
        text = f"{value:.15g}"
    elif isinstance(value, int):
        text = str(value) if abs(value) < 10**30 else "a number of more than 30 digits"
    else:
        text = "nothing" if value is None else str(value)
    text = " ".join(text.split())
    return text if len(text) <= width else text[: width - 3] + "..."


def expected_and_found(error: Any, value: object) -> tuple[str, str]:
    """Say what one validation error expected and what it found, in words.

    Parameters
    ----------
    error : pydantic_core.ErrorDetails
        One entry of ``ValidationError.errors()``.
    value : object
        The value as it stands in the file.
    """
    kind, context = error["type"], error.get("ctx", {})
    if kind in {"value_error", "assertion_error"}:
        return _from_message(str(context.get("error", error["msg"])), value)
    if kind in _TYPES:
        quotes = " without quotes" if isinstance(value, str) and "number" in _TYPES[kind] else ""
        return _TYPES[kind] + quotes, shown(value)
    return _limit(kind, context), shown(value)


def _from_message(message: str, value: object) -> tuple[str, str]:
    match = _MESSAGE.match(message)
    if not match:
        return f"a valid value: {message}", shown(value)
    return match["expected"] + match["why"], match["found"]


def _limit(kind: str, context: dict[str, Any]) -> str:
    words = {
        "greater_than": "a number above {gt}",
        "greater_than_equal": "a number of at least {ge}",
        "less_than": "a number below {lt}",
        "less_than_equal": "a number of at most {le}",
        "string_too_short": "text of at least {min_length} character",
        "string_too_long": "text of at most {max_length} characters",
        "too_short": "a list of at least {min_length}",
        "too_long": "a list of at most {max_length}",
        "literal_error": "{expected}",
    }
    if kind == "string_pattern_mismatch":
        return _PATTERNS.get(context["pattern"], "text of another form")
    if kind not in words:
        return "a value of another kind"
    plain = {key: f"{item:.15g}" if isinstance(item, int | float) else item for key, item in context.items()}
    return words[kind].format(**plain).replace("'", "")
