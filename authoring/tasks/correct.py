"""*correct*: find the first wrong line of a flawed working and put it right."""

from __future__ import annotations

import contextlib
from dataclasses import dataclass

from pydantic import Field

from authoring.faults import ContentError
from authoring.shielding.quantities.configuration import configuration_of
from authoring.shielding.quantity import PointRule, Target, quantity
from authoring.shielding.solve import Step, work
from authoring.slips.catalogue import Slip
from authoring.tasks.calculate import answer_of
from authoring.tasks.fields import TargetFields, Word
from authoring.tasks.points import Candidate, chosen
from authoring.tasks.setting import Setting, rounding_of, rounding_words, target_of
from authoring.tasks.several import FIRST_WRONG, closing, scattered
from authoring.tasks.slipped import practice_with, steps_under, values_under
from authoring.tasks.solved import Answer, ShownWorking, Solved, Wrong
from authoring.tasks.task import Task
from authoring.tasks.wording import noun, space_for, worded
from authoring.working.nodes import Chain, Num, Row, Words
from authoring.working.numbers import Rounding

# The likeliest faults only: a paper does not print what hardly anybody does.
LIKELY = 6


class Correct(TargetFields):
    """`correct: effective nuclear charge`: a working with one slip in it is printed."""

    correct: Word = Field(description="the quantity that the flawed working leads to")
    slip: Word | None = Field(
        None,
        description="the slip in the working; left out: one that the variant settles. Whoever has it must still "
        "find an electron in the subshell that is asked about",
    )


@dataclass(frozen=True, slots=True)
class Flawed:
    """A working with one slip in it, and the index of its first wrong line."""

    slip: Slip
    steps: tuple[Step, ...]
    at: int


def flawed(target: Target, right: tuple[Step, ...], slip: Slip, setting: Setting, rounding: Rounding) -> Flawed:
    """The working under a slip.

    Raises ContentError where the slip does not show in the answer, or first shows elsewhere than in what it changes.
    """
    wrong = steps_under(target, slip, setting.practice, rounding)
    if not wrong or wrong[-1].line.shown == right[-1].line.shown:
        raise ContentError(
            f"the slip {slip.name!r} does not change {quantity(target.quantity).name} of {target.about}: "
            "there would be nothing to correct"
        )
    pairs = enumerate(zip(wrong, right, strict=False))
    at = next((index for index, (one, other) in pairs if one.line.chain != other.line.chain), len(right))
    same = [step.target for step in wrong] == [step.target for step in right]
    if not same or right[at].target.quantity not in slip.first:
        raise ContentError(f"the slip {slip.name!r} does not show in one line of the working for {target.about}")
    return Flawed(slip, wrong, at)


def fault_of(target: Target, right: tuple[Step, ...], part: Correct, setting: Setting, rounding: Rounding) -> Flawed:
    """The working with the slip that the part names, or with one of the likelier ones, settled by the variant."""
    if part.slip is not None:
        fault = flawed(target, right, setting.slips.named(part.slip), setting, rounding)
        _keeps_the_electron(target, fault.slip, setting)
        return fault
    value = right[-1].line.value
    names = [name for name, under in values_under(target, setting.practice, setting.slips).items() if under != value]
    likely = names[:LIKELY]
    start = scattered(target.quantity, target.about) % max(1, len(likely))
    for name in (*likely[start:], *likely[:start], *names[LIKELY:]):
        with contextlib.suppress(ContentError):
            fault = flawed(target, right, setting.slips.named(name), setting, rounding)
            break
    else:
        raise ContentError(f"no slip changes {quantity(target.quantity).name} of {target.about}")
    # Which slip a variant settles on never changes: papers of older sets are marked by it.
    _keeps_the_electron(target, fault.slip, setting)
    return fault


def _keeps_the_electron(target: Target, slip: Slip, setting: Setting) -> None:
    """Raise ContentError where whoever has the slip finds no electron in the subshell that a new part names."""
    if not setting.new or target.electron is None:
        return
    under = practice_with(slip, setting.practice)
    configuration = configuration_of(target.species, under)
    if not configuration.count(target.electron):
        raise ContentError(
            f"under the slip {slip.name!r}, {target.species.label} is {configuration.short()} and has no "
            f"{target.electron.label} electron, so the flawed working would be about another electron; name another "
            "slip under `slip`, or keep to species where it leaves the electron",
            slip.name,
        )


def solve(part: Correct, setting: Setting) -> Solved:
    """The flawed working, the number of its first wrong line, and the working from there on put right."""
    target = target_of(part.correct, part, setting)
    what = quantity(target.quantity)
    rounding = rounding_of(what, part, setting)
    right = work(target, setting.practice, None, rounding)
    fault = fault_of(target, right, part, setting, rounding)
    slip, wrong, at = fault.slip, fault.steps, fault.at
    number = Num(str(at + 1))
    chain = Chain(Words(FIRST_WRONG), ((":", number),))
    steps = (closing(FIRST_WRONG, target, chain, at + 1, str(at + 1), slip.did), *right[at:])
    final = answer_of(right[-1], what)
    wording = (
        f"A candidate's working for {noun(target)} is printed here with numbered lines. There is one mistake in it. "
        "State which line is the first wrong one, say what is wrong, and put the working right."
    )
    if right[-1].line.rounded:
        wording += f" Give the answer {rounding_words(rounding)}."
    value = f"{final.shown} {final.unit}".strip()
    return Solved(
        task="correct",
        quantity=what.name,
        targets=(target,),
        ask=worded(part, setting.turn, wording),
        steps=steps,
        answer=Answer(
            "correction",
            f"line {at + 1}; {value}",
            Row((Words(f"line {at + 1};"), final.node)),
            (at + 1, final.value),
        ),
        points=chosen(_candidates(steps, at), steps, part.marks, part.scheme, _candidates(steps, at)),
        space=space_for(steps) + 1 if part.space is None else part.space,
        exhibits=(ShownWorking(tuple(step.line for step in wrong)),),
        wrong=(Wrong((slip.name,), f"{wrong[-1].line.shown} {wrong[-1].line.unit}".strip()),),
        notes=(*part.notes, f"The mistake: {slip.did}"),
    )


def _candidates(steps: tuple[Step, ...], at: int) -> list[Candidate]:
    return [
        Candidate(0, PointRule("B", f"line {at + 1} found", "choice", 120)),
        Candidate(1, PointRule("M", "the mistake explained, or this line put right", "reason", 115)),
        Candidate(len(steps) - 1, PointRule("A", "the right answer from there on", "value", 110, True)),
    ]


TASK = Task(
    name="correct",
    says="find the first wrong line of a printed working and put it right",
    fields=Correct,
    solve=solve,
    example="- correct: effective nuclear charge\n  of: V\n  electron: 4s\n  slip: self counted\n  marks: 3\n",
    rounds=True,
)
