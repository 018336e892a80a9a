"""One row of ``picks.csv``: what one lot gave on one day, and what is known of the lot."""

from __future__ import annotations

from datetime import date
from typing import Annotated

from pydantic import Field

from models.farm.units import FarmModel, NotNegative
from scheduler.folder.table_file import Columns

FILE = "picks.csv"
COLUMNS = Columns(
    required=("lot", "day", "kg", "bags"),
    optional=("flush", "strain", "inoculated", "bags_inoculated", "ready", "opened"),
)
MISSING = f"a table whose first row is {','.join(COLUMNS.names)}, of which the first four must be there"
OF_LOT = ("strain", "inoculated", "bags_inoculated", "ready", "opened")
"""Columns that hold for the whole lot: given on any of its rows."""


class PickRow(FarmModel):
    """What one lot gave on one day."""

    lot: Annotated[str, Field(pattern=r"^[A-Za-z0-9-]{1,20}$")]
    """Lot code."""
    day: date
    """Day it was picked."""
    kg: NotNegative
    """Fresh mushrooms picked [kg]."""
    bags: Annotated[int, Field(ge=0, le=1_000_000)]
    """Bags of the lot that stood when it was picked [bags]; 0 when none was left."""
    flush: Annotated[int, Field(ge=1, le=8)] | None = None
    """Number of the flush; blank: told by the days between picks."""
    strain: str | None = None
    """Code of the strain; blank: read from the lot code."""
    inoculated: date | None = None
    """Day the lot was inoculated."""
    bags_inoculated: Annotated[int, Field(ge=1, le=1_000_000)] | None = None
    """Bags that were inoculated [bags]."""
    ready: date | None = None
    """Day the lot was found ready to be opened."""
    opened: date | None = None
    """Day the lot was opened."""


NumberedRow = tuple[int, PickRow]
"""A row with its number, as a spreadsheet counts."""
