"""What the referee says: violations, and how many comparisons were made."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Violation:
    """A broken rule: its name in the plan rules, where, what was found, and the limit, with a unit."""

    rule: str
    where: str
    found: str
    limit: str
    unit: str = ""

    def sentence(self) -> str:
        """Say it in one sentence."""
        unit = f" {self.unit}" if self.unit else ""
        return f"[{self.rule}] {self.where}: found {self.found}{unit}, the rule allows {self.limit}{unit}."


@dataclass(frozen=True, slots=True)
class Verdict:
    """The outcome of a check."""

    checked: int
    violations: tuple[Violation, ...]
