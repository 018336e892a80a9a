"""A sound farm folder, and a way to break it in one place and read what is said about it."""

from __future__ import annotations

import shutil
from collections.abc import Callable
from pathlib import Path

import pytest

from scheduler.errors import InputError
from scheduler.folder import read_farm_folder

BASE = Path(__file__).parent / "base"
JARGON = ("pydantic", "traceback", "value_error", "type=", "input_value", "nonetype", "field required", "\\n")

New = str | bytes | Callable[[Path], None] | None


def break_file(path: Path, old: str | None, new: New) -> None:
    if new is None or callable(new):
        path.unlink()
        if callable(new):
            new(path)
    elif old is None:
        path.write_bytes(new if isinstance(new, bytes) else new.encode())
    else:
        text = path.read_text(encoding="utf-8")
        assert old in text, f"the text to replace is not in {path.name}"
        assert isinstance(new, str)
        path.write_text(text.replace(old, new, 1), encoding="utf-8")


@pytest.fixture
def sound(tmp_path: Path) -> Path:
    """A copy of the sound farm folder."""
    return Path(shutil.copytree(BASE, tmp_path / "farm"))


@pytest.fixture
def refusal(sound: Path) -> Callable[[str, str | None, New], str]:
    """Break a file of the sound farm; get the message, which is checked to be one a grower can read."""

    def refuse(file: str, old: str | None, new: New) -> str:
        break_file(sound / file, old, new)
        with pytest.raises(InputError) as caught:
            read_farm_folder(sound)
        error = caught.value
        message = str(error)
        assert error.exit_code == 2
        assert not any(word in message.lower() for word in JARGON), message
        assert file in {finding.file for finding in error.findings}
        assert len(error.findings) <= 8, message
        assert len({(f.file, f.key, f.expected) for f in error.findings}) == len(error.findings), message
        for finding in error.findings:
            sentence = finding.sentence()
            assert "\n" not in sentence
            assert len(sentence) < 300, sentence
            assert sentence[-1] in ".?"
            assert not sentence.endswith("....")
        return message

    return refuse
