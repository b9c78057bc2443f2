"""`mark`: judge scripts from a file, or one after the other at the desk; keep everything in the ledger."""

from __future__ import annotations

import sys
from pathlib import Path

import click

from authoring.commands.common import json_option
from authoring.commands.mark_file import mark_file
from authoring.faults import ContentError, UsageError
from authoring.marking.desk import Desk, with_marks
from authoring.marking.ledger import Ledger
from authoring.marking.ledger_mark import Mark
from authoring.marking.recall import RecalledSet, recalled


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
    if other is not None or decide is not None or differences:
        with Ledger.open(Path(folder), of.set_id) as ledger:
            if other is not None:
                click.echo(f"{ledger.merge(Path(other))} new entries taken in")
            if decide is not None:
                _decide(of, ledger, decide, reason, marker)
            if differences:
                _show_differences(ledger)
    elif scripts is None:
        with Ledger.open(Path(folder), of.set_id) as ledger:
            _at_desk(of, ledger, marker)
    if scripts is not None:
        sys.exit(mark_file(of, Path(folder), Path(scripts), marker, "json" if as_json else "full" if full else "open"))


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
