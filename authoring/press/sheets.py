"""Press: what the templates of a sheet need, ready to print in one medium."""

from __future__ import annotations

import math
from dataclasses import dataclass

from markupsafe import Markup

from authoring.papers.assemble import Paper, PaperSet
from authoring.papers.questions import PartAsked, Question
from authoring.press.language import Words
from authoring.press.medium import Medium
from authoring.specs.plan import Plan
from authoring.specs.prose import read_prose
from authoring.tasks.solved import BlankTable, Chart, Exhibit, Options, ShownWorking, Solved
from authoring.working.nodes import Node
from authoring.working.text import to_text

_ROMAN = ("i", "ii", "iii", "iv", "v", "vi", "vii", "viii", "ix", "x", "xi", "xii")
_SPACE = {"none": 0.0, "narrow": 0.7, "normal": 1.0, "wide": 1.5}
_MOST_LINES = 30
_GRID = 12  # questions in a row of the table of marks
# Characters of an option that leave room for four, or two, side by side.
_FOUR_ABREAST, _TWO_ABREAST = 13, 30

_NOTHING = Markup()


@dataclass(frozen=True, slots=True)
class ExhibitView:
    """What stands under a wording: `kind` is options, working, table or chart.

    `rows`: (letter, option), (number, line), or the cells of a row, where a blank is its number (i), (ii), ….
    """

    kind: str
    rows: tuple[tuple[Markup, ...], ...] = ()
    header: tuple[Markup, ...] = ()
    abreast: int = 1
    blanks: frozenset[tuple[int, int]] = frozenset()
    picture: Markup = _NOTHING


@dataclass(frozen=True, slots=True)
class PartView:
    """A part: `lines` ruled lines are left for the answer; `choices` are its alternatives."""

    label: Markup
    ask: Markup
    marks: Markup
    lines: int
    exhibits: tuple[ExhibitView, ...]
    choices: tuple[PartView, ...]


@dataclass(frozen=True, slots=True)
class QuestionView:
    """A question."""

    number: int
    title: Markup
    marks: Markup
    story: Markup
    caution: Markup
    tables: Markup
    figure: Markup
    figure_caption: Markup
    parts: tuple[PartView, ...]


@dataclass(frozen=True, slots=True)
class FrontView:
    """What every first page says."""

    title: Markup
    course: Markup
    date: Markup
    time: Markup
    instructions: Markup
    conventions: tuple[tuple[Markup, Markup], ...]


@dataclass(frozen=True, slots=True)
class PaperView:
    """A paper: its code, whom it is for, and rows of (question, marks)."""

    code: Markup
    candidate: Markup
    name: Markup
    seat: Markup
    marks: Markup
    grid: tuple[tuple[tuple[int, int], ...], ...]
    total: int


class SheetMaker:
    """Makes the views of sheets in one medium."""

    def __init__(self, paper_set: PaperSet, medium: Medium, words: Words) -> None:
        self.plan: Plan = paper_set.plan
        self.medium = medium
        self.words = words

    def front(self) -> FrontView:
        """The head of all papers."""
        plan, medium = self.plan, self.medium
        time = self.words("time_allowed", time=medium.text(plan.time)) if plan.time else Markup()
        return FrontView(
            title=medium.text(plan.title),
            course=medium.text(plan.course),
            date=medium.text(plan.date),
            time=time,
            instructions=medium.prose(read_prose(plan.instructions)[0]),
            conventions=conventions_of(plan, medium),
        )

    def paper(self, paper: Paper, named: bool = True) -> PaperView:
        """The head of one paper; a key has no names, and so never needs the fonts for them."""
        medium, who = self.medium, paper.candidate
        return PaperView(
            code=medium.text(paper.code),
            candidate=medium.text(who.id if who else ""),
            name=medium.text(who.name if who and named else ""),
            seat=medium.text(who.seat if who else ""),
            marks=self.words.count("marks", paper.marks),
            grid=_grid(paper),
            total=paper.marks,
        )

    def question(self, question: Question, number: int) -> QuestionView:
        """One question at its place."""
        medium = self.medium
        return QuestionView(
            number=number,
            title=medium.text(question.title),
            marks=self.words.count("marks", question.marks),
            story=medium.prose(question.story),
            caution=medium.prose(question.caution),
            tables=medium.prose(question.tables),
            figure=medium.chart(question.figure) if question.figure else Markup(),
            figure_caption=medium.prose(question.figure_caption),
            parts=tuple(self.part(part) for part in question.parts),
        )

    def part(self, part: PartAsked) -> PartView:
        """One part, or the alternatives of one."""
        if part.choices:
            choices = tuple(self.part(choice) for choice in part.choices)
            room = max(choice.lines for choice in choices)
            ask = self.words("answer_one_of")
            return PartView(self.medium.text(part.label), ask, mark_words(part, self.medium), room, (), choices)
        return PartView(
            label=self.medium.text(part.label),
            ask=self.medium.prose(part.ask),
            marks=mark_words(part, self.medium),
            lines=self.lines(part.solved),
            exhibits=tuple(exhibit_view(each, self.medium) for each in part.solved.exhibits),
            choices=(),
        )

    def lines(self, solved: Solved) -> int:
        """Ruled lines for an answer, as the plan wants them."""
        return min(_MOST_LINES, math.ceil(solved.space * _SPACE[self.plan.layout.space]))


def _grid(paper: Paper) -> tuple[tuple[tuple[int, int], ...], ...]:
    pairs = [(at, question.marks) for at, question in enumerate(paper.questions, start=1)]
    return tuple(tuple(pairs[at : at + _GRID]) for at in range(0, len(pairs), _GRID))


def mark_words(part: PartAsked, medium: Medium) -> Markup:
    """`[3]`."""
    return medium.text(f"[{part.marks}]")


def conventions_of(plan: Plan, medium: Medium) -> tuple[tuple[Markup, Markup], ...]:
    """What the course does otherwise than the published method: words and value."""
    from authoring.shielding.practice import convention_fields

    fields = convention_fields()
    found = []
    for words, value in plan.conventions.items():
        says = fields[words].metadata["says"] if words in fields else words
        heading = says if says.startswith("n*") else says[:1].upper() + says[1:]
        found.append((medium.words(heading), medium.number(value)))
    return tuple(found)


def exhibit_view(exhibit: Exhibit, medium: Medium) -> ExhibitView:
    """An exhibit as the candidate sees it: nothing in it says what is right."""
    match exhibit:
        case Options(options):
            rows = tuple((medium.text(f"({option.letter})"), medium.node(option.node)) for option in options)
            return ExhibitView("options", rows, abreast=_abreast([option.node for option in options]))
        case ShownWorking(lines):
            numbered = enumerate(lines, start=1)
            return ExhibitView(
                "working", tuple((medium.text(str(at)), *medium.relations(line.chain)) for at, line in numbered)
            )
        case BlankTable():
            return _blank_table(exhibit, medium)
        case Chart():
            return ExhibitView("chart", picture=medium.chart(exhibit))


def _abreast(nodes: list[Node]) -> int:
    longest = max(len(to_text(node)) for node in nodes)
    if longest <= _FOUR_ABREAST:
        return 4 if len(nodes) <= 4 else 3
    return 2 if longest <= _TWO_ABREAST else 1


def _blank_table(table: BlankTable, medium: Medium) -> ExhibitView:
    rows: list[tuple[Markup, ...]] = []
    blanks: set[tuple[int, int]] = set()
    for at, row in enumerate(table.rows):
        cells = []
        for column, cell in enumerate(row):
            if cell is None:
                blanks.add((at, column))
                cells.append(medium.text(f"({blank_label(len(blanks))})"))
            else:
                cells.append(medium.node(cell))
        rows.append(tuple(cells))
    header = tuple(medium.node(cell) for cell in table.header)
    return ExhibitView("table", tuple(rows), header, blanks=frozenset(blanks))


def blank_label(number: int) -> str:
    """1 → i; beyond twelve, digits."""
    return _ROMAN[number - 1] if number <= len(_ROMAN) else str(number)

