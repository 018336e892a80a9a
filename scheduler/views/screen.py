"""The look that all answers share: quiet rules, aligned columns, at most 80 columns."""

from __future__ import annotations

import textwrap
import unicodedata

from rich.console import Console
from rich.text import Text

WIDTH = 80
PLAIN = str.maketrans({
    "°": " ", "²": "2", "³": "3", "·": ".", "×": "x", "–": "-", "—": "-", "…": "...", "→": "->", "≤": "<=", "≥": ">=",
    "α": "a", "γ": "g", "ρ": "r", "σ": "s", "±": "+-", "€": "EUR", "£": "GBP",
})  # fmt: skip
"""What stands for characters that a terminal of ASCII does not have."""


def plain(text: str) -> str:
    """A text in ASCII: signs replaced, accents left off, anything else a question mark.

    Examples
    --------
    >>> plain("22 °C, 9 W/m², Brückner")
    '22 C, 9 W/m2, Bruckner'
    """
    signs = text.replace(" °C", " C").translate(PLAIN)
    letters = (character for character in unicodedata.normalize("NFKD", signs) if not unicodedata.combining(character))
    return "".join(letters).encode("ascii", "replace").decode("ascii")


class Screen:
    """A console with the few shapes that an answer needs."""

    def __init__(self, console: Console) -> None:
        self.console = console
        self.width = min(console.width, WIDTH)
        self.ascii_only = console.options.ascii_only
        self._rule = "-" if self.ascii_only else "─"
        self.full, self.empty = ("#", ".") if self.ascii_only else ("▪", "·")

    def line(self, text: str = "", style: str = "") -> None:
        """One line, cut to the width."""
        if self.ascii_only:
            text = plain(text)
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
