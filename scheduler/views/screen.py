"""The look that all answers share: quiet rules, aligned columns, at most 80 columns."""

from __future__ import annotations

import textwrap

from rich.console import Console
from rich.text import Text

WIDTH = 80


class Screen:
    """A console with the few shapes that an answer needs."""

    def __init__(self, console: Console) -> None:
        self.console = console
        self.width = min(console.width, WIDTH)
        self._rule = "-" if console.options.ascii_only else "─"
        self.full, self.empty = ("#", ".") if console.options.ascii_only else ("▪", "·")

    def line(self, text: str = "", style: str = "") -> None:
        """One line, cut to the width."""
        self.console.print(Text(text[: self.width].rstrip(), style=style), soft_wrap=True)

    def title(self, text: str) -> None:
        """The first line."""
        self.line(text, "bold")

    def heading(self, text: str) -> None:
        """A blank line, then a heading over a rule."""
        self.line()
        self.line(text, "bold")
        self.line(self._rule * self.width, "dim")

    def wrapped(self, text: str, indent: str = "", style: str = "") -> None:
        """A paragraph."""
        following = " " * len(indent)
        for line in textwrap.wrap(text, self.width, initial_indent=indent, subsequent_indent=following):
            self.line(line, style)
