"""Stage 4, assemble: `set.json`, the private record of a set: which paper has which variants, and their answers.

Numbers are strings, as printed but with an ASCII minus. Names never enter it, only candidate ids. `texts` keeps
the plan and items as they were, so that a set can be marked when its files have moved on.
"""

from __future__ import annotations

from typing import Any

from authoring import __version__
from authoring.atoms.species import Species
from authoring.papers.assemble import Paper, PaperSet
from authoring.papers.questions import PartAsked, Question
from authoring.shielding.quantity import Target
from authoring.specs.plan import Plan
from authoring.tasks.solved import Options, Solved
from authoring.working.text import to_text

FORMAT = "shieldwright set 1"


def record(paper_set: PaperSet) -> dict[str, Any]:
    """The record of a set, ready for JSON (design: format, tool_version, plan, seed, conventions, papers, texts)."""
    plan = paper_set.plan
    made = _Parts()
    return {
        "format": FORMAT,
        "tool_version": __version__,
        "plan": plan.name,
        "title": plan.title,
        "seed": paper_set.seed,
        "conventions": dict(plan.conventions),
        "papers": [_paper(paper, made) for paper in paper_set.papers],
        "texts": texts_of(plan),
    }


def texts_of(plan: Plan) -> dict[str, Any]:
    """The plan's and items' YAML as read, by file name."""
    return {
        "plan": plan.tree.text,
        "items": {item.name: item.tree.text for item in plan.items},
        "slips": plan.slips_tree.text if plan.slips_tree else "",
    }


def _paper(paper: Paper, made: _Parts) -> dict[str, Any]:
    return {
        "code": paper.code,
        "candidate": paper.candidate.id if paper.candidate else None,
        "items": [
            {
                "item": question.variant.item.name,
                "variables": question.variant.variables,
                "parts": made.of(question, at),
            }
            for at, question in enumerate(paper.questions, start=1)
        ],
    }


class _Parts:
    """The parts of questions; variants repeat over papers and are written once."""

    def __init__(self) -> None:
        self._made: dict[tuple[int, int], list[dict[str, Any]]] = {}

    def of(self, question: Question, number: int) -> list[dict[str, Any]]:
        key = (id(question), number)
        if key not in self._made:
            self._made[key] = [entry for part in question.parts for entry in _entries(part, str(number))]
        return self._made[key]


def _entries(part: PartAsked, number: str) -> list[dict[str, Any]]:
    label = number + part.label
    if part.choices:
        return [_part(choice.solved, f"{label}-{choice.label}") for choice in part.choices]
    return [_part(part.solved, label)]


def ascii_text(text: str) -> str:
    """A printed number with the minus that programs read."""
    return text.replace("−", "-")


def _part(solved: Solved, label: str) -> dict[str, Any]:
    target = solved.targets[0] if solved.targets else None
    return {
        "label": label,
        "task": solved.task,
        "quantity": solved.quantity,
        "of": species_text(target.species) if target else "",
        "electron": target.electron.label if target and target.electron else "",
        "with": dict(target.detail) if target else {},
        "targets": [_target(each) for each in solved.targets],
        "given": [list(pair) for pair in solved.given] + _options(solved),
        "answer": ascii_text(solved.answer.shown),
        "unit": solved.answer.unit,
        "marks": solved.marks,
        "points": [
            {"code": point.code, "line": _line_text(solved, point.line), "mark": point.kind, "what": point.what}
            for point in solved.points
        ],
        "slips": [{"names": list(wrong.slips), "answer": ascii_text(wrong.shown)} for wrong in solved.wrong],
    }


def _options(solved: Solved) -> list[list[str]]:
    return [
        [option.letter, ascii_text(option.shown)]
        for exhibit in solved.exhibits
        if isinstance(exhibit, Options)
        for option in exhibit.options
    ]


def _target(target: Target) -> dict[str, Any]:
    return {
        "quantity": target.quantity,
        "of": species_text(target.species),
        "electron": target.electron.label if target.electron else "",
        "with": dict(target.detail),
    }


def species_text(species: Species) -> str:
    """A species so that it can be read back: `V2+`, `Cr: [Ar] 3d4 4s2`."""
    return species.label if species.stated is None else f"{species.label}: {species.stated.short()}"


def _line_text(solved: Solved, index: int) -> str:
    if 0 <= index < len(solved.steps):
        return ascii_text(to_text(solved.steps[index].line.chain))
    return ""
