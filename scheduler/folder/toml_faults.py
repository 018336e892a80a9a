"""Say in plain words why a text is not TOML."""

from __future__ import annotations

import re
from datetime import date

from scheduler.errors import Finding

_PLACE = re.compile(r"^(?P<what>.*?) \(at (?:line (?P<line>\d+), column (?P<column>\d+)|end of document)\)$", re.DOTALL)
_DATE = re.compile(r"\b\d{4}-\d{2}-\d{2}\b")
_DECIMAL_COMMA = re.compile(r"=\s*[+-]?\d+,\d+\s*(#.*)?$")

_WORDS = (
    ("Expected newline or end of document", "more text after the value"),
    ("Illegal character '\\n'", "a text whose quotes are not closed"),
    ("Unterminated string", "a text whose quotes are not closed"),
    ('Expected "', "a text whose quotes are not closed"),
    ("Unclosed array", "a list whose bracket is not closed"),
    ("Unclosed inline table", "a table whose brace is not closed"),
    ("Cannot overwrite a value", "a key that stands twice"),
    ("Duplicate inline table key", "a key that stands twice"),
    ("Cannot declare", "a table that stands twice, or a section in single and in double brackets"),
    ("Cannot mutate immutable", "a table that stands twice"),
    ("Invalid value", "a value that TOML cannot read"),
    ("Invalid date or datetime", "a date that is in no calendar"),
    ("Invalid statement", "a line that is not `key = value`"),
    ("Expected '='", "a key without `=`"),
    ("Illegal character", "a character that TOML does not allow"),
)
"""How the parser begins a message, and what that means."""


def toml_fault(name: str, text: str, message: str) -> Finding:
    """Turn the message of the TOML parser into a finding with the line it is about.

    Examples
    --------
    >>> toml_fault("farm.toml", "a = 1,5", "Invalid statement (at line 1, column 6)").sentence()
    'farm.toml, line 1: expected TOML, found a decimal comma where TOML has a decimal point in: a = 1,5.'
    """
    match = _PLACE.match(message)
    what = match["what"] if match else message
    words = next(
        (plain for start, plain in _WORDS if what.startswith(start)), f"a fault ({what[:1].lower()}{what[1:]})"
    )
    if not match or match["line"] is None:
        return Finding(name, "at its end", words, "TOML")
    lines = text.replace("\r\n", "\n").split("\n")
    number = int(match["line"])
    line = lines[number - 1] if number <= len(lines) else ""
    return Finding(name, f"line {number}", f"{_better(line) or words} in: {_shown(line)}", "TOML")


def _better(line: str) -> str:
    """Recognise slips that the parser reports as something else."""
    if _DECIMAL_COMMA.search(line):
        return "a decimal comma where TOML has a decimal point"
    for text in _DATE.findall(line):
        try:
            date.fromisoformat(text)
        except ValueError:
            return f"{text}, which is in no calendar,"
    return ""


def _shown(line: str) -> str:
    line = "".join(letter if letter.isprintable() else "?" for letter in " ".join(line.split()))
    return line if len(line) <= 60 else line[:57] + "..."
