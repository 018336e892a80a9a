"""Rules of the bags: conservation, inoculation days, colonisation, losses, waits, cold, climate, flushes."""

from __future__ import annotations

from collections import defaultdict
from datetime import date, timedelta

from models.farm import StockLot, Strain
from models.growth.colonisation import days_to_ready
from models.plan import Inoculation, Opening
from scheduler.referee.case import Case

Place = tuple[str, str, date]


def check_bags(case: Case) -> None:
    """Follow the bags of every lot from filling to discarding."""
    _whole(case)
    _inoculated(case)
    _lost(case)
    _ready(case)
    _stock(case)
    for opening in case.plan.openings:
        _opening(case, opening)


def _whole(case: Case) -> None:
    plan = case.plan
    counts = [(event.lot, event.day, event.bags) for event in plan.inoculations]
    counts += [(event.lot, event.day, event.bags) for event in plan.holdings]
    counts += [(event.lot, event.day, event.bags) for event in plan.openings]
    counts += [(event.lot, event.day, event.bags) for event in plan.discards]
    for lot, day, bags in counts:
        ok = isinstance(bags, int) and bags > 0
        case.expect("bags", f"{lot} on {day}", ok, bags, "a whole number above zero", "bags")
    for event in plan.inoculations:
        ok = isinstance(event.lost, int) and 0 <= event.lost <= event.bags
        case.expect("lost", f"{event.lot} on {event.day}", ok, event.lost, f"0 to {event.bags}", "bags")


def _inoculated(case: Case) -> None:
    """Each lot of a run is inoculated, or discarded cooled, on allowed days."""
    used: dict[str, int] = defaultdict(int)
    for event in case.plan.inoculations:
        if event.before:
            continue
        used[event.lot] += event.bags
        strain = case.strain_of(event.lot)
        room = case.farm.room_called(event.room)
        where = f"{event.lot} in {room.code}"
        case.expect("colonise", where, room.kind == "colonisation", room.kind, "a colonisation room")
        warmest = strain.t_max_c - strain.self_heating_k
        grows = strain.t_min_c < room.temp_c < warmest
        case.expect("colonise", where, grows, room.temp_c, f"{strain.t_min_c:g} to {warmest:g}", "°C")
        ready = event.day + timedelta(days=days_to_ready(strain, room.temp_c))
        case.expect("colonise", where, event.ready_day == ready, event.ready_day, ready)
        first, last = _inoculation_window(case, event.lot)
        works = case.works(event.day, "inoculate")
        case.expect("inoculate-day", where, works, event.day, "a day with an inoculate shift")
        case.expect("inoculate-day", where, first <= event.day <= last, event.day, f"{first} to {last}")
        case.expect("inoculate-day", where, case.inside(event.day), event.day, "a day of the plan")
    for discard in case.plan.discards:
        if not discard.room:
            used[discard.lot] += discard.bags
    for lot in case.plan.lots:
        stage = case.stock_lots[lot.code].stage if not lot.run else ""
        if stage not in ("colonising", "ready", "cold-held", "fruiting"):
            left = lot.bags - used[lot.code]
            waits = left > 0 and _inoculation_window(case, lot.code)[1] > case.last
            case.expect("bags", lot.code, left == 0 or waits, used[lot.code], f"all {lot.bags} accounted for", "bags")


def _inoculation_window(case: Case, lot: str) -> tuple[date, date]:
    limits, rates = case.farm.limits, case.farm.rates
    code = case.lots[lot].run
    if code:
        run = case.runs[code]
        cooled = run.cooled
        first = case.local(cooled).date()
        step = max(1, round(run.load_step * case.farm.steriliser_called(run.steriliser).places))
        if _hours_left(case, first, cooled) < step / rates.inoculate_bags_h - 1e-9:
            first = case.next_working(first + timedelta(days=1), "inoculate")
    else:
        since = case.stock_lots[lot].since
        cooled = case.moment(since + timedelta(days=1), 0)
        first = max(case.first, since)
    deadline = cooled + 60 * limits.cooled_to_inoculate_h
    last = case.local(deadline).date()
    for _ in range(60):
        shifts = case.shifts(last, "inoculate")
        if shifts and max(end for _, _, end in shifts) <= deadline:
            break
        last -= timedelta(days=1)
    return first, last


def _hours_left(case: Case, day: date, moment: float) -> float:
    shifts = case.shifts(day, "inoculate")
    if not shifts:
        return 0.0
    hours = sum(crew.people * max(0.0, end - max(start, moment)) / 60 for crew, start, end in shifts)
    benches = case.farm.limits.inoculation_benches
    if benches is not None:
        first, last = min(start for _, start, _ in shifts), max(end for _, _, end in shifts)
        hours = min(hours, benches * max(0.0, last - max(first, moment)) / 60)
    return hours


def _lost(case: Case) -> None:
    groups: dict[str, list[Inoculation]] = defaultdict(list)
    for event in case.plan.inoculations:
        row = case.stock_lots.get(event.lot)
        if case.inside(event.ready_day) and not (row is not None and row.stage != "colonising" and event.before):
            groups[case.lots[event.lot].strain].append(event)
        else:
            case.expect("lost", event.lot, event.lost == 0, event.lost, 0, "bags")
    for code, events in groups.items():
        share = case.farm.strain_called(code).loss_pct / 100
        together: dict[tuple[date, date, str], list[int]] = defaultdict(lambda: [0, 0])
        for event in events:
            entry = together[event.ready_day, event.day, event.lot]
            entry[0] += event.bags
            entry[1] += event.lost
        bags = lost = 0
        for (_, _, lot), (more_bags, more_lost) in sorted(together.items()):
            bags += more_bags
            lost += more_lost
            ok = abs(lost - share * bags) < 1
            case.expect("lost", f"{code} until {lot}", ok, lost, f"{share * bags:.1f} give or take one", "bags")


def _ready(case: Case) -> None:
    """Ready bags of each lot, room and ready day leave in time; cold ones too."""
    plan = case.plan
    come: dict[Place, int] = defaultdict(int)
    for event in plan.inoculations:
        come[event.lot, event.room, event.ready_day] += event.bags - event.lost
    gone: dict[Place, int] = defaultdict(int)
    held: dict[Place, int] = defaultdict(int)
    released: dict[Place, int] = defaultdict(int)
    for holding in plan.holdings:
        held[holding.lot, holding.room, holding.day] += holding.bags
        if not holding.before:
            _leaves(
                case, gone, holding.lot, holding.from_room, holding.ready_day, holding.day, holding.bags, opens=True
            )
            kind = case.farm.room_called(holding.room).kind
            case.expect("cold-hold", holding.lot, kind == "cold-hold", kind, "a cold-hold room")
    for opening in plan.openings:
        if opening.before:
            continue
        if opening.held_day is None:
            _leaves(
                case, gone, opening.lot, opening.from_room, opening.ready_day, opening.day, opening.bags, opens=True
            )
        else:
            released[opening.lot, opening.from_room, opening.held_day] += opening.bags
            _cold(case, opening.lot, opening.held_day, opening.day)
            works = case.works(opening.day, "open")
            case.expect("cold-hold", opening.lot, works, opening.day, "a day with an open shift")
    _unopened(case, gone, held, released)
    for key in {**come, **gone}:
        lot, room, ready = key
        deadline = _deadline(case, lot, ready)
        stays = deadline > case.last
        ok = gone[key] == come[key] or (stays and gone[key] < come[key])
        case.expect("bags", f"{lot} in {room}", ok, gone[key], f"{come[key]} ready bags that leave", "bags")
    for where, bags in {**held, **dict.fromkeys(released.keys() - held.keys(), 0)}.items():
        lot, room, day = where
        stays = day + timedelta(days=case.strain_of(lot).cold_hold_days) > case.last
        ok = released[where] == bags or (stays and released[where] < bags)
        case.expect("bags", f"{lot} in {room}", ok, released[where], f"{bags} held bags that leave", "bags")


def _unopened(case: Case, gone: dict[Place, int], held: dict[Place, int], released: dict[Place, int]) -> None:
    """Ready and cold bags that are thrown away."""
    for discard in case.plan.discards:
        if not discard.room or discard.ready_day is None:
            continue
        if case.farm.room_called(discard.room).kind != "cold-hold":
            _leaves(case, gone, discard.lot, discard.room, discard.ready_day, discard.day, discard.bags, opens=False)
            continue
        keys = [key for key in held if key[0] == discard.lot and key[1] == discard.room and key[2] <= discard.day]
        left = discard.bags
        for key in sorted(keys, key=lambda k: k[2]):
            part = min(left, held[key] - released[key])
            released[key] += part
            left -= part
        case.expect("bags", discard.lot, left == 0, discard.bags, "bags that are in the cold")


def _deadline(case: Case, lot: str, ready: date) -> date:
    deadline = ready + timedelta(days=case.strain_of(lot).ready_wait_days)
    if deadline < max(ready, case.first):
        deadline = case.next_working(case.first, "open")
    return deadline


def _leaves(
    case: Case, gone: dict[Place, int], lot: str, room: str, ready: date, day: date, bags: int, *, opens: bool
) -> None:
    gone[lot, room, ready] += bags
    deadline = _deadline(case, lot, ready)
    ok = ready <= day <= deadline
    case.expect("ready-wait", f"{lot} on {day}", ok, day, f"{ready} to {deadline}")
    if opens:
        case.expect("ready-wait", f"{lot} on {day}", case.works(day, "open"), day, "a day with an open shift")


def _cold(case: Case, lot: str, since: date, day: date) -> None:
    deadline = since + timedelta(days=case.strain_of(lot).cold_hold_days)
    if deadline < case.first:
        deadline = case.next_working(case.first, "open")
    case.expect("cold-hold", f"{lot} on {day}", since <= day <= deadline, day, f"{since} to {deadline}")


def _stock(case: Case) -> None:
    """Everything in the stock file is taken up, as it stands there."""
    begun: dict[str, int] = defaultdict(int)
    for event in case.plan.inoculations:
        if event.before:
            begun[event.lot] += event.bags
            row = case.stock_lots[event.lot]
            ready = row.since
            if row.stage == "colonising":
                ready += timedelta(
                    days=days_to_ready(case.strain_of(event.lot), case.farm.room_called(event.room).temp_c)
                )
            case.expect("stock", event.lot, event.ready_day == ready, event.ready_day, ready)
            case.expect("stock", event.lot, not row.room or row.room == event.room, event.room, row.room)
    for holding in case.plan.holdings:
        if holding.before:
            begun[holding.lot] += holding.bags
            since = case.stock_lots[holding.lot].since
            case.expect("stock", holding.lot, holding.day == since, holding.day, since)
    for opening in case.plan.openings:
        if opening.before:
            begun[opening.lot] += opening.bags
    for row in case.stock:
        if row.stage != "cooled":
            case.expect("stock", row.lot, begun[row.lot] == row.bags, begun[row.lot], row.bags, "bags")


def _opening(case: Case, opening: Opening) -> None:
    strain = case.strain_of(opening.lot)
    room = case.farm.room_called(opening.room)
    where = f"{opening.lot} opened {opening.day}"
    case.expect("fruiting-climate", where, room.kind == "fruiting", room.kind, "a fruiting room")
    count = len(strain.flush_share)
    if opening.before:
        row = case.stock_lots[opening.lot]
        days = stock_flush_days(case, strain, row)
        picked = count - len(days)
        case.expect("flush-days", where, picked <= opening.flushes <= count, opening.flushes, f"{picked} to {count}")
    else:
        low, high = strain.fruiting_temp_c
        case.expect("fruiting-climate", where, low <= room.temp_c <= high, room.temp_c, f"{low:g} to {high:g}", "°C")
        case.expect("flush-days", where, 1 <= opening.flushes <= count, opening.flushes, f"1 to {count}")
        case.expect("flush-days", where, case.inside(opening.day), opening.day, "a day of the plan")
        picked = 0
        days = [opening.day + after for after in case.after_opening(strain, room)]
    kept = days[: opening.flushes - picked]
    kg = case.flush_kg(strain, picked)
    right = [(picked + k + 1, day) for k, day in enumerate(kept) if case.inside(day)]
    found = [(pick.flush, pick.day) for pick in opening.picks]
    case.expect("flush-days", where, found == right, found, right)
    for pick in opening.picks:
        if 1 <= pick.flush <= count:
            case.equal(
                "kg", f"{where}, flush {pick.flush}", pick.ripe_kg, opening.bags * kg[pick.flush - 1], "kg", 1e-6
            )
        case.expect("kg", where, -1e-9 <= pick.kg <= pick.ripe_kg + 1e-6, pick.kg, f"0 to {pick.ripe_kg:g}", "kg")
        if pick.kg > 1e-9:
            case.expect("pick-day", where, case.works(pick.day, "pick"), pick.day, "a day with a pick shift")
    leave = case.next_working(kept[-1] if kept else case.first, "open")
    case.expect("flush-days", f"{where}, leaving", opening.leave_day == leave, opening.leave_day, leave)


def stock_flush_days(case: Case, strain: Strain, row: StockLot) -> list[date]:
    """Days of the flushes still to come of a fruiting stock lot."""
    room = case.farm.room_called(row.room) if row.room else case.fruiting_rooms(strain)[0]
    after = case.after_opening(strain, room)
    days = [row.since + one for one in after]
    picked = row.flushes_picked
    if picked is None:
        picked = sum(day < case.first for day in days)
    left = days[picked:]
    if left and left[0] < case.first:
        left = [case.first + one - after[picked] for one in after[picked:]]
    return left
