"""Stage 8, mark: final answers in a table (CSV): a row a paper, a column a part."""

from __future__ import annotations

import csv
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from authoring.faults import Fault, Source, suggestion
from authoring.marking.scripts import HEAD, Script, ScriptFile, canonical_label
from authoring.specs.texts import control_faults, unify_breaks


def parse_table(text: str, path: str) -> ScriptFile:
    """The scripts of a CSV text with the columns `paper`, perhaps `candidate` and `marker`, and part labels.

    Commas, semicolons and tabs are taken as separators: whichever the header has.
    """
    text = unify_breaks(text)
    lines = text.split("\n")
    if faults := control_faults(text, path):
        return ScriptFile((), tuple(faults))
    rows = csv.reader(iter(line + "\n" for line in lines), delimiter=_separator(lines[0]), strict=True)
    columns: dict[int, str] = {}
    scripts: list[Script] = []
    faults = []
    while True:
        first = rows.line_num
        try:
            row = next(rows, None)
        except csv.Error as error:
            source = Source(path, first + 1, 1, lines[min(first, len(lines) - 1)])
            faults = [*faults, Fault("csv-syntax", f"this row cannot be read: {error}", source)]
            continue
        if row is None:
            break
        if not any(cell.strip() for cell in row):
            continue
        where = _Row(path, first + 1, lines[first])
        if not columns:
            columns, wrong = _columns(row, where)
            if wrong:
                return ScriptFile((), tuple(wrong))
        else:
            script, wrong = _script(row, columns, where)
            scripts += [script] if script else []
            faults = [*faults, *wrong]
    if not columns:
        faults = [Fault("scripts-none", "there are no scripts in this file", Source(path, 1, 1, lines[0]))]
    return ScriptFile(tuple(scripts), tuple(faults))


class _Row:
    """A row and where its cells stand."""

    def __init__(self, path: str, line: int, text: str) -> None:
        self.path, self.line, self.text = path, line, text

    def at(self, cell: str = "", start: int = 0) -> Source:
        """The place of a cell: where its text first stands in the row at or after `start`."""
        found = self.text.find(cell, start) if cell else 0
        return Source(self.path, self.line, max(found, 0) + 1, self.text)


def _separator(header: str) -> str:
    return max(",;\t", key=lambda mark: (header.count(mark), mark == ","))


def _columns(row: Sequence[str], where: _Row) -> tuple[dict[int, str], list[Fault]]:
    found: dict[int, str] = {}
    faults = []
    for index, cell in enumerate(row):
        name = cell.strip()
        known = name.lower() if name.lower() in HEAD else canonical_label(name)
        if known is None:
            message = f"column {index + 1}: {name[:40]!r} is neither a part label nor known" + suggestion(name, HEAD)
            faults.append(Fault("csv-column", message, where.at(name)))
        elif known in found.values():
            faults.append(Fault("csv-column", f"the column {known} stands twice", where.at(name)))
        else:
            found[index] = known
    if not faults and "paper" not in found.values():
        faults.append(Fault("csv-column", "the column `paper` is missing", where.at()))
    return found, faults


def _script(row: Sequence[str], columns: Mapping[int, str], where: _Row) -> tuple[Script | None, list[Fault]]:
    if len(row) > len(columns):
        message = f"{len(row)} cells in a table of {len(columns)} columns; a cell with a comma in it needs quotes"
        return None, [Fault("csv-row", message, where.at())]
    cells = {name: row[index].strip() for index, name in columns.items() if index < len(row)}
    if not cells.get("paper"):
        return None, [Fault("script-paper", "this row does not say its paper", where.at())]
    answers: dict[str, tuple[str, ...]] = {}
    cells_at: dict[str, Source] = {}
    start = 0
    for name, cell in cells.items():
        source = where.at(cell, start)
        start = source.column - 1 + len(cell) if cell else start
        if name not in HEAD:
            answers[name] = tuple(cell.split("\n"))
            cells_at[name] = source
    places = CellPlaces(where.at(), cells_at)
    return Script(cells["paper"], answers, places, cells.get("candidate", ""), cells.get("marker", "")), []


@dataclass(frozen=True, slots=True)
class CellPlaces:
    """The places of a script in a table: its row and its cells."""

    row: Source
    cells: Mapping[str, Source]

    def entry(self) -> Source:
        """The row."""
        return self.row

    def label(self, label: str) -> Source:
        """The cell of a part."""
        return self.cells[label]

    def line(self, label: str, at: int) -> Source:
        """The cell of a part, whichever of its lines is meant."""
        return self.cells[label]
