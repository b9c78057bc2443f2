"""`mark`: judge scripts from a file, or one after the other at the desk; keep everything in the ledger."""

from __future__ import annotations

import sys
from collections.abc import Sequence
from pathlib import Path

import click

from authoring.commands.common import json_option, print_json, progress_bar
from authoring.faults import ContentError, UsageError, render_faults
from authoring.marking.desk import Desk, judgement_words, with_marks
from authoring.marking.ledger import Ledger
from authoring.marking.ledger_mark import Mark
from authoring.marking.pile import Pile, ScriptJudged
from authoring.marking.recall import RecalledSet, recalled
from authoring.marking.scripts import read_scripts

CAUTION = "Proposed marks are for a person to confirm; your institution's assessment and data-protection rules apply."
BATCH = 500


@click.command("mark")
@click.argument("folder")
@click.argument("scripts", required=False)
@click.option("--marker", default="marker", show_default=True, help="Who marks: an id, not a name.")
@click.option("--merge", "other", metavar="LEDGER", help="Take in the ledger of another marker's machine.")
@click.option("--differences", is_flag=True, help="Show where markers differ.")
@click.option("--decide", nargs=3, metavar="PAPER PART MARKS", help="Settle a part; needs --reason.")
@click.option("--reason", help="Why, with --decide.")
@click.option("--full", is_flag=True, help="Print every judgement, not only those that need a person.")
@json_option
def command(
    folder: str,
    scripts: str | None,
    marker: str,
    other: str | None,
    differences: bool,
    decide: tuple[str, str, str] | None,
    reason: str | None,
    full: bool,
    as_json: bool,
) -> None:
    """Mark the set in FOLDER: the scripts in a file (YAML or CSV), or, without one, paper by paper at the keyboard.

    \b
    shieldwright mark autumn-test scripts.yaml
    shieldwright mark autumn-test
    """
    of = recalled(Path(folder))
    with Ledger.open(Path(folder), of.set_id) as ledger:
        if other is not None:
            click.echo(f"{ledger.merge(Path(other))} new entries taken in")
        if decide is not None:
            _decide(of, ledger, decide, reason, marker)
        if differences:
            _show_differences(ledger)
        if scripts is not None:
            sys.exit(_mark_file(of, ledger, Path(scripts), marker, as_json, full))
        if other is None and decide is None and not differences:
            _at_desk(of, ledger, marker)


# --- a file of scripts -----------------------------------------------------------------------------------


def _mark_file(of: RecalledSet, ledger: Ledger, path: Path, marker: str, as_json: bool, full: bool) -> int:
    read = read_scripts(path)
    pile = Pile(of)
    done: list[ScriptJudged] = []
    rows: list[object] = []
    tally = _Tally()
    with progress_bar("marking") as progress:
        for judged in pile.judged(read.scripts):
            done.append(judged)
            tally.add(judged)
            if as_json:
                rows += [each.data(judged.paper.code, judged.paper.candidate or None) for each in judged.judgements]
            elif full:
                click.echo(_script_words(judged, every=True))
            elif judged_by_person(judged):
                click.echo(_script_words(judged, every=False))
            if len(done) == BATCH:
                _keep(ledger, done, marker)
                done = []
            progress(tally.scripts, len(read.scripts))
    _keep(ledger, done, marker)
    if as_json:
        print_json(rows)
    else:
        click.echo(tally.words())
        click.echo(CAUTION)
    faults = (*read.faults, *pile.faults)
    if faults:
        click.echo(render_faults(faults), err=True)
    return 1 if any(fault.severity == "fault" for fault in faults) else 0


class _Tally:
    """Counts over a pile."""

    def __init__(self) -> None:
        self.scripts = self.parts = self.open = self.awarded = self.out_of = 0

    def add(self, judged: ScriptJudged) -> None:
        """Count one script."""
        self.scripts += 1
        for judgement in judged.judgements:
            self.parts += 1
            self.open += judgement.needs_person
            self.awarded += judgement.awarded
            self.out_of += judgement.out_of

    def words(self) -> str:
        """One line for the terminal."""
        return (
            f"{self.scripts} scripts, {self.parts} parts; {self.open} parts need a person; "
            f"proposed {self.awarded} of {self.out_of} marks"
        )


def judged_by_person(judged: ScriptJudged) -> bool:
    """Whether a script has a part that a person must look at."""
    return any(judgement.needs_person for judgement in judged.judgements)


def _script_words(judged: ScriptJudged, every: bool) -> str:
    total = sum(judgement.awarded for judgement in judged.judgements)
    out_of = sum(judgement.out_of for judgement in judged.judgements)
    head = f"{judged.paper.code}  {judged.paper.candidate}".rstrip() + f"  {total} of {out_of} proposed"
    lines = [head]
    for judgement in judged.judgements:
        if every or judgement.needs_person:
            written = " | ".join(judged.answers.get(judgement.label, ())) or "nothing written"
            lines.append(f"  {judgement.label}  {written[:70]}")
            lines.append(judgement_words(judgement))
    return "\n".join(lines)


def _keep(ledger: Ledger, done: Sequence[ScriptJudged], marker: str) -> None:
    if not done:
        return
    ledger.add_scripts([(each.paper.code, each.answers, each.paper.candidate) for each in done], marker)
    ledger.add_judgements(
        (Mark(each.paper.code, judgement, each.paper.candidate) for each in done for judgement in each.judgements),
        marker,
    )


# --- the desk and decisions --------------------------------------------------------------------------------


def _at_desk(of: RecalledSet, ledger: Ledger, marker: str) -> None:
    def ask(words: str) -> str:
        try:
            return input(words)
        except EOFError:
            return "stop"

    Desk(of, ledger, marker, ask, click.echo).run()


def _decide(of: RecalledSet, ledger: Ledger, decide: tuple[str, str, str], reason: str | None, marker: str) -> None:
    code, part, marks = decide
    if not reason:
        raise UsageError("a decision needs its reason: --reason TEXT")
    if not marks.isascii() or not marks.isdigit() or len(marks) > 3:
        raise UsageError(f"{marks[:20]!r} is no number of marks")
    events = ledger.current(paper=code.upper(), part=part)
    if not events:
        known = of.paper(code.upper()).labels if code.upper() in of.codes else of.codes
        raise ContentError(f"nobody has marked {code[:20]} {part[:20]} yet", part, known)
    mark = events[-1].mark
    decided = with_marks(mark.judgement, int(marks), reason)
    ledger.adjudicate(Mark(mark.paper, decided, mark.candidate), marker, reason)
    click.echo(f"{mark.paper} {part}: {decided.awarded} of {decided.out_of} decided")


def _show_differences(ledger: Ledger) -> None:
    found = ledger.differences()
    for difference in found:
        marks = ", ".join(f"{event.marker} {event.mark.judgement.awarded}" for event in difference.marks)
        click.echo(f"{difference.paper}  {difference.part}  {marks}")
    click.echo(f"{len(found)} parts differ; settle one with --decide PAPER PART MARKS --reason TEXT")
