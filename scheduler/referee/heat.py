"""Heat of colonising bags against what each room can carry off, by day."""

from __future__ import annotations

from datetime import timedelta

from models.growth.colonisation import colonisation_days
from models.growth.heat import HeatingLot, room_heat
from scheduler.referee.case import Case


def check_heat(case: Case) -> None:
    """Add up the heat of each room by day; what passes its cooling must come from the opening stock and be listed."""
    listed = {
        (item.limit.removeprefix("heat "), item.day): item.amount
        for item in case.plan.shortfalls
        if item.limit.startswith("heat ")
    }
    for room in case.farm.rooms_of("colonisation"):
        if room.cooling_w is None:
            continue
        lots, before = [], []
        for event in case.plan.inoculations:
            if event.room != room.code or (event.before and case.stock_lots[event.lot].stage != "colonising"):
                continue
            strain = case.strain_of(event.lot)
            wet_kg = case.farm.bag_of(strain).wet_kg
            run_days = colonisation_days(strain, room.temp_c)
            lot = HeatingLot(strain, event.bags, wet_kg, (event.day - case.first).days, run_days)
            lots.append(lot)
            if event.before:
                before.append(lot)
        standing = room_heat(before, case.days)
        for offset, watts in enumerate(room_heat(lots, case.days)):
            day = case.first + timedelta(days=offset)
            over = listed.pop((room.code, day), 0.0)
            case.at_most("room-heat", f"{room.code} on {day}", watts, max(room.cooling_w, standing[offset]), "W", 1e-3)
            forced = max(0.0, standing[offset] - room.cooling_w)
            case.equal("room-heat", f"{room.code} on {day}, shortfall", over, forced, "W", 1e-3)
    for (code, day), amount in listed.items():
        case.fail("room-heat", f"{code} on {day}", f"a shortfall of {amount:g} W", "shortfalls of rooms with a limit")
