"""Read ``stock.csv``: the lots that stand in the rooms on the first day."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from pathlib import Path

from models.farm import Farm, Room, RoomKind, StockLot, StockStage, Strain
from scheduler.errors import Finding
from scheduler.folder.farm_file import FarmFile
from scheduler.folder.rows import place, read_rows, unknown_code
from scheduler.folder.table_file import Columns, read_table

FILE = "stock.csv"
COLUMNS = Columns(
    required=("lot", "strain", "stage", "bags", "since"),
    optional=("room", "flushes_picked"),
)
MISSING = f"a table whose first row is {','.join(COLUMNS.names)}, or no such file"

ROOM_OF_STAGE: dict[StockStage, RoomKind] = {
    "cooled": "cooling",
    "colonising": "colonisation",
    "ready": "colonisation",
    "cold-held": "cold-hold",
    "fruiting": "fruiting",
}


def read_stock(path: Path, farm: FarmFile, findings: list[Finding]) -> tuple[StockLot, ...]:
    """Read and check the opening stock; none when there is no such file. Findings are added to the list."""
    if not path.exists() and not path.is_symlink():
        return ()
    table = read_table(path, COLUMNS, MISSING, findings)
    if table is None:
        return ()
    lots: dict[str, int] = {}
    kept = []
    strains, rooms = farm.codes.get("strain", ()), farm.codes.get("room", ())
    for row, lot in read_rows(table, COLUMNS, StockLot, {}, findings):
        if lot.lot in lots:
            found = f"'{lot.lot}' in row {lots[lot.lot]} too"
            expected = "each lot once (give a part that stands elsewhere a code of its own)"
            findings.append(Finding(FILE, place(row, "lot"), found, expected))
        lots.setdefault(lot.lot, row)
        if strains and lot.strain not in strains:
            findings.append(unknown_code(FILE, place(row, "strain"), "strain", lot.strain, strains))
        elif lot.room and rooms and lot.room not in rooms:
            findings.append(unknown_code(FILE, place(row, "room"), "room", lot.room, rooms))
        elif farm.farm is not None:
            findings += _misplaced(farm.farm, row, lot)
        kept.append(lot)
    if farm.farm is not None:
        findings += _overfull(farm.farm, kept)
    return tuple(kept)


def _suits(strain: Strain, lot: StockLot, room: Room) -> bool:
    if lot.stage == "fruiting":
        return strain.fruiting_temp_c[0] <= room.temp_c <= strain.fruiting_temp_c[1]
    return lot.stage not in {"colonising", "ready"} or strain.grows_in(room.temp_c)


def _misplaced(farm: Farm, row: int, lot: StockLot) -> Iterator[Finding]:
    """Check that a lot's stage, room and flushes agree."""
    strain, kind = farm.strain_called(lot.strain), ROOM_OF_STAGE[lot.stage]
    rooms = farm.rooms_of(kind)
    fitting = [room for room in rooms if _suits(strain, lot, room)]
    near = fitting[0].code if fitting else ""
    where = place(row, "room")
    if lot.room is None:
        if not fitting and (rooms or kind != "cooling"):
            yield Finding(FILE, where, "none in farm.toml", f"a {kind} room that suits {strain.code}")
    elif (room := farm.room_called(lot.room)).kind != kind:
        found = f"'{room.code}', a {room.kind} room"
        yield Finding(FILE, where, found, f"a {kind} room, as the lot is {lot.stage}", near)
    elif room not in fitting:
        yield Finding(FILE, where, f"'{room.code}' at {room.temp_c:g} °C", f"a room that suits {strain.code}", near)
    if lot.flushes_picked is None:
        return
    where, flushes = place(row, "flushes_picked"), len(strain.flush_share)
    if lot.stage != "fruiting":
        yield Finding(FILE, where, f"{lot.flushes_picked}", f"nothing, as the lot is {lot.stage}")
    elif lot.flushes_picked >= flushes:
        found = f"{lot.flushes_picked}, after which its bags give no more"
        yield Finding(FILE, where, found, f"fewer than the {flushes} flushes of {strain.code}")


def _overfull(farm: Farm, lots: list[StockLot]) -> Iterator[Finding]:
    """Warn of rooms that hold more bags than places."""
    bags: Counter[str] = Counter()
    for lot in lots:
        bags[lot.room or ""] += lot.bags
    for room in farm.room:
        if bags[room.code] > room.places:
            found = f"{bags[room.code]} in it"
            expected = f"at most the {room.places} places of room {room.code}"
            yield Finding(FILE, "bags", found, expected, severity="warning")
