"""Stage 8, mark: the ledger's file: its tables, opened safely, with SQLite's complaints in plain words.

Every fact is one row of `events`, and rows are only ever added: triggers refuse anything else. `turn` is a
logical clock (one more than any turn seen), so that ledgers merged from two machines agree on what came last.
"""

from __future__ import annotations

import contextlib
import hashlib
import platform
import sqlite3
import uuid
from collections.abc import Iterator
from pathlib import Path
from typing import Any

from authoring.faults import UsageError

NAME = "ledger.sqlite"
VERSION = 1
# "shld", so that `file` and a careful person can tell what it is.
APPLICATION = 0x73686C64

_TABLES = """
CREATE TABLE facts (name TEXT PRIMARY KEY, value TEXT NOT NULL) WITHOUT ROWID;
CREATE TABLE origins (place TEXT PRIMARY KEY, origin TEXT NOT NULL) WITHOUT ROWID;
CREATE TABLE events (
    seq INTEGER PRIMARY KEY,
    id TEXT NOT NULL UNIQUE,
    turn INTEGER NOT NULL CHECK (typeof(turn) = 'integer'),
    kind TEXT NOT NULL CHECK (kind IN ('script', 'judgement', 'change', 'adjudication')),
    paper TEXT NOT NULL,
    part TEXT NOT NULL,
    marker TEXT NOT NULL,
    at TEXT NOT NULL,
    origin TEXT NOT NULL,
    payload TEXT NOT NULL
);
CREATE INDEX events_by_part ON events (paper, part);
"""
_REFUSAL = """
CREATE TRIGGER {table}_no_{verb} BEFORE {verb} ON {table}
BEGIN SELECT RAISE(ABORT, 'the ledger only grows: nothing in it is changed or removed'); END;
"""
# REPLACE removes a row without asking the triggers above.
_NO_REPLACING = """
CREATE TRIGGER {table}_no_replacing BEFORE INSERT ON {table}
WHEN EXISTS (SELECT 1 FROM {table} WHERE {keys})
BEGIN SELECT RAISE(ABORT, 'the ledger only grows: nothing in it is changed or removed'); END;
"""


@contextlib.contextmanager
def explained(path: Path) -> Iterator[None]:
    """SQLite's errors as usage errors that say what to do."""
    try:
        yield
    except sqlite3.Error as error:
        raise UsageError(_explanation(path, error)) from error


def _explanation(path: Path, error: sqlite3.Error) -> str:
    code = getattr(error, "sqlite_errorcode", 0) & 0xFF
    words = {
        sqlite3.SQLITE_BUSY: "another program is writing to the ledger; try again when it has finished",
        sqlite3.SQLITE_LOCKED: "another program is writing to the ledger; try again when it has finished",
        sqlite3.SQLITE_READONLY: "the ledger cannot be written: the file or its folder is read-only",
        sqlite3.SQLITE_CANTOPEN: "the ledger cannot be opened or made here; check the folder and its permissions",
        sqlite3.SQLITE_PERM: "the ledger cannot be opened: permission is refused",
        sqlite3.SQLITE_FULL: "the disk is full; nothing of this step was kept",
        sqlite3.SQLITE_IOERR: "the disk failed while the ledger was read or written; nothing of this step was kept",
        sqlite3.SQLITE_NOTADB: "this file is no ledger",
        sqlite3.SQLITE_CORRUPT: "the ledger is damaged; restore it from a copy",
    }
    return f"{path}: {words.get(code, str(error))}"


def connect(path: Path, wait: float, *, read_only: bool = False) -> sqlite3.Connection:
    """An open connection. Raises sqlite3.Error; a caller wraps it in `explained`."""
    address = path.resolve().as_uri() + ("?mode=ro" if read_only else "?mode=rwc")
    connection = sqlite3.connect(address, uri=True, timeout=wait, isolation_level=None)
    try:
        connection.execute("PRAGMA trusted_schema=OFF")
        if not read_only:
            # Write-ahead logging lets a report read while a marker writes; FULL makes each commit reach the disk.
            if connection.execute("PRAGMA journal_mode").fetchone() != ("wal",):
                connection.execute("PRAGMA journal_mode=WAL")
            connection.execute("PRAGMA synchronous=FULL")
    except sqlite3.Error:
        connection.close()
        raise
    return connection


@contextlib.contextmanager
def writing(connection: sqlite3.Connection) -> Iterator[None]:
    """One transaction that holds the write lock from its start; whole or not at all."""
    connection.execute("BEGIN IMMEDIATE")
    try:
        yield
        connection.execute("COMMIT")
    except BaseException:
        # A failed COMMIT (a full disk) may have rolled back by itself.
        if connection.in_transaction:
            connection.execute("ROLLBACK")
        raise


def make_tables(connection: sqlite3.Connection, set_id: str) -> None:
    """The tables of a new ledger, in one transaction with its facts, unless another process was quicker."""
    with writing(connection):
        if has_tables(connection):
            return
        for statement in _TABLES.split(";\n"):
            if statement.strip():
                connection.execute(statement)
        connection.execute(f"PRAGMA application_id={APPLICATION}")
        facts = {"set": set_id, "version": str(VERSION)}
        connection.executemany("INSERT INTO facts VALUES (?, ?)", facts.items())
        for table in ("facts", "events", "origins"):
            for verb in ("UPDATE", "DELETE"):
                connection.execute(_REFUSAL.format(table=table, verb=verb))
        connection.execute(_NO_REPLACING.format(table="facts", keys="name = NEW.name"))
        connection.execute(_NO_REPLACING.format(table="events", keys="id = NEW.id OR seq = NEW.seq"))


def has_tables(connection: sqlite3.Connection) -> bool:
    """Whether the file is a ledger already."""
    found = connection.execute("SELECT type FROM sqlite_master WHERE name IN ('events', 'facts')").fetchall()
    return found == [("table",), ("table",)]


def check_identity(connection: sqlite3.Connection, path: Path, set_id: str) -> None:
    """Raise UsageError where the file is no ledger, of another version, or of another set."""
    if not has_tables(connection):
        raise UsageError(f"{path}: this file is no ledger")
    facts: dict[str, Any] = dict(connection.execute("SELECT name, value FROM facts"))
    if facts.get("version") != str(VERSION):
        raise UsageError(f"{path}: the ledger has version {facts.get('version')}; this program reads version {VERSION}")
    if facts.get("set") != set_id:
        raise UsageError(f"{path}: this is the ledger of another set ({str(facts.get('set'))[:40]})")


def origin_of(connection: sqlite3.Connection, path: Path) -> str:
    """The random id of this copy of the ledger: a copy on another machine, or beside this one, gets its own."""
    stat = path.stat()
    where = f"{platform.node()}|{path.resolve()}|{stat.st_dev}|{stat.st_ino}"
    place = hashlib.sha256(where.encode()).hexdigest()
    found = connection.execute("SELECT origin FROM origins WHERE place = ?", (place,)).fetchone()
    if found is None:
        with writing(connection):
            connection.execute("INSERT OR IGNORE INTO origins VALUES (?, ?)", (place, uuid.uuid4().hex))
        found = connection.execute("SELECT origin FROM origins WHERE place = ?", (place,)).fetchone()
    return str(found[0])
