"""*decide*: which of two (or which electron), with the reason."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Literal

from pydantic import Field

from authoring.faults import ContentError
from authoring.shielding.quantity import PointRule, Target, Value, quantity
from authoring.shielding.solve import Step, work
from authoring.tasks.calculate import answer_of
from authoring.tasks.fields import TargetFields, Word, Words
from authoring.tasks.points import MAIN, Candidate, pointed
from authoring.tasks.setting import Setting, target_of
from authoring.tasks.several import COMPARISON, Things, closing, comparison, rising, things, values_of, worked
from authoring.tasks.slipped import misjudged
from authoring.tasks.solved import Answer, Solved, Wrong
from authoring.tasks.task import Task
from authoring.tasks.wording import asked, electron_words, space_for, species_words, worded


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
    if not steps:
        raise ContentError(f"an earlier part already gives {what.name} of {target.about}; ask for something new")
    answer = answer_of(steps[-1], what)

    def judge(values: Mapping[Target, Value]) -> str | None:
        return getattr(values[target], "label", None)

    return Solved(
        task="decide",
        quantity=what.name,
        targets=(target,),
        ask=worded(part, setting.turn, asked(what.ask, target)),
        steps=steps,
        answer=answer,
        points=pointed(steps, part.marks, part.scheme, default=len(what.points), main=(target,)),
        space=space_for(steps) if part.space is None else part.space,
        wrong=misjudged({target: answer.value}, judge, setting),
        notes=part.notes,
    )


def _between(part: Decide, setting: Setting) -> Solved:
    compared = things(part.decide, part.between, part, setting, "between")
    if len(compared.targets) != 2:
        raise ContentError(f"`between` takes two names, not {len(compared.targets)}")
    values = values_of(compared, setting)
    order = rising(compared, values)
    chosen = order[1] if part.which == "larger" else order[0]
    text, node = compared.label(chosen), compared.node(chosen)
    steps = worked(compared, setting)
    steps.append(closing(COMPARISON, chosen, comparison(compared, order, values, node), compared.value(chosen), text))
    last = len(steps) - 1
    extra = [
        Candidate(last, PointRule("B", "the right choice", "choice", 2 * MAIN)),
        Candidate(last, PointRule("M", f"the reason: {compared.what.name} compared", "reason", 2 * MAIN - 1, True)),
    ]
    return Solved(
        task="decide",
        quantity=compared.what.name,
        targets=compared.targets,
        ask=worded(part, setting.turn, _wording(compared, part.which)),
        steps=tuple(steps),
        answer=Answer("electron" if compared.by_electron else "species", text, node, compared.value(chosen)),
        points=pointed(steps, part.marks, part.scheme, extra, _default_marks(compared, steps), compared.targets),
        space=space_for(tuple(steps)) if part.space is None else part.space,
        wrong=_wrong(compared, part.which, values, setting),
        notes=part.notes,
    )


def _default_marks(compared: Things, steps: list[Step]) -> int:
    """The choice, the reason, and each value that is worked out here."""
    return 2 + len({step.target for step in steps} & set(compared.targets))


def _wrong(compared: Things, which: str, right: Mapping[Target, Value], setting: Setting) -> tuple[Wrong, ...]:
    def judge(values: Mapping[Target, Value]) -> str | None:
        try:
            order = rising(compared, values)
        except ContentError:
            return None
        return compared.label(order[1] if which == "larger" else order[0])

    return misjudged(right, judge, setting)


def _wording(compared: Things, which: str) -> str:
    one, other = compared.targets
    if compared.by_electron:
        pair = f"{electron_words(one.electron)} or {electron_words(other.electron)} of {species_words(one.species)}"
    else:
        pair = f"{species_words(one.species)} or {species_words(other.species)}"
        if "electron" in compared.what.takes:
            pair += f" (for {electron_words(one.electron)} of each)"
    return f"Decide which has the {which} {compared.measure}: {pair}. Give the reason."


TASK = Task(
    name="decide",
    says="say which of two, or which electron, and give the reason",
    fields=Decide,
    solve=solve,
    example="- decide: first electron lost\n  of: V\n  marks: 2\n",
)
