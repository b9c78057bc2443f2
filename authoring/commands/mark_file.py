"""`mark` with a file: the lot is judged on all cores, kept in the ledger, and what needs a person is listed."""

from __future__ import annotations

import functools
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Literal, TypeAlias

import click

from authoring.commands.common import print_json, progress_bar
from authoring.faults import Fault, render_faults
from authoring.marking.cores import cores, seldom_collected, spread
from authoring.marking.desk import judgement_words
from authoring.marking.judgement import Judgement
from authoring.marking.ledger import Ledger
from authoring.marking.ledger_entries import Entry, entry_of, judgement_text, script_entry
from authoring.marking.pile import MOST_REMEMBERED, Firsts, Judge, ScriptJudged
from authoring.marking.recall import RecalledSet, recalled
from authoring.marking.scripts import Script, read_scripts

CAUTION = "Proposed marks are for a person to confirm; your institution's assessment and data-protection rules apply."
Form = Literal["open", "full", "json"]
# Parts, parts that need a person, marks proposed, marks there are.
Marks: TypeAlias = "tuple[int, int, int, int]"

# Scripts judged at a time: what is kept of one heap is on the disk before the next is asked for.
HEAP = 250
# Fewer are judged sooner than a second process is there.
FEWEST_TO_SPREAD = 500


def mark_file(of: RecalledSet, folder: Path, path: Path, marker: str, form: Form) -> int:
    """Judge the scripts of a file into the ledger and print what `form` asks for; the exit code."""
    read = read_scripts(path)
    heaps = [(at, min(at + HEAP, len(read.scripts))) for at in range(0, len(read.scripts), HEAP)]
    workers = cores() if len(read.scripts) >= FEWEST_TO_SPREAD else 1
    # The workers are there before the ledger is open: none of them holds its file.
    make = _maker(of, read.scripts, folder, path, form)
    with seldom_collected(), spread(make, heaps, workers) as judged, Ledger.open(folder, of.set_id) as ledger:
        total = _Total(Firsts(of), form)
        with progress_bar("marking") as progress:
            for (start, end), outcomes in zip(heaps, judged, strict=True):
                kept = total.take(read.scripts[start:end], outcomes)
                ledger.add([entry for outcome in kept for entry in outcome.entries], marker)
                # What is told is on the disk.
                total.show(kept)
                progress(end, len(read.scripts))
    total.close()
    faults = (*read.faults, *total.faults)
    if faults:
        click.echo(render_faults(faults), err=True)
    return 1 if any(fault.severity == "fault" for fault in faults) else 0


@dataclass(frozen=True, slots=True)
class Outcome:
    """What is told of one script: for the ledger, for the reader, and for the counts."""

    faults: tuple[Fault, ...]
    entries: tuple[Entry, ...] = ()
    shown: Any = ()
    marks: Marks = (0, 0, 0, 0)

    @property
    def known(self) -> bool:
        """Whether its paper is in the set."""
        return bool(self.entries)


class _Total:
    """The outcomes of a pile, in order: counted, and printed when they are kept."""

    def __init__(self, firsts: Firsts, form: Form) -> None:
        self.firsts = firsts
        self.form = form
        self.faults: list[Fault] = []
        self.rows: list[object] = []
        self.scripts = 0
        self.marks = (0, 0, 0, 0)

    def take(self, scripts: Sequence[Script], outcomes: Sequence[Outcome]) -> list[Outcome]:
        """Count some scripts' outcomes; those that the ledger is to keep."""
        kept: list[Outcome] = []
        for script, outcome in zip(scripts, outcomes, strict=True):
            self.faults += outcome.faults
            again = self.firsts.again(script) if outcome.known else None
            if again is not None:
                self.faults.append(again)
            elif outcome.known:
                kept.append(outcome)
                self.scripts += 1
                self.marks = tuple(map(sum, zip(self.marks, outcome.marks, strict=True)))  # type: ignore[assignment]
        return kept

    def show(self, outcomes: Sequence[Outcome]) -> None:
        """Print what is to be told of outcomes, or gather their rows."""
        for outcome in outcomes:
            if self.form == "json":
                self.rows += outcome.shown
            elif outcome.shown:
                click.echo(outcome.shown)

    def close(self) -> None:
        """The last lines."""
        if self.form == "json":
            print_json(self.rows)
            return
        parts, left, awarded, out_of = self.marks
        click.echo(
            f"{self.scripts} scripts, {parts} parts; {left} parts need a person; "
            f"proposed {awarded} of {out_of} marks\n{CAUTION}"
        )


# --- judging a heap, in whichever process --------------------------------------------------------------------


def _maker(
    of: RecalledSet, scripts: Sequence[Script], folder: Path, path: Path, form: Form
) -> Callable[[], Callable[[tuple[int, int]], list[Outcome]]]:
    """What makes the judge of heaps: here from what was read, in a process begun anew by reading it again."""
    return functools.partial(_HeapJudge, _Material(of, scripts, folder, path), form)


@dataclass(slots=True)
class _Material:
    """The set and the scripts. Sent to another process it sends their paths, and is read again there."""

    of: RecalledSet
    scripts: Sequence[Script]
    folder: Path
    path: Path

    def __reduce__(self) -> tuple[Callable[[Path, Path], _Material], tuple[Path, Path]]:
        return _read_again, (self.folder, self.path)


def _read_again(folder: Path, path: Path) -> _Material:
    return _Material(recalled(folder), read_scripts(path).scripts, folder, path)


class _HeapJudge:
    """Judges heaps of scripts, given by where they begin and end."""

    def __init__(self, material: _Material, form: Form) -> None:
        self.scripts = material.scripts
        self.judge = Judge(material.of)
        self.form = form
        self._kept: dict[int, _Told] = {}

    def __call__(self, heap: tuple[int, int]) -> list[Outcome]:
        return [self.outcome(script) for script in self.scripts[slice(*heap)]]

    def outcome(self, script: Script) -> Outcome:
        """One script."""
        judged, faults = self.judge.script(script)
        if judged is None:
            return Outcome(faults)
        code, candidate = judged.paper.code, judged.paper.candidate
        told = [self._told(each) for each in judged.judgements]
        entries = [script_entry(code, judged.answers, candidate)]
        entries += [entry_of(each.text, code, each.of.label, candidate) for each in told]
        marks = (len(told), sum([t.open for t in told]), sum([t.awarded for t in told]), sum([t.out_of for t in told]))
        return Outcome(faults, tuple(entries), self._shown(judged, told, marks), marks)

    def _told(self, judgement: Judgement) -> _Told:
        told = self._kept.get(id(judgement))
        if told is None or told.of is not judgement:
            if len(self._kept) > MOST_REMEMBERED:
                self._kept.clear()
            told = self._kept[id(judgement)] = _Told.about(judgement)
        return told

    def _shown(self, judged: ScriptJudged, told: Sequence[_Told], marks: Marks) -> Any:
        if self.form == "json":
            return [each.data(judged.paper.code, judged.paper.candidate or None) for each in judged.judgements]
        full = self.form == "full"
        return _words(judged, [each for each in told if full or each.open], marks) if full or marks[1] else ""


@dataclass(frozen=True, slots=True)
class _Told:
    """What is told of a judgement, worked out once for all who wrote the same."""

    of: Judgement
    text: str
    words: str
    open: bool
    awarded: int
    out_of: int

    @staticmethod
    def about(of: Judgement) -> _Told:
        return _Told(of, judgement_text(of), judgement_words(of), of.needs_person, of.awarded, of.out_of)


def _words(judged: ScriptJudged, told: Sequence[_Told], marks: Marks) -> str:
    _, _, awarded, out_of = marks
    lines = [f"{judged.paper.code}  {judged.paper.candidate}".rstrip() + f"  {awarded} of {out_of} proposed"]
    for each in told:
        written = " | ".join(judged.answers.get(each.of.label, ())) or "nothing written"
        lines += [f"  {each.of.label}  {written[:70]}", each.words]
    return "\n".join(lines)
