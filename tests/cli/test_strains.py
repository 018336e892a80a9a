"""``bagweek strains`` as a user meets it."""

from __future__ import annotations

import json
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

from models.farm import Strain
from models.growth import days_to_ready, first_pick_days
from scheduler.folder import read_farm_folder
from scheduler.folder.presets import presets

TOP = Path(__file__).parents[2]
FARM = TOP / "tests" / "broken_farms" / "base"
OWN = """
[[strain]]
code = "SHI"
preset = "shiitake"
recipe = "oak62"
bag = "block"
programme = "overnight"
be_pct = 68
"""


def run(*options: str, cwd: Path | None = None) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-m", "scheduler.cli.main", "strains", *options]
    return subprocess.run(
        command, capture_output=True, text=True, encoding="utf-8", check=False, cwd=cwd,
        env={"PYTHONPATH": str(TOP), "PATH": "", "COLUMNS": "80", "PYTHONIOENCODING": "utf-8"},
    )  # fmt: skip


@pytest.fixture
def farm(tmp_path: Path) -> Path:
    """The sound farm with a third strain, from a preset."""
    folder = Path(shutil.copytree(FARM, tmp_path / "farm"))
    file = folder / "farm.toml"
    text = file.read_text(encoding="utf-8")
    file.write_text(text.replace("[[crew]]", f"{OWN}\n[[crew]]", 1), encoding="utf-8")
    return folder


def test_without_a_farm_it_lists_the_presets(tmp_path: Path) -> None:
    done = run(cwd=tmp_path)
    assert (done.returncode, done.stderr) == (0, "")
    assert "Strains of" not in done.stdout
    for preset in presets().values():
        assert f"{preset.key} " in done.stdout
        assert preset.latin in done.stdout


def test_in_a_farm_folder_it_lists_its_strains_first(farm: Path) -> None:
    here, named = run(cwd=farm), run("--farm", str(farm))
    assert here.stdout == named.stdout
    lines = here.stdout.splitlines()
    assert lines[0] == "Strains of Larch Yard"
    assert [line.split()[0] for line in lines[2:5]] == ["OYS", "LIO", "SHI"]
    assert "shiitake" in lines[4]


@pytest.mark.parametrize("code", ["OYS", "SHI", "lions-mane", "enoki"])
def test_the_screen_fits_and_has_no_codes(farm: Path, code: str) -> None:
    done = run(code, "--farm", str(farm))
    assert done.returncode == 0
    assert max(len(line) for line in done.stdout.splitlines()) <= 80
    assert "\x1b" not in done.stdout
    missing = [key for key in presets()["grey-oyster"].values if f"\n{key} " not in done.stdout]
    assert missing == []


def test_every_field_says_where_it_comes_from_and_how_sure_it_is(farm: Path) -> None:
    document = json.loads(run("SHI", "--farm", str(farm), "--json").stdout)
    assert document["schema"] == "bagweek/strains/1"
    assert (document["farm"], document["shown"]["code"], document["shown"]["preset"]) == (
        "Larch Yard",
        "SHI",
        "shiitake",
    )
    fields = {one["key"]: one for one in document["shown"]["fields"]}
    assert list(fields) == list(Strain.model_fields)
    assert fields["be_pct"] == {
        "key": "be_pct", "value": 68, "unit": "%", "from": "farm.toml", "source": None, "sure": "farm",
    }  # fmt: skip
    card = presets()["shiitake"]
    for key, one in card.values.items():
        if key != "be_pct":
            assert (fields[key]["value"], fields[key]["from"]) == (one.value, "preset")
            assert (fields[key]["source"], fields[key]["sure"]) == (one.source, one.sure)
    assert (fields["spawn_cost_per_kg"]["from"], fields["spawn_cost_per_kg"]["sure"]) == ("default", "default")
    assert fields["fruit_at_c"]["sure"] == "none"


def test_days_are_those_of_the_farms_rooms(farm: Path) -> None:
    strain = read_farm_folder(farm).farm.strain_called("SHI")
    shown = json.loads(run("SHI", "--farm", str(farm), "--json").stdout)["shown"]
    assert [(pair["colonisation"], pair["fruiting"]) for pair in shown["rooms"]] == [("shelf", "wet")]
    assert shown["rooms"][0]["ready_days"] == days_to_ready(strain, 22.0)
    assert shown["rooms"][0]["first_days"] == first_pick_days(strain, 22.0, 16.0)
    assert shown["unsuited"] == []
    assert shown["first_flush_kg_per_bag"] == pytest.approx(3.0 * 0.38 * 0.68 * 0.5)


def test_rooms_that_do_not_suit_are_named(farm: Path) -> None:
    done = run("pink-oyster", "--farm", str(farm))
    assert "No pair of rooms suits it." in done.stdout
    assert "wet (fruiting, 16 °C) does not suit it." in done.stdout


def test_a_preset_without_a_farm_is_shown_for_usual_rooms(tmp_path: Path) -> None:
    shown = json.loads(run("shiitake", "--json", cwd=tmp_path).stdout)["shown"]
    assert [pair["colonise_c"] for pair in shown["rooms"]] == [18, 21, 22, 24]
    assert [pair["colonisation"] for pair in shown["rooms"]] == [None] * 4


@pytest.mark.parametrize(
    ("options", "words"),
    [
        (("shitake",), ["CODE", "the name of a preset", "'shitake'", "did you mean 'shiitake'?"]),
        (("OYX", "--farm", str(FARM)), ["CODE", "a strain of the farm or a preset", "did you mean 'OYS'?"]),
        (("--farm", "nowhere"), ["nowhere", "no such folder"]),
        (("--farm", ""), ["farm.toml"]),
    ],
)
def test_bad_input_is_one_sentence(options: tuple[str, ...], words: list[str], tmp_path: Path) -> None:
    done = run(*options, cwd=tmp_path)
    assert (done.returncode, done.stdout) == (2, "")
    assert all(word in done.stderr for word in words), done.stderr
    assert "Traceback" not in done.stderr


def test_command_is_known_without_heavy_imports() -> None:
    heavy = "{'numpy', 'pydantic', 'scipy', 'pandas', 'ortools', 'rich.console'}"
    code = f"import sys, scheduler.cli.strains; print(sorted({heavy} & set(sys.modules)))"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True, cwd=TOP)
    assert done.stdout.strip() == "[]"
