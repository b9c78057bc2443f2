"""Solving: the chain of lines that leads to a target, under any practice, from any inputs already had.

`evaluate` gives values only, `work` the lines as well. Both take `known`: values that stand already (a
candidate's own, an earlier part's), which are used as they are and not worked again.
"""

from __future__ import annotations

import functools
from collections.abc import Mapping
from dataclasses import dataclass

from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantity import Target, Value, quantity
from authoring.working.lines import Line
from authoring.working.numbers import Rounding


@dataclass(frozen=True, slots=True)
class Step:
    """A line of working and the target it is about."""

    target: Target
    line: Line


def evaluate(target: Target, practice: Practice, known: Mapping[Target, Value] | None = None) -> Value:
    """The exact value of a target. Raises ContentError where the species or practice has none."""
    return evaluate_into(dict(known), target, practice) if known else _evaluated(target, practice)


@functools.lru_cache(maxsize=16384)
def _evaluated(target: Target, practice: Practice) -> Value:
    """Of nothing but the species: asked for again and again while a pile is judged."""
    return evaluate_into({}, target, practice)


def evaluate_into(known: dict[Target, Value], target: Target, practice: Practice) -> Value:
    """As `evaluate`, keeping every value on the way in `known`: for many targets of the same species."""
    if target in known:
        return known[target]
    what = quantity(target.quantity)
    inputs = tuple([evaluate_into(known, need, practice) for need in what.needs(target, practice)])
    found = known[target] = what.value(target, practice, inputs)
    return found


def work(
    target: Target,
    practice: Practice,
    known: Mapping[Target, Value] | None = None,
    rounding: Rounding | None = None,
) -> tuple[Step, ...]:
    """Every line from the first that is not known to the target, in the order a person writes them.

    `rounding` is for the target's own line; the lines before it are rounded as their quantities say.
    """
    values = dict(known) if known else {}
    steps: list[Step] = []
    _work(target, practice, values, steps, rounding, done=set(values))
    return tuple(steps)


def _work(
    target: Target,
    practice: Practice,
    values: dict[Target, Value],
    steps: list[Step],
    rounding: Rounding | None,
    done: set[Target],
) -> None:
    if target in done:
        return
    what = quantity(target.quantity)
    needs = what.needs(target, practice)
    for need in needs:
        _work(need, practice, values, steps, None, done)
    inputs = tuple([evaluate_into(values, need, practice) for need in needs])
    value = evaluate_into(values, target, practice)
    done.add(target)
    steps.append(Step(target, what.line(target, practice, inputs, value, rounding or what.rounding)))


def check_details(target: Target) -> None:
    """Raise ContentError when a target carries a detail its quantity does not take, or lacks one it must have."""
    what = quantity(target.quantity)
    for name, _ in target.detail:
        if name not in what.details:
            raise ContentError(f"{what.name} takes no {name!r}", name, what.details)
    for name in what.required:
        if not target.get(name):
            raise ContentError(f"{what.name} needs {name!r}")
