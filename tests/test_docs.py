"""What the pages say is so: commands and options exist, links lead somewhere, and the tutorial can be followed."""

from __future__ import annotations

import re
import shlex
from pathlib import Path

import pytest
import typer
from typer.testing import CliRunner

from scheduler.cli.main import app
from scheduler.folder import scenario_names

TOP = Path(__file__).parents[1]
PAGES = sorted([*TOP.glob("*.md"), *TOP.glob("docs/**/*.md")])
TUTORIAL = TOP / "docs" / "tutorial" / "first-plan.md"
COMMANDS = typer.main.get_command(app).commands
"""The commands that there are, by name."""
HEADING = re.compile(r"^#+ +(.*)$", re.MULTILINE)
LINK = re.compile(r"\[[^\]]+\]\(([^)\s]+)\)")
CODE = re.compile(
    r"^```sh\n(.*?)^```$|(?<!`)`(bagweek [^`\n]+)`(?!`)|^ {4}((?:\S*/)?bagweek .*?)$", re.MULTILINE | re.DOTALL
)
"""Blocks of commands, commands within a sentence, and indented commands."""


def name_of(page):
    return page.relative_to(TOP).as_posix()


def commands_in(page):
    """Each use of bagweek on a page: the words after it, up to the end of the line or of the command."""
    for found in CODE.findall(page.read_text("utf-8")):
        for line in "".join(found).splitlines():
            for part in re.split(r"&&|;|\||>", line):
                words = shlex.split(part, comments=True)
                if words and Path(words[0]).name == "bagweek":
                    yield words[1:]


def anchors(page):
    """Anchors of the headings of a page, as they are made from their text."""
    headings = HEADING.findall(page.read_text(encoding="utf-8"))
    return {re.sub(r"[^\w\- ]", "", heading.lower()).replace(" ", "-") for heading in headings}


@pytest.mark.parametrize("page", PAGES, ids=name_of)
def test_commands_and_options_exist(page):
    for words in commands_in(page):
        if words[0].startswith("-"):
            assert words[0] in {"--help", "--version"}, words
            continue
        assert words[0] in COMMANDS, f"{name_of(page)}: bagweek {' '.join(words)}"
        known = {option for parameter in COMMANDS[words[0]].params for option in parameter.opts} | {"--help"}
        for word in words[1:]:
            assert not word.startswith("-") or word.partition("=")[0] in known, f"{name_of(page)}: {word}"


@pytest.mark.parametrize("page", PAGES, ids=name_of)
def test_links_lead_somewhere(page):
    for link in LINK.findall(page.read_text(encoding="utf-8")):
        if "://" in link:
            continue
        path, _, anchor = link.partition("#")
        target = (page.parent / path).resolve() if path else page
        assert target.exists(), f"{name_of(page)}: {link}"
        if anchor:
            assert anchor in anchors(target), f"{name_of(page)}: {link}"


def test_every_command_is_shown_on_the_front_page():
    text = (TOP / "README.md").read_text(encoding="utf-8")
    assert [name for name in COMMANDS if f"`bagweek {name}" not in text] == []


def test_every_page_is_reached_from_the_index():
    index = TOP / "docs" / "index.md"
    reached = {(index.parent / link.partition("#")[0]).resolve() for link in LINK.findall(index.read_text("utf-8"))}
    assert [name_of(page) for page in index.parent.rglob("*.md") if page != index and page not in reached] == []


def test_scenarios_are_shown_to_those_who_start_a_farm():
    page = (TOP / "docs" / "how-to" / "enter-your-farm.md").read_text(encoding="utf-8")
    assert [name for name in scenario_names() if f"{name}`" not in page] == []


def test_the_tutorial_can_be_followed(tmp_path, monkeypatch):
    """Make the farm, check it, make the slip that the page makes: what it says is what one sees."""
    page = " ".join(TUTORIAL.read_text(encoding="utf-8").split())
    monkeypatch.chdir(tmp_path)
    monkeypatch.setenv("COLUMNS", "80")
    runner = CliRunner()
    said = [words for words in commands_in(TUTORIAL) if words[0] in {"new", "check"} and "--like" not in words]
    assert said[:2] == [["new", "my-farm"], ["check", "--farm", "my-farm"]]
    assert runner.invoke(app, said[0]).exit_code == 0
    check = runner.invoke(app, said[1])
    assert check.exit_code == 0, check.output
    assert "no findings" in check.output
    places = re.search(r"(\d+) places turn over (\d+) bags", page)
    assert places is not None
    rows = re.findall(r"OYS, 3 flushes kept +([\d.]+) .*\n.* (\d+) places in tent", check.output)
    assert rows[0][1] == places[1]
    assert int(float(rows[0][0])) == int(places[2])
    slip = re.search(r"change `(places = \d+)` of the steriliser to `(palces = \d+)`", page)
    assert slip is not None
    farm = tmp_path / "my-farm" / "farm.toml"
    sound = farm.read_text(encoding="utf-8")
    assert slip[1] in sound
    farm.write_text(sound.replace(slip[1], slip[2]), encoding="utf-8")
    check = runner.invoke(app, said[1])
    assert check.exit_code == 2
    assert "did you mean 'places'" in check.output
    assert "Corner Greens,OYS,fri,22" in (tmp_path / "my-farm" / "orders.csv").read_text(encoding="utf-8")
