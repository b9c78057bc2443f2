"""Press: what the templates of a key need, ready to print in one medium."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from decimal import Decimal

from markupsafe import Markup

from authoring.papers.assemble import Paper, PaperSet
from authoring.papers.questions import PartAsked, Question
from authoring.press.language import Words
from authoring.press.medium import Medium, parted
from authoring.press.sheets import ExhibitView, blank_label
from authoring.shielding.quantity import Target
from authoring.specs.prose import read_prose
from authoring.tasks.explain import NOT
from authoring.tasks.solved import Answer, BlankTable, Options, Solved
from authoring.working.lines import Point
from authoring.working.nodes import Math, Plain
from authoring.working.numbers import shown
from authoring.working.text import to_text

_MOST_WRONG = 6
_LONGEST_CELL = 26  # characters of an answer at a glance
# em of running type that a character of a formula takes, about; one more for the gap between columns
_LETTER, _COLUMN_GAP = 0.56, 1.3
_LEAST_COLUMN = 3.0
_MOST_FIRST = 22  # a longer left side stands on a line of its own


@dataclass(frozen=True, slots=True)
class PointView:
    """A mark point and what earns it."""

    code: Markup
    follow_through: bool
    what: Markup


@dataclass(frozen=True, slots=True)
class LineView:
    """A line of working: what stands before its first relation, the rest, and the points it carries."""

    first: Markup
    rest: Markup
    apart: bool
    points: tuple[PointView, ...]
    note: Markup


@dataclass(frozen=True, slots=True)
class KeyPart:
    """A part on the key. `first_width` in em is the room of the left sides of its lines."""

    label: Markup
    asks: Markup
    marks: Markup
    answer: Markup
    model: Markup
    accepted: Markup
    first_width: Markup
    lines: tuple[LineView, ...]
    exhibits: tuple[ExhibitView, ...]
    options: tuple[tuple[Markup, Markup, Markup], ...]
    wrong: tuple[tuple[Markup, Markup, Markup], ...]
    rubric: tuple[tuple[Markup, Markup], ...]
    notes: tuple[Markup, ...]
    choices: tuple[KeyPart, ...]


@dataclass(frozen=True, slots=True)
class KeyQuestion:
    """A question on the key."""

    number: int
    title: Markup
    marks: Markup
    notes: tuple[Markup, ...]
    parts: tuple[KeyPart, ...]


@dataclass(frozen=True, slots=True)
class Column:
    """A column of the answers at a glance, with its width in em."""

    head: Markup
    width: Markup


class KeyMaker:
    """Makes the views of a key in one medium."""

    def __init__(self, paper_set: PaperSet, medium: Medium, words: Words) -> None:
        self.paper_set = paper_set
        self.medium = medium
        self.words = words
        self._what: dict[str, Markup] = {}
        self._cells: dict[int, tuple[Markup, ...]] = {}

    def question(self, question: Question, number: int) -> KeyQuestion:
        """One question at its place."""
        medium = self.medium
        return KeyQuestion(
            number=number,
            title=medium.text(question.title),
            marks=self.words.count("marks", question.marks),
            notes=tuple(medium.prose(note) for note in question.notes),
            parts=tuple(self.part(part) for part in question.parts),
        )

    def part(self, part: PartAsked) -> KeyPart:
        """One part, or the alternatives of one."""
        medium, solved, answer = self.medium, part.solved, part.solved.answer
        choices = tuple(self.part(choice) for choice in part.choices)
        if choices:
            return KeyPart(
                medium.text(part.label), self.words("answer_one_of"), medium.text(f"[{part.marks}]"), Markup(),
                Markup(), Markup(), medium.text("0"), (), (), (), (), (), (), choices,
            )  # fmt: skip
        shown_firsts = [len(to_text(first)) for step in solved.steps if (first := parted(step.line.chain)[0])]
        fitting = [length for length in shown_firsts if length <= _MOST_FIRST]
        return KeyPart(
            label=medium.text(part.label),
            asks=medium.text(_asks(solved)),
            marks=medium.text(f"[{part.marks}]"),
            answer=self.answer(answer),
            model=self.model(solved),
            accepted=self.accepted(solved),
            first_width=medium.text(f"{max(fitting, default=0) * _LETTER + 0.3:.1f}"),
            lines=tuple(self.lines(solved)),
            exhibits=tuple(_filled(each, medium) for each in solved.exhibits if isinstance(each, BlankTable)),
            options=tuple(self.options(solved)),
            wrong=tuple(self.wrong(solved)),
            rubric=tuple(self.rubric(solved)),
            notes=tuple(medium.prose(note) for note in part.notes),
            choices=(),
        )

    def answer(self, answer: Answer) -> Markup:
        """The answer as a marker looks for it."""
        if answer.kind == "text":
            return Markup()
        if answer.kind in ("electron", "letter"):
            return self.medium.number(answer.shown)
        return self.medium.node(answer.node)

    def model(self, solved: Solved) -> Markup:
        """A model answer in words, where it says more than the rubric does."""
        text = solved.answer.shown
        said = all(entry.rstrip(".;") in text for code, entry in solved.rubric if code != NOT)
        if solved.answer.kind != "text" or (solved.rubric and said):
            return Markup()
        return self.medium.prose(read_prose(text)[0])

    def rubric(self, solved: Solved) -> Iterator[tuple[Markup, Markup]]:
        """What earns each mark, and what does not."""
        for code, text in solved.rubric:
            head = self.words("rubric_not") if code == NOT else self.medium.text(code)
            yield head, self.medium.prose(read_prose(text)[0])

    def lines(self, solved: Solved) -> Iterator[LineView]:
        """The working with its points; where a rubric says what earns them, the points stand there."""
        medium = self.medium
        for at, step in enumerate(solved.steps):
            first, rest = medium.relations(step.line.chain)
            left = parted(step.line.chain)[0]
            points = tuple(self.point(point) for point in solved.points if point.line == at)
            apart = left is not None and len(to_text(left)) > _MOST_FIRST
            yield LineView(first, rest, apart, points, medium.number(step.line.note))

    def point(self, point: Point) -> PointView:
        """A mark point."""
        if point.what not in self._what:
            self._what[point.what] = self.medium.words(point.what)
        return PointView(self.medium.text(point.code), point.follow_through, self._what[point.what])

    def options(self, solved: Solved) -> Iterator[tuple[Markup, Markup, Markup]]:
        """Each option, and which is right or which slip is behind it."""
        for exhibit in solved.exhibits:
            if isinstance(exhibit, Options):
                for option in exhibit.options:
                    right = option.letter == solved.answer.shown
                    says = self.words("option_right") if right else self.medium.words(" + ".join(option.slips))
                    yield self.medium.text(f"({option.letter})"), self.medium.node(option.node), says

    def wrong(self, solved: Solved) -> Iterator[tuple[Markup, Markup, Markup]]:
        """The likeliest wrong answers, the slips that lead to them, and what each earns with its working."""
        if any(isinstance(exhibit, Options) for exhibit in solved.exhibits):
            return
        for each in solved.wrong[:_MOST_WRONG]:
            worth = Markup() if each.marks is None else self.medium.text(f"[{each.marks}]")
            yield self.medium.number(each.shown), self.medium.words(" + ".join(each.slips)), worth

    def accepted(self, solved: Solved) -> Markup:
        """Which values will do for a rounded number: what the task says, else one more or less in the last place."""
        answer = solved.answer
        if answer.kind != "number" or not solved.steps:
            return Markup()
        if answer.accepted is not None:
            low, high = (shown(end) for end in answer.accepted)
        elif solved.steps[-1].line.rounded:
            value = Decimal(answer.shown.replace("−", "-"))
            last = Decimal(1).scaleb(int(value.as_tuple().exponent))
            low, high = shown(value - last), shown(value + last)
        else:
            return self.words("exact")
        return self.words("accept", low=self.medium.number(low), high=self.medium.number(high))

    # --- answers at a glance -----------------------------------------------------------------------

    def columns(self) -> tuple[Column, ...]:
        """A column for each part (or alternative), as wide as its longest answer."""
        heads: list[str] = []
        longest: list[int] = []
        for paper in self.paper_set.papers:
            texts = [(head, text) for head, text, _ in _answers(paper)]
            heads += [head for head, _ in texts[len(heads) :]]
            longest += [0] * (len(texts) - len(longest))
            for at, (head, text) in enumerate(texts):
                longest[at] = max(longest[at], len(head), len(text) if len(text) <= _LONGEST_CELL else 10)
        return tuple(
            Column(self.medium.text(head), self.medium.text(f"{max(_LEAST_COLUMN, width(length)):.1f}"))
            for head, length in zip(heads, longest, strict=True)
        )

    def glance(self, paper: Paper) -> tuple[Markup, ...]:
        """The answers of a paper, one for each column."""
        cells: list[Markup] = []
        for question in paper.questions:
            if id(question) not in self._cells:
                self._cells[id(question)] = tuple(self._cell(part) for part in _flat(question))
            cells += self._cells[id(question)]
        return tuple(cells)

    def _cell(self, part: PartAsked) -> Markup:
        answer = part.solved.answer
        if _long(answer):
            return self.words("see_paper")
        if answer.kind in ("number", "letter", "electron"):
            return self.medium.number(answer.shown)
        return self.medium.node(answer.node)


def width(characters: int) -> float:
    """The room in em that so many characters take, with the gap after them."""
    return characters * _LETTER + _COLUMN_GAP


def blocks(columns: Sequence[Column], room: float) -> list[tuple[int, int]]:
    """Runs of columns (from, to) that fit into `room` em side by side; at least one each."""
    found: list[tuple[int, int]] = []
    start, used = 0, 0.0
    for at, column in enumerate(columns):
        size = float(column.width)
        if at > start and used + size > room:
            found.append((start, at))
            start, used = at, 0.0
        used += size
    return [*found, (start, len(columns))]


def _flat(question: Question) -> Iterator[PartAsked]:
    for part in question.parts:
        yield from part.choices or (part,)


def _answers(paper: Paper) -> Iterator[tuple[str, str, PartAsked]]:
    """The head, text and part of every answer of a paper."""
    for number, question in enumerate(paper.questions, start=1):
        for part in question.parts:
            for choice in part.choices or (part,):
                head = f"{number}{part.label}" + (f" ({choice.label})" if part.choices else "")
                yield head, choice.solved.answer.shown, choice


def _long(answer: Answer) -> bool:
    return answer.kind in ("text", "table", "correction") or len(answer.shown) > _LONGEST_CELL


def _asks(solved: Solved) -> str:
    """`calculate screening constant: V 4s`, for the marker's eye."""
    about = ", ".join(dict.fromkeys(_about(target) for target in solved.targets))
    words = f"{solved.task} {solved.quantity}".strip()
    return f"{words}: {about}" if about else words


def _about(target: Target) -> str:
    """`V²⁺ 3d`."""
    return target.about.replace(target.species.label, target.species.printed, 1)


def _filled(table: BlankTable, medium: Medium) -> ExhibitView:
    """The table with every cell; those that the candidate fills in are marked with their numbers."""
    blanks = [
        (at, column) for at, row in enumerate(table.rows) for column, cell in enumerate(row) if cell is None
    ]
    number = {place: blank_label(index) for index, place in enumerate(blanks, start=1)}
    rows = tuple(
        tuple(
            medium.inline((Plain(f"({number[at, column]}) "), Math(cell)))
            if (at, column) in number
            else medium.node(cell)
            for column, cell in enumerate(row)
        )
        for at, row in enumerate(table.filled)
    )
    return ExhibitView("table", rows, tuple(medium.node(cell) for cell in table.header), blanks=frozenset(blanks))
