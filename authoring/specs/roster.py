"""Stage 1, read: a CSV file of candidates becomes a roster, or a list of what is wrong with it."""

from __future__ import annotations

import csv
import re
import unicodedata
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from pathlib import Path

from authoring.faults import Fault, FaultsFound, Source, suggestion
from authoring.specs.texts import character_name, control_faults, read_text, unify_breaks

COLUMNS = ("candidate", "name", "needs", "seat")
_DELIMITERS = (",", ";", "\t")
_LONGEST_ID = 64
_LONGEST_CELL = 200
_MOST_CANDIDATES = 20_000


@dataclass(frozen=True, slots=True)
class Candidate:
    """A student who sits the paper: `id` stands in records, `name` on sheets only; the rest may be empty."""

    id: str
    name: str = ""
    needs: str = ""
    seat: str = ""
    source: Source | None = field(default=None, compare=False)


@dataclass(frozen=True, slots=True)
class Roster:
    """The candidates in the order of the file, and what is odd about it without stopping the work."""

    candidates: tuple[Candidate, ...]
    weaknesses: tuple[Fault, ...] = ()


@dataclass(frozen=True, slots=True)
class _Row:
    """A line of the file: its number, its text and its cells (unquoted)."""

    line: int
    text: str
    cells: tuple[str, ...]


def read_roster(path: Path) -> Roster:
    """The roster in a CSV file. Raises UsageError (unreadable) or FaultsFound."""
    return parse_roster(read_text(path), str(path))


def parse_roster(text: str, path: str) -> Roster:
    """The roster in CSV text (commas, semicolons or tabs). Raises FaultsFound with everything wrong with it."""
    return _Reader(path).read(unify_breaks(text.removeprefix("\ufeff")))


class _Reader:
    def __init__(self, path: str) -> None:
        self._path = path
        self._delimiter = ","
        self.faults: list[Fault] = []
        self.weaknesses: list[Fault] = []

    def read(self, text: str) -> Roster:
        self.faults.extend(control_faults(text, self._path))
        self._stop_on_faults()
        rows = list(self._rows(text.split("\n")))
        self._stop_on_faults()
        if not rows:
            self._fault(
                "roster-empty", "the roster is empty; its first line names the columns", Source(self._path, 1, 1)
            )
            self._stop_on_faults()
        where = self._columns(rows[0])
        self._stop_on_faults()
        candidates = tuple(self._candidates(rows[1:], where, len(rows[0].cells)))
        if len(rows) == 1:
            message = "the roster names no candidate"
            self._fault("roster-empty", message, self._source(rows[0], 0))
        self._stop_on_faults()
        return Roster(candidates, tuple(self.weaknesses))

    def _stop_on_faults(self) -> None:
        if self.faults:
            raise FaultsFound([*self.faults, *self.weaknesses])

    def _fault(self, code: str, message: str, source: Source) -> None:
        self.faults.append(Fault(code, message, source))

    def _rows(self, lines: Sequence[str]) -> Iterator[_Row]:
        """The lines that hold something. A cell stays on its line, so a quote without its partner is found there."""
        header = next((line for line in lines if line.strip()), "")
        self._delimiter = max(_DELIMITERS, key=lambda mark: len(_split(header, mark) or ()))
        for number, line in enumerate(lines, 1):
            if not line.strip(f" {self._delimiter}\t"):
                continue
            cells = _split(line, self._delimiter)
            if cells is None:
                at = line.find('"')
                message = "the quotes in this line are not closed, or hold a cell of several lines"
                self._fault("roster-quotes", message, Source(self._path, number, at + 1, line))
                continue
            yield _Row(number, line, tuple(_clean(cell) for cell in cells))

    def _columns(self, header: _Row) -> Mapping[str, int]:
        where: dict[str, int] = {}
        for at, title in enumerate(header.cells):
            name = title.lower()
            source = self._source(header, at)
            if name in where:
                self._fault("roster-columns", f"the column {name!r} stands twice", source)
            elif name in COLUMNS:
                where[name] = at
            elif name:
                message = f"the column {title[:40]!r} is not used{suggestion(name, COLUMNS)}"
                self.weaknesses.append(Fault("roster-columns", message, source, "weakness"))
        if "candidate" not in where:
            message = "the first line must name a column `candidate` (and may name name, needs, seat)"
            self._fault("roster-columns", message, self._source(header, 0))
        return where

    def _candidates(self, rows: Sequence[_Row], where: Mapping[str, int], width: int) -> Iterator[Candidate]:
        seen: dict[str, int] = {}
        if len(rows) > _MOST_CANDIDATES:
            message = f"a roster has at most {_MOST_CANDIDATES:,} candidates"
            self._fault("roster-size", message, self._source(rows[_MOST_CANDIDATES], 0))
            return
        for row in rows:
            cells = {name: row.cells[at] if at < len(row.cells) else "" for name, at in where.items()}
            source = self._source(row, where["candidate"])
            if not self._fits(row, width, cells, source):
                continue
            name = cells["candidate"]
            first = seen.setdefault(name.casefold(), row.line)
            if first != row.line:
                message = f"the candidate {name!r} already stands on line {first}"
                self._fault("roster-duplicate", message, source)
                continue
            yield Candidate(name, cells.get("name", ""), cells.get("needs", ""), cells.get("seat", ""), source)

    def _fits(self, row: _Row, width: int, cells: Mapping[str, str], source: Source) -> bool:
        """Whether the cells of a row can be used; what is wrong with them is noted."""
        before = len(self.faults)
        word = cells["candidate"]
        if not word:
            self._fault("roster-candidate", "the candidate has no id in this line", source)
        elif len(word) > _LONGEST_ID:
            self._fault("roster-candidate", f"an id has at most {_LONGEST_ID} characters", source)
        elif odd := next((c for c in word if not c.isprintable()), ""):
            self._fault("roster-candidate", f"the id contains the invisible character {character_name(odd)}", source)
        for name, cell in cells.items():
            if name != "candidate" and len(cell) > _LONGEST_CELL:
                message = f"the {name} has more than {_LONGEST_CELL} characters"
                self._fault("roster-cell", message, source)
        extra = next((at for at, cell in enumerate(row.cells) if at >= width and cell), None)
        if extra is not None:
            message = "this line has more cells than the first line has columns; put text with commas in quotes"
            self._fault("roster-cell", message, self._source(row, extra))
        return len(self.faults) == before

    def _source(self, row: _Row, cell: int) -> Source:
        return Source(self._path, row.line, _column(row.text, self._delimiter, cell), row.text)


def _split(line: str, delimiter: str) -> list[str] | None:
    """The cells of one line; None where its quotes do not match."""
    try:
        rows = list(csv.reader([line], delimiter=delimiter, strict=True, skipinitialspace=True))
    except csv.Error:
        return None
    return rows[0] if rows else []


def _clean(cell: str) -> str:
    return unicodedata.normalize("NFC", " ".join(cell.split()))


def _column(line: str, delimiter: str, cell: int) -> int:
    """The 1-based column at which a cell of a line begins."""
    at = 0
    for _ in range(cell):
        found = re.compile(rf'\s*(?:"(?:[^"]|"")*")?[^{re.escape(delimiter)}]*').match(line, at)
        at = (found.end() if found else at) + 1
        if at > len(line):
            return len(line) + 1
    return at + len(line[at:]) - len(line[at:].lstrip(" ")) + 1
