"""Progress of a long search, on stderr: a moving line on a terminal, else a plain line now and then."""

from __future__ import annotations

import sys
import time
from types import TracebackType
from typing import TextIO

SECONDS_BETWEEN_LINES = 2.0


class ProgressLine:
    """Says what the search is doing and how far it has got; use it as a context."""

    def __init__(self, stream: TextIO | None = None) -> None:
        self._stream = sys.stderr if stream is None else stream
        self._live = self._stream.isatty()
        self._said = 0.0
        self._stage = ""

    def __enter__(self) -> ProgressLine:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        if self._live and self._said:
            self._stream.write("\r" + " " * 78 + "\r")
            self._stream.flush()

    def tell(self, stage: str, best: float | None, bound: float | None, gap: float | None) -> None:
        """Take note of a stage, best money, bound and gap, as far as they are known."""
        now = time.monotonic()
        if not self._live and stage == self._stage and now - self._said < SECONDS_BETWEEN_LINES:
            return
        self._stage, self._said = stage, now
        parts = [stage]
        if best is not None:
            parts.append(f"best {best:,.0f}")
        if bound is not None:
            parts.append(f"at most {bound:,.0f}")
        if gap is not None and gap < 10:
            parts.append(f"gap {100 * gap:.2f} %")
        line = ", ".join(parts)[:78]
        self._stream.write(f"\r{line:<78}" if self._live else f"{line}\n")
        self._stream.flush()
