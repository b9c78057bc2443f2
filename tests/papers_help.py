"""Help for the tests of papers: items and plans from their YAML text."""

from __future__ import annotations

from decimal import Decimal
from pathlib import Path

from authoring.papers.assemble import PaperSet, assembled
from authoring.papers.pools import pool
from authoring.papers.questions import Question, Terms, question
from authoring.papers.record_file import RECORD, written
from authoring.papers.variants import Pool, enumerated
from authoring.papers.views import value_text
from authoring.shielding.practice import published
from authoring.slips.catalogue import shipped
from authoring.specs.draws import draw_model
from authoring.specs.item import Item, item_from
from authoring.specs.plan import Plan, plan_from, read_plan
from authoring.specs.yaml_tree import parse_tree

TERMS = Terms(published(), shipped(), new=True)

TANK = """item: The evening tank
level: first-year
draw:
  metal: {block: d, period: 4, except: [Cr, Cu, Zn]}
  outer: {electron of: metal, shell: outermost}
story: |
  A paper exercise about dissolved {{ metal.name }}.
parts:
  - calculate: screening constant
    of: metal
    electron: outer
  - calculate: effective nuclear charge
"""


def read(text: str, name: str = "tank") -> Item:
    """An item from its text."""
    return item_from(parse_tree(text, f"{name}.yaml"), name, new=True)


def variants(text: str) -> Pool:
    """The variants of an item under the published practice."""
    return enumerated(read(text), published())


def drawn(spec: object, **bindings: object) -> list[str]:
    """What a draw allows, as the record writes it."""
    shaped = {"among": spec} if isinstance(spec, list) else spec
    draw = draw_model(shaped).model_validate(shaped)
    return [value_text(value) for value in pool(draw, bindings, published())]


def questions(text: str) -> list[Question]:
    """Every variant of an item, solved."""
    return [question(variant, TERMS) for variant in variants(text).variants]


def plan(items: dict[str, str], more: str = "") -> Plan:
    """A plan of items given by name and text; `more` are further lines of the plan."""
    listed = "\n".join(f"  - {name}" for name in items)
    tree = parse_tree(f"plan: A test\nitems:\n{listed}\n{more}", "plan.yaml")
    return plan_from(tree, "plan", lambda word: read(items[word], word), lambda word: parse_tree("", word))


def number(text: str) -> Decimal:
    """A printed number."""
    return Decimal(text.replace("−", "-"))


def write_item(folder: Path, text: str, name: str = "tank") -> Path:
    """An item as a file."""
    path = folder / f"{name}.yaml"
    path.write_text(text, encoding="utf-8")
    return path


def write_set(folder: Path, item: str, copies: int) -> PaperSet:
    """A set of an item's papers in a folder: its files and its record, nothing printed."""
    (folder / "tank.yaml").write_text(item, encoding="utf-8")
    (folder / "plan.yaml").write_text("plan: Tank\nitems: [tank.yaml]\n", encoding="utf-8")
    plan = read_plan(folder / "plan.yaml")
    made = assembled(plan, Terms(plan.practice, plan.slips), "seed", [None] * copies, allow_repeats=True)
    (folder / RECORD).write_text(written(made), encoding="utf-8")
    return made
