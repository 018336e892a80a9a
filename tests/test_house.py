"""The house itself: what lies where, how long files are, who imports whom, and what the gate runs."""

import re
import stat
import subprocess
import sys
import tomllib
from pathlib import Path

import pytest

from scheduler.folder import read_farm_folder

HOME = Path(__file__).resolve().parents[1]
FOLDERS = {"docs", "models", "scenarios", "scheduler", "tests"}
FILES = {"CHANGELOG.md", "DEVELOPERS.md", "LICENSE", "README.md", "pyproject.toml"}
BUILT = {"build", "dist"}
MOST_LINES = 400
SCENARIOS = sorted(path.parent for path in HOME.glob("scenarios/*/farm.toml"))
TEXTS = {".md", ".py", ".toml", ".csv", ".json", ".yaml", ".yml", ".cfg", ".txt", ""}
LEFT_UNDONE = tuple("".join(parts) for parts in (("TO", "DO"), ("FIX", "ME"), ("XX", "X"), ("HA", "CK")))
MACHINE_PATHS = tuple("/" + path for path in ("work/", "tmp/", "home/", "root/", "Users/"))


def tracked_texts():
    """Return the text files that belong to the project, found without any version control."""
    tops = [HOME / name for name in sorted(FOLDERS | FILES)] + [HOME / ".ci", HOME / ".pre-commit-config.yaml"]
    for top in tops:
        for path in sorted(top.rglob("*")) if top.is_dir() else [top]:
            if path.is_file() and path.suffix in TEXTS and "__pycache__" not in path.parts:
                yield path


def package_files():
    return [path for name in ("models", "scheduler") for path in sorted((HOME / name).rglob("*.py"))]


def readme_command(ending):
    found = re.findall(
        rf"^ *(python3 -m venv .*{re.escape(ending)}.*)$", (HOME / "README.md").read_text("utf-8"), re.MULTILINE
    )
    assert len(found) == 1, f"one command with {ending!r} in README.md was expected; found {found}"
    return found[0]


def test_top_level_holds_only_what_belongs_there():
    names = {path.name for path in HOME.iterdir() if not path.name.startswith(".")}
    assert names - BUILT - {name for name in names if name.endswith(".egg-info")} == FOLDERS | FILES


@pytest.mark.parametrize("path", package_files(), ids=lambda path: str(path.relative_to(HOME)))
def test_package_file_is_short_and_says_what_it_is_for(path):
    text = path.read_text("utf-8")
    assert len(text.splitlines()) <= MOST_LINES
    assert not text.strip() or text.lstrip().startswith('"""')


def test_no_text_is_left_undone_or_names_a_machine():
    found = [
        f"{path.relative_to(HOME)}: {word}"
        for path in tracked_texts()
        for text in [path.read_text("utf-8")]
        for word in (*LEFT_UNDONE, *MACHINE_PATHS)
        if re.search(rf"(?<![\w.]){re.escape(word)}" + (r"(?!\w)" if word.isalpha() else ""), text)
    ]
    assert found == []


def test_gate_runs_the_command_of_the_readme_and_every_check():
    gate = HOME / ".ci" / "run"
    assert gate.stat().st_mode & stat.S_IXUSR
    text = gate.read_text("utf-8")
    pattern = re.search(r"grep -E '([^']+)' README\.md", text)
    assert pattern
    lines = [line for line in (HOME / "README.md").read_text("utf-8").splitlines() if re.search(pattern[1], line)]
    assert [line.strip() for line in lines] == [readme_command("-m pytest")]
    assert 'eval "$command"' in text
    assert "set -euo pipefail" in text
    for check in ("ruff check", "ruff format --check", "mypy", "lint-imports"):
        assert re.search(rf"\.venv/bin/{check}\b", text), check


def test_readme_plans_a_scenario_that_is_there():
    folder = re.search(r"--farm (scenarios/\S+)", readme_command("bagweek plan"))
    assert folder
    assert HOME / folder[1] in SCENARIOS


def test_import_rules_name_modules_that_exist():
    rules = tomllib.loads((HOME / "pyproject.toml").read_text("utf-8"))["tool"]["importlinter"]["contracts"]
    for rule in rules:
        for module in rule["source_modules"]:
            place = HOME.joinpath(*module.split("."))
            assert place.is_dir() or place.with_suffix(".py").is_file(), f"{rule['name']}: {module}"


def test_import_rules_are_kept():
    script = "import sys; from importlinter.cli import lint_imports_command; sys.exit(lint_imports_command())"
    done = subprocess.run(
        [sys.executable, "-W", "ignore", "-c", script, "--no-cache"],
        cwd=HOME, capture_output=True, text=True, timeout=60, check=False,
    )  # fmt: skip
    assert done.returncode == 0, done.stdout + done.stderr


@pytest.mark.parametrize("folder", SCENARIOS, ids=lambda path: path.name)
def test_scenario_reads_without_a_finding(folder):
    read = read_farm_folder(folder)
    assert read.findings == ()
    assert read.orders


@pytest.mark.parametrize("folder", SCENARIOS, ids=lambda path: path.name)
def test_scenario_names_its_schema_and_where_its_strain_values_come_from(folder):
    text = (folder / "farm.toml").read_text("utf-8")
    first = text.splitlines()[0]
    assert first.startswith("#:schema ")
    assert (folder / first.removeprefix("#:schema ")).resolve().is_file()
    for block in text.split("[[strain]]")[1:]:
        for key in ("t_opt_c", "colonise_days", "pin_days", "flush_share", "be_pct", "loss_pct", "shelf_life_days"):
            line = re.search(rf"^{key} = .*$", block, re.MULTILINE)
            assert line, key
            assert "#" in line[0], line[0]
