"""Stage 3, solve and vet: a variant becomes a question: its story, its tables, and its parts with their working."""

from __future__ import annotations

import string
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache, partial
from typing import Any, TypeVar

from pydantic import BaseModel, ValidationError

from authoring.atoms.species import Species
from authoring.faults import ContentError, Fault, FaultsFound, Source
from authoring.papers.exhibits import chart_shown, table_of
from authoring.papers.pools import pool
from authoring.papers.variants import Variant
from authoring.papers.views import value_text, view
from authoring.shielding.practice import Practice
from authoring.slips.catalogue import Slips
from authoring.specs.drawn_names import ROUNDING
from authoring.specs.draws import rests_on
from authoring.specs.item import Alternative, FigureFields, Item, Part, alternatives, texts_in
from authoring.specs.item import parts_of as parts_of
from authoring.specs.prose import ProseFault, read_prose
from authoring.specs.template import Template
from authoring.specs.template_expressions import TemplateFault
from authoring.tasks.apart import told_apart
from authoring.tasks.setting import Setting, rounding_said
from authoring.tasks.solved import Chart, Solved
from authoring.working.nodes import Prose, TableBlock

LETTERS = string.ascii_lowercase
ROMAN = ("i", "ii", "iii", "iv", "v", "vi")
Steps = tuple[str | int, ...]
_Fields = TypeVar("_Fields", bound=BaseModel)
_Made = TypeVar("_Made")


@dataclass(frozen=True, slots=True)
class PartAsked:
    """One part on the page: its label (`a`), its wording as prose, what was solved, and notes to markers.

    Where the candidate chooses, `choices` holds the alternatives (labelled `i`, `ii`) and `solved` is the first's.
    """

    label: str
    ask: Prose
    solved: Solved
    notes: tuple[Prose, ...]
    choices: tuple[PartAsked, ...] = ()

    @property
    def marks(self) -> int:
        """The marks of the part."""
        return self.solved.marks


@dataclass(frozen=True, slots=True)
class Question:
    """A variant, ready for the press and the judge."""

    variant: Variant
    title: str
    story: Prose
    caution: Prose
    notes: tuple[Prose, ...]
    tables: tuple[TableBlock, ...]
    figure: Chart | None
    figure_caption: Prose
    parts: tuple[PartAsked, ...]

    @property
    def marks(self) -> int:
        """The marks of all parts."""
        return sum(part.marks for part in self.parts)


@dataclass(frozen=True, slots=True)
class Terms:
    """What a plan asks of every question: the practice, figures, the slips that are known.

    `new`: questions are written now and not made again from a record, so that what older records may hold is a fault.
    """

    practice: Practice
    slips: Slips
    figures: int | None = None
    new: bool = False


class Kept:
    """Parts solved under the same terms, by the drawn values that they rest on: variants share most of them."""

    def __init__(self) -> None:
        self.parts: dict[tuple[object, ...], PartAsked] = {}
        self._names: dict[int, frozenset[str]] = {}

    def names(self, part: Part, item: Item) -> frozenset[str]:
        """The draws that a part may rest on: those that its texts or templates name, and what these rest on."""
        if id(part) not in self._names:
            pieces = {piece.strip() for _, text in texts_in(part.raw) for piece in (text, *text.split(","))}
            pieces.update(name for _, template in part.templates for name in template.names)
            # A draw rests on draws before it only, so one way back finds them all.
            for name, draw in reversed(list(item.draws.items())):
                if name in pieces:
                    pieces.update(rests_on(draw))
            self._names[id(part)] = frozenset(pieces & set(item.draws))
        return self._names[id(part)]


def question(variant: Variant, terms: Terms, turn: int = 0, kept: Kept | None = None) -> Question:
    """Solve a variant. Raises FaultsFound with every fault of it, each at its place in the item's file.

    `kept` is filled and used by calls with the same terms and items.
    """
    maker = _Maker(variant, terms, turn, kept or Kept())
    made = maker.question()
    if maker.faults:
        raise FaultsFound(maker.faults)
    return made


@lru_cache(maxsize=16384)
def prose_of(text: str) -> tuple[Prose, tuple[ProseFault, ...]]:
    """Item text as prose; texts repeat over papers."""
    return read_prose(text)


class _Maker:
    """Builds one question and gathers its faults."""

    def __init__(self, variant: Variant, terms: Terms, turn: int, kept: Kept) -> None:
        self.kept = kept
        self.names: frozenset[str] = frozenset()
        self.item: Item = variant.item
        self.variant = variant
        self.terms = terms
        self.turn = turn
        self.faults: list[Fault] = []
        self.seen: Mapping[str, object] = {name: view(value, terms.practice) for name, value in variant.values}

    def question(self) -> Question:
        bindings, terms = self.variant.bindings, self.terms
        named = frozenset[str]().union(*(self.kept.names(part, self.item) for part in parts_of(self.item)))
        pools = {name: pool(draw, bindings, terms.practice) for name, draw in self.item.draws.items() if name in named}
        setting = Setting(terms.practice, bindings, (), self.turn, terms.figures, terms.slips, pools, terms.new)
        figure = self.figure()
        return Question(
            variant=self.variant,
            title=self.item.title,
            story=self.prose(self.item.story, "story"),
            caution=self.prose(self.item.caution, "caution"),
            notes=tuple(self.prose(text, "notes", at) for at, text in enumerate(self.item.notes)),
            tables=self.tables(setting),
            figure=self.attempt(lambda: chart_shown(figure, setting), "figure") if figure else None,
            figure_caption=self.plain(figure.caption, "figure", "caption") if figure else (),
            parts=self.parts(setting),
        )

    def tables(self, setting: Setting) -> tuple[TableBlock, ...]:
        """The tables of the item, those that can be made."""
        made = []
        for at, table in enumerate(self.item.given):
            steps = ("given", at)
            filled = self.attempt(partial(self.exhibit, table, steps), *steps)
            made.append(self.attempt(partial(table_of, filled, setting), *steps) if filled else None)
        return tuple(table for table in made if table is not None)

    def figure(self) -> FigureFields | None:
        """The fields of the item's chart for this variant."""
        figure = self.item.figure
        return self.attempt(lambda: self.exhibit(figure, ("figure",)), "figure") if figure else None

    def exhibit(self, fields: _Fields, steps: Steps) -> _Fields:
        """A table or chart with the texts that hold templates rendered for this variant."""
        templates = self.templates_below(steps)
        if not templates:
            return fields
        return _filled(type(fields), self.data_at(steps), [(at, each.render(self.seen)) for at, each in templates])

    def templates_below(self, steps: Steps) -> list[tuple[Steps, Template]]:
        """The templates of a table or chart, at their steps from its own."""
        return [(at[len(steps) :], each) for at, each in self.item.exhibit_templates if at[: len(steps)] == steps]

    def data_at(self, steps: Steps) -> Any:
        """A piece of the item as written."""
        data: Any = self.item.tree.data
        for step in steps:
            data = data[step]
        return data

    def place(self, word: str, steps: Steps, templates: Sequence[tuple[Steps, Template]]) -> Source:
        """Where a word is the whole of a text in the piece of the item at `steps`; else the place of the piece."""
        texts = dict(texts_in(self.data_at(steps)))
        ready = set(self.seen)
        texts.update((at, each.render(self.seen)) for at, each in templates if each.names <= ready)
        found = next((at for at, text in texts.items() if word and text.strip() == word.strip()), ())
        return self.item.at(*steps, *found)

    def attempt(self, make: Callable[[], _Made], *steps: str | int) -> _Made | None:
        """What is made, or None and a fault at the steps."""
        try:
            return make()
        except TemplateFault as error:
            self.faults.append(Fault("template", error.full_message + self.where, self.item.at(*steps)))
            return None
        except ContentError as error:
            place = self.place(error.word, steps, self.templates_below(steps))
            self.faults.append(Fault("unsolvable", error.full_message + self.where, place))
            return None

    @property
    def where(self) -> str:
        """The variant, for a message."""
        words = ", ".join(f"{name} = {value_text(value)}" for name, value in self.variant.values)
        return f" (in the variant {words})" if words else ""

    def prose(self, template: Template, *steps: str | int) -> Prose:
        """A template of the item with its values in place, as prose."""
        try:
            text = template.render(self.seen)
        except TemplateFault as error:
            place = self.item.tree.block_line(steps, error.line - 1, error.column)
            self.faults.append(Fault("template", error.full_message + self.where, place))
            return ()
        return self.plain(text, *steps)

    def plain(self, text: str, *steps: str | int) -> Prose:
        """Item text as prose; faults in it stand at the template's own place."""
        made, faults = prose_of(text)
        for fault in faults:
            place = self.item.tree.block_line(steps, fault.line - 1, fault.column)
            self.faults.append(Fault("text", fault.message + self.where, place))
        return made

    def parts(self, setting: Setting) -> tuple[PartAsked, ...]:
        """The parts in order; a part sees what those before it worked out."""
        made: list[PartAsked] = []
        for label, part in zip(LETTERS, self.item.parts, strict=False):
            if isinstance(part, Alternative):
                asked = self.alternative(part, label, setting)
            else:
                asked = self.part(part, label, setting)
            if asked is None:
                break  # what follows would complain about what this part did not give
            made.append(asked)
            self.names = self.names.union(*(self.kept.names(each, self.item) for each in alternatives(part)))
            setting = replace(setting, earlier=(*setting.earlier, asked.solved))
        return tuple(made)

    def alternative(self, either: Alternative, label: str, setting: Setting) -> PartAsked | None:
        """The alternatives of a part: equal marks, each with its working."""
        choices = [self.part(part, roman, setting) for roman, part in zip(ROMAN, either.parts, strict=False)]
        solved = [choice for choice in choices if choice is not None]
        if len(solved) < len(either.parts):
            return None
        if len({choice.marks for choice in solved}) > 1:
            marks = ", ".join(str(choice.marks) for choice in solved)
            words = f"the alternatives give {marks} marks; they must be equal"
            self.faults.append(Fault("unequal", words, either.source))
        return PartAsked(label, (), solved[0].solved, (), tuple(solved))

    def part(self, part: Part, label: str, setting: Setting) -> PartAsked | None:
        """One part, solved: it rests on what it names and on what the parts before it name."""
        names = self.names | self.kept.names(part, self.item)
        key = (id(part), label, self.turn, *(value for name, value in self.variant.values if name in names))
        if key in self.kept.parts:
            return self.kept.parts[key]
        faults = len(self.faults)
        made = self.newly_solved(part, label, setting)
        if made is not None and len(self.faults) == faults:
            self.kept.parts[key] = made
        return made

    def newly_solved(self, part: Part, label: str, setting: Setting) -> PartAsked | None:
        """One part, worked out."""
        try:
            solved = part.task.solve(self.fields(part, setting), setting)
        except TemplateFault as error:
            self.faults.append(Fault("template", error.full_message + self.where, part.source))
            return None
        except ContentError as error:
            place = self.place(error.word, part.steps, part.templates)
            self.faults.append(Fault("unsolvable", error.full_message + self.where, place))
            return None
        had = setting.had
        return PartAsked(
            label,
            self.asked(solved.ask, part),
            replace(solved, steps=told_apart(solved.steps, had)),
            tuple(self.wording(note, part.source) for note in solved.notes),
        )

    def fields(self, part: Part, setting: Setting) -> Any:
        """The part's fields, with the texts that hold templates rendered for this variant.

        How the answer is rounded depends on the other fields, so the wordings that say it come last.
        """
        if not part.templates:
            return part.fields
        late = [each for each in part.templates if ROUNDING in each[1].names - set(self.seen)]
        texts = [(at, each.render(self.seen)) for at, each in part.templates if (at, each) not in late]
        fields: Any = _filled(part.task.fields, part.raw, texts)
        if not late:
            return fields
        said = rounding_said(getattr(fields, part.task.name), fields, setting)
        texts += [(at, each.render({**self.seen, ROUNDING: said})) for at, each in late]
        return _filled(part.task.fields, part.raw, texts)

    def asked(self, text: str, part: Part) -> Prose:
        """The wording of a part; faults in an item's own stand in it."""
        own = part.fields.ask
        return self.plain(text, *part.steps, "ask", self.turn % len(own)) if own else self.wording(text, part.source)

    def wording(self, text: str, place: Source) -> Prose:
        """A task's wording as prose; faults in it stand at the part."""
        made, faults = prose_of(text)
        self.faults += [Fault("text", fault.message + self.where, place) for fault in faults]
        return made


def _filled(model: type[_Fields], raw: Any, texts: Sequence[tuple[Steps, str]]) -> _Fields:
    """The fields read again, with the texts at their steps in place."""
    data = _copied(raw)
    for steps, text in texts:
        _put(data, steps, text)
    try:
        return model.model_validate(data)
    except ValidationError as error:
        raise ContentError(str(error.errors()[0]["msg"])) from error


def _copied(data: Any) -> Any:
    if isinstance(data, Mapping):
        return {key: _copied(value) for key, value in data.items()}
    return [_copied(value) for value in data] if isinstance(data, list) else data


def _put(data: Any, steps: tuple[str | int, ...], text: str) -> None:
    for step in steps[:-1]:
        data = data[step]
    data[steps[-1]] = text


def species_of(variant: Variant) -> tuple[Species, ...]:
    """The species that a variant draws."""
    return tuple(value for _, value in variant.values if isinstance(value, Species))


def wordings(item: Item) -> int:
    """How many wordings papers take turns with: the most that any part has."""
    return max((len(part.fields.ask) for part in parts_of(item)), default=1) or 1
