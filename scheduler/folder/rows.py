"""Turn the rows of a table into checked values; whatever is wrong with a cell becomes a finding with its place."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from typing import Any, TypeVar

from pydantic import BaseModel, ValidationError

from models.farm.references import choices_in_words, nearest_choice
from scheduler.errors import Finding
from scheduler.folder.cells import CellError, codes, day, iso_week, number, weekday, whole_number, yes_or_no
from scheduler.folder.plain_words import expected_and_found
from scheduler.folder.table_file import Columns, Table

Row = TypeVar("Row", bound=BaseModel)

_DECIMAL_COLUMNS = frozenset({"kg", "price_per_kg"})
_WHOLE_COLUMNS = frozenset({"priority", "bags", "flushes_picked", "bags_inoculated", "flush"})
_OTHER_COLUMNS: Mapping[str, Callable[[str], object]] = {
    "weekday": weekday,
    "first_week": iso_week,
    "last_week": iso_week,
    **dict.fromkeys(("since", "day", "inoculated", "ready", "opened"), day),
    "accepts": codes,
    "part": yes_or_no,
}


def place(row: int, column: str = "") -> str:
    """Name a cell as a spreadsheet shows it: ``row 7, kg``."""
    return f"row {row}, {column}" if column else f"row {row}"


def read_rows(
    table: Table, columns: Columns, model: type[Row], defaults: Mapping[str, object], findings: list[Finding]
) -> Iterator[tuple[int, Row]]:
    """Yield the sound rows of a table as values of a model, and add findings for all others.

    Parameters
    ----------
    table : Table
        The table as text.
    columns : Columns
        Its columns; cells of the required ones may not be blank.
    model : type
        Model of a row.
    defaults : mapping
        Values of blank cells of optional columns.
    findings : list of Finding
        Findings are added here.
    """
    comma = _has_decimal_comma(table)
    for row, cells in table.rows:
        values: dict[str, object] = {}
        faults: list[Finding] = []
        for column in columns.names:
            text = cells.get(column, "")
            if not text:
                values[column] = defaults.get(column)
                if column in columns.required:
                    faults.append(Finding(table.name, place(row, column), "an empty cell", "a value"))
                continue
            try:
                values[column] = _value(column, text, comma=comma)
            except CellError as error:
                faults.append(Finding(table.name, place(row, column), error.found, error.expected, error.nearest))
        if not faults:
            try:
                yield row, model.model_validate(values)
            except ValidationError as error:
                faults = _faults(error, table.name, row, cells)
        findings += faults


def unknown_code(table: str, where: str, what: str, code: str, known: tuple[str, ...]) -> Finding:
    """Say that a cell names something the farm file does not have."""
    expected = choices_in_words(f"the code of a {what} in farm.toml", known)
    return Finding(table, where, f"'{code}'", expected, nearest_choice(code, known))


def _value(column: str, text: str, *, comma: bool) -> object:
    if column in _DECIMAL_COLUMNS:
        return number(text, decimal_comma=comma)
    if column in _WHOLE_COLUMNS:
        return whole_number(text, decimal_comma=comma)
    return _OTHER_COLUMNS[column](text) if column in _OTHER_COLUMNS else " ".join(text.split())


def _has_decimal_comma(table: Table) -> bool:
    return any("," in cells.get(column, "") for _, cells in table.rows for column in _DECIMAL_COLUMNS)


def _faults(error: ValidationError, name: str, row: int, cells: Mapping[str, str]) -> list[Finding]:
    faults = []
    for detail in error.errors(include_url=False):
        column = str(detail["loc"][0]) if detail["loc"] else ""
        shown_value: Any = cells.get(column, "")
        if column in _DECIMAL_COLUMNS | _WHOLE_COLUMNS:
            shown_value = detail["input"]
        expected, found = expected_and_found(detail, shown_value)
        near = ""
        if detail["type"] == "literal_error":
            choices = [word.strip(" '") for word in detail["ctx"]["expected"].replace(" or ", ",").split(",")]
            near = nearest_choice(str(shown_value), choices)
        faults.append(Finding(name, place(row, column), found, expected, near))
    return faults
