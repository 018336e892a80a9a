"""Whatever stands in the files, the reader gives a farm or findings in words, and nothing else."""

from __future__ import annotations

import shutil
import tempfile
from pathlib import Path

from hypothesis import given, settings
from hypothesis import strategies as st

from scheduler.errors import InputError
from scheduler.folder import read_farm_folder

BASE = Path(__file__).parents[1] / "broken_farms" / "base"
FILES = {name: (BASE / name).read_bytes() for name in ("farm.toml", "orders.csv", "stock.csv")}
BITS = st.sampled_from(
    [b"", b"\n", b"\r", b",", b";", b'"', b"'", b"[", b"]", b"{", b"=", b".", b"-", b"0", b"9" * 400, b"1e999", b"nan",
     b"true", b"[[]]", b"\xff", b"\0", b"\xe2\x80\x93", b"2027-02-30", b"07:30:00", b"# ", b"''", b"_", b"[a.b]\n"]
)  # fmt: skip


@st.composite
def damaged(draw) -> tuple[str, bytes]:
    name = draw(st.sampled_from(sorted(FILES)))
    data = FILES[name]
    for _ in range(draw(st.integers(1, 3))):
        start = draw(st.integers(0, len(data)))
        data = data[:start] + draw(BITS | st.binary(max_size=6)) + data[start + draw(st.integers(0, 12)) :]
    return name, data


def read(name: str, data: bytes) -> None:
    with tempfile.TemporaryDirectory() as folder:
        shutil.copytree(BASE, folder, dirs_exist_ok=True)
        (Path(folder) / name).write_bytes(data)
        try:
            found = read_farm_folder(folder).findings
        except InputError as error:
            found = error.findings
            refused = True
        else:
            refused = False
        assert refused == any(finding.severity == "error" for finding in found)
        for finding in found:
            assert finding.file in FILES
            assert "\n" not in finding.sentence()
            assert "pydantic" not in finding.sentence()


@settings(max_examples=150, deadline=None)
@given(damaged())
def test_damaged_files(case):
    read(*case)


@settings(max_examples=60, deadline=None)
@given(st.sampled_from(sorted(FILES)), st.binary(max_size=300))
def test_any_bytes(name, data):
    read(name, data)


@settings(max_examples=60, deadline=None)
@given(st.sampled_from(["orders.csv", "stock.csv"]), st.text(max_size=120))
def test_any_text_below_the_first_row(name, text):
    read(name, FILES[name].split(b"\n", 1)[0] + b"\n" + text.encode("utf-8", "surrogatepass"))
