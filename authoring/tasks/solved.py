"""What a task makes of a part: the wording, what is printed with it, the working, the answer and its marks."""

from __future__ import annotations

from dataclasses import dataclass, field
from decimal import Decimal
from typing import Literal

from authoring.shielding.quantity import Target
from authoring.shielding.solve import Step
from authoring.working.lines import Line, Point
from authoring.working.nodes import Node

AnswerKind = Literal[
    "number",
    "configuration",
    "groups",
    "tally",
    "electron",
    "species",
    "order",
    "letter",
    "table",
    "correction",
    "text",
]


@dataclass(frozen=True, slots=True)
class Answer:
    """The answer: `shown` as printed without its unit, `node` for the press, `value` for the judge.

    `value`: Decimal, Configuration, groups, Subshell, Species, a tuple of Species or electrons in order, text; for a
    table the tuple of its blanks' answers; for a correction (number of the first wrong line, value).
    `accepted`: the range, ends included, that a reading off a chart may be in.
    """

    kind: AnswerKind
    shown: str
    node: Node
    value: object
    unit: str = ""
    accepted: tuple[Decimal, Decimal] | None = None


@dataclass(frozen=True, slots=True)
class Wrong:
    """An answer that a misunderstanding leads to: the slips' names and the answer as it would be written.

    `marks`: what it earns with its working, where that is settled.
    """

    slips: tuple[str, ...]
    shown: str
    marks: int | None = None


# --- exhibits: what is printed with a question besides its wording ------------------------------------


@dataclass(frozen=True, slots=True)
class Option:
    """One option of a choice; `slips` names the misunderstanding behind a wrong one (empty for the right one)."""

    letter: str
    node: Node
    shown: str
    slips: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Options:
    """The options to choose from."""

    options: tuple[Option, ...]


@dataclass(frozen=True, slots=True)
class ShownWorking:
    """A worked solution printed with numbered lines (with the fault that the candidate has to find)."""

    lines: tuple[Line, ...]


@dataclass(frozen=True, slots=True)
class BlankTable:
    """A table to complete: a cell is a node, or None for a blank; `filled` has every cell, for the key.

    The blanks are labelled (i), (ii), … in reading order. A column's unit stands in its head.
    """

    header: tuple[Node, ...]
    rows: tuple[tuple[Node | None, ...], ...]
    filled: tuple[tuple[Node, ...], ...]


@dataclass(frozen=True, slots=True)
class Series:
    """The points of one chart series: (label on the axis, value)."""

    name: str
    points: tuple[tuple[str, float], ...]


@dataclass(frozen=True, slots=True)
class Chart:
    """A chart of a quantity: its axis words, its series, and a description for readers who cannot see it.

    `style`: `points` joined by lines, or `levels` (an energy ladder; each point is a level with its label).
    """

    style: Literal["points", "levels"]
    x_words: str
    y_words: str
    series: tuple[Series, ...]
    description: str


Exhibit = Options | ShownWorking | BlankTable | Chart


@dataclass(frozen=True, slots=True)
class Solved:
    """A part of a variant, solved.

    `ask` is item Markdown. `steps` is the working of the key. `space` is the number of ruled lines an answer by
    hand needs. `notes` are for markers (item Markdown); `rubric` (for *explain*) says what earns each point and
    what does not. `rounding` words say how the final value is to be given.
    """

    task: str
    quantity: str
    targets: tuple[Target, ...]
    ask: str
    steps: tuple[Step, ...]
    answer: Answer
    points: tuple[Point, ...]
    space: int
    exhibits: tuple[Exhibit, ...] = ()
    wrong: tuple[Wrong, ...] = ()
    notes: tuple[str, ...] = ()
    rubric: tuple[tuple[str, str], ...] = ()
    given: tuple[tuple[str, str], ...] = field(default=())

    @property
    def marks(self) -> int:
        """The marks of the part: one per point."""
        return len(self.points)
