"""Stage 8, mark: one entry of the ledger, and the check of entries that come from another copy."""

from __future__ import annotations

import json
import re
import secrets
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Literal

from authoring.faults import ContentError, UsageError
from authoring.marking.ledger_mark import Mark, mark_from

EventKind = Literal["script", "judgement", "change", "adjudication"]
MARKS = ("judgement", "change", "adjudication")
COLUMNS = "id, turn, kind, paper, part, marker, at, origin, payload"
# What came last is the same in every copy: by turn, then by time, then by the random id.
ORDER = "turn, at, id"
LONGEST_NAME = 200
LONGEST_PAYLOAD = 1_000_000

_ID = re.compile(r"[0-9a-f]{32}")


@dataclass(frozen=True, slots=True)
class Event:
    """One row of the ledger; `at` is UTC in ISO 8601; `payload` is the JSON text as it is kept."""

    id: str
    turn: int
    kind: EventKind
    paper: str
    part: str
    marker: str
    at: str
    origin: str
    payload: str

    @property
    def content(self) -> dict[str, Any]:
        """The payload, read."""
        found = json.loads(self.payload)
        return found if isinstance(found, dict) else {}

    @property
    def mark(self) -> Mark:
        """The marks that a judgement, a change or an adjudication gives. ContentError for a script."""
        return mark_from(self.paper, self.part, self.content)

    @property
    def reason(self) -> str:
        """Why a person changed or decided; empty for a judgement."""
        return str(self.content.get("reason", ""))

    @property
    def by(self) -> str:
        """Who made the entry: for a change perhaps another than the marker whose mark it is."""
        return str(self.content.get("by") or self.marker)


@dataclass(frozen=True, slots=True)
class Difference:
    """A part whose markers give different marks, and which nobody has decided since."""

    paper: str
    part: str
    marks: tuple[Event, ...]


def new_id(turn: int) -> str:
    """96 random bits behind the turn: ids in the order of their making keep the index of a large pile quick."""
    return f"{turn:08x}{secrets.token_hex(12)}"


def checked_row(row: tuple[Any, ...], path: Path) -> tuple[Any, ...]:
    """A row of another file, which may hold anything."""
    texts = (row[0], *row[2:])
    fits = all(isinstance(text, str) for text in texts) and isinstance(row[1], int) and 0 < row[1] < 2**32
    fits = fits and bool(_ID.fullmatch(row[0])) and int(row[0][:8], 16) == row[1]
    if fits and row[2] in ("script", *MARKS) and len(row[8]) <= LONGEST_PAYLOAD:
        try:
            content = json.loads(row[8])
            if row[2] in MARKS:
                mark_from(row[3], row[4], content)
            elif not isinstance(content["answers"], dict):
                raise ContentError("no answers")
            return row
        except (ValueError, KeyError, TypeError, RecursionError):
            pass
    raise UsageError(f"{path}: the ledger has a row that cannot be read (event {str(row[0])[:40]!r})")
