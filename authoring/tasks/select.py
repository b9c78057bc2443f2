"""*select*: choose the right answer; every wrong option is what a slip leads to."""

from __future__ import annotations

from decimal import Decimal
from typing import Annotated

from pydantic import Field

from authoring.faults import ContentError
from authoring.shielding.quantity import PointRule, Quantity, Target, Value, quantity
from authoring.shielding.solve import work
from authoring.tasks.calculate import answer_of
from authoring.tasks.fields import Between, TargetFields, Word, Words
from authoring.tasks.points import MAIN, Candidate, pointed
from authoring.tasks.setting import Setting, rounding_of, rounding_words, target_of
from authoring.tasks.several import CHOICE, closing, measured, printed, scattered
from authoring.tasks.slipped import steps_under, values_under
from authoring.tasks.solved import Answer, Option, Options, Solved, Wrong
from authoring.tasks.task import Task
from authoring.tasks.wording import asked, worded
from authoring.working.nodes import Chain
from authoring.working.nodes import Words as WordsNode
from authoring.working.numbers import Rounding

LETTERS = "ABCDEF"


class Select(TargetFields):
    """`select: screening constant`: the right answer among the answers of slips."""

    select: Word = Field(description="the quantity")
    options: Annotated[int, Between(2, len(LETTERS))] = Field(
        4, description="how many options, the right one among them"
    )
    slips: Words = Field((), description="the slips whose answers are the wrong options; left out: the likeliest")


def answer_under(target: Target, name: str, value: Value, setting: Setting, rounding: Rounding) -> Answer:
    """What a slip leads to, as an answer."""
    what = quantity(target.quantity)
    if what.numeric:
        text = printed(value, rounding)
        unit = target.get("unit") or what.unit
        return Answer("number", text, measured(text, unit), value, unit)
    return answer_of(steps_under(target, setting.slips.named(name), setting.practice, rounding)[-1], what)


def distractors(
    target: Target, right: Answer, part: Select, setting: Setting, rounding: Rounding
) -> tuple[list[tuple[Answer, str]], tuple[tuple[str, str], ...]]:
    """The wrong options, each with the slip behind it, and every slip with the wrong answer it gives.

    Raises ContentError where slips give too few answers that differ from the right one and from each other.
    """
    values = values_under(target, setting.practice, setting.slips)
    named = [setting.slips.named(name).name for name in part.slips]
    found: dict[str, tuple[Answer, str]] = {}
    everyone = []
    for name in named or values:
        answer = answer_under(target, name, values[name], setting, rounding) if name in values else right
        if answer.shown != right.shown:
            everyone.append((name, answer.shown))
            found.setdefault(answer.shown, (answer, name))
    if len(found) < part.options - 1:
        raise ContentError(
            f"{part.options} options need {part.options - 1} different wrong answers, but "
            f"{'these slips' if part.slips else 'slips'} give {len(found)} for "
            f"{quantity(target.quantity).name} of {target.about}"
        )
    return list(found.values())[: part.options - 1], tuple(everyone)


def place(part: Select, setting: Setting) -> int:
    """Where the right option stands: it moves on by one from paper to paper, so that every place comes equally
    often and neighbours differ; where it starts differs from part to part."""
    start = scattered(part.model_dump_json(), str(len(setting.earlier)))
    return (setting.turn + start) % part.options


def solve(part: Select, setting: Setting) -> Solved:
    """The right answer at its place, the options in ascending order, turned round to bring it there."""
    target = target_of(part.select, part, setting)
    what = quantity(target.quantity)
    rounding = rounding_of(what, part, setting)
    steps = work(target, setting.practice, setting.known, rounding)
    if not steps:
        raise ContentError(f"an earlier part already gives {what.name} of {target.about}; ask for something new")
    right = answer_of(steps[-1], what)
    chosen, everyone = distractors(target, right, part, setting, rounding)
    at = place(part, setting)
    rows = sorted([(right, ()), *((answer, (name,)) for answer, name in chosen)], key=lambda each: _size(each[0], what))
    # In ascending order from some option on, and on from the first again: no option stands out.
    start = rows.index((right, ())) - at
    rows = rows[start:] + rows[:start]
    options = tuple(
        Option(LETTERS[index], answer.node, f"{answer.shown} {answer.unit}".strip(), names)
        for index, (answer, names) in enumerate(rows)
    )
    letters = {answer.shown: LETTERS[index] for index, (answer, _) in enumerate(rows)}
    letter = WordsNode(LETTERS[at])
    choice = closing(CHOICE, target, Chain(right.node, (("→", letter),)), LETTERS[at], LETTERS[at])
    steps = (*steps, choice)
    # A choice of one letter leaves no room for a reason.
    wording = asked(what.ask, target).replace(", and give the reason", "")
    if steps[-2].line.rounded:
        wording += f" The answers are given {rounding_words(rounding)}."
    rule = PointRule("B", f"option {LETTERS[at]}", "choice", 2 * MAIN)
    return Solved(
        task="select",
        quantity=what.name,
        targets=(target,),
        ask=worded(part, setting.turn, wording + " Which answer is right?"),
        steps=steps,
        answer=Answer("letter", LETTERS[at], letter, LETTERS[at]),
        points=pointed(steps, part.marks, part.scheme, [Candidate(len(steps) - 1, rule)], default=1, main=(target,)),
        space=1 if part.space is None else part.space,
        exhibits=(Options(options),),
        wrong=tuple(Wrong((name,), letters[text]) for name, text in everyone if text in letters),
        notes=part.notes,
    )


def _size(answer: Answer, what: Quantity) -> tuple[Decimal, str]:
    # As printed: what the candidate sees is in order.
    number = Decimal(answer.shown.replace("−", "-")) if what.numeric else Decimal(0)
    return (number, answer.shown)


TASK = Task(
    name="select",
    says="choose the right answer among those that named slips lead to",
    fields=Select,
    solve=solve,
    example=(
        "- select: screening constant\n  of: V\n  electron: 4s\n  options: 4\n"
        "  slips: [self counted, 1.00 for all inner, 0.85 for all inner]\n"
    ),
    turns=True,
    rounds=True,
)
