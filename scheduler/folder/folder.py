"""Read a farm folder: the farm, its orders and its opening stock, or everything that is wrong with them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from pathlib import Path

from models.farm import Farm, Order, StockLot
from scheduler.errors import Finding, InputError
from scheduler.folder.farm_file import read_farm_file
from scheduler.folder.orders import read_orders
from scheduler.folder.stock import read_stock


@dataclass(frozen=True, slots=True)
class FarmFolder:
    """A sound farm folder.

    Attributes
    ----------
    farm : Farm
        ``farm.toml``.
    orders : tuple of Order
        ``orders.csv``.
    stock : tuple of StockLot
        ``stock.csv``; empty without one.
    findings : tuple of Finding
        Warnings only.
    path : Path
        The folder.
    written : mapping of str to frozenset of str
        By strain code, the keys that ``farm.toml`` itself has, and not only the strain's preset.
    """

    farm: Farm
    orders: tuple[Order, ...]
    stock: tuple[StockLot, ...]
    findings: tuple[Finding, ...]
    path: Path
    written: Mapping[str, frozenset[str]] = field(default_factory=dict)


def read_farm_folder(path: Path | str) -> FarmFolder:
    """Read a farm folder.

    Parameters
    ----------
    path : Path or str
        The folder.

    Returns
    -------
    FarmFolder
        Farm, orders, stock and warnings.

    Raises
    ------
    InputError
        Anything in the folder is wrong; it carries every finding in all files.
    """
    folder = Path(path)
    refused = _no_folder(folder)
    if refused:
        raise InputError((refused,))
    findings: list[Finding] = []
    farm_file = read_farm_file(folder / "farm.toml", findings)
    orders = read_orders(folder / "orders.csv", farm_file, findings)
    stock = read_stock(folder / "stock.csv", farm_file, findings)
    if farm_file.farm is None or any(finding.severity == "error" for finding in findings):
        raise InputError(tuple(findings))
    return FarmFolder(farm_file.farm, orders, stock, tuple(findings), folder, farm_file.written)


def _no_folder(folder: Path) -> Finding | None:
    expected = "a folder that holds farm.toml"
    try:
        if folder.is_dir():
            return None
        found = "a file" if folder.exists() else "no such folder"
    except (OSError, ValueError):
        found = "a name that no folder can have"
    return Finding(str(folder), "", found, expected)
