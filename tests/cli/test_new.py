"""``bagweek new`` makes a whole farm folder, or nothing."""

from __future__ import annotations

import json
import tomllib

import pytest
import typer
from typer.testing import CliRunner

from scheduler.cli.new import new
from scheduler.errors import UsageError
from scheduler.folder import create, read_farm_folder, scenario_folder, scenario_names
from scheduler.folder.create import create_farm_folder

FILES = ["farm.schema.json", "farm.toml", "orders.csv", "stock.csv"]


@pytest.fixture
def app():
    app = typer.Typer()
    app.command("new")(new)
    return app


def names(folder):
    return sorted(path.name for path in folder.iterdir())


def test_the_new_farm_is_sound(tmp_path):
    create_farm_folder(tmp_path / "deep" / "farm")
    assert names(tmp_path / "deep") == ["farm"]
    folder = read_farm_folder(tmp_path / "deep" / "farm")
    assert folder.orders
    assert set(FILES) == set(names(tmp_path / "deep" / "farm"))


def test_the_schema_beside_it_is_named_in_the_first_line(tmp_path):
    create_farm_folder(tmp_path / "farm")
    text = (tmp_path / "farm" / "farm.toml").read_text(encoding="utf-8")
    assert text.startswith("#:schema farm.schema.json\n")
    known = json.loads((tmp_path / "farm" / "farm.schema.json").read_text(encoding="utf-8"))["properties"]
    assert set(tomllib.loads(text)) <= set(known)


@pytest.mark.parametrize("like", scenario_names())
def test_every_scenario_can_be_copied_without_its_recorded_output(tmp_path, like):
    create_farm_folder(tmp_path / "farm", like)
    assert set(names(tmp_path / "farm")) <= set(FILES)


def test_an_empty_folder_may_exist(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    create_farm_folder(create.Path())
    assert set(names(tmp_path)) == set(FILES)


def test_a_folder_with_something_in_it_is_left_alone(tmp_path):
    (tmp_path / "notes").write_text("mine", encoding="utf-8")
    with pytest.raises(UsageError, match="a folder that holds files"):
        create_farm_folder(tmp_path)
    assert names(tmp_path) == ["notes"]


@pytest.mark.parametrize(
    ("target", "words"),
    [("file", "a file of that name"), ("file/below", "cannot"), ("x" * 300, "cannot"), ("a\0b", "cannot")],
)
def test_what_cannot_be_a_folder_is_refused(tmp_path, target, words):
    (tmp_path / "file").touch()
    with pytest.raises(UsageError, match=words):
        create_farm_folder(tmp_path / target)
    assert names(tmp_path) == ["file"]


def test_the_nearest_scenario_is_named(tmp_path):
    with pytest.raises(UsageError, match="did you mean 'one-drum'"):
        create_farm_folder(tmp_path / "farm", "one-drm")
    assert names(tmp_path) == []


@pytest.mark.parametrize("path", ["../one-drum", "/", "", "."])
def test_a_path_is_no_scenario(path):
    with pytest.raises(UsageError, match="the name of a scenario"):
        scenario_folder(path)


@pytest.mark.parametrize("existing", [False, True])
def test_nothing_is_left_half_made(tmp_path, monkeypatch, existing):
    def full_disk(source, target):
        if target.name == "orders.csv":
            raise OSError(28, "No space left on device")
        return target.write_bytes(source.read_bytes())

    monkeypatch.setattr(create.shutil, "copyfile", full_disk)
    if existing:
        (tmp_path / "farm").mkdir()
    with pytest.raises(UsageError, match="no space left on device"):
        create_farm_folder(tmp_path / "farm")
    assert names(tmp_path) == (["farm"] if existing else [])
    assert not existing or names(tmp_path / "farm") == []


def test_a_scenario_that_cannot_be_moved_leaves_an_empty_folder(tmp_path, monkeypatch):
    (tmp_path / "farm").mkdir()
    rename = create.Path.rename

    def fail_at_orders(path, target):
        if path.name == "orders.csv":
            raise OSError(13, "Permission denied")
        return rename(path, target)

    monkeypatch.setattr(create.Path, "rename", fail_at_orders)
    with pytest.raises(UsageError, match="permission denied"):
        create_farm_folder(tmp_path / "farm")
    assert names(tmp_path / "farm") == []


def test_command(app, tmp_path):
    done = CliRunner().invoke(app, [str(tmp_path / "farm")])
    assert done.exit_code == 0
    assert done.stdout.splitlines() == [str(tmp_path / "farm" / name) for name in FILES]
    assert "bagweek check" in done.stderr


def test_command_as_json(app, tmp_path):
    done = CliRunner().invoke(app, [str(tmp_path / "farm"), "--like", "one-drum", "--json"])
    document = json.loads(done.stdout)
    assert next(iter(document)) == "schema"
    assert document["schema"] == "bagweek/new/1"
    assert document["files"] == FILES


def test_command_refuses(app, tmp_path):
    done = CliRunner().invoke(app, [str(tmp_path), "--like", "two-drums"])
    assert isinstance(done.exception, UsageError)
    assert done.exception.exit_code == 2
