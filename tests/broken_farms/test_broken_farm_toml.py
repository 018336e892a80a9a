"""Farm files broken in one place each.

Each row: a name, the text to replace (None: the whole file), what stands there instead (None: nothing is left; a
function makes something else), and the words that the message must hold.
"""

from __future__ import annotations

from datetime import date, timedelta
from pathlib import Path

import pytest


def _huge(path: Path) -> None:
    with path.open("wb") as file:
        file.seek(50_000_000)
        file.write(b"x")


def _year(first: date) -> str:
    return ", ".join((first + timedelta(days=k)).isoformat() for k in range(400))


def _noise() -> bytes:
    return bytes((37 * k * k + 11 * k) % 256 for k in range(4000))


ROWS = (
    # the file
    ("farm-missing", None, None, ("farm.toml", "no such file", "bagweek new")),
    ("farm-empty", None, "", ("farm.toml", "an empty file", "bagweek new")),
    ("farm-blank", None, "\n\n   \n", ("farm.toml", "an empty file")),
    ("farm-folder", None, Path.mkdir, ("farm.toml", "a folder of that name", "a file")),
    ("farm-noise", None, _noise(), ("farm.toml", "not text", "UTF-8")),
    ("farm-nul", None, b"[site]\0\0\0\n", ("farm.toml", "binary data")),
    ("farm-huge", None, _huge, ("farm.toml", "50.0 MB", "at most 1 MB")),
    ("farm-latin1", None, 'x = "caf\xe9"'.encode("latin-1"), ("farm.toml", "byte 9, in line 1", "UTF-8")),
    ("farm-lonely-comment", None, "# nothing here\n", ("farm.toml, site", "missing")),
    ("farm-dangling-link", None, lambda path: path.symlink_to("nowhere"), ("farm.toml", "no such file")),
    # TOML
    ("toml-open-text", 'name = "Larch Yard"', 'name = "Larch Yard', ("line 4", "quotes are not closed", "Larch Yard")),
    (
        "toml-two-keys-a-line", "water_pct = 62\n", "water_pct = 62 ",
        ("line 15", "more text after the value", "water_pct = 62 dry_cp"),
    ),
    ("toml-key-twice", "water_pct = 62\n", "water_pct = 62\nwater_pct = 61\n", ("line 16", "a key that stands twice")),
    ("toml-section-twice", "[rates]", "[site]", ("line 143", "stands twice", "[site]")),
    ("toml-decimal-comma", "density_kg_m3 = 560", "density_kg_m3 = 560,5", ("line 17", "a decimal comma", "560,5")),
    ("toml-no-value", "hold_h = 12", "hold_h =", ("line 40", "hold_h =")),
    ("toml-nested", None, "x = " + "[" * 50_000, ("farm.toml", "nested too deep")),
    ("toml-long-number", None, "x = " + "9" * 9000, ("farm.toml", "thousands of digits")),
    ("toml-nonsense-date", "2026-12-25,", "2026-13-45,", ("line 141", "2026-13-45, which is in no calendar")),
    # missing keys and tables
    ("no-site", "[site]", "[rates.x]", ("site", "missing")),
    ("no-name", 'name = "Larch Yard"\n', "", ("site.name", "missing")),
    ("no-strain-temperature", "t_opt_c = 27\n", "", ("strain.OYS.t_opt_c", "missing")),
    ("no-be", "be_pct = 72\n", "", ("strain.LIO.be_pct", "missing")),
    ("no-element", "element_kw = 6.0\n", "", ("steriliser.drum.element_kw", "missing")),
    ("no-code", 'code = "cool"\n', "", ("room number 1.code", "missing")),
    ("single-brackets", "[[programme]]", "[programme]", ("programme", "[[programme]]", "single brackets")),
    ("double-brackets", "[rates]", "[[rates]]", ("rates", "written [rates]", "[[rates]] in double brackets")),
    ("section-is-number", "[[crew]]", "crew2 = 1\n[[crew]]", ("strain.LIO.crew2", "unknown key")),
    # unknown keys
    ("unknown-key", "be_pct = 85", "be_pc = 85", ("strain.OYS.be_pc", "did you mean 'be_pct'")),
    ("wrong-unit-cm", "diameter_mm = 130", "diameter_cm = 13", ("bag.2k3.diameter_cm", "'diameter_mm'")),
    ("wrong-unit-g", "wet_kg = 2.3", "wet_g = 2300", ("bag.2k3.wet_g", "did you mean 'wet_kg'")),
    ("wrong-unit-w", "element_kw = 6.0", "element_w = 6000", ("drum.element_w", "'element_kw'")),
    ("unknown-section", "[limits]", "[limit]", ("farm.toml, limit", "did you mean 'limits'")),
    ("unknown-tariff-key", "price = 0.17", "prise = 0.17", ("tariff.periods number 1.prise", "'price'")),
    ("unknown-rate", "pick_kg_h = 12", "picking = 12", ("rates.picking", "unknown key")),
    ("unlike-anything", "hold_h = 12", "hold_h = 12\nzzzz = 1", ("overnight.zzzz", "hold_h")),
    # kinds of value
    ("text-for-number", "wet_kg = 2.3", 'wet_kg = "2.3"', ("bag.2k3.wet_kg", "a number without quotes")),
    ("truth-for-number", "places = 110", "places = true", ("drum.places", "a whole number", "found true")),
    ("part-of-a-place", "places = 110", "places = 110.5", ("drum.places", "a whole number", "110.5")),
    ("number-for-text", 'name = "Larch Yard"', "name = 7", ("site.name", "text in quotes", "found 7")),
    ("number-for-truth", "count = 1", "count = 1\ncondensate_return = 1", ("condensate_return", "true or false")),
    ("number-for-list", "loads = [0.5, 0.75, 1.0]", "loads = 1", ("drum.loads", "a list in brackets")),
    ("closed-for-good", "vent_min = 30", "vent_min = 30\nclosed = true", ("drum.closed", "a list", "true")),
    ("closed-with-time", "2026-12-25,", "2026-12-25T08:00:00,", ("crew.main.closed number 1", "a date")),
    ("closed-in-words", "2026-12-25,", '"Christmas",', ("crew.main.closed number 1", "Christmas", "a date")),
    ("not-a-number", "hold_h = 12", "hold_h = nan", ("overnight.hold_h", "a finite number", "nan")),
    ("infinite", "cost_per_kg = 0.12", "cost_per_kg = inf", ("recipe.oak62.cost_per_kg", "finite")),
    ("shift-a-list", '{ mon = "07:30-16:00"', '{ mon = ["07:30"]', ("shift.mon", "text in quotes")),
    ("ambient-text", "ambient_c = [6,", 'ambient_c = ["6",', ("site.ambient_c", "twelve")),
    # ranges and forms
    ("negative-mass", "wet_kg = 2.3", "wet_kg = -2.3", ("bag.2k3.wet_kg", "above 0", "-2.3")),
    ("negative-price", "cost_per_h = 16", "cost_per_h = -1", ("crew.main.cost_per_h", "at least 0")),
    ("no-people", "people = 2", "people = 0", ("crew.main.people", "at least 1", "found 0")),
    ("no-places", "places = 1400", "places = 0", ("room.shelf.places", "at least 1")),
    ("all-water", "water_pct = 62", "water_pct = 100", ("recipe.oak62.water_pct", "below 100")),
    ("everything-lost", "loss_pct = 4", "loss_pct = 100", ("strain.OYS.loss_pct", "below 100")),
    ("molten", "temp_c = 22", "temp_c = 2200", ("room.shelf.temp_c", "at most 200")),
    ("absurdly-high", "altitude_m = 60", "altitude_m = 60000", ("site.altitude_m", "at most 5000")),
    ("absurd-count", "places = 600", "places = 9" + "9" * 40, ("room.wet.places", "at most 1000000")),
    ("load-above-one", "loads = [0.5, 0.75, 1.0]", "loads = [50, 75, 100]", ("loads number 1", "at most 1")),
    ("loads-falling", "loads = [0.5, 0.75, 1.0]", "loads = [1.0, 0.5]", ("drum.loads", "rising order")),
    ("no-loads", "loads = [0.5, 0.75, 1.0]", "loads = []", ("drum.loads", "at least one load step")),
    ("shares-short", "[0.55, 0.30, 0.15]", "[0.55, 0.30]", ("strain.OYS.flush_share", "sum to 1", "0.85")),
    ("shares-in-percent", "[0.55, 0.30, 0.15]", "[55, 30, 15]", ("OYS.flush_share", "sum to 100")),
    ("eleven-months", "ambient_c = [6, ", "ambient_c = [", ("site.ambient_c", "twelve", "11")),
    ("no-such-zone", "Europe/Dublin", "Europe/Dubln", ("site.timezone", "IANA", "Europe/Dubln")),
    ("zone-outside", "Europe/Dublin", "../../etc/passwd", ("site.timezone", "IANA")),
    ("currency-sign", '"EUR"', '"€"', ("site.currency", "three capital letters", "EUR")),
    ("code-with-space", 'code = "shelf"', 'code = "my shelf"', ("room.my shelf.code", "1-12 letters")),
    ("kind-misspelt", '"colonisation"', '"colonization"', ("room.shelf.kind", "did you mean 'colonisation'")),
    ("shape-unknown", '"cylinder"', '"ball"', ("bag.2k3.shape", "cylinder or brick", "'ball'")),
    ("brick-with-diameter", '"cylinder"', '"brick"', ("bag.2k3", "for a brick", "length_mm")),
    ("cylinder-no-diameter", "diameter_mm = 130\n", "", ("bag.2k3", "diameter_mm for a cylinder")),
    ("skill-misspelt", '"inoculate", ', '"innoculate", ', ("skills number 3", "did you mean 'inoculate'")),
    ("skill-twice", '"inoculate", ', '"mix", ', ("crew.main.skills", "each skill once")),
    ("shift-backwards", 'mon = "07:30-16:00"', 'mon = "16:00-07:30"', ("shift.mon", "ends after it starts")),
    ("shift-25h", 'mon = "07:30-16:00"', 'mon = "07:30-25:00"', ("crew.main.shift.mon", "HH:MM", "25:00")),
    ("weekday-misspelt", "mon = ", "mo = ", ("crew.main.shift", "mon")),
    ("tariff-clock", 'from = "23:00"', 'from = "11pm"', ("tariff.periods number 1.from", "HH:MM", "11pm")),
    ("tariff-no-time", 'to = "08:00"', 'to = "23:00"', ("tariff.periods number 1", "two different clock")),
    # growth
    ("pole", "t_opt_c = 27", "t_opt_c = 18", ("strain.OYS", "above the middle", "(20)", "18")),
    ("temperatures-crossed", "t_max_c = 36", "t_max_c = 26", ("strain.OYS", "t_min_c < t_opt_c < t_max_c")),
    ("colonised-frozen", "colonise_at_c = 22", "colonise_at_c = 2", ("OYS", "colonise_at_c between")),
    ("fruiting-crossed", "[10, 20]", "[20, 10]", ("strain.OYS.fruiting_temp_c", "[lowest, highest]")),
    ("fruiting-one", "[10, 20]", "[10]", ("strain.OYS.fruiting_temp_c", "one value more", "[10]")),
    # between the parts
    ("unknown-recipe", 'recipe = "oak62"', 'recipe = "oak26"', ("strain.OYS.recipe", "did you mean 'oak62'")),
    ("unknown-bag", 'bag = "2k3"', 'bag = "2K3"', ("strain.OYS.bag", "did you mean '2k3'")),
    ("unknown-programme", '"overnight"\nspawn', '"over"\nspawn', ("strain.OYS.programme", "'overnight'")),
    ("duplicate-strain", 'code = "LIO"', 'code = "OYS"', ("strain.OYS.code", "2 tables", "once")),
    ("duplicate-bag", 'code = "block"', 'code = "2k3"', ("bag.2k3.code", "2 tables")),
    ("room-too-hot", "temp_c = 22", "temp_c = 36", ("strain.OYS", "colonisation room between", "shelf at 36")),
    ("no-fruiting-climate", "temp_c = 16", "temp_c = 21", ("OYS.fruiting_temp_c", "10 to 20", "wet at 21")),
    ("no-fruiting-room", 'kind = "fruiting"', 'kind = "cooling"', ("OYS.fruiting_temp_c", "a fruiting room")),
    ("nobody-picks", ', "pick"]', "]", ("crew", "the skill 'pick'", "none")),
    ("height-in-cm", "height_mm = 310", "height_mm = 31", ("bag.2k3.wet_kg", "wrong unit", "mm")),
    ("mass-in-g", "wet_kg = 3.0", "wet_kg = 30", ("bag.block.wet_kg", "wrong unit", "5.6 l")),
    ("element-above-supply", "element_kw = 6.0", "element_kw = 60", ("drum.element_kw", "at most 12 kW")),
    ("supply-below-base", "supply_kw = 14.0", "supply_kw = 1.5", ("drum.element_kw", "at most 0 kW")),
    (
        "steriliser-closed-all-year", "vent_min = 30", f"vent_min = 30\nclosed = [{_year(date(2027, 1, 1))}]",
        ("steriliser.drum.closed", "400 closed days", "open on some days"),
    ),
    ("hotter-than-steam", "target_core_c = 95", "target_core_c = 121",
        ("programme.overnight.target_core_c", "99.8 °C at 60 m and 0 kPa gauge", "121 °C")),
    ("too-hot-up-here", "altitude_m = 60", "altitude_m = 1800",
        ("programme.overnight.target_core_c", "94.0 °C at 1800 m", "17.0 h at 93.5 °C kill as much", "95 °C")),
    ("air-left-in-steam", "gauge_kpa = 0", "gauge_kpa = 0\nair_fraction = 0.3",
        ("programme.overnight.target_core_c", "below the boiling point")),
    ("cooling-room-warm", "temp_c = 15", "temp_c = 28", ("room.cool.temp_c", "inoculate_below_c")),
    ("never-unloaded", "unload_below_c = 60", "unload_below_c = 5", ("drum.unload_below_c", "ambient")),
    ("mix-too-slow", "mix_bags_h = 30", "mix_bags_h = 3", ("drum.loads", "within one shift (8.5 h)")),
    ("mix-sours", "mix_bags_h = 30", "mix_bags_h = 4", ("drum.loads", "mix_to_steam_h (6 h)")),
)  # fmt: skip


NAMES = [row[0] for row in ROWS]


@pytest.mark.parametrize(("name", "old", "new", "says"), ROWS, ids=NAMES)
def test_broken_farm_file_is_refused_in_words(refusal, name, old, new, says):
    message = refusal("farm.toml", old, new)
    for words in says:
        assert words in message, f"{name}: {message}"


def test_rows_have_names_of_their_own():
    assert len(set(NAMES)) == len(ROWS) >= 60
