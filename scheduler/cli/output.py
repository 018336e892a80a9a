"""What leaves the program: one JSON document, or a screen, on whatever standard output can show."""

from __future__ import annotations

import json
import sys
from collections.abc import Mapping
from typing import TYPE_CHECKING, Any

import typer

if TYPE_CHECKING:
    from rich.console import Console


def print_document(document: Mapping[str, Any], indent: int | None = None) -> None:
    """Print one JSON document; characters that standard output cannot take are escaped."""
    unicode = (sys.stdout.encoding or "utf-8").lower().replace("-", "").startswith("utf")
    typer.echo(json.dumps(document, indent=indent, ensure_ascii=not unicode))


def console() -> Console:
    """A console on standard output, without guesses about what is a number or a link."""
    from rich.console import Console

    return Console(highlight=False, emoji=False, markup=False)
