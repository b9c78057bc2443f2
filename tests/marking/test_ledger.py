"""The ledger: it only grows, it knows its set, and two copies of it become one."""

from __future__ import annotations

import shutil
import sqlite3
import time
from pathlib import Path

import pytest

from authoring.faults import ContentError, UsageError
from authoring.marking.judgement import Judgement, PointJudged
from authoring.marking.ledger import Ledger
from authoring.marking.ledger_file import NAME, explained
from authoring.marking.ledger_mark import Mark


def mark(paper: str = "K7QD2", part: str = "1a", earned: str = "10", candidate: str = "c-014") -> Mark:
    """A mark with a point for each digit."""
    points = tuple(PointJudged(f"M{at}", int(digit), f"because {at}") for at, digit in enumerate(earned, 1))
    return Mark(paper, Judgement(part, points, "certain", ("self counted",), (), ("note",)), candidate)


def awarded(ledger: Ledger) -> dict[tuple[str, str, str], int]:
    """The marks that count now, by paper, part and marker."""
    return {(each.paper, each.part, each.marker): each.mark.judgement.awarded for each in ledger.current()}


def test_what_is_kept_comes_back(tmp_path: Path) -> None:
    """Scripts and judgements, after closing and opening."""
    with Ledger.open(tmp_path, "set-1") as ledger:
        ledger.add_script("K7QD2", {"1a": ["S = 19.70", "σ²"], "1b": []}, "AB", "c-014")
        ledger.add_judgement(mark(), "AB")
    with Ledger.open(tmp_path, "set-1", create=False) as ledger:
        (script,) = ledger.scripts()
        assert script.content == {"answers": {"1a": ["S = 19.70", "σ²"], "1b": []}, "candidate": "c-014"}
        (event,) = ledger.current()
        assert event.mark == mark()
        assert (event.marker, event.kind, event.at.endswith("+00:00")) == ("AB", "judgement", True)


def test_the_latest_counts_and_the_history_stays(tmp_path: Path) -> None:
    """A later judgement, then a change with its reason."""
    with Ledger.open(tmp_path, "set-1") as ledger:
        ledger.add_judgement(mark(earned="00"), "AB")
        ledger.add_judgement(mark(earned="10"), "AB")
        ledger.add_change(mark(earned="11"), "AB", "the unit was there", by="CD")
        assert awarded(ledger) == {("K7QD2", "1a", "AB"): 2}
        assert [(event.kind, event.mark.judgement.awarded) for event in ledger.history("K7QD2", "1a")] == [
            ("judgement", 0),
            ("judgement", 1),
            ("change", 2),
        ]
        last = ledger.history()[-1]
        assert (last.reason, last.by) == ("the unit was there", "CD")


def test_marking_once_more_adds_nothing_and_leaves_changes_in_force(tmp_path: Path) -> None:
    """The same pile twice is one pile."""
    with Ledger.open(tmp_path, "set-1") as ledger:
        first = ledger.add_judgements([mark(), mark(part="1b")], "tool")
        ledger.add_change(mark(earned="11"), "tool", "seen by a person")
        assert ledger.add_judgements([mark(), mark(part="1b")], "tool") == first
        assert ledger.add_script("A", {"a": ["1"]}, "AB") == ledger.add_script("A", {"a": ["1"]}, "AB")
        assert len(ledger.history()) == 4
        assert awarded(ledger)["K7QD2", "1a", "tool"] == 2


def test_differences_until_somebody_decides(tmp_path: Path) -> None:
    """Two markers differ; the decision settles it; a change after it opens it again."""
    with Ledger.open(tmp_path, "set-1") as ledger:
        ledger.add_judgements([mark(earned="10"), mark(part="1b")], "AB")
        ledger.add_judgements([mark(earned="01"), mark(part="1b")], "CD")
        (difference,) = ledger.differences()
        assert (difference.paper, difference.part, len(difference.marks)) == ("K7QD2", "1a", 2)
        assert set(ledger.settled()) == {("K7QD2", "1b")}
        ledger.adjudicate(mark(earned="11"), "EF", "both points are there")
        assert ledger.differences() == ()
        assert ledger.settled()["K7QD2", "1a"].mark.judgement.awarded == 2
        ledger.add_change(mark(earned="00"), "CD", "second thoughts")
        assert len(ledger.differences()) == 1


@pytest.mark.parametrize(
    "statement",
    [
        "UPDATE events SET payload = '{}'",
        "DELETE FROM events",
        "UPDATE facts SET value = 'x'",
        "DELETE FROM facts",
        "REPLACE INTO facts VALUES ('set', 'x')",
        "INSERT OR REPLACE INTO events SELECT seq, id, turn, kind, 'Z', part, marker, at, origin, payload FROM events",
    ],
)
def test_nothing_is_changed_or_removed(tmp_path: Path, statement: str) -> None:
    """Not even by another program."""
    with Ledger.open(tmp_path, "set-1") as ledger:
        ledger.add_judgement(mark(), "AB")
    connection = sqlite3.connect(tmp_path / NAME)
    with pytest.raises(sqlite3.IntegrityError, match="only grows"):
        connection.execute(statement)
    connection.close()
    with Ledger.open(tmp_path, "set-1") as ledger:
        assert [event.mark for event in ledger.history()] == [mark()]


def test_a_ledger_of_another_set_is_refused(tmp_path: Path) -> None:
    """And so is a folder without one, where none is to be made."""
    Ledger.open(tmp_path, "set-1").close()
    with pytest.raises(UsageError, match="another set"):
        Ledger.open(tmp_path, "set-2")
    with pytest.raises(UsageError, match="no ledger here"):
        Ledger.open(tmp_path / "none", "set-1", create=False)
    with pytest.raises(UsageError, match="cannot be opened"):
        Ledger.open(tmp_path / "none", "set-1")


def test_files_that_are_no_ledger(tmp_path: Path) -> None:
    """Another file of the name, and another program's database."""
    (tmp_path / NAME).write_bytes(b"not a database, but long enough to be read as one" * 30)
    with pytest.raises(UsageError, match="no ledger"):
        Ledger.open(tmp_path, "set-1")
    (tmp_path / NAME).unlink()
    connection = sqlite3.connect(tmp_path / NAME)
    connection.execute("CREATE TABLE other (x)")
    connection.commit()
    connection.close()
    with pytest.raises(UsageError, match="no ledger"):
        Ledger.open(tmp_path, "set-1")


def test_another_writer_is_said_plainly(tmp_path: Path) -> None:
    """After the wait, and nothing is kept of the call."""
    with Ledger.open(tmp_path, "set-1", wait=0.05) as ledger:
        other = sqlite3.connect(tmp_path / NAME, isolation_level=None)
        other.execute("BEGIN IMMEDIATE")
        with pytest.raises(UsageError, match="another program is writing"):
            ledger.add_judgement(mark(), "AB")
        other.execute("ROLLBACK")
        other.close()
        assert ledger.history() == ()
        ledger.add_judgement(mark(), "AB")


def test_a_full_disk_and_a_read_only_file(tmp_path: Path) -> None:
    """All or nothing, with the reason; the ledger works on when there is room again."""
    with Ledger.open(tmp_path, "set-1") as ledger:
        inner = ledger._connection
        (pages,) = inner.execute("PRAGMA page_count").fetchone()
        inner.execute(f"PRAGMA max_page_count={pages + 2}")
        with pytest.raises(UsageError, match="disk is full"):
            ledger.add_judgements([mark(paper=f"P{n}") for n in range(500)], "AB")
        assert ledger.history() == ()
        inner.execute("PRAGMA max_page_count=1000000")
        inner.execute("PRAGMA query_only=ON")
        with pytest.raises(UsageError, match="read-only"):
            ledger.add_judgement(mark(), "AB")
        inner.execute("PRAGMA query_only=OFF")
        ledger.add_judgement(mark(), "AB")


def test_a_mistake_among_many_keeps_none(tmp_path: Path) -> None:
    """One transaction; and a change without its reason is refused."""
    with Ledger.open(tmp_path, "set-1") as ledger:
        with pytest.raises(ContentError, match="paper is named"):
            ledger.add_judgements([mark(), mark(paper="")], "AB")
        with pytest.raises(ContentError, match="marker is named"):
            ledger.add_judgement(mark(), " ")
        with pytest.raises(ContentError, match="reason"):
            ledger.add_change(mark(), "AB", " ")
        assert ledger.history() == ()


def test_two_machines_become_one(tmp_path: Path) -> None:
    """Merged either way, twice, the copies say the same; what came last is the same on both."""
    one, two = tmp_path / "one", tmp_path / "two"
    one.mkdir()
    with Ledger.open(one, "set-1") as ledger:
        ledger.add_judgement(mark(), "AB")
        origin = ledger.origin
    shutil.copytree(one, two)
    with Ledger.open(two, "set-1") as ledger:
        assert ledger.origin != origin
        ledger.add_judgement(mark(earned="11"), "AB")
        ledger.add_judgement(mark(part="1b"), "CD")
    with Ledger.open(one, "set-1") as ledger:
        ledger.add_judgement(mark(earned="00"), "AB")
        assert ledger.merge(two) == 2
        assert ledger.merge(two / NAME) == 0
        assert ledger.merge(one) == 0
        mine = ledger.history()
    with Ledger.open(two, "set-1") as ledger:
        assert ledger.merge(one) == 1
        assert ledger.history() == mine
        assert len(mine) == 4
        ledger.add_judgement(mark(earned="01"), "AB")
        assert ledger.current(marker="AB")[0].mark == mark(earned="01")


@pytest.mark.parametrize("payload", ["{}", "not json", "[" * 5000, '{"awarded": 7}'])
def test_a_copy_with_unreadable_rows_is_refused(tmp_path: Path, payload: str) -> None:
    """Nothing of it is taken."""
    one, two = tmp_path / "one", tmp_path / "two"
    for folder in (one, two):
        folder.mkdir()
        Ledger.open(folder, "set-1").close()
    connection = sqlite3.connect(two / NAME)
    row = ("00000001" + "a" * 24, 1, "judgement", "A", "1a", "AB", "2026-01-01", "o", payload)
    connection.execute(
        "INSERT INTO events (id, turn, kind, paper, part, marker, at, origin, payload) VALUES (?,?,?,?,?,?,?,?,?)", row
    )
    connection.commit()
    connection.close()
    with Ledger.open(one, "set-1") as ledger:
        with pytest.raises(UsageError, match="cannot be read"):
            ledger.merge(two)
        assert ledger.history() == ()


def test_an_altered_copy_is_refused(tmp_path: Path) -> None:
    """One event with two contents: somebody changed a file."""
    one, two = tmp_path / "one", tmp_path / "two"
    one.mkdir()
    with Ledger.open(one, "set-1") as ledger:
        ledger.add_judgement(mark(), "AB")
    shutil.copytree(one, two)
    connection = sqlite3.connect(two / NAME)
    connection.execute("DROP TRIGGER events_no_UPDATE")
    connection.execute("UPDATE events SET marker = 'XX'")
    connection.commit()
    connection.close()
    with Ledger.open(one, "set-1") as ledger, pytest.raises(UsageError, match="altered"):
        ledger.merge(two)


def test_a_pile_is_kept_quickly(tmp_path: Path) -> None:
    """60,000 judgements in one transaction; the bound leaves room for a slow disk."""
    pile = [mark(paper=f"P{n // 6:05d}", part=f"{n % 6 + 1}a") for n in range(60_000)]
    with Ledger.open(tmp_path, "set-1") as ledger:
        start = time.process_time()
        ids = ledger.add_judgements(pile, "tool")
        assert time.process_time() - start < 3
        assert len(set(ids)) == 60_000


def test_an_error_of_another_kind_keeps_its_words(tmp_path: Path) -> None:
    """What has no words of ours is passed on."""
    with pytest.raises(UsageError, match="some new trouble"), explained(tmp_path):
        raise sqlite3.Error("some new trouble")
