"""Stage 8, mark: from what a candidate has to a value: the lines between, and which of them a slip spoils."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache

from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantity import Target, Value, quantities, quantity
from authoring.slips.catalogue import Slip, applied

Known = tuple[tuple[Target, Value], ...]


@dataclass(frozen=True, slots=True)
class Traced:
    """One line on the way: its value under the slips, and whether it is wrong on the candidate's own inputs."""

    target: Target
    value: Value
    spoiled: bool


@lru_cache(maxsize=65536)
def way_to(target: Target, practice: Practice) -> tuple[Target, ...]:
    """Every target that leads to this one, inputs first, itself last."""
    found: dict[Target, None] = {}
    if target.quantity not in quantities():
        return ()
    for need in quantity(target.quantity).needs(target, practice):
        found.update(dict.fromkeys(way_to(need, practice)))
    found[target] = None
    return tuple(found)


def frontier(target: Target, practice: Practice, values: Mapping[Target, Value]) -> Known:
    """The candidate's own values that the target is worked out from: the nearest on each way to it."""
    found: dict[Target, Value] = {}

    def walk(need: Target) -> None:
        if need in values:
            found[need] = values[need]
            return
        for each in quantity(need.quantity).needs(need, practice):
            walk(each)

    for need in quantity(target.quantity).needs(target, practice):
        walk(need)
    return tuple(found.items())


def gap(target: Target, practice: Practice, known: Known) -> tuple[Target, ...]:
    """The lines between what is known and the target, the target last."""
    had = dict(known)
    found: dict[Target, None] = {}

    def walk(need: Target) -> None:
        if need in had or need in found:
            return
        for each in quantity(need.quantity).needs(need, practice):
            walk(each)
        found[need] = None

    walk(target)
    return tuple(found)


@lru_cache(maxsize=65536)
def traced(target: Target, practice: Practice, known: Known, slips: tuple[Slip, ...]) -> tuple[Traced, ...]:
    """The lines from what is known to the target under slips, each with whether it is spoiled.

    A line is spoiled when the practice gives another value from the same inputs.
    """
    under = applied(slips, practice)
    values = dict(known)
    found = []
    for step in gap(target, under, known):
        what = quantity(step.quantity)
        inputs = tuple([values[need] for need in what.needs(step, under)])
        value = values[step] = what.value(step, under, inputs)
        found.append(Traced(step, value, bool(slips) and value != _published(step, practice, values)))
    return tuple(found)


def _published(step: Target, practice: Practice, values: Mapping[Target, Value]) -> Value:
    what = quantity(step.quantity)
    try:
        return what.value(step, practice, tuple([values[need] for need in what.needs(step, practice)]))
    except (ContentError, KeyError):
        return None  # the practice has no such value from these inputs: the slip made one
