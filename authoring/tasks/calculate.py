"""*calculate*: work out a quantity and give its value."""

from __future__ import annotations

import itertools
from collections.abc import Sequence

from pydantic import Field

from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantity import Quantity, Target, quantity
from authoring.shielding.solve import Step, evaluate_into, work
from authoring.slips.catalogue import Slip, applied
from authoring.slips.outcomes import Known, as_known, outcomes, printed
from authoring.tasks.fields import TargetFields, Word
from authoring.tasks.points import marks_left, pointed
from authoring.tasks.setting import Setting, rounding_of, rounding_words, target_of
from authoring.tasks.solved import Answer, Solved, Wrong
from authoring.tasks.task import Task
from authoring.tasks.wording import asked, space_for
from authoring.working.lines import Line, Point
from authoring.working.nodes import Chain, Measured, Node, Num
from authoring.working.numbers import Rounding


class Calculate(TargetFields):
    """`calculate: screening constant`, with `of`, `electron` and how the answer is given."""

    calculate: Word = Field(description="the quantity")


def answer_of(step: Step, what: Quantity) -> Answer:
    """The answer that a final step states."""
    line = step.line
    if not what.numeric:
        kind = what.name if what.name in ("configuration", "groups", "tally") else "electron"
        return Answer(kind, line.shown, final_node(line), line.value, line.unit)  # type: ignore[arg-type]
    node: Node = Num(line.shown)
    return Answer("number", line.shown, Measured(node, line.unit) if line.unit else node, line.value, line.unit)


def final_node(line: Line) -> Node:
    """The last member of a line's chain."""
    chain: Chain = line.chain
    return chain.rest[-1][1] if chain.rest else chain.first


def wrong_answers(
    target: Target, setting: Setting, rounding: Rounding, steps: Sequence[Step], points: Sequence[Point]
) -> tuple[Wrong, ...]:
    """What single slips lead to from the same earlier values, distinct from the right answer, likeliest first."""
    known = as_known(setting.known)
    found = outcomes(target, setting.practice, known, setting.slips, 1)
    return tuple(
        Wrong(
            tuple(slip.name for slip in each.slips),
            printed(target, each.answer, setting.practice, known, rounding),
            marks_left(points, _altered(each.slips, steps, setting.practice, known)),
        )
        for each in found
    )


def _altered(slips: Sequence[Slip], steps: Sequence[Step], practice: Practice, known: Known) -> set[int]:
    """The lines that slips alter first; what follows from them is right on its own values."""
    first = frozenset[str]().union(*(slip.first for slip in slips))
    lines = {at for at, step in enumerate(steps) if step.target.quantity in first}
    if lines:
        return lines
    # What they alter first was worked out in an earlier part: the first line here that comes out otherwise.
    under, had = applied(slips, practice), dict(known)
    changed = (at for at, step in enumerate(steps) if evaluate_into(had, step.target, under) != step.line.value)
    return set(itertools.islice(changed, 1))


def solve(part: Calculate, setting: Setting) -> Solved:
    """The chain to the quantity, from what earlier parts of the item already worked out."""
    target = target_of(part.calculate, part, setting)
    what = quantity(target.quantity)
    rounding = rounding_of(what, part, setting)
    steps = work(target, setting.practice, setting.known, rounding)
    if not steps:
        raise ContentError(f"an earlier part already gives {what.name} of {target.about}; ask for something new")
    wording = part.ask[setting.turn % len(part.ask)] if part.ask else asked(what.ask, target)
    if steps[-1].line.rounded and not part.ask:
        wording += f" Give your answer {rounding_words(rounding)}."
    points = pointed(steps, part.marks, part.scheme, main=(target,))
    return Solved(
        task="calculate",
        quantity=what.name,
        targets=(target,),
        ask=wording,
        steps=steps,
        answer=answer_of(steps[-1], what),
        points=points,
        space=space_for(steps) if part.space is None else part.space,
        wrong=wrong_answers(target, setting, rounding, steps, points) if what.numeric else (),
        notes=part.notes,
    )


TASK = Task(
    name="calculate",
    says="work out a quantity and give its value, with the working",
    fields=Calculate,
    solve=solve,
    example="- calculate: screening constant\n  of: V\n  electron: 4s\n  marks: 3\n",
    rounds=True,
)
