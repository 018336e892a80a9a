"""Strains that take a preset up, soundly and with one fault each: the words name the key of ``farm.toml``."""

from __future__ import annotations

from pathlib import Path

import pytest

from scheduler.folder import read_farm_folder
from scheduler.folder.presets import OWN_KEYS, presets
from tests.broken_farms.conftest import BASE, break_file

CARD = (BASE / "farm.toml").read_text(encoding="utf-8").split("[[strain]]\n")[1].strip("\n")
SHORT = 'code = "OYS"\npreset = "grey-oyster"\nrecipe = "oak62"\nbag = "2k3"\nprogramme = "overnight"\n'

ROWS = (
    ("misspelt", SHORT.replace("grey-oyster", "grey-oister"), ("strain.OYS.preset", "did you mean 'grey-oyster'")),
    ("capitals", SHORT.replace("grey-oyster", "Grey-Oyster"), ("OYS.preset", "did you mean 'grey-oyster'")),
    ("unlike-any", SHORT.replace("grey-oyster", "zzz"), ("OYS.preset", "the name of a preset", "king-oyster", "'zzz'")),
    ("blank", SHORT.replace('"grey-oyster"', '" "'), ("OYS.preset", "an empty text")),
    ("number", SHORT.replace('"grey-oyster"', "7"), ("strain.OYS.preset", "text in quotes", "found 7")),
    ("list", SHORT.replace('"grey-oyster"', '["grey-oyster"]'), ("strain.OYS.preset", "text in quotes")),
    ("pole-by-override", SHORT + "t_opt_c = 18\n", ("strain.OYS", "above the middle", "(20)", "found 18")),
    ("wrong-kind-of-override", SHORT + 'be_pct = "85"\n', ("strain.OYS.be_pct", "a number without quotes")),
    ("override-out-of-range", SHORT + "loss_pct = 100\n", ("strain.OYS.loss_pct", "below 100")),
    ("override-against-preset", SHORT + "colonise_at_c = 40\n", ("strain.OYS", "colonise_at_c between", "36")),
    ("unknown-key", SHORT + "be_pc = 85\n", ("strain.OYS.be_pc", "did you mean 'be_pct'")),
    ("no-recipe", SHORT.replace('recipe = "oak62"\n', ""), ("strain.OYS.recipe", "missing")),
    ("unknown-recipe", SHORT.replace("oak62", "oak26"), ("strain.OYS.recipe", "did you mean 'oak62'")),
    ("no-code", SHORT.replace('code = "OYS"\n', ""), ("strain number 1.code", "missing")),
    ("no-climate", SHORT.replace("grey-oyster", "pink-oyster"), ("OYS.fruiting_temp_c", "18 to 30", "wet at 16")),
    ("too-hot-inside", SHORT + "self_heating_k = 15\n", ("strain.OYS", "self_heating_k", "below t_max_c (36)")),
    ("q10-alone", SHORT + "fruit_q10 = 2\n", ("strain.OYS", "fruit_at_c", "fruit_q10 2 alone")),
    ("fruits-outside", SHORT + "fruit_at_c = 25\n", ("strain.OYS", "within fruiting_temp_c (10 to 21)", "25")),
    ("all-lost-between-flushes", SHORT + "flush_loss_pct = 100\n", ("strain.OYS.flush_loss_pct", "below 100")),
)  # fmt: skip


@pytest.mark.parametrize(("name", "card", "says"), ROWS, ids=[row[0] for row in ROWS])
def test_a_fault_is_said_once_and_in_words(refusal, name, card, says):
    message = refusal("farm.toml", CARD, card)
    for words in says:
        assert words in message, f"{name}: {message}"
    assert len([line for line in message.splitlines() if line.startswith("farm.toml")]) == 1, message


def test_a_preset_fills_what_the_file_leaves_out(sound: Path):
    break_file(sound / "farm.toml", CARD, SHORT + "be_pct = 85\ncolonise_days = 17\n")
    folder = read_farm_folder(sound)
    strain, card = folder.farm.strain_called("OYS"), presets()["grey-oyster"]
    assert (strain.preset, strain.name, strain.be_pct, strain.colonise_days) == ("grey-oyster", "grey oyster", 85, 17)
    for key, one in card.values.items():
        if key not in {"be_pct", "colonise_days"}:
            expected = tuple(one.value) if isinstance(one.value, list) else one.value
            assert getattr(strain, key) == expected
    assert folder.written["OYS"] == {*OWN_KEYS, "preset", "be_pct", "colonise_days"}


def test_a_blank_preset_is_none(sound: Path):
    break_file(sound / "farm.toml", 'name = "grey oyster"', 'name = "grey oyster"\npreset = ""')
    assert read_farm_folder(sound).farm.strain_called("OYS").be_pct == 85


def test_cold_store_out_of_range(refusal):
    assert "site.cold_store_c" in refusal("farm.toml", "feed_water_c = 12", "feed_water_c = 12\ncold_store_c = 999")
