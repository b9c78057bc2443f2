"""`set`: sheets, key and record for a roster or a number of copies."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

import click

from authoring.commands.common import json_option, print_json, progress_bar
from authoring.faults import OutsideError, UsageError, render_faults
from authoring.marking.scripts import write_blank_form
from authoring.papers.assemble import PaperSet, assembled
from authoring.papers.chance import checked_seed, new_seed
from authoring.papers.folder import checked_target, whole_folder
from authoring.papers.questions import Terms
from authoring.papers.record_file import RECORD, pieces, read_drawn, used_variants
from authoring.press.publish import Published, publish
from authoring.specs.plan import Plan, read_plan
from authoring.specs.roster import Candidate, read_roster
from authoring.specs.shipped import located

MOST_COPIES = 20_000
REMINDER = (
    "The papers, key and set.json are assessment material: your institution's assessment and "
    "data-protection rules apply."
)


@click.command("set")
@click.argument("plan")
@click.option("--candidates", "roster", metavar="FILE", help="A CSV with a column `candidate` (name, needs, seat).")
@click.option("--copies", type=click.IntRange(1, MOST_COPIES), help="So many papers, without names.")
@click.option("--into", "into", required=True, metavar="FOLDER", help="The folder to write; it appears whole.")
@click.option("--seed", help="The same seed gives the same papers. Default: 128 random bits, kept in the record.")
@click.option("--replace", is_flag=True, help="Write a set anew over one that has no marks yet.")
@click.option("--split", is_flag=True, help="One PDF per candidate as well.")
@click.option("--allow-repeats", is_flag=True, help="More papers than there are different ones.")
@click.option("--time-limit", type=click.IntRange(1, 86_400), help="Seconds for TeX. Default: 600, or 0.6 a paper.")
@json_option
def command(
    plan: str,
    roster: str | None,
    copies: int | None,
    into: str,
    seed: str | None,
    replace: bool,
    split: bool,
    allow_repeats: bool,
    time_limit: int | None,
    as_json: bool,
) -> None:
    """Set the papers of PLAN (a path or a shipped name): sheets, key, record and blank script form.

    \b
    shieldwright set weekly-sheet --copies 4 --into first-set
    shieldwright set my-plan.yaml --candidates class.csv --into autumn-test
    """
    target = Path(into)
    checked_target(target, replace)
    candidates = _candidates(roster, copies)
    read = read_plan(located(plan, "plans"))
    made = _assembled(read, candidates, checked_seed(seed) if seed is not None else new_seed(), allow_repeats)
    with whole_folder(target, replace) as scratch:
        with scratch.joinpath(RECORD).open("w", encoding="utf-8") as file:
            file.writelines(pieces(made))
        scratch.joinpath("scripts.yaml").write_text(write_blank_form(*form_of(made)), encoding="utf-8")
        with progress_bar("printing") as progress:
            published = publish(made, scratch, split=split, progress=progress, time_limit=time_limit)
    _say(made, target, published, as_json)
    if published.missing:
        raise OutsideError(published.missing)


def _candidates(roster: str | None, copies: int | None) -> Sequence[Candidate | None]:
    if (roster is None) == (copies is None):
        raise UsageError("say for whom: --candidates FILE, or --copies NUMBER (one of them)")
    if roster is None:
        return [None] * (copies or 0)
    read = read_roster(Path(roster))
    if read.weaknesses:
        click.echo(render_faults(read.weaknesses), err=True)
    return read.candidates


def _assembled(plan: Plan, candidates: Sequence[Candidate | None], seed: str, allow_repeats: bool) -> PaperSet:
    apart: frozenset[tuple[str, tuple[tuple[str, str], ...]]] = frozenset()
    if plan.apart_from is not None:
        apart = used_variants(read_drawn(Path(plan.path).parent / plan.apart_from))
    with progress_bar("drawing and solving") as progress:
        return assembled(
            plan,
            Terms(plan.practice, plan.slips, plan.figures, new=True),
            seed,
            candidates,
            allow_repeats=allow_repeats,
            apart_from=apart,
            progress=progress,
        )


def form_of(made: PaperSet) -> tuple[list[tuple[str, list[str]]], dict[str, str]]:
    """What the blank script form needs: code and part labels of each paper, and candidate ids by code."""
    papers = [
        (
            paper.code,
            [f"{number}{part.label}" for number, question in enumerate(paper.questions, 1) for part in question.parts],
        )
        for paper in made.papers
    ]
    return papers, {paper.code: paper.candidate.id for paper in made.papers if paper.candidate}


def _say(made: PaperSet, target: Path, published: Published, as_json: bool) -> None:
    files = [*published.files, RECORD, "scripts.yaml"]
    if as_json:
        print_json(
            {
                "into": str(target),
                "papers": len(made.papers),
                "marks": made.papers[0].marks,
                "files": sorted(files),
                "codes": [paper.code for paper in made.papers],
            }
        )
        return
    plural = "s" if len(made.papers) != 1 else ""
    click.echo(f"{made.plan.title}: {len(made.papers)} paper{plural} of {made.papers[0].marks} marks in {target}")
    for name in sorted(files):
        click.echo(f"  {name}")
    click.echo(REMINDER)
