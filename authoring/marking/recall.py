"""Stage 8, mark: the papers of a set, made again from its record: from the texts kept in it, not from today's files."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any, TypeAlias

from authoring.faults import FaultsFound, UsageError
from authoring.marking.explaining import Terms
from authoring.marking.judge import Policy
from authoring.papers.assemble import ROUND, turns
from authoring.papers.pools import pool
from authoring.papers.questions import Kept, Question, question
from authoring.papers.questions import Terms as Asked
from authoring.papers.record_file import read_drawn
from authoring.papers.variants import Variant
from authoring.papers.views import value_text
from authoring.specs.draws import rests_on
from authoring.specs.item import Item, item_from
from authoring.specs.plan import Plan, plan_from
from authoring.specs.yaml_tree import parse_tree
from authoring.tasks.solved import Solved

QuestionToMark: TypeAlias = "tuple[tuple[str, tuple[Solved, ...]], ...]"


@dataclass(frozen=True, slots=True)
class PaperToMark:
    """One paper as the judge needs it, grouped by question: each part's label, and what was solved.

    A part of which the candidate answers one alternative has them all; every other part has one.
    """

    code: str
    candidate: str
    questions: tuple[QuestionToMark, ...]

    @property
    def labels(self) -> tuple[str, ...]:
        """The labels of its parts."""
        return tuple(label for question in self.questions for label, _ in question)


class RecalledSet:
    """A set read back from its record; papers are solved when they are asked for, each variant once."""

    def __init__(self, data: Mapping[str, Any], place: str) -> None:
        self._data = data
        self.plan = _plan(data, place)
        self.terms = Terms(self.plan.practice, self.plan.slips)
        decimal = "comma" if self.plan.layout.decimal == "comma" else "auto"
        self.policy = Policy(self.plan.bare_values, decimal)  # type: ignore[arg-type]
        self._places = {paper["code"]: at for at, paper in enumerate(data["papers"])}
        self._made: dict[tuple[str, tuple[tuple[str, str], ...], int, int], QuestionToMark] = {}
        self._papers: dict[str, PaperToMark] = {}
        self._kept: dict[int, Kept] = {}
        self._turning: dict[int, bool] = {}
        self._drawn: dict[tuple[object, ...], dict[str, object]] = {}

    @property
    def set_id(self) -> str:
        """What tells this set from any other."""
        return f"{self._data['plan']}:{self._data['seed']}:{len(self._data['papers'])}"

    @property
    def codes(self) -> tuple[str, ...]:
        """The paper codes, in the order of the record."""
        return tuple(self._places)

    def __contains__(self, code: str) -> bool:
        return code in self._places

    def paper(self, code: str) -> PaperToMark:
        """One paper. Raises KeyError for a code that is not in the set."""
        if code not in self._papers:
            at = self._places[code]
            entry = self._data["papers"][at]
            questions = tuple(self._question(item, number, at) for number, item in enumerate(entry["items"]))
            self._papers[code] = PaperToMark(code, entry["candidate"] or "", questions)
        return self._papers[code]

    def _question(self, entry: Mapping[str, Any], number: int, place: int) -> QuestionToMark:
        item = self.plan.items[number]
        if number not in self._turning:
            self._turning[number] = turns(self._variant(item, entry["variables"]))
        turn = place % ROUND if self._turning[number] else 0
        key = (item.name, tuple(entry["variables"].items()), turn, number)
        if key not in self._made:
            variant = self._variant(item, entry["variables"])
            kept = self._kept.setdefault(number, Kept())
            asked = question(variant, Asked(self.plan.practice, self.plan.slips, self.plan.figures), turn, kept)
            self._made[key] = labelled(asked, number + 1)
        return self._made[key]

    def _variant(self, item: Item, variables: Mapping[str, str]) -> Variant:
        """The variant with these recorded values: each is found again in its pool."""
        bindings: dict[str, object] = {}
        before: tuple[str, ...] = ()
        for name, draw in item.draws.items():
            wanted = variables[name]
            key = (item.name, name, *before) if rests_on(draw) else (item.name, name)
            if key not in self._drawn:
                self._drawn[key] = {value_text(each): each for each in pool(draw, bindings, self.plan.practice)}
            if wanted not in self._drawn[key]:
                raise UsageError(f"the record says {name} = {wanted} for {item.name}, which the item does not allow")
            bindings[name] = self._drawn[key][wanted]
            before = (*before, wanted)
        return Variant(item, tuple(bindings.items()))


def labelled(asked: Question, number: int) -> QuestionToMark:
    """The parts of a question with the labels that scripts and records use."""
    return tuple(
        (f"{number}{part.label}", tuple(choice.solved for choice in part.choices) or (part.solved,))
        for part in asked.parts
    )


def recalled(folder: Path) -> RecalledSet:
    """The set in a folder. Raises UsageError where there is none, or where its record is damaged."""
    data = read_drawn(folder)
    try:
        return RecalledSet(data, str(folder))
    except (KeyError, TypeError, AttributeError) as error:
        raise UsageError(f"{folder}: the record is damaged ({error})") from error
    except FaultsFound as error:
        raise UsageError(f"{folder}: the record's plan cannot be read again: {error.faults[0].message}") from error


def _plan(data: Mapping[str, Any], place: str) -> Plan:
    texts = data["texts"]
    items: Mapping[str, str] = texts["items"]

    def item_named(word: str) -> Item:
        stem = Path(word).stem
        if stem not in items:
            raise UsageError(f"the record lacks the item {word!r}")
        return item_from(parse_tree(items[stem], f"{place}: {stem}"), stem)

    return plan_from(
        parse_tree(texts["plan"], f"{place}: plan"),
        data["plan"],
        item_named,
        lambda word: parse_tree(texts["slips"], f"{place}: slips"),
    )
