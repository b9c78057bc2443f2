"""Stage 8, mark: the ledger of a set: every script, judgement and decision, who made it and when.

A call that returned is on the disk. Nothing is overwritten: what counts now is the latest entry of each part
and marker, and the history stays. Only candidate ids stand in it, never names.
"""

from __future__ import annotations

import datetime
import functools
import json
import sqlite3
from collections.abc import Iterable, Iterator, Mapping, Sequence
from pathlib import Path
from types import TracebackType
from typing import Any

from authoring.faults import ContentError, UsageError
from authoring.marking.ledger_entries import Entry, judgement_entry, reasoned_entry, script_entry
from authoring.marking.ledger_events import (
    COLUMNS,
    LONGEST_NAME,
    MARKS,
    ORDER,
    Difference,
    Event,
    checked_row,
    new_id,
)
from authoring.marking.ledger_file import (
    NAME,
    check_identity,
    connect,
    explained,
    has_tables,
    make_tables,
    origin_of,
    writing,
)
from authoring.marking.ledger_mark import Mark

_KEPT_ONCE = ("script", "judgement")


class Ledger:
    """An open ledger; a context manager. Every method raises UsageError where the file cannot be used."""

    def __init__(self, path: Path, set_id: str, connection: sqlite3.Connection, origin: str) -> None:
        self.path = path
        self.set_id = set_id
        self.origin = origin
        self._connection = connection

    @classmethod
    def open(cls, folder: Path, set_id: str, create: bool = True, wait: float = 5.0) -> Ledger:
        """The ledger in a set's folder, made where there is none (`create`).

        `wait`: seconds to wait for another writer. UsageError: none there, another set's, unreadable, read-only.
        """
        path = folder / NAME
        if not path.exists() and not create:
            raise UsageError(f"{folder}: there is no ledger here; nothing has been marked yet")
        with explained(path):
            connection = connect(path, wait)
            try:
                if create and not has_tables(connection) and _is_empty(connection):
                    make_tables(connection, set_id)
                check_identity(connection, path, set_id)
                return cls(path, set_id, connection, origin_of(connection, path))
            except BaseException:
                connection.close()
                raise

    def close(self) -> None:
        """Close the file; the ledger is not used after it."""
        self._connection.close()

    def __enter__(self) -> Ledger:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        self.close()

    # --- adding ---------------------------------------------------------------------------------------

    def add_script(self, paper: str, answers: Mapping[str, Iterable[str]], marker: str, candidate: str = "") -> str:
        """Keep a script as it was transcribed: part label → lines. Returns the event's id; see `add_scripts`."""
        return self.add_scripts([(paper, answers, candidate)], marker)[0]

    def add_scripts(self, scripts: Iterable[tuple[str, Mapping[str, Iterable[str]], str]], marker: str) -> list[str]:
        """Keep scripts (paper, answers, candidate id) in one transaction.

        One that says the same as that marker's latest is not kept again: its id is returned.
        """
        return self.add([script_entry(*each) for each in scripts], marker)

    def add_judgement(self, mark: Mark, marker: str) -> str:
        """Keep one judgement; returns the event's id; see `add_judgements`."""
        return self.add_judgements([mark], marker)[0]

    def add_judgements(self, marks: Iterable[Mark], marker: str) -> list[str]:
        """Keep judgements in one transaction: all or none. Returns the ids in order.

        One that equals that marker's latest judgement of the part is not kept again, so that marking a pile once
        more leaves the changes made since in force.
        """
        return self.add(map(judgement_entry, marks), marker)

    def add_change(self, mark: Mark, marker: str, reason: str, by: str = "") -> str:
        """A new mark for a part that counts from now on for `marker`; `by` says who, where that is somebody else."""
        return self.add([reasoned_entry("change", mark, reason, by)], marker)[0]

    def adjudicate(self, mark: Mark, marker: str, reason: str) -> str:
        """The decision that settles a part between markers; with the reason."""
        return self.add([reasoned_entry("adjudication", mark, reason)], marker)[0]

    def add(self, entries: Iterable[Entry], marker: str) -> list[str]:
        """Add entries in one transaction; their ids in order, once they are on the disk.

        A script or judgement that equals the latest of that marker keeps its id: it is not kept again.
        """
        _check_name("marker", marker)
        entries = list(entries)
        with explained(self.path), writing(self._connection):
            # Ids begin with their turn.
            last = self._connection.execute("SELECT turn FROM events ORDER BY id DESC LIMIT 1").fetchone()
            turn = int(last[0]) if last else 0
            latest = _Latest(self._connection, marker, {paper for _, paper, _, _ in entries})
            ids: list[str] = []
            self._insert(self._rows(entries, latest, marker, turn, ids))
        return ids

    # --- reading --------------------------------------------------------------------------------------

    def history(self, paper: str | None = None, part: str | None = None) -> tuple[Event, ...]:
        """Every event, oldest first."""
        return tuple(self._events(paper, part))

    def current(
        self, paper: str | None = None, part: str | None = None, marker: str | None = None
    ) -> tuple[Event, ...]:
        """The latest mark of each (paper, part, marker): judgement or change; adjudications are in `settled`."""
        latest: dict[tuple[str, str, str], Event] = {}
        for event in self._events(paper, part):
            if event.kind in ("judgement", "change") and marker in (None, event.marker):
                latest[event.paper, event.part, event.marker] = event
        return tuple(sorted(latest.values(), key=lambda event: (event.paper, event.part, event.marker)))

    def scripts(self, paper: str | None = None) -> tuple[Event, ...]:
        """The latest transcription of each (paper, marker)."""
        latest = {(event.paper, event.marker): event for event in self._events(paper, None) if event.kind == "script"}
        return tuple(latest[key] for key in sorted(latest))

    def settled(self) -> dict[tuple[str, str], Event]:
        """The mark that counts for each (paper, part): the latest decision, or the mark that all markers give."""
        found: dict[tuple[str, str], Event] = {}
        for key, (marks, decision) in self._by_part().items():
            if decision is not None:
                found[key] = decision
            elif not _differ(marks):
                found[key] = max(marks, key=lambda event: (event.turn, event.at, event.id))
        return found

    def differences(self) -> tuple[Difference, ...]:
        """The parts whose markers differ (in marks, or in the points awarded) without a later decision."""
        return tuple(
            Difference(paper, part, tuple(marks))
            for (paper, part), (marks, decision) in sorted(self._by_part().items())
            if decision is None and _differ(marks)
        )

    # --- two machines ---------------------------------------------------------------------------------

    def merge(self, other: Path) -> int:
        """Add what another copy of this set's ledger has; returns how many events were new.

        Merging the same file again adds nothing. UsageError where it is no ledger of this set, or contradicts this one.
        """
        path = other / NAME if other.is_dir() else other
        if not path.exists():
            raise UsageError(f"{path}: there is no ledger here")
        with explained(path):
            theirs = connect(path, 5.0, read_only=True)
            try:
                check_identity(theirs, path, self.set_id)
                found = theirs.execute(f"SELECT {COLUMNS} FROM events ORDER BY {ORDER}")
                rows = [checked_row(row, path) for row in found]
            finally:
                theirs.close()
        with explained(self.path), writing(self._connection):
            ours = {row[0]: row for row in self._connection.execute(f"SELECT {COLUMNS} FROM events")}
            new = [row for row in rows if row[0] not in ours]
            for row in rows:
                if row[0] in ours and ours[row[0]] != row:
                    raise UsageError(f"{path}: event {row[0]} differs from the one kept here; one copy was altered")
            self._insert(new)
        return len(new)

    # --- inside ---------------------------------------------------------------------------------------

    def _rows(
        self, entries: Iterable[Entry], latest: _Latest, marker: str, turn: int, ids: list[str]
    ) -> Iterator[tuple[Any, ...]]:
        """The rows of what is new among the entries; `ids` gathers the id of every entry."""
        at = datetime.datetime.now(datetime.UTC).isoformat(timespec="microseconds")
        for kind, paper, part, payload in entries:
            _check_name("paper", paper)
            if kind != "script":
                _check_name("part", part)
            known = latest.same(kind, paper, part, payload)
            if known is None:
                turn += 1
                known = new_id(turn)
                latest.note(kind, paper, part, payload, known)
                yield known, turn, kind, paper, part, marker, at, self.origin, payload
            ids.append(known)

    def _insert(self, rows: Iterable[tuple[Any, ...]]) -> None:
        self._connection.executemany(f"INSERT INTO events ({COLUMNS}) VALUES (?,?,?,?,?,?,?,?,?)", rows)

    def _events(self, paper: str | None, part: str | None) -> Iterator[Event]:
        tests = [(name, value) for name, value in (("paper", paper), ("part", part)) if value is not None]
        where = " AND ".join(f"{name} = ?" for name, _ in tests) or "1"
        query = f"SELECT {COLUMNS} FROM events WHERE {where} ORDER BY {ORDER}"
        with explained(self.path):
            rows = self._connection.execute(query, [value for _, value in tests]).fetchall()
        return (Event(*row) for row in rows)

    def _by_part(self) -> dict[tuple[str, str], tuple[list[Event], Event | None]]:
        """Each part's current marks by marker, and its decision unless a mark was changed after it."""
        marks: dict[tuple[str, str], dict[str, Event]] = {}
        decisions: dict[tuple[str, str], Event | None] = {}
        for event in self._events(None, None):
            key = (event.paper, event.part)
            if event.kind == "adjudication":
                decisions[key] = event
                marks.setdefault(key, {})
            elif event.kind in MARKS:
                marks.setdefault(key, {})[event.marker] = event
                if event.kind == "change":
                    decisions[key] = None
        return {key: ([each[marker] for marker in sorted(each)], decisions.get(key)) for key, each in marks.items()}


class _Latest:
    """A marker's latest scripts and judgements, so that the same said again is not kept again.

    What a person decides (a change, an adjudication) is always kept: it may follow something else.
    """

    def __init__(self, connection: sqlite3.Connection, marker: str, papers: Iterable[str]) -> None:
        query = f"""SELECT kind, paper, part, payload, id FROM events
            WHERE paper IN (SELECT value FROM json_each(?)) AND marker = ? ORDER BY {ORDER}"""
        self._known: dict[tuple[str, str, str], tuple[str, str]] = {}
        for row in connection.execute(query, (json.dumps(list(papers)), marker)):
            self.note(*row)

    def note(self, kind: str, paper: str, part: str, payload: str, event_id: str) -> None:
        """Remember an entry as the latest of its kind about its paper and part."""
        if kind in _KEPT_ONCE:
            self._known[kind, paper, part] = (payload, event_id)

    def same(self, kind: str, paper: str, part: str, payload: str) -> str | None:
        """The id of the latest entry where it says the same."""
        found = self._known.get((kind, paper, part))
        return found[1] if found is not None and found[0] == payload else None


def _is_empty(connection: sqlite3.Connection) -> bool:
    return not connection.execute("SELECT 1 FROM sqlite_master LIMIT 1").fetchone()


def _check_name(what: str, text: str) -> None:
    if not _is_name(text):
        raise ContentError(f"a {what} is named by 1 to {LONGEST_NAME} printable characters, not {text[:40]!r}")


@functools.lru_cache(maxsize=1024)
def _is_name(text: str) -> bool:
    return bool(text.strip()) and len(text) <= LONGEST_NAME and text.isprintable()


def _differ(marks: Sequence[Event]) -> bool:
    if len(marks) < 2:
        return False
    seen = set()
    for event in marks:
        content = event.content
        points = tuple((point[0], bool(point[1])) for point in content.get("points", ()))
        seen.add((content.get("awarded"), points))
    return len(seen) > 1
