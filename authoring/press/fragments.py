"""Press: what repeats over papers is rendered once: questions, and the rows of the answers at a glance."""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING, Any

from markupsafe import Markup

from authoring.papers.assemble import Paper, PaperSet
from authoring.papers.questions import Question
from authoring.press.environment import rendered
from authoring.press.keys import KeyMaker, blocks, width
from authoring.press.language import Words

if TYPE_CHECKING:
    from jinja2 import Environment

_TOGETHER = 24  # so few rows that no block of columns needs pages of its own
_CODE_CHARACTERS = 9  # bold capitals are wide: room as for so many


class Fragments:
    """Each distinct question at its place, rendered once."""

    def __init__(
        self, environment: Environment, template: str, view: Callable[[Question, int], Any], words: Words
    ) -> None:
        self._environment = environment
        self._template = template
        self._view = view
        self._words = words
        self._done: dict[tuple[int, int], Markup] = {}

    def of(self, paper: Paper) -> list[Markup]:
        """The questions of a paper."""
        return [self._one(question, number) for number, question in enumerate(paper.questions, start=1)]

    def _one(self, question: Question, number: int) -> Markup:
        key = (id(question), number)
        if key not in self._done:
            view = self._view(question, number)
            self._done[key] = Markup(rendered(self._environment, self._template, question=view, words=self._words))
        return self._done[key]


def glance_values(paper_set: PaperSet, maker: KeyMaker, room: float) -> dict[str, Any]:
    """What the template of the answers at a glance needs; `room` is the width of the text in em."""
    medium = maker.medium
    columns = maker.columns()
    ids = [paper.candidate.id if paper.candidate else "" for paper in paper_set.papers]
    longest = max(map(len, ids), default=0)
    before = width(_CODE_CHARACTERS) + (width(longest) if longest else 0.0)
    runs = blocks(columns, room - before)
    rows = []
    for paper, candidate in zip(paper_set.papers, ids, strict=True):
        cells = maker.glance(paper)
        rows.append((medium.text(paper.code), medium.text(candidate), [cells[start:end] for start, end in runs]))
    return {
        "blocks": [columns[start:end] for start, end in runs],
        "papers": rows,
        "together": len(rows) <= _TOGETHER,
        "ids": bool(longest),
        "code_width": medium.text(f"{width(_CODE_CHARACTERS):.1f}"),
        "id_width": medium.text(f"{width(longest) if longest else 0:.1f}"),
    }
