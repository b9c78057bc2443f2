"""*rank*: put species or electrons in the order of a quantity."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Literal

from pydantic import Field

from authoring.faults import ContentError
from authoring.shielding.quantity import PointRule, Target, Value
from authoring.tasks.fields import TargetFields, Word, Words
from authoring.tasks.points import MAIN, Candidate, pointed
from authoring.tasks.setting import Setting
from authoring.tasks.several import COMPARISON, Things, closing, comparison, joined, rising, things, values_of, worked
from authoring.tasks.slipped import misjudged
from authoring.tasks.solved import Answer, Solved
from authoring.tasks.task import Task
from authoring.tasks.wording import space_for, worded
from authoring.working.nodes import Chain, Relation

FEWEST, MOST = 3, 6


class Rank(TargetFields):
    """`rank: effective nuclear charge` among species, or among electrons of the species under `of`."""

    rank: Word = Field(description="the quantity that orders them")
    among: Words = Field(description="3 to 6 species, or electrons of the species under `of`")
    order: Literal["increasing", "decreasing"] = Field("increasing", description="smallest or largest first")


def order_text(compared: Things, order: Sequence[Target], relation: Relation) -> str:
    """`Na < Mg < Al`."""
    return f" {relation} ".join(compared.label(target) for target in order)


def order_node(compared: Things, order: Sequence[Target], relation: Relation) -> Chain:
    """The same as a node."""
    first, *others = (compared.node(target) for target in order)
    return Chain(first, tuple((relation, each) for each in others))


def solve(part: Rank, setting: Setting) -> Solved:
    """The value of each, and the order they stand in."""
    compared = things(part.rank, part.among, part, setting)
    if not FEWEST <= len(compared.targets) <= MOST:
        raise ContentError(f"`among` takes {FEWEST} to {MOST} things to rank, not {len(compared.targets)}")
    values = values_of(compared, setting)
    up = part.order == "increasing"
    order = rising(compared, values)[:: 1 if up else -1]
    relation: Relation = "<" if up else ">"
    text, node = order_text(compared, order, relation), order_node(compared, order, relation)
    steps = worked(compared, setting)
    valued = len({step.target for step in steps} & set(compared.targets))
    steps.append(closing(COMPARISON, order[0], comparison(compared, order, values, node), order, text))
    extra = [Candidate(len(steps) - 1, PointRule("A", "the order, as the values say", "choice", 2 * MAIN, True))]
    return Solved(
        task="rank",
        quantity=compared.what.name,
        targets=compared.targets,
        ask=worded(part, setting.turn, _wording(compared, part.order)),
        steps=tuple(steps),
        answer=Answer("order", text, node, tuple(compared.value(target) for target in order)),
        points=pointed(steps, part.marks, part.scheme, extra, valued + 1, compared.targets),
        space=space_for(tuple(steps)) if part.space is None else part.space,
        wrong=misjudged(values, lambda found: _judged(compared, found, relation), setting),
        notes=part.notes,
    )


def _judged(compared: Things, values: Mapping[Target, Value], relation: Relation) -> str | None:
    try:
        order = rising(compared, values)
    except ContentError:
        return None
    return order_text(compared, order if relation == "<" else order[::-1], relation)


def _wording(compared: Things, order: str) -> str:
    names = joined([compared.words(target) for target in compared.targets])
    if compared.by_electron:
        which = f"the {names} electrons{compared.of_each()}"
        return f"Rank {which} in order of {order} {compared.measure}. Show your working."
    where = f"{compared.of_each().removesuffix(',')}"
    return f"Rank {names} in order of {order} {compared.measure}{where}. Show your working."


TASK = Task(
    name="rank",
    says="put three to six species or electrons in the order of a quantity",
    fields=Rank,
    solve=solve,
    example=(
        "- rank: effective nuclear charge\n  among: [Na, Mg, Al, Si]\n  electron: outermost\n"
        "  order: increasing\n  marks: 3\n"
    ),
)
