"""`guide`: its topics. What the program's tables say is taken from them; only what they cannot say is written here."""

from __future__ import annotations

import textwrap
from collections.abc import Callable
from dataclasses import dataclass

from pydantic import BaseModel

from authoring.commands.guide_texts import ERRORS, FIRST_ITEM, ITEM_TEXT, JSON, MARKING, SCRIPTS, SETTING
from authoring.faults import ContentError
from authoring.shielding.practice import convention_fields, published
from authoring.shielding.quantity import quantities, quantity
from authoring.slips.catalogue import catalogue, shipped
from authoring.specs.drawn_names import HAS
from authoring.specs.draws import TELLING, SpeciesDraw
from authoring.specs.item import FigureFields, GivenTable, ItemFields
from authoring.specs.plan import LayoutFields, PlanFields, PlanItem
from authoring.specs.shipped import shipped_names
from authoring.tasks.fields import PartFields, SchemeEntry, TargetFields
from authoring.tasks.task import task, tasks
from authoring.working.text import to_text

WIDTH = 79


@dataclass(frozen=True, slots=True)
class Topic:
    """A topic: what it is about, its text, and (where it has entries) the text of one of them."""

    says: str
    text: Callable[[], str]
    entry: Callable[[str], str] | None = None


def topic(name: str, detail: str) -> str:
    """The text of a topic, or of one entry of it. Raises ContentError for an entry it does not have."""
    found = TOPICS[name]
    if not detail:
        return found.text()
    if found.entry is None:
        raise ContentError(f"the topic {name} has no entries; ask for it alone")
    return found.entry(detail)


def wrapped(text: str, indent: int = 0) -> str:
    """A paragraph within the terminal's width."""
    pad = " " * indent
    return textwrap.fill(text, WIDTH, initial_indent=pad, subsequent_indent=pad, break_on_hyphens=False)


def entries(rows: list[tuple[str, str]], indent: int = 2) -> str:
    """Names in a column, their descriptions beside them."""
    width = min(26, max((len(name) for name, _ in rows), default=0))
    pad = " " * (indent + width + 2)
    lines = []
    for name, says in rows:
        head = " " * indent + name.ljust(width) + "  "
        if len(name) > width:
            lines.append(" " * indent + name)
            head = pad
        lines.append(textwrap.fill(says, WIDTH, initial_indent=head, subsequent_indent=pad, break_on_hyphens=False))
    return "\n".join(lines)


def keys(model: type[BaseModel], without: type[BaseModel] | None = None) -> list[tuple[str, str]]:
    """The keys of a model with their descriptions; a mark says which must be there."""
    left_out = set(without.model_fields) if without else set()
    return [
        (field.alias or name, (field.description or "") + (" (needed)" if field.is_required() else ""))
        for name, field in model.model_fields.items()
        if name not in left_out
    ]


def quantities_text() -> str:
    """All quantities, a line each."""
    rows = [(each.name, each.says) for each in quantities().values()]
    return "Quantities (shieldwright guide quantity NAME):\n\n" + entries(rows)


def quantity_text(name: str) -> str:
    """One quantity."""
    what = quantity(name)
    points = [(rule.kind + (" ft" if rule.follow_through else ""), rule.what) for rule in what.points]
    rows = [
        ("symbol", to_text(what.symbol)),
        ("unit", what.unit or "none"),
        ("takes", ", ".join([*sorted(what.takes), *what.details]) or "a species"),
        ("also called", ", ".join(what.aliases) or "nothing else"),
        ("given", "to " + _rounding_words(what.rounding.places, what.rounding.figures) if what.numeric else "in words"),
        ("source", what.source),
    ]
    if what.units:
        rows.insert(2, ("units", ", ".join(what.units)))
    slips = ", ".join(slip.name for slip in shipped().touching(what.name)) or "none"
    return "\n".join(
        [
            wrapped(f"{what.name}: {what.says}"),
            "",
            entries(rows),
            "",
            "  Mark points of its line (ft: follow-through):",
            entries(points, 4),
            "",
            wrapped(f"Default wording: {what.ask}", 2),
            wrapped(f"Slips that touch it: {slips}", 2),
        ]
    )


def _rounding_words(places: int | None, figures: int | None) -> str:
    return f"{places} decimal places" if places is not None else f"{figures} significant figures"


def tasks_text() -> str:
    """All tasks, a line each, and what every part takes."""
    rows = [(each.name, each.says) for each in tasks().values()]
    return "\n".join(
        [
            "Tasks (shieldwright guide task NAME): a part is named by its command word.",
            "",
            entries(rows),
            "",
            "Every part takes:",
            entries(keys(PartFields)),
            "",
            "An entry of `scheme` has:",
            entries(keys(SchemeEntry)),
            "",
            wrapped("`either:` with a list of two or more parts lets the candidate answer one; their marks are equal."),
        ]
    )


def task_text(name: str) -> str:
    """One task: its own keys and an example."""
    found = task(name)
    base = TargetFields if issubclass(found.fields, TargetFields) else PartFields
    lines = [wrapped(f"{found.name}: {found.says}"), "", "  Its keys:", entries(keys(found.fields, base), 4)]
    if base is TargetFields:
        lines += ["", "  What says of which species, and how the answer is given:"]
        lines += [entries(keys(TargetFields, PartFields), 4)]
    lines += ["", "  Example:", textwrap.indent(found.example.rstrip(), "    ")]
    lines += ["", "  And what every part takes: shieldwright guide task"]
    return "\n".join(lines)


def slips_text() -> str:
    """All slips, with what the candidate did."""
    rows = [(slip.name, slip.did) for slip in catalogue().values()]
    return "Slips (shieldwright guide slip NAME): named misunderstandings.\n\n" + entries(rows)


def slip_text(name: str) -> str:
    """One slip."""
    slip = shipped().named(name)
    changes = ", ".join(f"{field} = {value}" for field, value in slip.changes)
    rows = [
        ("did", slip.did),
        ("tell", slip.tell),
        ("changes", changes),
        ("first alters", ", ".join(sorted(slip.first))),
        ("likelihood", f"{slip.likelihood} of 10 (an estimate)"),
        ("source", slip.source),
    ]
    return f"{slip.name}\n\n" + entries(rows)


def items_text() -> str:
    """The keys of an item, of its draws, tables and figure, and what texts see of a drawn value."""
    kinds: dict[type[BaseModel], str] = {SpeciesDraw: "species (no other key tells its kind)"}
    for key, model in TELLING.items():
        kinds.setdefault(model, f"with `{key}`")
    parts = [FIRST_ITEM, "Keys of an item:", entries(keys(ItemFields)), "", "`draw` binds names to what is drawn:"]
    for kind, told in kinds.items():
        summary = (kind.__doc__ or "").strip().splitlines()[0]
        parts += ["", wrapped(f"{told}: {summary}", 2), entries(keys(kind), 4)]
    parts += ["", "A table under `given`:", entries(keys(GivenTable)), "", "`figure`:", entries(keys(FigureFields))]
    species_has = ", ".join(HAS["species"])
    parts += ["", wrapped(f"In texts and conditions a drawn species has: {species_has}.")]
    parts += [wrapped("A drawn electron has: " + ", ".join(HAS["electron"]) + ".")]
    parts += ["", wrapped("Shipped items: " + ", ".join(shipped_names("items")) + ".")]
    return "\n".join(parts)


def plans_text() -> str:
    """The keys of a plan."""
    return "\n".join(
        [
            SETTING,
            "Keys of a plan:",
            entries(keys(PlanFields)),
            "",
            "An item with something fixed:",
            entries(keys(PlanItem)),
            "",
            "`layout`:",
            entries(keys(LayoutFields)),
            "",
            wrapped("Shipped plans: " + ", ".join(shipped_names("plans")) + "."),
        ]
    )


def conventions_text() -> str:
    """The words of conventions, their meaning and their published value."""
    standard = published()
    rows = []
    for words, field in convention_fields().items():
        value = getattr(standard, field.name)
        choices = field.metadata.get("choices")
        usual = "yes" if value is True else "no" if value is False else " ".join(map(str, value)) if isinstance(
            value, tuple
        ) else str(value)
        says = field.metadata["says"] + f" [{usual}]"
        rows.append((words, says + (f"; one of: {', '.join(choices)}" if choices else "")))
    rows.append(("n* for 7", "an effective quantum number that the published table lacks [none]"))
    head = "Conventions (a plan's `conventions:`; published value in brackets):\n\n"
    return head + entries(rows)


TOPICS = {
    "item": Topic("how an item is written: keys, draws, tables, figures", items_text),
    "text": Topic("stories and wordings: chemistry, formulas, {{ }}, filters", lambda: ITEM_TEXT),
    "task": Topic("what a part can ask", tasks_text, task_text),
    "quantity": Topic("what can be asked for, with sources and mark points", quantities_text, quantity_text),
    "slip": Topic("the named misunderstandings", slips_text, slip_text),
    "plan": Topic("how a plan is written, and how a set is made from it", plans_text),
    "convention": Topic("what a course may do otherwise", conventions_text),
    "script": Topic("how candidates' work is transcribed", lambda: SCRIPTS),
    "marking": Topic("how work is judged, and what the ledger keeps", lambda: MARKING),
    "json": Topic("the JSON of every command, and set.json", lambda: JSON),
    "errors": Topic("exit codes, and how faults are shown", lambda: ERRORS),
}
