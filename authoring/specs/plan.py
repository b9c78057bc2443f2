"""Stage 1, read: a plan file becomes a `Plan`: the items of a paper, its conventions and its layout."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from pathlib import Path
from typing import Annotated, Any, Literal

from pydantic import BeforeValidator, Field

from authoring.faults import ContentError, Fault, FaultsFound, Source, UsageError
from authoring.shielding.practice import Practice, published, with_convention
from authoring.specs.item import Item, read_item
from authoring.specs.shipped import located
from authoring.specs.validate import validated
from authoring.specs.yaml_tree import Tree, read_tree
from authoring.tasks.fields import Strict, Text, Word, YesNo, read_whole

Sized = Annotated[int, BeforeValidator(read_whole)]


class LayoutFields(Strict):
    """How the sheets are laid out."""

    paper: Literal["A4", "Letter"] = Field("A4", description="the paper size")
    type_size: Annotated[Sized, Field(ge=10, le=20)] = Field(11, alias="type", description="type size in pt, 10 to 20")
    space: Literal["none", "narrow", "normal", "wide"] = Field("normal", description="room for answers")
    two_sided: YesNo = Field(False, alias="two-sided", description="each paper starts on a right-hand page")
    decimal: Literal["point", "comma"] = Field("point", description="the decimal mark")


class PlanItem(Strict):
    """An item of a plan with something fixed."""

    item: Word = Field(description="an item: a path beside the plan, or a shipped name")
    fix: dict[Word, Word] = Field(default_factory=dict, description="drawn variables held at one value")


class PlanFields(Strict):
    """The keys of a plan."""

    plan: Word = Field(description="the title printed on the sheets")
    course: Text = Field("", description="the course")
    date: Text = Field("", description="the date, as it is to be printed")
    time: Text = Field("", description="the time allowed")
    language: Word = Field("en", description="the language of the printed words")
    instructions: Text = Field("", description="instructions to candidates, in item text")
    items: tuple[Any, ...] = Field(min_length=1, max_length=60, description="the items, in order")
    conventions: dict[Word, Word] = Field(default_factory=dict, description="what the course does otherwise")
    figures: Annotated[Sized, Field(ge=1, le=8)] | None = Field(
        None, description="significant figures of energies and sizes"
    )
    layout: LayoutFields = Field(default_factory=LayoutFields, description="page and type")
    attach: tuple[Literal["constants", "periodic table"], ...] = Field(
        (), description="data printed after the questions"
    )
    slips: Word | None = Field(None, description="a file of the course's own slips, beside the plan")
    bare_values: Literal["full marks", "accuracy only"] = Field(
        "full marks", alias="bare values", description="what a right value without working earns"
    )
    apart_from: Word | None = Field(
        None, alias="apart from", description="a set.json whose variants are not used again"
    )


@dataclass(frozen=True, slots=True)
class Plan:
    """A plan, read: `fixed[i]` holds what is held fixed of item i; `practice` is the published one under the conventions."""

    name: str
    title: str
    course: str
    date: str
    time: str
    language: str
    instructions: str
    items: tuple[Item, ...]
    fixed: tuple[Mapping[str, str], ...]
    conventions: Mapping[str, str]
    practice: Practice
    figures: int | None
    layout: LayoutFields
    attach: tuple[str, ...]
    bare_values: str
    slips: str | None
    apart_from: str | None
    path: str
    tree: Tree = field(compare=False, repr=False)

    def at(self, *steps: str | int) -> Source:
        """The place of a value in the plan's file."""
        return self.tree.at(steps)


def read_plan(path: Path) -> Plan:
    """Read a plan and its items. Raises FaultsFound with everything wrong in any of them."""
    tree = read_tree(path)
    faults: list[Fault] = []
    fields, found = validated(PlanFields, tree.data, tree)
    faults += found
    data = tree.data if isinstance(tree.data, dict) else {}
    practice = _practice(data.get("conventions"), tree, faults)
    entries = _entries(data.get("items"), tree, faults)
    items = _items(entries, path.parent, tree, faults)
    if fields is None or faults:
        raise FaultsFound(faults)
    return Plan(
        name=path.stem,
        title=fields.plan,
        course=fields.course,
        date=fields.date,
        time=fields.time,
        language=fields.language,
        instructions=fields.instructions,
        items=tuple(items),
        fixed=tuple(entry.fix for entry in entries),
        conventions=fields.conventions,
        practice=practice,
        figures=fields.figures,
        layout=fields.layout,
        attach=fields.attach,
        bare_values=fields.bare_values,
        slips=fields.slips,
        apart_from=fields.apart_from,
        path=tree.path,
        tree=tree,
    )


def _practice(data: object, tree: Tree, faults: list[Fault]) -> Practice:
    practice = published()
    if not isinstance(data, dict):
        return practice
    for words, value in data.items():
        if not isinstance(value, str):
            continue
        try:
            practice = with_convention(practice, words, value)
        except ContentError as error:
            faults.append(Fault.from_error("convention", error, tree.key_at(("conventions", words))))
    return practice


def _entries(data: object, tree: Tree, faults: list[Fault]) -> list[PlanItem]:
    entries = []
    for at, spec in enumerate(data if isinstance(data, list) else []):
        shaped = {"item": spec} if isinstance(spec, str) else spec
        entry, found = validated(PlanItem, shaped, tree, ("items", at))
        faults += found
        if entry is not None:
            entries.append(entry)
    return entries


def _items(entries: list[PlanItem], beside: Path, tree: Tree, faults: list[Fault]) -> list[Item]:
    items: list[Item] = []
    read: dict[Path, Item] = {}
    for at, entry in enumerate(entries):
        place = tree.at(("items", at))
        try:
            path = located(entry.item, "items", beside)
            item = read[path] if path in read else read_item(path)
        except UsageError as error:
            faults.append(Fault("no-item", error.message, place))
            continue
        except FaultsFound as error:
            faults += error.faults
            continue
        read[path] = item
        faults += _check_fixed(item, entry, tree, at)
        items.append(item)
    return items


def _check_fixed(item: Item, entry: PlanItem, tree: Tree, at: int) -> list[Fault]:
    return [
        Fault.from_error(
            "undefined",
            ContentError(f"{item.name} draws no {name!r}", name, tuple(item.draws)),
            tree.key_at(("items", at, "fix", name)),
        )
        for name in entry.fix
        if name not in item.draws
    ]
