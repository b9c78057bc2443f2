"""*decide*: which of two (or which electron), with the reason."""

from __future__ import annotations

from decimal import Decimal
from typing import Literal

from pydantic import Field

from authoring.faults import ContentError
from authoring.shielding.quantity import PointRule, Target, quantity
from authoring.shielding.solve import Step, work
from authoring.tasks.calculate import answer_of
from authoring.tasks.fields import TargetFields, Word, Words
from authoring.tasks.points import Candidate, pointed
from authoring.tasks.setting import Setting, electron_named, rounding_of, species_named, target_of
from authoring.tasks.solved import Answer, Solved
from authoring.tasks.task import Task
from authoring.tasks.wording import asked, electron_words, space_for, species_words
from authoring.working.lines import Line
from authoring.working.nodes import Chain, Function, Node, Occupied

# The name of a closing line that compares values already worked; it is no quantity.
COMPARISON = "comparison"


class Decide(TargetFields):
    """`decide: first electron lost`, or `decide: effective nuclear charge` with `between` two things."""

    decide: Word = Field(description="the quantity that decides")
    between: Words = Field((), description="two species, or two electrons of the species under `of`")
    which: Literal["larger", "smaller"] = Field("larger", description="which of the two is asked for")


def solve(part: Decide, setting: Setting) -> Solved:
    """A decision read off one quantity, or off the same quantity of two things."""
    what = quantity(part.decide)
    if part.between:
        return _between(part, setting)
    if what.numeric:
        raise ContentError(f"deciding by {what.name} needs two things: say `between: [a, b]`")
    target = target_of(part.decide, part, setting)
    steps = work(target, setting.practice, setting.known)
    return _solved(part, setting, (target,), steps, answer_of(steps[-1], what), asked(what.ask, target))


def compared(part: Decide, setting: Setting) -> tuple[Target, Target]:
    """The two targets of a comparison: two species, or two electrons of one."""
    if len(part.between) != 2:
        raise ContentError(f"`between` takes two names, not {len(part.between)}")
    what = quantity(part.decide)
    if part.of is not None:
        species = species_named(part.of, setting)
        first, second = (electron_named(word, setting) for word in part.between)
        pair = (Target(what.name, species, first), Target(what.name, species, second))
    else:
        electron = electron_named(part.electron, setting) if part.electron else None
        if "electron" not in what.takes and part.electron:
            raise ContentError(f"{what.name} is not a quantity of an electron; leave `electron` out")
        one, two = (species_named(word, setting) for word in part.between)
        pair = (Target(what.name, one, electron), Target(what.name, two, electron))
    if pair[0] == pair[1]:
        raise ContentError(f"`between` names the same thing twice: {pair[0].about}")
    return pair


def thing(target: Target, by_electron: bool) -> str:
    """What is chosen, in item Markdown."""
    return electron_words(target.electron) if by_electron else species_words(target.species)


def thing_node(target: Target, by_electron: bool) -> Node:
    """What is chosen, as a node."""
    if by_electron and target.electron is not None:
        return Occupied((target.electron.label,))
    return target.species.node()


def _between(part: Decide, setting: Setting) -> Solved:
    pair = compared(part, setting)
    what = quantity(pair[0].quantity)
    rounding = rounding_of(what, part, setting)
    known = setting.known
    steps: list[Step] = []
    for target in pair:
        new = work(target, setting.practice, known, rounding)
        known.update({step.target: step.line.value for step in new})
        steps += new
    left, right = (known[target] for target in pair)
    if not isinstance(left, Decimal) or left == right:
        raise ContentError(f"{what.name} does not decide between {pair[0].about} and {pair[1].about}: they are equal")
    by_electron = part.of is not None
    at = int((left < right) == (part.which == "larger"))
    chosen = pair[at]
    low, high = sorted(pair, key=lambda target: known[target])
    comparison = Chain(
        Function(what.symbol, thing_node(low, by_electron)),
        (("<", Function(what.symbol, thing_node(high, by_electron))), ("→", thing_node(chosen, by_electron))),
    )
    shown = chosen.electron.label if by_electron and chosen.electron else chosen.species.label
    line = Line(COMPARISON, chosen.about, comparison, shown, shown)
    steps.append(Step(Target(COMPARISON, chosen.species, chosen.electron), line))
    value = chosen.electron if by_electron else chosen.species
    answer = Answer("electron" if by_electron else "species", shown, thing_node(chosen, by_electron), value)
    words = f"Decide which has the {part.which} {what.name}: {thing(pair[0], by_electron)} or {thing(pair[1], by_electron)}"
    if by_electron:
        words += f" of {species_words(pair[0].species)}"
    elif part.electron and "electron" in what.takes:
        words += f" (for {electron_words(pair[0].electron)} of each)"
    return _solved(part, setting, pair, tuple(steps), answer, words + ". Give the reason.")


def _solved(
    part: Decide,
    setting: Setting,
    targets: tuple[Target, ...],
    steps: tuple[Step, ...],
    answer: Answer,
    wording: str,
) -> Solved:
    what = quantity(targets[0].quantity)
    last = len(steps) - 1
    extra = []
    if len(targets) > 1:
        extra = [
            Candidate(last, PointRule("B", "the right choice", "choice", 120)),
            Candidate(last, PointRule("M", f"the reason: {what.name} compared", "reason", 115, True)),
        ]
    return Solved(
        task="decide",
        quantity=what.name,
        targets=targets,
        ask=part.ask[setting.turn % len(part.ask)] if part.ask else wording,
        steps=steps,
        answer=answer,
        points=pointed(steps, part.marks, part.scheme, extra),
        space=space_for(steps) if part.space is None else part.space,
        notes=part.notes,
    )


TASK = Task(
    name="decide",
    says="say which of two, or which electron, and give the reason",
    fields=Decide,
    solve=solve,
    example="- decide: first electron lost\n  of: V\n  marks: 2\n",
)
