"""Read ``orders.csv``: who is to get what on which weekday."""

from __future__ import annotations

from pathlib import Path

from models.farm import Order
from scheduler.errors import Finding
from scheduler.folder.farm_file import FarmFile
from scheduler.folder.rows import place, read_rows, unknown_code
from scheduler.folder.table_file import Columns, read_table

FILE = "orders.csv"
COLUMNS = Columns(
    required=("customer", "strain", "weekday", "kg", "price_per_kg"),
    optional=("first_week", "last_week", "priority", "accepts", "part"),
)
DEFAULTS = {"priority": 1, "accepts": (), "part": True}
MISSING = f"a table of orders whose first row is {','.join(COLUMNS.names)} (no more rows when there are no orders)"


def read_orders(path: Path, farm: FarmFile, findings: list[Finding]) -> tuple[Order, ...]:
    """Read and check the orders; findings are added to the list."""
    table = read_table(path, COLUMNS, MISSING, findings)
    if table is None:
        return ()
    if not table.rows:
        findings.append(Finding(FILE, "", "none", "at least one order", severity="warning"))
    strains = farm.codes.get("strain", ())
    orders: dict[Order, int] = {}
    kept = []
    for row, order in read_rows(table, COLUMNS, Order, DEFAULTS, findings):
        if strains and order.strain not in strains:
            findings.append(unknown_code(FILE, place(row, "strain"), "strain", order.strain, strains))
        unknown = [code for code in order.accepts if strains and code not in strains]
        findings += [unknown_code(FILE, place(row, "accepts"), "strain", code, strains) for code in unknown]
        if order in orders:
            found = f"the same as in row {orders[order]}, and count it twice"
            findings.append(Finding(FILE, place(row), found, "each order once", severity="warning"))
        orders.setdefault(order, row)
        kept.append(order)
    return tuple(kept)
