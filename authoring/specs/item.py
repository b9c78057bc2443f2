"""Stage 1, read: an item file becomes an `Item`; every fault in it is found in one reading."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any, Literal

from pydantic import Field

from authoring.faults import ContentError, Fault, FaultsFound, Source, suggestion
from authoring.specs.drawn_names import ROUNDING, Names
from authoring.specs.draws import TELLING, Draw, SpeciesDraw, draw_model, rests_on
from authoring.specs.template import Condition, Template, compile_condition, compile_text
from authoring.specs.template_expressions import TemplateFault
from authoring.specs.validate import keys_of, validated
from authoring.specs.yaml_tree import Tree, read_tree
from authoring.tasks.fields import PartFields, Several, Strict, Text, Word, Words
from authoring.tasks.task import Task, tasks

Steps = tuple[str | int, ...]
LEVELS = ("first-year", "majors", "inorganic")


class GivenTable(Strict):
    """Data printed with the question: of a quantity for some species, or typed in with its source."""

    caption: Text = Field("", description="what the table shows")
    quantity: Word | None = Field(None, description="a quantity, one column")
    of: Words = Field((), description="drawn species or species: one row each")
    electron: Word | None = Field(None, description="for a quantity of an electron")
    header: tuple[Text, ...] = Field((), description="column heads of a typed table")
    rows: tuple[tuple[Text, ...], ...] = Field((), description="rows of a typed table")
    source: Text = Field("", description="where typed data come from (required for them)")


class FigureFields(Strict):
    """A chart printed with the story."""

    chart: Word = Field(description="the quantity shown")
    of: Words = Field(description="species, drawn species, or ranges: the points in order")
    electron: Word | None = Field(None, description="for a quantity of an electron; left out: the outermost")
    electrons: Words = Field((), description="electrons of the one species under `of`, as the points")
    style: Literal["points", "levels"] = Field("points", description="points joined by lines, or energy levels")
    caption: Text = Field("", description="the words under the chart")


class ItemFields(Strict):
    """The keys of an item."""

    item: Word = Field(description="the title")
    level: Literal["first-year", "majors", "inorganic"] = Field(description="who it is for")
    topics: Words = Field((), description="topics, for reports and searches")
    draw: dict[Word, Any] = Field(default_factory=dict, description="variables by name")
    keep: Several = Field((), description="conditions that every variant meets")
    story: Text = Field(description="the setting, in item text")
    caution: Text = Field("", description="a caution printed with the story")
    given: tuple[GivenTable, ...] = Field((), description="tables printed with the question")
    figure: FigureFields | None = Field(None, description="a chart printed with the question")
    parts: tuple[Any, ...] = Field(min_length=1, max_length=20, description="the parts, in order")
    notes: Several = Field((), description="notes to markers about the whole item")


@dataclass(frozen=True, slots=True)
class Part:
    """One part as written, at `steps` of the file: its task, its fields, and the templates in them.

    `raw` is the part's data; where `templates` is not empty, the texts at those steps (from the part's own) are
    rendered per variant and the fields read again.
    """

    task: Task
    fields: PartFields
    raw: Mapping[str, Any]
    templates: tuple[tuple[Steps, Template], ...]
    source: Source = field(compare=False)
    steps: Steps = field(compare=False, default=())


@dataclass(frozen=True, slots=True)
class Alternative:
    """Parts of which the candidate answers one (`either`)."""

    parts: tuple[Part, ...]
    source: Source = field(compare=False)


@dataclass(frozen=True, slots=True)
class Item:
    """One question: its draws, conditions, story and parts; `name` is the file's stem.

    `exhibit_templates` are those in the texts of `given` and `figure`, at their steps from the file's top.
    """

    name: str
    title: str
    level: str
    topics: tuple[str, ...]
    draws: Mapping[str, Draw]
    keep: tuple[Condition, ...]
    story: Template
    caution: Template
    notes: tuple[Template, ...]
    given: tuple[GivenTable, ...]
    figure: FigureFields | None
    parts: tuple[Part | Alternative, ...]
    path: str
    tree: Tree = field(compare=False, repr=False)
    text: str = field(compare=False, repr=False, default="")
    exhibit_templates: tuple[tuple[Steps, Template], ...] = ()

    def at(self, *steps: str | int) -> Source:
        """The place of a value in the file."""
        return self.tree.at(steps)


def read_item(path: Path) -> Item:
    """Read an item file. Raises FaultsFound with everything that is wrong in it, UsageError if unreadable."""
    tree = read_tree(path)
    return item_from(tree, path.stem, new=True)


class _Reader:
    """Gathers the faults of one item."""

    def __init__(self, tree: Tree, new: bool) -> None:
        self.tree = tree
        self.new = new
        self.faults: list[Fault] = []
        self.broken: set[str] = set()  # draws with faults of their own: what rests on them is not complained about

    def fault(self, code: str, message: str, source: Source) -> None:
        self.faults.append(Fault(code, message, source))

    def template(self, text: str, *steps: str | int) -> Template:
        try:
            return compile_text(text)
        except TemplateFault as error:
            place = self.tree.block_line(steps, error.line - 1, error.column)
            self.faults.append(Fault.from_error("template", error, place))
            return compile_text("")

    def condition(self, text: str, *steps: str | int) -> Condition | None:
        try:
            return compile_condition(text)
        except ContentError as error:
            at = (error.line - 1, error.column) if isinstance(error, TemplateFault) else (0, 1)
            self.faults.append(Fault.from_error("condition", error, self.tree.block_line(steps, *at)))
            return None


def item_from(tree: Tree, name: str, new: bool = False) -> Item:
    """An item from its tree. Raises FaultsFound.

    `new`: it is not out of a record of a set, so that what sets were once made with is a fault all the same.
    """
    reader = _Reader(tree, new)
    fields, faults = validated(ItemFields, tree.data, tree)
    reader.faults += faults
    data = tree.data if isinstance(tree.data, dict) else {}
    draws = _draws(reader, data.get("draw"))
    parts = _parts(reader, data.get("parts"), frozenset(draws))
    if fields is None:
        raise FaultsFound(reader.faults)
    keep = [reader.condition(text, "keep", at) for at, text in enumerate(fields.keep)]
    item = Item(
        name=name,
        title=fields.item,
        level=fields.level,
        topics=fields.topics,
        draws=draws,
        keep=tuple(each for each in keep if each is not None),
        story=reader.template(fields.story, "story"),
        caution=reader.template(fields.caution, "caution"),
        notes=tuple(reader.template(text, "notes", at) for at, text in enumerate(fields.notes)),
        given=fields.given,
        figure=fields.figure,
        parts=parts,
        path=tree.path,
        tree=tree,
        exhibit_templates=_exhibit_templates(reader, data, draws),
    )
    _check_names(reader, item)
    _check_given(reader, item)
    if reader.faults:
        raise FaultsFound(reader.faults)
    return item


def _draws(reader: _Reader, data: object) -> dict[str, Draw]:
    found: dict[str, Draw] = {}
    if not isinstance(data, dict):
        return found
    for name, spec in data.items():
        place = reader.tree.key_at(("draw", name))
        if not name.isidentifier() or not name.islower() or not name.isascii():
            reader.fault("draw-name", f"{name[:40]!r}: name a variable with small letters, digits and _", place)
            continue
        shaped = {"among": spec} if isinstance(spec, list | str) and spec else spec
        mistaken = _mistaken_kind(shaped)
        if mistaken:
            words = f"no key {mistaken!r} here{suggestion(mistaken, tuple(TELLING))}"
            reader.fault("unknown-key", words, reader.tree.key_at(("draw", name, mistaken)))
            reader.broken.add(name)
            continue
        model = draw_model(shaped)
        draw, faults = validated(model, shaped, reader.tree, ("draw", name))
        reader.faults += faults
        if draw is None:
            reader.broken.add(name)
            continue
        if isinstance(draw, SpeciesDraw) and not (draw.among or draw.block or draw.period or draw.group):
            reader.fault("empty-pool", f"{name} is drawn from nothing; say among, block, period or group", place)
        for other in rests_on(draw):
            if other not in found and other not in reader.broken:
                hint = "; it is drawn later, so put it first" if other in data and other != name else ""
                reader.fault("undefined", f"{name} rests on {other!r}, which is not drawn before it{hint}", place)
        found[name] = draw
    return found


def _mistaken_kind(spec: object) -> str:
    """The key of a draw that is nearly one of those which tell its kind, or nothing."""
    if not isinstance(spec, dict) or draw_model(spec) is not SpeciesDraw:
        return ""
    known = keys_of(SpeciesDraw)
    return next((key for key in spec if key not in known and is_near(key, TELLING) and not is_near(key, known)), "")


def _parts(reader: _Reader, data: object, drawn: frozenset[str]) -> tuple[Part | Alternative, ...]:
    if not isinstance(data, list):
        return ()
    found: list[Part | Alternative] = []
    for at, spec in enumerate(data):
        steps: Steps = ("parts", at)
        if isinstance(spec, dict) and "either" in spec:
            either = _either(reader, spec, steps)
            found += [either] if either else []
        else:
            part = _part(reader, spec, steps)
            found += [part] if part else []
    return tuple(found)


def _either(reader: _Reader, spec: dict[str, Any], steps: Steps) -> Alternative | None:
    inner = spec["either"]
    if len(spec) != 1 or not isinstance(inner, list) or len(inner) < 2:
        reader.fault("wrong-value", "`either` is a list of two or more parts and stands alone", reader.tree.at(steps))
        return None
    parts = [_part(reader, each, (*steps, "either", at)) for at, each in enumerate(inner)]
    read = tuple(part for part in parts if part is not None)
    return Alternative(read, reader.tree.at(steps)) if len(read) == len(parts) else None


def _part(reader: _Reader, spec: object, steps: Steps) -> Part | None:
    source = reader.tree.at(steps)
    if not isinstance(spec, dict):
        reader.fault(
            "wrong-value", "a part is written as keys and values, such as `calculate: screening constant`", source
        )
        return None
    named = [key for key in spec if key in tasks()]
    if len(named) != 1:
        known = tuple(tasks())
        unknown = next((key for key in spec if is_near(key, known)), "")
        hint = suggestion(unknown, known) if unknown else "; its tasks: " + ", ".join(known)
        words = "a part has one task" if named else "this part has no task"
        reader.fault("no-task", f"{words}{hint}", source)
        return None
    task = tasks()[named[0]]
    fields, faults = validated(task.fields, spec, reader.tree, steps)
    reader.faults += faults
    templates = tuple(
        (inner, reader.template(text, *steps, *inner)) for inner, text in texts_in(spec) if "{{" in text or "{%" in text
    )
    return None if fields is None else Part(task, fields, spec, templates, source, steps)


def _exhibit_templates(
    reader: _Reader, data: Mapping[str, Any], draws: Mapping[str, Draw]
) -> tuple[tuple[Steps, Template], ...]:
    """The templates in the texts of tables and chart. Sets once had braces there as they stand; records keep them."""
    found = []
    for key in ("given", "figure"):
        for steps, text in texts_in(data.get(key), (key,)):
            if "{{" not in text and "{%" not in text:
                continue
            had = len(reader.faults)
            template = reader.template(text, *steps)
            if not reader.new and (len(reader.faults) > had or not template.names <= set(draws)):
                del reader.faults[had:]
                continue
            found.append((steps, template))
    return tuple(found)


def is_near(word: str, known: Iterable[str]) -> bool:
    """Whether a word is nearly one of those known."""
    return suggestion(word, tuple(known)).startswith("; did")


def texts_in(data: object, at: Steps = ()) -> Iterator[tuple[Steps, str]]:
    """Every text in a piece of a tree, with the steps to it."""
    if isinstance(data, str):
        yield at, data
    elif isinstance(data, dict):
        for key, value in data.items():
            yield from texts_in(value, (*at, key))
    elif isinstance(data, list | tuple):
        for index, value in enumerate(data):
            yield from texts_in(value, (*at, index))


def parts_of(item: Item) -> tuple[Part, ...]:
    """The parts of an item, alternatives among them."""
    return tuple(each for part in item.parts for each in alternatives(part))


def alternatives(part: Part | Alternative) -> tuple[Part, ...]:
    """The parts of which a candidate answers one; a part alone."""
    return part.parts if isinstance(part, Alternative) else (part,)


def _check_names(reader: _Reader, item: Item) -> None:
    """Every name used in a text or condition is drawn, and has what is asked of it."""
    names = Names(item.draws, reader.broken, reader.tree, reader.new)
    used: list[tuple[Template | Condition, Steps]] = [(item.story, ("story",)), (item.caution, ("caution",))]
    used += [(each, ("notes", at)) for at, each in enumerate(item.notes)]
    used += [(each, ("keep", at)) for at, each in enumerate(item.keep)]
    used += [(template, steps) for steps, template in item.exhibit_templates]
    for text, steps in used:
        reader.faults += names.faults(text, steps)
    for part in parts_of(item):
        for inner, template in part.templates:
            more = (ROUNDING,) if inner[0] == "ask" and part.task.rounds else ()
            reader.faults += names.faults(template, (*part.steps, *inner), more)


def _check_given(reader: _Reader, item: Item) -> None:
    for at, table in enumerate(item.given):
        place = reader.tree.at(("given", at))
        if (table.quantity is None) == (not table.rows):
            reader.fault("given", "a table has a `quantity` with `of`, or typed `rows`", place)
        if table.rows and not table.source:
            reader.fault("given", "typed data need a `source`", place)
        for row, cells in enumerate(table.rows):
            if len(cells) != len(table.header):
                words = f"cells: {len(cells)}, heads: {len(table.header)}; every row needs a cell for each head"
                reader.fault("given", words, reader.tree.at(("given", at, "rows", row)))
