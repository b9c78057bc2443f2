"""The key, fed back as a script, earns full marks: its lines as printed, its answers alone, and `ok`."""

from __future__ import annotations

from collections.abc import Iterator

import pytest

from authoring.marking.explaining import Terms
from authoring.marking.judge import Policy, judged
from authoring.marking.judgement import Own
from authoring.marking.recall import labelled
from authoring.papers.assemble import assembled
from authoring.papers.questions import Terms as Asked
from authoring.specs.plan import read_plan
from authoring.specs.shipped import shipped_folder, shipped_names
from authoring.tasks.solved import Solved
from authoring.working.text import to_text

PLANS = shipped_names("plans")


def questions(name: str) -> Iterator[tuple[tuple[tuple[str, tuple[Solved, ...]], ...], Terms, str]]:
    """The questions of three papers of a plan, with what they are judged under."""
    plan = read_plan(shipped_folder("scenarios") / "plans" / f"{name}.yaml")
    made = assembled(plan, Asked(plan.practice, plan.slips, plan.figures), "fed back", [None] * 3)
    for paper in made.papers:
        for question in paper.questions:
            yield labelled(question, 1), Terms(plan.practice, plan.slips), plan.bare_values


def key_lines(solved: Solved, decimal: str) -> tuple[str, ...]:
    """The working as the key prints it in text; tables and corrections by their answer as well."""
    working = tuple(to_text(step.line.chain, decimal=decimal) for step in solved.steps)
    if solved.answer.kind == "table":
        return (solved.answer.shown,)
    return (solved.answer.shown, *working[1:]) if solved.answer.kind == "correction" else working


@pytest.mark.parametrize("decimal", [".", ","])
@pytest.mark.parametrize("name", PLANS)
def test_the_printed_working_earns_full_marks(name: str, decimal: str) -> None:
    """Every line of every part that a machine may judge; explanations are left to a person."""
    for parts, terms, policy in questions(name):
        own = Own()
        for label, alternatives in parts:
            solved = alternatives[0]
            if solved.task != "explain":
                lines = key_lines(solved, decimal)
                found = judged(label, solved, lines, own, terms, Policy(policy, "comma" if decimal == "," else "auto"))
                assert found.awarded == found.out_of, (lines, found)


@pytest.mark.parametrize("name", PLANS)
def test_ok_earns_full_marks(name: str) -> None:
    """`ok` says: exactly as the key."""
    for parts, terms, policy in questions(name):
        own = Own()
        for label, alternatives in parts:
            found = judged(label, alternatives[0], ("ok",), own, terms, Policy(policy))
            assert (found.awarded, found.certainty) == (found.out_of, "certain")
