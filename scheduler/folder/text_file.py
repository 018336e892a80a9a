"""Read a text file that may be missing, huge, or no text at all."""

from __future__ import annotations

import codecs
from pathlib import Path

from scheduler.errors import Finding

MEGABYTE = 1_000_000

_MARKS = (
    (codecs.BOM_UTF8, "utf-8-sig"),
    (codecs.BOM_UTF16_LE, "utf-16"),
    (codecs.BOM_UTF16_BE, "utf-16"),
)


def read_text(path: Path, limit: int, missing: str, findings: list[Finding]) -> str | None:
    """Read a file as text; None, and a finding, when that cannot be done.

    Parameters
    ----------
    path : Path
        The file.
    limit : int
        Most bytes it may have; a larger file is refused unread.
    missing : str
        What to say was expected when there is no such file.
    findings : list of Finding
        Findings are added here.

    Notes
    -----
    UTF-8 with or without a byte-order mark and UTF-16 with one are read. A table from an older spreadsheet program in
    Windows-1252 is read with a warning.
    """
    data = _bytes(path, limit, missing, findings)
    if data is None:
        return None
    if not data.strip():
        findings.append(Finding(path.name, "", "an empty file", missing))
        return None
    text = _decoded(path.name, data, findings)
    if text is not None and "\0" in text:
        findings.append(Finding(path.name, "", "binary data", "text in UTF-8"))
        return None
    return text


def _bytes(path: Path, limit: int, missing: str, findings: list[Finding]) -> bytes | None:
    def refuse(found: str, expected: str) -> None:
        findings.append(Finding(path.name, "", found, expected))

    try:
        if not path.exists():
            refuse("no such file", missing)
        elif path.is_dir():
            refuse("a folder of that name", "a file")
        elif not path.is_file():
            refuse("something that is not a file", "a file")
        elif path.stat().st_size > limit:
            refuse(f"{path.stat().st_size / MEGABYTE:.1f} MB", f"a file of at most {limit / MEGABYTE:g} MB")
        else:
            return path.read_bytes()
    except PermissionError:
        refuse("no permission to read it", "a file that can be read")
    except OSError as error:
        refuse(f"that it cannot be read ({error.strerror or 'unknown reason'})", "a file that can be read")
    return None


def _decoded(name: str, data: bytes, findings: list[Finding]) -> str | None:
    encoding = next((encoding for mark, encoding in _MARKS if data.startswith(mark)), "utf-8")
    try:
        return data.decode(encoding)
    except UnicodeDecodeError as error:
        text = _windows(data) if encoding == "utf-8" and name.endswith(".csv") else None
        if text is None:
            line = data.count(b"\n", 0, error.start) + 1
            found = f"bytes that are not text (byte {error.start + 1}, in line {line})"
            findings.append(Finding(name, "", found, "text in UTF-8"))
        else:
            findings.append(Finding(name, "", "Windows-1252, and read it as that", "text in UTF-8", severity="warning"))
        return text


def _windows(data: bytes) -> str | None:
    """Decode Windows-1252, unless it holds characters that no table has."""
    if any(byte < 32 and byte not in b"\t\r\n" for byte in data):
        return None
    try:
        return data.decode("cp1252")
    except UnicodeDecodeError:
        return None
