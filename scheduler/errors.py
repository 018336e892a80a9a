"""Every way bagweek says no: one tree of exceptions, and the finding, a remark with its place.

::

    BagweekError            exit code 2
    ├── InputError          2  the farm folder cannot be read; carries every finding at once
    ├── UsageError          2  an option or argument that makes no sense
    ├── NoPlanError         3  no plan within the limits of time
    └── RecordError         4  the record is damaged or locked

The library raises; only ``scheduler.cli`` catches, prints one plain sentence and sets the exit code.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import ClassVar, Literal

Severity = Literal["error", "warning"]


@dataclass(frozen=True, slots=True)
class Finding:
    """A remark on one value of a farm folder.

    Attributes
    ----------
    file : str
        Name of the file, such as ``farm.toml``.
    key : str
        Where in the file: a dotted path with list items by code (``strain.OYS.flush_share``) or a row and column
        (``row 7, kg``); empty for the file as a whole.
    found : str
        What stands there, in words; empty when nothing does.
    expected : str
        What was expected, in words.
    nearest : str
        The nearest valid choice; empty when there is none.
    severity : {"error", "warning"}
        Whether the file can be used all the same.
    """

    file: str
    key: str
    found: str
    expected: str
    nearest: str = ""
    severity: Severity = "error"

    @property
    def place(self) -> str:
        """File and key, as a reader would look them up."""
        return f"{self.file}, {self.key}" if self.key else self.file

    def sentence(self) -> str:
        """Say it in one sentence: where, what was expected, what was found, the likely fix.

        Examples
        --------
        >>> Finding("farm.toml", "strain.OYS.recipe", "'oak26'", "the code of a recipe", "oak62").sentence()
        "farm.toml, strain.OYS.recipe: expected the code of a recipe, found 'oak26'; did you mean 'oak62'?"
        """
        text = f"{self.place}: expected {self.expected}"
        if self.found:
            text += f", found {self.found}"
        if self.nearest:
            return f"{text}; did you mean '{self.nearest}'?"
        return text if text.endswith(".") else f"{text}."

    def as_json(self) -> dict[str, str]:
        """Return the finding as it stands in a JSON document."""
        return {
            "severity": self.severity,
            "file": self.file,
            "key": self.key,
            "found": self.found,
            "expected": self.expected,
            "nearest": self.nearest,
            "sentence": self.sentence(),
        }


class BagweekError(Exception):
    """Anything bagweek refuses; its text is the sentence a user sees."""

    exit_code: ClassVar[int] = 2


class InputError(BagweekError):
    """A farm folder that cannot be used; the text is its first errors, one sentence a line."""

    SHOWN: ClassVar[int] = 20

    def __init__(self, findings: tuple[Finding, ...]) -> None:
        self.findings = findings
        lines = [finding.sentence() for finding in findings if finding.severity == "error"]
        if len(lines) > self.SHOWN:
            lines[self.SHOWN :] = [f"... and {len(lines) - self.SHOWN} more; bagweek check lists them all."]
        super().__init__("\n".join(lines))


class UsageError(BagweekError):
    """An option or argument that makes no sense."""


class NoPlanError(BagweekError):
    """No plan was found within the limits of time."""

    exit_code: ClassVar[int] = 3


class RecordError(BagweekError):
    """The record is damaged or locked."""

    exit_code: ClassVar[int] = 4
