"""Stage: solve. The outcomes: what each slip, and each pair of slips, makes of a target.

A quantity's value depends only on the slips that touch it or what it needs, so the values of a chain are kept per
relevant slips: hundreds of pairs cost little more than the tally of each.
"""

from __future__ import annotations

import functools
import itertools
import math
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal
from types import MappingProxyType

from authoring.faults import ContentError
from authoring.shielding.practice import Practice
from authoring.shielding.quantity import Quantity, Target, Value, quantity
from authoring.shielding.solve import evaluate, work
from authoring.slips.catalogue import Slip, Slips, applied, compatible, upstream
from authoring.working.numbers import Rounding, shown

Combination = tuple[Slip, ...]
Known = tuple[tuple[Target, Value], ...]
MOST = 3


def likelihood(slips: Combination) -> int:
    """How likely slips are together: the product of their likelihoods."""
    return math.prod(slip.likelihood for slip in slips)


@dataclass(frozen=True, slots=True)
class Outcome:
    """Slips, and the exact value that a target has under them."""

    slips: Combination
    answer: Value

    @property
    def rank(self) -> tuple[int, int, tuple[str, ...]]:
        """Likeliest first: fewer slips, then the likelier ones; names settle the rest."""
        return (len(self.slips), -likelihood(self.slips), tuple(slip.name for slip in self.slips))


class _Chain:
    """Values of the quantities that lead to a target, kept per slips that touch each.

    Slips are bits of a number here: a set of them is one integer.
    """

    __slots__ = ("_nodes", "_practices", "_slips")

    def __init__(self, slips: Combination, practice: Practice, known: Known) -> None:
        self._slips = slips
        self._practices = _practices(slips, practice)
        # What is known already is touched by no slip.
        self._nodes = {target: (quantity(target.quantity), 0, {0: value}) for target, value in known}

    def value(self, target: Target, chosen: int) -> Value:
        """The target's value under the chosen slips. Raises ContentError where there is none."""
        what, mask, values = self._nodes.get(target) or self._node(target)
        chosen &= mask
        found = values.get(chosen)
        if found is None:
            practice = self._practices.get(chosen) or self._with_slips(chosen)
            inputs = tuple([self.value(need, chosen) for need in what.needs(target, practice)])
            found = values[chosen] = what.value(target, practice, inputs)
        return found

    def _node(self, target: Target) -> tuple[Quantity, int, dict[int, Value]]:
        above = upstream(target)
        mask = sum(1 << at for at, slip in enumerate(self._slips) if slip.first & above)
        made = self._nodes[target] = (quantity(target.quantity), mask, {})
        return made

    def _with_slips(self, chosen: int) -> Practice:
        several = tuple(slip for at, slip in enumerate(self._slips) if chosen >> at & 1)
        made = self._practices[chosen] = applied(several, self._practices[0])
        return made


@functools.lru_cache(maxsize=64)
def _practices(slips: Combination, practice: Practice) -> dict[int, Practice]:
    """The practices with slips applied that were needed so far: one store for all targets."""
    return {0: practice}


def as_known(known: Mapping[Target, Value] | None) -> Known:
    """Known values in a form that tables can be kept by."""
    return tuple(known.items()) if known else ()


def right_value(target: Target, practice: Practice, known: Known = ()) -> Value | None:
    """The target's value without a slip; None where the practice gives none."""
    try:
        return evaluate(target, practice, dict(known))
    except ContentError:
        return None


@functools.lru_cache(maxsize=64)
def combinations(slips: Combination, most: int) -> tuple[tuple[int, Combination], ...]:
    """Single slips, then pairs (and so on up to `most`) of which no two set the same field; each with its bits."""
    found = []
    for size in range(1, max(1, min(most, MOST)) + 1):
        for places in itertools.combinations(range(len(slips)), size):
            several = tuple(slips[at] for at in places)
            if all(compatible(one, other) for one, other in itertools.combinations(several, 2)):
                found.append((sum(1 << at for at in places), several))
    return tuple(found)


@functools.lru_cache(maxsize=8192)
def outcomes(target: Target, practice: Practice, known: Known, slips: Slips, most: int) -> tuple[Outcome, ...]:
    """What every slip and compatible combination makes of a target, likeliest first.

    Left out: slips that leave the right value, combinations that give what fewer of their slips give already,
    and those under which the species has no such value.
    """
    right = right_value(target, practice, known)
    touching = slips.touching(target)
    chain = _Chain(touching, practice, known)
    values: dict[int, Value] = {0: right}
    found = []
    for chosen, combination in combinations(touching, most):
        try:
            answer = chain.value(target, chosen)
        except ContentError:
            continue
        values[chosen] = answer
        if answer != right and not any(values.get(fewer) == answer for fewer in _one_fewer(chosen)):
            found.append(Outcome(combination, answer))
    return tuple(sorted(found, key=lambda outcome: outcome.rank))


def _one_fewer(chosen: int) -> Iterator[int]:
    left = chosen
    while left:
        lowest = left & -left
        yield chosen ^ lowest
        left ^= lowest


@functools.lru_cache(maxsize=8192)
def by_answer(
    target: Target, practice: Practice, known: Known, slips: Slips, most: int
) -> Mapping[Value, tuple[Combination, ...]]:
    """The combinations by the exact value that they give, each likeliest first."""
    found: dict[Value, list[Combination]] = {}
    for outcome in outcomes(target, practice, known, slips, most):
        found.setdefault(outcome.answer, []).append(outcome.slips)
    return MappingProxyType({answer: tuple(several) for answer, several in found.items()})


def printed(target: Target, value: Value, practice: Practice, known: Known, rounding: Rounding | None = None) -> str:
    """A value as the page prints it, without its unit (U+2212 for minus)."""
    if isinstance(value, Decimal):
        return shown((rounding or quantity(target.quantity).rounding).apply(value))
    given = {each: kept for each, kept in known if each != target}
    return work(target, practice, given, rounding)[-1].line.shown
