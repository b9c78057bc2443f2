"""Stage 1, read: a plan file becomes a `Plan`: the items of a paper, its conventions and its layout."""

from __future__ import annotations

import functools
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from pathlib import Path
from typing import Annotated, Any, Literal

from pydantic import Field

from authoring.faults import ContentError, Fault, FaultsFound, Source, UsageError, suggestion
from authoring.shielding.practice import Practice, published, with_convention
from authoring.slips.catalogue import Slip, Slips, make_slip, shipped
from authoring.specs.item import Item, read_item
from authoring.specs.shipped import languages, located
from authoring.specs.validate import validated
from authoring.specs.yaml_tree import Tree, read_tree
from authoring.tasks.fields import Between, Strict, Text, Word, YesNo


class LayoutFields(Strict):
    """How the sheets are laid out."""

    paper: Literal["A4", "Letter"] = Field("A4", description="the paper size")
    type_size: Annotated[int, Between(10, 20)] = Field(11, alias="type", description="type size in pt, 10 to 20")
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
    figures: Annotated[int, Between(1, 8)] | None = Field(
        None, description="significant figures of energies and sizes"
    )
    layout: LayoutFields = Field(default_factory=lambda: LayoutFields.model_validate({}), description="page and type")
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
    """A plan, read. `fixed[i]` is what is held fixed of item i; `practice` the published one under the conventions."""

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
    slips: Slips
    slips_tree: Tree | None
    apart_from: str | None
    path: str
    tree: Tree = field(compare=False, repr=False)

    def at(self, *steps: str | int) -> Source:
        """The place of a value in the plan's file."""
        return self.tree.at(steps)


def read_plan(path: Path) -> Plan:
    """Read a plan and its items. Raises FaultsFound with everything wrong in any of them."""

    def slips_beside(word: str) -> Tree:
        return read_tree(path.parent / word)

    def item_beside(word: str) -> Item:
        return read_item(located(word, "items", path.parent))

    return plan_from(read_tree(path), path.stem, item_beside, slips_beside)


def plan_from(
    tree: Tree, name: str, item_named: Callable[[str], Item], slips_named: Callable[[str], Tree]
) -> Plan:
    """A plan from its tree; the two functions find its items and its file of slips. Raises FaultsFound."""
    faults: list[Fault] = []
    fields, found = validated(PlanFields, tree.data, tree)
    faults += found
    data = tree.data if isinstance(tree.data, dict) else {}
    practice = _practice(data.get("conventions"), tree, faults)
    entries = _entries(data.get("items"), tree, faults)
    items = _items(entries, item_named, tree, faults)
    slips_tree = _slips_tree(data.get("slips"), slips_named, tree, faults)
    slips = slips_from(slips_tree, faults) if slips_tree else shipped()
    if fields is not None and fields.language not in languages():
        message = f"no printed words in {fields.language[:40]!r}{suggestion(fields.language, languages())}"
        faults.append(Fault("no-language", message, tree.at(("language",))))
    if fields is None or faults:
        raise FaultsFound(faults)
    return Plan(
        name=name,
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
        slips=slips,
        slips_tree=slips_tree,
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


def _items(
    entries: list[PlanItem], item_named: Callable[[str], Item], tree: Tree, faults: list[Fault]
) -> list[Item]:
    items: list[Item] = []
    named = functools.cache(item_named)
    for at, entry in enumerate(entries):
        try:
            item = named(entry.item)
        except UsageError as error:
            faults.append(Fault("no-item", error.message, tree.at(("items", at))))
            continue
        except FaultsFound as error:
            faults += [fault for fault in error.faults if fault not in faults]
            continue
        faults += _check_fixed(item, entry, tree, at)
        items.append(item)
    return items


def _slips_tree(
    word: object, slips_named: Callable[[str], Tree], tree: Tree, faults: list[Fault]
) -> Tree | None:
    if not isinstance(word, str) or not word:
        return None
    try:
        return slips_named(word)
    except UsageError as error:
        faults.append(Fault("no-slips", error.message, tree.at(("slips",))))
    except FaultsFound as error:
        faults += error.faults
    return None


def slips_from(tree: Tree, faults: list[Fault]) -> Slips:
    """The shipped slips with those of a course's file: name → did, tell, changes, likelihood, source."""
    made: list[Slip] = []
    data = tree.data if isinstance(tree.data, dict) else {}
    if not data:
        faults.append(Fault("slips", "a file of slips has their names as keys", tree.at()))
    for name, fields in data.items():
        try:
            slip = make_slip(name, fields if isinstance(fields, dict) else {})
            shipped().with_more([*made, slip])
            made.append(slip)
        except ContentError as error:
            faults.append(Fault.from_error("slip", error, tree.key_at((name,))))
    return shipped().with_more(made)


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
